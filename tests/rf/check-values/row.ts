// A row of the check values: published or recomputed figures with their source, and how one is checked.
import { expect } from "vitest";
import checkValues from "../../reference/check-values.json";

export interface CheckValue {
  readonly id: string;
  readonly section: string;
  readonly what: string;
  readonly source?: string;
  readonly source_confidence?: string;
  readonly inputs?: unknown;
  readonly value: unknown;
  readonly published?: unknown;
  readonly tolerance?: number | readonly number[];
}

/** Checks every row whose id matches. */
export interface RowCheck {
  readonly ids: RegExp;
  readonly check: (row: CheckValue) => void;
}

export const checkValueRows = checkValues.values as unknown as readonly CheckValue[];

/** The figures that a reader prints beside a row: where it is from, and whether that was re-read in the source. */
export function sourceOf({ source = "computed", source_confidence: confidence = "" }: CheckValue): string {
  return confidence.includes("from memory") ? `${source}; ${confidence}` : source;
}

export function rowOf(id: string): CheckValue {
  const found = checkValueRows.find((row) => row.id === id);
  if (found === undefined) throw new RangeError(`no check value ${id}`);
  return found;
}

/** A row's numbers; "inf" stands for infinity. */
export function figuresOf(value: unknown): number[] {
  return [value].flat().map((figure) => (figure === "inf" ? Infinity : Number(figure)));
}

/** Every figure equal to the wanted one, or within `tolerance` of it. */
export function expectFigures(
  actual: readonly number[],
  wanted: readonly number[],
  tolerance: number | number[],
): void {
  expect(actual).toHaveLength(wanted.length);
  wanted.forEach((figure, k) => {
    const allowed = typeof tolerance === "number" ? tolerance : (tolerance[k] ?? NaN);
    const found = actual[k] ?? NaN;
    const isClose = found === figure || Math.abs(found - figure) <= allowed;
    expect(isClose, `figure ${k}: ${found} instead of ${figure}`).toBe(true);
  });
}

/** The printed figures of the source, rounded as printed there. */
export function expectPublished(actual: readonly number[], { published, tolerance }: CheckValue): void {
  if (published === undefined) return;
  expectFigures(actual, figuresOf(published), typeof tolerance === "number" ? tolerance : [...(tolerance ?? [])]);
}
