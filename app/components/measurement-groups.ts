// The files of a quote in their places: under unit and temperature, those without one of the two first.
import { temperatureText } from "~/forms/measurement";
import type { Setup } from "~/rf/contract";
import type { RequirementDefinition, Verdict } from "~/rf/index";

/** A row of `listMeasurements`. */
export interface MeasuredFile {
  readonly publicId: string;
  readonly fileId: string;
  readonly fileName: string;
  readonly size: number;
  readonly serial: string | null;
  /** °C, exact decimal text. */
  readonly temperature: string | null;
  readonly points: number;
  /** Hz. */
  readonly sweep: readonly [number, number];
  /** Hz, finest and widest. */
  readonly step: readonly [number, number] | null;
  /** Null where the quote's counts. */
  readonly setup: Setup | null;
  readonly notes: readonly { readonly severity: "repaired" | "doubtful"; readonly message: string }[];
  /** Null while it is not scored with the setup in use. */
  readonly verdict: Verdict | null;
  /** Measured lines it covers by itself, of how many. */
  readonly coverage: { readonly lines: number; readonly of: number } | null;
  readonly worst: {
    readonly lineNumber: string;
    readonly definition: RequirementDefinition;
    readonly margin: number | null;
    readonly frequency: number | null;
  } | null;
}

/** The sweeps of a unit at a temperature. */
export interface MeasurementGroup {
  readonly temperature: string;
  readonly files: readonly MeasuredFile[];
}

export interface UnitGroup {
  readonly serial: string;
  /** The coldest first. */
  readonly measurements: readonly MeasurementGroup[];
}

export interface PlacedFiles {
  /** Without a unit, a temperature, or both. */
  readonly unplaced: readonly MeasuredFile[];
  readonly units: readonly UnitGroup[];
}

const names = new Intl.Collator("en", { numeric: true });

export function groupMeasurements(files: readonly MeasuredFile[]): PlacedFiles {
  const units = new Map<string, Map<string, MeasuredFile[]>>();
  const unplaced: MeasuredFile[] = [];
  for (const file of files) {
    if (file.serial === null || file.temperature === null) {
      unplaced.push(file);
      continue;
    }
    const unit = units.get(file.serial) ?? new Map<string, MeasuredFile[]>();
    unit.set(file.temperature, [...(unit.get(file.temperature) ?? []), file]);
    units.set(file.serial, unit);
  }
  return {
    unplaced,
    units: [...units]
      .sort(([a], [b]) => names.compare(a, b))
      .map(([serial, measurements]) => ({
        serial,
        measurements: [...measurements]
          .sort(([a], [b]) => Number(a) - Number(b))
          .map(([temperature, ofIt]) => ({ temperature, files: ofIt })),
      })),
  };
}

/** "1 file", "3 files" */
export const counted = (count: number, one: string): string => `${count} ${one}${count === 1 ? "" : "s"}`;

/** Where sweeps are put; a part that is left open stays as each sweep has it. */
export interface Place {
  readonly serial?: string | undefined;
  /** °C, exact decimal text. */
  readonly temperature?: string | undefined;
}

/** "HR2-0411, −30 °C" */
export const placeWords = ({ serial, temperature }: Place): string =>
  [serial, temperature === undefined ? undefined : `${temperatureText(temperature)} °C`].filter(Boolean).join(", ");
