// What of a quote's curves is looked at: the measurement and the line that the address names, or those that decide.
import type { CurvesQuery } from "~/forms/curves";
import { isMeasured, type Cell } from "~/rf/index";
import { cellAt, type ComplianceColumns, type ComplianceLine } from "./compliance-words";

/** A unit at a temperature, with measured sweeps. */
export interface CurvesPlace {
  readonly unit: string;
  readonly celsius: number;
}

/** A line with its cell at the place that is looked at. */
export interface PlacedLine {
  readonly line: ComplianceLine;
  readonly cell: Cell;
}

export interface ChosenCurves {
  readonly place: CurvesPlace;
  /** The temperature asked for was not measured on this unit: the nearest one that was stands for it. */
  readonly isNearest: boolean;
  /** The measured lines at the place, in their order. */
  readonly lines: readonly PlacedLine[];
  readonly selected: PlacedLine | undefined;
}

interface ChoiceOf {
  readonly lines: readonly ComplianceLine[];
  readonly units: readonly ComplianceColumns[];
  readonly worstLineKey: string | null;
}

/** Temperatures of a unit that were measured, not predicted. */
export const measuredTemperatures = (column: ComplianceColumns | undefined): number[] =>
  (column?.temperatures ?? []).filter(({ predicted }) => !predicted).map(({ celsius }) => celsius);

/** Null where nothing was measured. */
export function chosenCurves(results: ChoiceOf, query: CurvesQuery): ChosenCurves | null {
  const deciding = results.lines.find(({ lineKey }) => lineKey === results.worstLineKey);
  const measured = results.units.filter((column) => measuredTemperatures(column).length > 0);
  const column =
    measured.find(({ unit }) => unit === query.unit) ??
    measured.find(({ unit }) => unit === deciding?.unit) ??
    measured[0];
  if (!column) return null;
  const wanted = query.unit === column.unit ? query.temperature : (deciding?.temperature ?? null);
  const celsius = nearest(measuredTemperatures(column), wanted);
  const lines = results.lines.flatMap((line) => {
    const cell = isMeasured(line.definition) ? cellAt(line, column.unit, celsius) : undefined;
    return cell ? [{ line, cell }] : [];
  });
  const named = lines.find(({ line }) => line.lineNumber === query.line);
  const selected = named ?? lines.find(({ line }) => line === deciding) ?? lines[0];
  const isNearest = query.temperature !== null && query.unit === column.unit && query.temperature !== celsius;
  return { place: { unit: column.unit, celsius }, isNearest, lines, selected };
}

function nearest(celsius: readonly number[], wanted: number | null): number {
  const aim = wanted ?? celsius[0] ?? NaN;
  return celsius.reduce((best, one) => (Math.abs(one - aim) < Math.abs(best - aim) ? one : best), celsius[0] ?? NaN);
}

/** The selected line where it is of a kind, else the first that is. */
export function lineOfKind(
  { lines, selected }: Pick<ChosenCurves, "lines" | "selected">,
  isOfKind: (line: ComplianceLine) => boolean,
): PlacedLine | undefined {
  return selected && isOfKind(selected.line) ? selected : lines.find(({ line }) => isOfKind(line));
}
