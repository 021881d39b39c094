// Largest spread (maximum minus minimum) over a band, or over windows sliding continuously within it.
import type { Band } from "./contract.ts";
import { valueBetween, type Segment } from "./coverage.ts";
import { firstAtOrAbove, sameFrequency } from "./frequency.ts";
import type { Readings } from "./curves.ts";
import { forEachReading } from "./assess-points.ts";

/** The largest and the least value of one window, and where the window or the largest value lies. */
export interface Extent {
  largest: number;
  least: number;
  /** Hz: where the value is largest; of a window its start. */
  frequency: number;
}

/** The extent of everything in the segments; undefined where there is nothing. */
export function extentOf(readings: Readings, segments: readonly Segment[], tolerance: number): Extent | undefined {
  const extent: Extent = { largest: -Infinity, least: Infinity, frequency: NaN };
  let reported = -Infinity;
  for (const part of segments) {
    forEachReading(readings, part, (value, _low, _high, hz) => {
      if (value < extent.least) extent.least = value;
      if (value > extent.largest) extent.largest = value;
      if (Number.isNaN(extent.frequency) || value > reported + tolerance) {
        reported = value;
        extent.frequency = hz;
      }
    });
  }
  return Number.isNaN(extent.frequency) ? undefined : extent;
}

/** Maximum minus minimum; where both are infinite there is no reading at all, and the spread is infinite. */
export function spreadOf({ largest, least }: { readonly largest: number; readonly least: number }): number {
  return largest === Infinity ? Infinity : largest - least;
}

/**
 * Visits the extent of every window that can be the worst: those with an edge on a sample or on an edge of the band.
 * Between such windows each end changes linearly, so no other can exceed both neighbours. Linear cost: two monotone
 * queues of sample indices. What lies in a hole is left out of a window.
 *
 * @param window Hz, not wider than the band
 * @param visit is handed one object, changed from call to call
 */
export function forEachWindow(
  readings: Readings,
  segments: readonly Segment[],
  band: Band,
  window: number,
  visit: (extent: Extent) => void,
): void {
  const { frequency, value } = readings;
  const highest = new MonotoneQueue(value, (later, earlier) => later >= earlier);
  const lowest = new MonotoneQueue(value, (later, earlier) => later <= earlier);
  const startReader = new EdgeReader(readings, segments);
  const endReader = new EdgeReader(readings, segments);
  const extent: Extent = { largest: NaN, least: NaN, frequency: NaN };

  let incoming = segments[0]?.first ?? frequency.length;
  const beyond = segments.at(-1)?.last ?? -1;
  for (const start of windowStarts(readings, segments, band, window)) {
    const end = start + window;
    while (
      incoming <= beyond &&
      !((frequency[incoming] as number) > end && !sameFrequency(frequency[incoming] as number, end))
    ) {
      if (!Number.isNaN(value[incoming])) {
        highest.push(incoming);
        lowest.push(incoming);
      }
      incoming += 1;
    }
    const isGone = (index: number) =>
      (frequency[index] as number) < start && !sameFrequency(frequency[index] as number, start);
    const startValue = startReader.at(start);
    const endValue = endReader.at(end);
    extent.largest = greaterOf(greaterOf(highest.best(isGone), startValue), endValue);
    extent.least = lesserOf(lesserOf(lowest.best(isGone), startValue), endValue);
    extent.frequency = start;
    if (!Number.isNaN(extent.largest)) visit(extent);
  }
}

/** Starts of the windows to look at, ascending: edges of the band, and windows with a sample at either end. */
function* windowStarts(
  readings: Readings,
  segments: readonly Segment[],
  band: Band,
  window: number,
): Generator<number> {
  const { frequency } = readings;
  const lastStart = band[1] - window;
  const stop = segments.at(-1)?.last ?? -1;
  let atStart = segments[0]?.first ?? frequency.length;
  let atEnd = firstAtOrAbove(frequency, band[0] + window);
  yield band[0];
  for (;;) {
    const byStart = atStart <= stop ? (frequency[atStart] as number) : Infinity;
    const byEnd = atEnd <= stop ? (frequency[atEnd] as number) - window : Infinity;
    const next = Math.min(byStart, byEnd);
    if (!(next < lastStart)) break;
    if (next > band[0]) yield next;
    if (byStart === next) atStart += 1;
    if (byEnd === next) atEnd += 1;
  }
  if (lastStart > band[0]) yield lastStart;
}

/** Reads values at ascending frequencies; NaN in a hole. */
class EdgeReader {
  readonly #readings: Readings;
  readonly #segments: readonly Segment[];
  #segment = 0;
  #above = 0;

  constructor(readings: Readings, segments: readonly Segment[]) {
    this.#readings = readings;
    this.#segments = segments;
    this.#above = Math.max(0, segments[0]?.first ?? 0);
  }

  at(hz: number): number {
    const { frequency, value } = this.#readings;
    while (this.#segment < this.#segments.length - 1 && hz > (this.#segments[this.#segment]?.to ?? Infinity))
      this.#segment += 1;
    const part = this.#segments[this.#segment];
    if (part === undefined || hz < part.from || hz > part.to) return NaN;
    while (this.#above < frequency.length && (frequency[this.#above] as number) < hz) this.#above += 1;
    return frequency[this.#above] === hz
      ? (value[this.#above] as number)
      : valueBetween(frequency, value, this.#above - 1, hz);
  }
}

/** Indices whose values fall (or rise) from front to back: the front is the extreme of a sliding window. */
class MonotoneQueue {
  readonly #values: Float64Array;
  readonly #replaces: (later: number, earlier: number) => boolean;
  readonly #indices: number[] = [];
  #head = 0;

  constructor(values: Float64Array, replaces: (later: number, earlier: number) => boolean) {
    this.#values = values;
    this.#replaces = replaces;
  }

  push(index: number): void {
    const indices = this.#indices;
    while (
      indices.length > this.#head &&
      this.#replaces(this.#values[index] as number, this.#values[indices.at(-1) as number] as number)
    )
      indices.pop();
    indices.push(index);
  }

  /** The extreme value of what is not gone, NaN where nothing is left. */
  best(isGone: (index: number) => boolean): number {
    while (this.#head < this.#indices.length && isGone(this.#indices[this.#head] as number)) this.#head += 1;
    const index = this.#indices[this.#head];
    return index === undefined ? NaN : (this.#values[index] as number);
  }
}

function greaterOf(a: number, b: number): number {
  if (Number.isNaN(a)) return b;
  return b > a ? b : a;
}

function lesserOf(a: number, b: number): number {
  if (Number.isNaN(a)) return b;
  return b < a ? b : a;
}
