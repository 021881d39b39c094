// Thins a curve for drawing: the least and the largest value of each pixel column, in the order they occur.
import type { Band, Series } from "./contract.ts";
import { firstAtOrAbove } from "./frequency.ts";

/** Stands for an infinite value, such as the loss at a null: large, finite, and clipped by whoever draws it. */
const LARGE = 1e6;

/**
 * A curve of at most two points a column that looks the same as the whole one at that width. The first and the last
 * sample drawn are always kept; NaN samples are left out.
 *
 * @param frequency Hz, ascending, n points
 * @param value n points; infinities become ±1e6
 * @param columns pixel columns across the range, 1 or more
 * @param range Hz; the neighbours just outside it are kept, so that the line runs to its edges @default the whole sweep
 * @throws RangeError if columns is less than 1
 */
export function decimate(
  frequency: Series,
  value: Series,
  columns: number,
  range?: Band,
): { x: Float64Array; y: Float64Array } {
  if (!(columns >= 1)) throw new RangeError(`columns must be 1 or more, got ${columns}`);
  const [first, last] = samplesWithin(frequency, range);
  const from = range?.[0] ?? frequency[0] ?? 0;
  const to = range?.[1] ?? frequency[frequency.length - 1] ?? 0;
  const scale = to > from ? columns / (to - from) : 0;
  const kept: number[] = [];
  for (let start = first; start <= last;) {
    const column = columnOf(frequency[start] as number, from, scale, columns);
    let stop = start;
    while (stop < last && columnOf(frequency[stop + 1] as number, from, scale, columns) === column) stop += 1;
    keepExtremes(value, start, stop, kept);
    start = stop + 1;
  }
  const points = withEnds(kept, value, first, last);
  return {
    x: Float64Array.from(points, (index) => frequency[index] as number),
    y: Float64Array.from(points, (index) => Math.min(LARGE, Math.max(-LARGE, value[index] as number))),
  };
}

/** First and last sample to draw: those in the range and one neighbour on each side. */
function samplesWithin(frequency: Series, range: Band | undefined): [number, number] {
  const end = frequency.length - 1;
  if (range === undefined) return [0, end];
  const first = firstAtOrAbove(frequency, range[0]);
  const above = firstAtOrAbove(frequency, range[1]);
  return [Math.max(0, frequency[first] === range[0] ? first : first - 1), Math.min(end, above)];
}

/** Samples outside the range lie in columns of their own. */
function columnOf(hz: number, from: number, scale: number, columns: number): number {
  const place = Math.floor((hz - from) * scale);
  return Math.min(columns, Math.max(-1, place));
}

/** Appends the samples with the least and the largest value of a column, in order. */
function keepExtremes(value: Series, start: number, stop: number, kept: number[]): void {
  let least = -1;
  let largest = -1;
  for (let index = start; index <= stop; index += 1) {
    const y = value[index] as number;
    if (Number.isNaN(y)) continue;
    if (least < 0 || y < (value[least] as number)) least = index;
    if (largest < 0 || y > (value[largest] as number)) largest = index;
  }
  if (least < 0) return;
  kept.push(Math.min(least, largest));
  if (least !== largest) kept.push(Math.max(least, largest));
}

/** The kept samples with the first and the last one that have a value. */
function withEnds(kept: readonly number[], value: Series, first: number, last: number): number[] {
  let start = first;
  let stop = last;
  while (start <= last && Number.isNaN(value[start])) start += 1;
  while (stop > start && Number.isNaN(value[stop])) stop -= 1;
  if (start > last || stop < start) return [];
  const inner = kept.filter((index) => index !== start && index !== stop);
  return start === stop ? [start] : [start, ...inner, stop];
}
