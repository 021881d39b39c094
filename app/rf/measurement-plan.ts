// What an RFQ asks of the measured data, besides how many units: temperatures, sweeps with their steps, how to measure.
import type { Band, Requirement } from "./contract.ts";

/** A stretch of frequency to be swept, and the largest step in it. */
export interface PlannedSweep {
  /** Hz, from < to. */
  readonly band: Band;
  /** Hz. */
  readonly maxStep: number;
}

export interface MeasurementPlan {
  /** Ascending by lower end, at most 12. Absent: none was asked for. */
  readonly sweeps?: readonly PlannedSweep[];
  /** °C asked besides ambient and the ends of the specification's range, ascending. */
  readonly temperatures?: readonly number[];
  /** Hz. */
  readonly ifBandwidth?: number;
  /** dBm at the part's input. */
  readonly power?: number;
  /** Hz, of the group delay. */
  readonly delayAperture?: number;
  readonly referencePlane?: "connector" | "board" | "fixture";
  /** Where the plane lies and, for a fixture, how it is de-embedded. */
  readonly referencePlaneWords?: string;
}

/**
 * The requirements with the largest step of the narrowest planned sweep that holds their band, where a line states none
 * itself: what the RFQ asks for and the file does not deliver is not covered.
 */
export function withPlannedSteps(
  requirements: readonly Requirement[],
  { sweeps = [] }: MeasurementPlan,
): readonly Requirement[] {
  if (sweeps.length === 0) return requirements;
  return requirements.map((requirement) => {
    if (requirement.maxStep !== undefined || !("band" in requirement)) return requirement;
    const maxStep = plannedStep(requirement.band, sweeps);
    return maxStep === undefined ? requirement : { ...requirement, maxStep };
  });
}

function plannedStep([from, to]: Band, sweeps: readonly PlannedSweep[]): number | undefined {
  const holding = sweeps.filter(({ band }) => band[0] <= from && to <= band[1]);
  return holding.toSorted((a, b) => a.band[1] - a.band[0] - (b.band[1] - b.band[0]))[0]?.maxStep;
}
