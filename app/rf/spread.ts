// Largest spread (maximum minus minimum) over a band, or over windows sliding continuously within it.
import type { Band, Series } from "./contract.ts";
import { valueBetween, type Segment } from "./coverage.ts";
import { firstAtOrAbove, isBelow } from "./frequency.ts";
import { forEachReading } from "./assess-points.ts";
import type { Readings } from "./readings.ts";

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
 * queues of sample indices, whose front is the largest or the least of the window. What lies in a hole is left out of a
 * window.
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
  const { frequency } = readings;
  const first = segments[0]?.first ?? frequency.length;
  const last = segments.at(-1)?.last ?? -1;
  const values = readings.valuesWithin(first - 1, last + 1);
  const highest = new Int32Array(Math.max(0, last - first + 1));
  const lowest = new Int32Array(highest.length);
  const atStart = new EdgeReader(frequency, values, segments);
  const atEnd = new EdgeReader(frequency, values, segments);
  const starts = startsOfWindows(frequency, first, last, band, window);
  const extent: Extent = { largest: NaN, least: NaN, frequency: NaN };

  let incoming = first;
  let highestFront = 0;
  let highestEnd = 0;
  let lowestFront = 0;
  let lowestEnd = 0;
  for (let place = 0; place < starts.length; place += 1) {
    const start = starts[place] as number;
    const end = start + window;
    for (; incoming <= last && !isBelow(end, frequency[incoming] as number); incoming += 1) {
      const value = values[incoming] as number;
      if (Number.isNaN(value)) continue;
      while (highestEnd > highestFront && value >= (values[highest[highestEnd - 1] as number] as number))
        highestEnd -= 1;
      while (lowestEnd > lowestFront && value <= (values[lowest[lowestEnd - 1] as number] as number)) lowestEnd -= 1;
      highest[highestEnd++] = incoming;
      lowest[lowestEnd++] = incoming;
    }
    while (highestFront < highestEnd && isBelow(frequency[highest[highestFront] as number] as number, start)) {
      highestFront += 1;
    }
    while (lowestFront < lowestEnd && isBelow(frequency[lowest[lowestFront] as number] as number, start)) {
      lowestFront += 1;
    }
    const startValue = atStart.at(start);
    const endValue = atEnd.at(end);
    const largest = highestFront < highestEnd ? (values[highest[highestFront] as number] as number) : NaN;
    const least = lowestFront < lowestEnd ? (values[lowest[lowestFront] as number] as number) : NaN;
    extent.largest = greaterOf(greaterOf(largest, startValue), endValue);
    extent.least = lesserOf(lesserOf(least, startValue), endValue);
    extent.frequency = start;
    if (!Number.isNaN(extent.largest)) visit(extent);
  }
}

/** Starts of the windows to look at, ascending: edges of the band, and windows with a sample at either end. */
function startsOfWindows(frequency: Series, first: number, last: number, band: Band, window: number): Float64Array {
  const lastStart = band[1] - window;
  let byStart = first;
  let byEnd = firstAtOrAbove(frequency, band[0] + window);
  const starts = new Float64Array(Math.max(0, last - byStart + 1) + Math.max(0, last - byEnd + 1) + 2);
  starts[0] = band[0];
  let count = 1;
  for (;;) {
    const sample = byStart <= last ? (frequency[byStart] as number) : Infinity;
    const before = byEnd <= last ? (frequency[byEnd] as number) - window : Infinity;
    const next = Math.min(sample, before);
    if (!(next < lastStart)) break;
    if (next > band[0]) starts[count++] = next;
    if (sample === next) byStart += 1;
    if (before === next) byEnd += 1;
  }
  if (lastStart > band[0]) starts[count++] = lastStart;
  return starts.subarray(0, count);
}

/** Reads values at ascending frequencies; NaN in a hole. */
class EdgeReader {
  private readonly frequency: Series;
  private readonly values: Series;
  private readonly segments: readonly Segment[];
  private segment = 0;
  private above: number;

  constructor(frequency: Series, values: Series, segments: readonly Segment[]) {
    this.frequency = frequency;
    this.values = values;
    this.segments = segments;
    this.above = Math.max(0, segments[0]?.first ?? 0);
  }

  /** A start and its window add up to the band's end but for a rounding: what lies that near to a segment lies in it. */
  at(edge: number): number {
    const { frequency, values, segments } = this;
    while (this.segment < segments.length - 1 && isBelow(segments[this.segment]?.to ?? Infinity, edge)) {
      this.segment += 1;
    }
    const part = segments[this.segment];
    if (part === undefined || isBelow(edge, part.from) || isBelow(part.to, edge)) return NaN;
    const hz = Math.min(Math.max(edge, part.from), part.to);
    let { above } = this;
    while (above < frequency.length && (frequency[above] as number) < hz) above += 1;
    this.above = above;
    return frequency[above] === hz ? (values[above] as number) : valueBetween(frequency, values, above - 1, hz);
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
