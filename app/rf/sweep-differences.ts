// Where two sweeps of one measurement overlap: how far their readings differ beyond what both uncertainties allow.
import { isNotMeasured } from "./check-columns.ts";
import type { Series, Setup, Trace, TwoPort } from "./contract.ts";
import { firstAtOrAbove, sameFrequency } from "./frequency.ts";
import { lossOf, reflectionSpread, reflectionTerms, transmissionTerms, type Ends } from "./uncertainty.ts";

export const COMPARED = ["s21", "s11", "s22"] as const;
export type Compared = (typeof COMPARED)[number];

/** One parameter of a sweep with the ends of its readings, linear magnitudes. */
export interface BoundedTrace {
  readonly frequency: Series;
  readonly trace: Trace;
  readonly low: Series;
  readonly high: Series;
  /** The ends of a magnitude between samples `above - 1` and `above`. */
  readonly endsBetween: (size: number, above: number) => Ends;
}

/** Where two sweeps differ in one parameter. */
export interface Difference {
  /** Hz, where they differ most beyond their uncertainties. */
  readonly frequency: number;
  /** dB there, of the one sweep and of the other; Infinity for an exact zero. */
  readonly readings: readonly [number, number];
  /** dB between the nearest ends of the two readings there; Infinity where one can only be an exact zero. */
  readonly excess: number;
  /** Hz, from the first to the last sample at which they differ. */
  readonly range: readonly [number, number];
  /** Samples that differ, and samples compared. */
  readonly count: number;
  readonly compared: number;
}

/**
 * A parameter with its ends by the setup in use; null where it has no uncertainty (of |S21|, or a directivity for a
 * reflection), or was not measured: of such a one it cannot be said that it differs.
 */
export function boundedTrace(network: TwoPort, parameter: Compared, setup: Setup): BoundedTrace | null {
  const stated = parameter === "s21" ? setup.transmission : setup.directivity;
  if (stated === undefined || isNotMeasured(network[parameter])) return null;
  const endsOf = parameter === "s21" ? transmissionEnds(network, setup) : reflectionEnds(network, setup);
  const { frequency } = network;
  const trace = network[parameter];
  const [low, high] = [new Float64Array(frequency.length), new Float64Array(frequency.length)];
  for (let k = 0; k < frequency.length; k += 1) [low[k], high[k]] = endsOf(sizeAt(trace, k), k, k);
  return { frequency, trace, low, high, endsBetween: (size, above) => endsOf(size, above - 1, above) };
}

/** Ends of a magnitude at a sample, or between two neighbours: 0 <= low <= high. */
type EndsOf = (size: number, one: number, other: number) => Ends;

/** |S21| 10^(±Ut/20) ± L, as the evaluation takes it. */
function transmissionEnds({ frequency }: TwoPort, setup: Setup): EndsOf {
  const { factor, floor } = transmissionTerms(setup, frequency.length);
  return (size) => [Math.max(0, size / factor - floor), size * factor + floor];
}

/** |Γ| ± (D + T|Γ| + M|Γ|² + K|S21||S12|), as the evaluation takes it, not clipped: what lies beyond 1 differs too. */
function reflectionEnds({ s21, s12 }: TwoPort, setup: Setup): EndsOf {
  const terms = reflectionTerms(setup);
  const throughAt = (k: number) => sizeAt(s21, k) * sizeAt(s12, k);
  return (size, one, other) => {
    const through = one === other ? throughAt(one) : Math.max(throughAt(one), throughAt(other));
    const spread = reflectionSpread(size, through, terms);
    return [Math.max(0, size - spread), size + spread];
  };
}

/** By the root of the squares: of numbers that overflow so, which no instrument writes, nothing is told. */
const sizeOf = (re: number, im: number): number => Math.sqrt(re * re + im * im);
const sizeAt = ({ re, im }: Trace, k: number): number => sizeOf(re[k] as number, im[k] as number);

/** Whether two sweeps have a frequency in common, a touching end included. */
export function overlaps(one: Series, other: Series): boolean {
  const from = Math.max(one[0] as number, other[0] as number);
  const to = Math.min(one[one.length - 1] as number, other[other.length - 1] as number);
  return from <= to || sameFrequency(from, to);
}

/**
 * How two sweeps differ in a parameter, or null where they agree.
 *
 * Samples of each are held against the other sweep where that has the very frequency, or is at least as fine there. Between two
 * samples a reading may be anything between theirs, or what a straight line between the complex numbers gives: a null between
 * samples is then no difference.
 *
 * @param stride every which sample is compared
 */
export function differenceOf(one: BoundedTrace, other: BoundedTrace, stride = 1): Difference | null {
  const forward = compare(one, other, stride);
  const backward = compare(other, one, stride);
  const isForward = forward.excess >= backward.excess;
  const { at, excess } = isForward ? forward : backward;
  if (at < 0) return null;
  const [sampled, held] = isForward ? [one, other] : [other, one];
  const hz = sampled.frequency[at] as number;
  const [own, others] = [lossOf(sizeAt(sampled.trace, at)), readingAt(held, hz)];
  return {
    frequency: hz,
    readings: isForward ? [own, others] : [others, own],
    excess: 20 * Math.log10(excess),
    range: [Math.min(forward.range[0], backward.range[0]), Math.max(forward.range[1], backward.range[1])],
    count: forward.count + backward.count,
    compared: forward.compared + backward.compared,
  };
}

interface Comparison {
  /** Index of the sample that differs most, -1 if none does. */
  at: number;
  /** Ratio of the nearest ends there, linear. */
  excess: number;
  range: [number, number];
  count: number;
  compared: number;
}

/** Samples of one sweep against the other. */
function compare(sampled: BoundedTrace, held: BoundedTrace, stride: number): Comparison {
  const { frequency } = sampled;
  const grid = held.frequency;
  const found: Comparison = { at: -1, excess: AGREES, range: [Infinity, -Infinity], count: 0, compared: 0 };
  let above = 0;
  for (let k = firstAtOrAbove(frequency, (grid[0] as number) * (1 - 1e-9)); k < frequency.length; k += stride) {
    const hz = frequency[k] as number;
    above = nextAtOrAbove(grid, above, hz);
    const same = sampleAt(grid, above, hz);
    if (same < 0 && above === grid.length) break;
    if (same < 0 && (above === 0 || !isAsFine(grid, above, frequency, k))) continue;
    found.compared += 1;
    const excess = same < 0 ? excessBetween(sampled, k, held, above, hz) : excessAt(sampled, k, held, same);
    if (!(excess > AGREES)) continue;
    found.count += 1;
    found.range = [Math.min(found.range[0], hz), hz];
    if (excess > found.excess) [found.at, found.excess] = [k, excess];
  }
  return found;
}

/** First sample at or above a frequency, looked for from a sample below or at it: mostly a step or two away. */
function nextAtOrAbove(grid: Series, start: number, hz: number): number {
  let width = 1;
  while (start + width < grid.length && (grid[start + width] as number) < hz) width *= 2;
  let low = start + (width >> 1);
  let high = Math.min(grid.length, start + width + 1);
  while (low < high) {
    const middle = (low + high) >>> 1;
    if ((grid[middle] as number) < hz) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** A ratio of ends beyond which two readings differ by more than rounding. */
const AGREES = 1 + 1e-9;

/** The sample that is the very frequency, of the first at or above it and the one below; -1 if neither is. */
function sampleAt(grid: Series, above: number, hz: number): number {
  if (above < grid.length && sameFrequency(grid[above] as number, hz)) return above;
  return above > 0 && sameFrequency(grid[above - 1] as number, hz) ? above - 1 : -1;
}

/** Whether the step of a grid below a sample is no wider than the steps of the other sweep about sample k. */
function isAsFine(grid: Series, above: number, frequency: Series, k: number): boolean {
  const below = k > 0 ? (frequency[k] as number) - (frequency[k - 1] as number) : 0;
  const next = k < frequency.length - 1 ? (frequency[k + 1] as number) - (frequency[k] as number) : 0;
  return (grid[above] as number) - (grid[above - 1] as number) <= Math.max(below, next) * (1 + 1e-9);
}

function excessAt(one: BoundedTrace, k: number, other: BoundedTrace, j: number): number {
  return excessOf(one.low[k] as number, one.high[k] as number, other.low[j] as number, other.high[j] as number);
}

function excessBetween(one: BoundedTrace, k: number, other: BoundedTrace, above: number, hz: number): number {
  const { frequency, trace, low, high } = other;
  const from = frequency[above - 1] as number;
  const share = (hz - from) / ((frequency[above] as number) - from);
  const between = (column: Series) =>
    (column[above - 1] as number) + share * ((column[above] as number) - (column[above - 1] as number));
  const [least, largest] = other.endsBetween(sizeOf(between(trace.re), between(trace.im)), above);
  return excessOf(
    one.low[k] as number,
    one.high[k] as number,
    Math.min(least, low[above - 1] as number, low[above] as number),
    Math.max(largest, high[above - 1] as number, high[above] as number),
  );
}

/** How far two intervals lie apart, as a ratio; 1 where they meet. */
function excessOf(low: number, high: number, otherLow: number, otherHigh: number): number {
  if (low > otherHigh) return low / otherHigh;
  return otherLow > high ? otherLow / high : 1;
}

/** dB, linear against frequency between samples. */
function readingAt({ frequency, trace }: BoundedTrace, hz: number): number {
  const above = firstAtOrAbove(frequency, hz);
  const same = sampleAt(frequency, above, hz);
  if (same >= 0) return lossOf(sizeAt(trace, same));
  const [from, to] = [lossOf(sizeAt(trace, above - 1)), lossOf(sizeAt(trace, above))];
  if (!Number.isFinite(from + to)) return Infinity;
  const start = frequency[above - 1] as number;
  return from + ((to - from) * (hz - start)) / ((frequency[above] as number) - start);
}
