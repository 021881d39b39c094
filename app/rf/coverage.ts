// Coverage: which parts of a band a sweep reaches, sample by sample, and what is missing.
import type { Band, Series } from "./contract.ts";
import { isBelow, locate, sameFrequency } from "./frequency.ts";

/**
 * A stretch of a band without holes. Samples first..last lie in it; an end that is not a sample is interpolated between
 * its two neighbours. `first` is `last + 1` where both ends lie between the same two samples.
 */
export interface Segment {
  /** Hz. */
  readonly from: number;
  readonly to: number;
  readonly first: number;
  readonly last: number;
}

export interface Coverage {
  readonly covered: readonly Band[];
  readonly missing: readonly Band[];
}

/**
 * The stretches of a band that a sweep reaches. A step wider than `maxStep` is a hole, and a sample whose value is NaN
 * is no sample; nothing is extrapolated. A lone sample between holes is a segment of no width.
 *
 * @param values one per sample; the frequencies themselves where every sample has a value
 * @param maxStep Hz; without it only the ends of the sweep and absent samples are holes
 */
export function segmentsWithin(frequency: Series, values: Series, band: Band, maxStep = Infinity): Segment[] {
  const { begin, end, firstInside, lastInside } = samplesOf(frequency, band);
  const segments: Segment[] = [];
  for (let start = begin; start <= end;) {
    const stop = endOfRun(frequency, values, start, end, maxStep);
    const isInside = stop > start || (start >= firstInside && start <= lastInside);
    if (isInside && !Number.isNaN(values[start])) {
      const first = Math.max(start, firstInside);
      const last = Math.min(stop, lastInside);
      const from = start < firstInside ? band[0] : (frequency[first] as number);
      const to = stop > lastInside ? band[1] : (frequency[last] as number);
      segments.push({ from, to, first, last });
    }
    start = stop + 1;
  }
  return segments;
}

interface SamplesOfBand {
  readonly firstInside: number;
  readonly lastInside: number;
  /** The same with the neighbours that an edge between two samples is interpolated from. */
  readonly begin: number;
  readonly end: number;
}

function samplesOf(frequency: Series, band: Band): SamplesOfBand {
  const lower = locate(frequency, band[0]);
  const upper = locate(frequency, band[1]);
  return {
    firstInside: lower.index,
    lastInside: upper.exact ? upper.index : upper.index - 1,
    begin: Math.max(0, lower.exact ? lower.index : lower.index - 1),
    end: Math.min(frequency.length - 1, upper.index),
  };
}

/** First and last sample that a band is read from: those inside and those its edges lie beside. */
export function samplesAround(frequency: Series, band: Band): readonly [first: number, last: number] {
  const { begin, end } = samplesOf(frequency, band);
  return [begin, end];
}

/** Last index of the unbroken run of samples that begins at `start`. */
function endOfRun(frequency: Series, values: Series, start: number, end: number, maxStep: number): number {
  if (Number.isNaN(values[start])) return start;
  // The frequencies stand for values where none is absent.
  if (values === frequency && maxStep === Infinity) return end;
  let stop = start;
  if (maxStep === Infinity) while (stop < end && !Number.isNaN(values[stop + 1])) stop += 1;
  else while (stop < end && !isHole(frequency, values, stop, maxStep)) stop += 1;
  return stop;
}

/** True where the step from the sample `below` to the next is a hole: that one has no value, or lies too far. */
export function isHole(frequency: Series, values: Series, below: number, maxStep: number): boolean {
  if (Number.isNaN(values[below]) || Number.isNaN(values[below + 1])) return true;
  if (maxStep === Infinity) return false;
  const reach = (frequency[below] as number) + maxStep;
  return (frequency[below + 1] as number) > reach && !sameFrequency(frequency[below + 1] as number, reach);
}

/** What a list of segments covers of a band. A lone sample covers nothing, unless the band is that one frequency. */
export function coverageOf(segments: readonly Segment[], band: Band): Coverage {
  return coverageOfBands(
    segments.map(({ from, to }): Band => [from, to]),
    band,
  );
}

/** What a list of stretches, in any order, covers of a band together. Gaps that touch are one. */
export function coverageOfBands(stretches: readonly Band[], band: Band): Coverage {
  if (sameFrequency(band[0], band[1])) {
    return stretches.length > 0 ? { covered: [band], missing: [] } : { covered: [], missing: [band] };
  }
  const covered: Band[] = [];
  for (const [from, to] of stretches.toSorted((a, b) => a[0] - b[0])) {
    const previous = covered.at(-1);
    if (!isBelow(from, to)) continue;
    if (previous !== undefined && !isBelow(previous[1], from)) {
      covered[covered.length - 1] = [previous[0], Math.max(previous[1], to)];
    } else covered.push([from, to]);
  }
  return { covered, missing: gapsBetween(covered, band) };
}

function gapsBetween(covered: readonly Band[], band: Band): Band[] {
  const missing: Band[] = [];
  let reached = band[0];
  for (const [from, to] of covered) {
    if (isBelow(reached, from)) missing.push([reached, from]);
    reached = Math.max(reached, to);
  }
  if (isBelow(reached, band[1])) missing.push([reached, band[1]]);
  return missing;
}

/**
 * Value between two neighbouring samples, linear against frequency. Beside a null (an infinite loss) it is +Infinity,
 * never NaN.
 *
 * @param below index of the sample below
 */
export function valueBetween(frequency: Series, values: Series, below: number, hz: number): number {
  const start = values[below] as number;
  const end = values[below + 1] as number;
  if (!Number.isFinite(start) || !Number.isFinite(end)) return Number.isNaN(start + end) ? NaN : Infinity;
  const fraction =
    (hz - (frequency[below] as number)) / ((frequency[below + 1] as number) - (frequency[below] as number));
  return start + (end - start) * fraction;
}
