// Thins curves for drawing where decimation of a single one is not enough: several on one grid, and loci in the plane.
import type { Band, Series, Trace } from "./contract.ts";
import { firstAtOrAbove } from "./frequency.ts";

/**
 * Samples that keep several curves on one grid looking as they are at a width of so many columns: in each column the
 * least and the largest of every curve, and a sample without value where one lies, so that a line breaks there.
 *
 * @param frequency Hz, ascending, n points
 * @param curves n points each
 * @param columns pixel columns across the range, 1 or more
 * @param range Hz; one neighbour on either side is kept @default the whole grid
 * @returns indices, ascending, the first and last of the range among them; at most three a column and curve
 * @throws RangeError if columns is less than 1
 */
export function extremeSamples(frequency: Series, curves: readonly Series[], columns: number, range?: Band): number[] {
  if (!(columns >= 1)) throw new RangeError(`columns must be 1 or more, got ${columns}`);
  if (frequency.length === 0) return [];
  const [first, last] = samplesWithin(frequency, range);
  const from = frequency[first] as number;
  const width = ((frequency[last] as number) - from) / columns;
  const kept = new Set([first, last]);
  for (let start = first; start <= last;) {
    const column = columnOf(frequency[start] as number, from, width, columns);
    let stop = start;
    while (stop < last && columnOf(frequency[stop + 1] as number, from, width, columns) === column) stop += 1;
    for (const curve of curves) keepExtremes(curve, start, stop, kept);
    start = stop + 1;
  }
  return [...kept].sort((one, other) => one - other);
}

function samplesWithin(frequency: Series, range: Band | undefined): readonly [number, number] {
  const end = frequency.length - 1;
  if (range === undefined) return [0, end];
  const first = Math.max(0, firstAtOrAbove(frequency, range[0]) - 1);
  return [Math.min(first, end), Math.min(end, firstAtOrAbove(frequency, range[1]))];
}

function columnOf(hz: number, from: number, width: number, columns: number): number {
  return width > 0 ? Math.min(columns - 1, Math.floor((hz - from) / width)) : 0;
}

function keepExtremes(curve: Series, start: number, stop: number, kept: Set<number>): void {
  let least = -1;
  let largest = -1;
  let absent = -1;
  for (let index = start; index <= stop; index += 1) {
    const value = curve[index] as number;
    if (Number.isNaN(value)) absent = index;
    else {
      if (least < 0 || value < (curve[least] as number)) least = index;
      if (largest < 0 || value > (curve[largest] as number)) largest = index;
    }
  }
  for (const index of [least, largest, absent]) if (index >= 0) kept.add(index);
}

/**
 * Samples that keep the shape of a locus in the complex plane: every sample left out lies nearer than `distance` to one
 * that is kept, and the distance grows by a half at a time until no more than `most` are kept beside the wanted ones.
 *
 * @param locus n points; NaN samples are left out
 * @param distance in the plane, positive
 * @param wanted indices kept whatever their distance
 * @returns indices, ascending, the first and last sample with a value among them
 */
export function locusSamples(
  locus: Trace,
  {
    distance,
    most,
    wanted = [],
  }: { readonly distance: number; readonly most: number; readonly wanted?: readonly number[] },
): number[] {
  for (let apart = distance; ; apart *= 1.5) {
    const kept = samplesApart(locus, apart, new Set(wanted));
    if (kept.length <= most + wanted.length || !Number.isFinite(apart)) return kept;
  }
}

function samplesApart({ re, im }: Trace, apart: number, wanted: ReadonlySet<number>): number[] {
  const kept: number[] = [];
  let last = -1;
  for (let index = 0; index < re.length; index += 1) {
    const [x, y] = [re[index] as number, im[index] as number];
    if (Number.isNaN(x) || Number.isNaN(y)) continue;
    last = index;
    const previous = kept[kept.length - 1];
    const isApart =
      previous === undefined || Math.hypot(x - (re[previous] as number), y - (im[previous] as number)) >= apart;
    if (isApart || wanted.has(index)) kept.push(index);
  }
  if (last >= 0 && kept[kept.length - 1] !== last) kept.push(last);
  return kept;
}
