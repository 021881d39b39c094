// The evidence grid as data: what an RFQ asks of the measured data, and what came, unit by unit and temperature by temperature.
import type { Band } from "./contract.ts";
import type { MeasurementPlan, PlannedSweep } from "./measurement-plan.ts";
import type { StepStretch } from "./step-profile.ts";

export interface EvidenceAsked {
  /** Units in all. */
  readonly units: number;
  /** Of them, units at ambient, both ends of the range and the temperatures that the plan adds. */
  readonly unitsOverRange: number;
  /** °C. */
  readonly ambient: number;
  /** °C, of the specification; absent where it gives none. */
  readonly range?: readonly [number, number];
  readonly plan: Pick<MeasurementPlan, "sweeps" | "temperatures">;
  /** Data of a similar part or of a simulation covers no temperature range. @default "measured" */
  readonly basis?: "measured" | "similar" | "simulated";
  /** Hz: where a planned sweep that starts at exactly 0 Hz is taken to start. */
  readonly lowestTestFrequency?: number;
}

export interface DeliveredSweep {
  /** Serial; null or empty for a file without one. */
  readonly unit: string | null;
  /** °C; null for a file without one. */
  readonly temperature: number | null;
  /** Hz. */
  readonly from: number;
  readonly to: number;
  readonly points: number;
  /** Null for a file whose steps were not kept. */
  readonly steps: readonly StepStretch[] | null;
}

/** What a temperature is asked as; a column may be several at once. */
export type TemperatureRole = "ambient" | "low-end" | "high-end" | "plan";

export interface EvidenceColumn {
  /** °C. */
  readonly celsius: number;
  /** Empty where it was measured and not asked. */
  readonly roles: readonly TemperatureRole[];
}

/** Stretches of a planned sweep that no sweep of the measurement delivers. */
export interface SweepGap {
  readonly planned: PlannedSweep;
  readonly kind: "not-reached" | "too-coarse" | "step-unknown";
  /** Hz, ascending. */
  readonly stretches: readonly Band[];
  /** Hz; of what is too coarse, the finest step that reaches all of it. */
  readonly step?: number;
}

export interface EvidenceCell {
  /** "extra": measured and not asked of this unit; "not-asked": neither. */
  readonly state: "delivered" | "partly" | "missing" | "extra" | "not-asked";
  readonly sweeps: readonly PlacedSweep[];
  /** Of the measurement that lacks least; empty unless the state is "partly". */
  readonly gaps: readonly SweepGap[];
  /** °C, where sweeps at several temperatures would deliver only if they were one measurement. */
  readonly apart?: readonly number[];
}

export interface EvidenceRow {
  /** Null for a unit that was asked and not delivered. */
  readonly unit: string | null;
  /** Other serials whose data is the same to the bit: they count as this unit. */
  readonly copies: readonly string[];
  readonly overRange: boolean;
  /** One per column. */
  readonly cells: readonly EvidenceCell[];
}

export interface Evidence {
  readonly columns: readonly EvidenceColumn[];
  readonly rows: readonly EvidenceRow[];
  /** What is missing, one sentence each; empty where all that was asked is there. */
  readonly missing: readonly string[];
}

export interface PlacedSweep extends DeliveredSweep {
  readonly unit: string;
  readonly temperature: number;
}
