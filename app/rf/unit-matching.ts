// Unit-to-unit matching: how far units differ in |S21| and in phase over a passband at one temperature.
import type { Band, Prepared, Series } from "./contract.ts";
import { circularSpread, extremes, wrapped, type Extremes } from "./circular-spread.ts";
import { coverageOfBands, segmentsWithin, valueBetween } from "./coverage.ts";
import { curvesOf } from "./curves.ts";
import { firstAtOrAbove, isBelow, locate, sameFrequency } from "./frequency.ts";

/** A unit with its sweeps at the temperature; of these the one that reaches most of the band is compared. */
export interface MatchedUnit {
  readonly unit: string;
  readonly sweeps: readonly Prepared[];
}

export interface MatchingOptions {
  /** Hz, the passband. */
  readonly band: Band;
  /** Takes each unit's own least-squares constant and delay from its phase before they are compared. */
  readonly removesDelay: boolean;
  /** Hz; a wider step between samples is a hole. @default none */
  readonly maxStep?: number;
}

/** The largest difference between two units. */
export interface Spread {
  /** dB or degree, zero or more. */
  readonly value: number;
  /** Hz, the lowest of equals. */
  readonly frequency: number;
  /** The unit with more loss, or whose phase is ahead of the other's, first. */
  readonly units: readonly [string, string];
}

export interface MatchingCurve {
  readonly unit: string;
  /** Loss less the mean of the units, dB; on the common grid. */
  readonly level: Series;
  /** Phase less the mean of the units, degree, each taken on the turn nearest to the first unit; constant and delay removed if so chosen. */
  readonly phase: Series;
}

export type UnitMatching =
  | {
      readonly kind: "found";
      readonly level: Spread;
      readonly phase: Spread;
      /** Hz; the points compared. */
      readonly frequency: Series;
      /** Which point of the common grid was compared: 1 for each, 2 for every second …; differences between them may then be larger. */
      readonly every: number;
      readonly curves: readonly MatchingCurve[];
      /** What all units' sweeps reach of the band together. */
      readonly covered: readonly Band[];
      readonly missing: readonly Band[];
      /** The largest phase step between two samples of a sweep in the band, degree: near 180 the phase is unknowable. */
      readonly largestPhaseStep: number;
    }
  | { readonly kind: "none"; readonly reason: "too-few-units" | "no-common-band" };

/** Points times units that are held at once: five series of 32 MB. */
const MOST_VALUES = 4_000_000;

/**
 * Compares units over the part of a band that a sweep of each of them reaches.
 *
 * Common grid: the samples of all compared sweeps inside the common part, and its ends; every second, third … of them where points times
 * units are more than `mostValues`, as with two hundred units on grids of their own. Loss in dB and phase unwrapped along each sweep are
 * linear in frequency between samples, so that between grid points each curve is a line: the spread of |S21| is largest on the grid. Phase
 * differences are taken on the circle, at most 180 degrees. With `removesDelay` each unit's least-squares line through phase against
 * frequency over the grid's points is taken away first: its constant and its delay; what is left are differences of shape. A sample of exactly
 * zero has no phase and is a hole.
 *
 * @param units each once; identical data under two names is for the caller to leave out
 */
export function matchUnits(
  units: readonly MatchedUnit[],
  options: MatchingOptions,
  mostValues = MOST_VALUES,
): UnitMatching {
  const compared = units.flatMap(({ unit, sweeps }) => {
    const found = widestReach(sweeps, options);
    return found === undefined ? [] : [{ unit, ...found }];
  });
  if (compared.length < 2) return { kind: "none", reason: units.length < 2 ? "too-few-units" : "no-common-band" };
  const covered = compared.map(({ reach }) => reach).reduce(intersection);
  const grid = commonGrid(compared, covered);
  if (grid.length === 0) return { kind: "none", reason: "no-common-band" };
  const every = Math.ceil((grid.length * compared.length) / mostValues);
  const frequency = every === 1 ? grid : grid.filter((_, index) => index % every === 0);
  const names = compared.map(({ unit }) => unit);
  const levels = compared.map(({ sweep }) => sampledAt(sweep, curvesOf(sweep).loss("s21"), frequency));
  const raw = compared.map(({ sweep }) => sampledAt(sweep, curvesOf(sweep).phase(), frequency));
  const phases = options.removesDelay ? raw.map((phase) => withoutLine(frequency, phase)) : raw;
  return {
    kind: "found",
    level: largest(frequency, levels, names, extremes),
    phase: largest(frequency, phases, names, circularSpread),
    frequency,
    every,
    curves: curvesAbout(names, levels, phases),
    ...coverageOfBands(covered, options.band),
    largestPhaseStep: Math.max(...compared.map(({ sweep }) => largestStep(sweep, covered))),
  };
}

interface Reached {
  readonly sweep: Prepared;
  /** Hz, ascending. */
  readonly reach: readonly Band[];
}

/** The sweep that reaches most of the band, of equals the one with the most samples there; undefined where none does. */
function widestReach(sweeps: readonly Prepared[], { band, maxStep }: MatchingOptions): Reached | undefined {
  const candidates = sweeps.map((sweep) => {
    const { frequency } = sweep.network;
    const curves = curvesOf(sweep);
    const segments = curves.isMeasured("s21") ? segmentsWithin(frequency, curves.phase(), band, maxStep) : [];
    const reach = coverageOfBands(
      segments.map(({ from, to }): Band => [from, to]),
      band,
    ).covered;
    const samples = segments.reduce((sum, { first, last }) => sum + Math.max(0, last - first + 1), 0);
    return { sweep, reach, width: reach.reduce((sum, [from, to]) => sum + to - from, 0), samples };
  });
  const reaching = candidates.filter(({ reach }) => reach.length > 0);
  reaching.sort((one, other) =>
    sameFrequency(one.width, other.width) ? other.samples - one.samples : other.width - one.width,
  );
  return reaching[0];
}

function intersection(one: readonly Band[], other: readonly Band[]): Band[] {
  return one.flatMap(([from, to]) =>
    other.flatMap(([otherFrom, otherTo]): Band[] => {
      const shared: Band = [Math.max(from, otherFrom), Math.min(to, otherTo)];
      return isBelow(shared[0], shared[1]) || sameFrequency(from, to) ? [shared] : [];
    }),
  );
}

/** Samples of all sweeps within the stretches, and their ends; frequencies within the tolerance are one. */
function commonGrid(compared: readonly Reached[], stretches: readonly Band[]): Series {
  const parts = stretches.flatMap(([from, to]) => [
    Float64Array.of(from, to),
    ...compared.map(({ sweep: { network } }) =>
      network.frequency.subarray(firstAtOrAbove(network.frequency, from), firstAtOrAbove(network.frequency, to)),
    ),
  ]);
  const points = new Float64Array(parts.reduce((sum, { length }) => sum + length, 0));
  let filled = 0;
  for (const part of parts) {
    points.set(part, filled);
    filled += part.length;
  }
  points.sort();
  let kept = NaN;
  return points.filter((hz) => {
    if (sameFrequency(hz, kept)) return false;
    kept = hz;
    return true;
  });
}

function sampledAt({ network }: Prepared, values: Series, grid: Series): Series {
  return grid.map((hz) => {
    const { index, exact } = locate(network.frequency, hz);
    return exact ? (values[index] as number) : valueBetween(network.frequency, values, index - 1, hz);
  });
}

/** Phase less its least-squares line against frequency: constant and delay. Two points are a line. */
function withoutLine(frequency: Series, phase: Series): Series {
  const count = frequency.length;
  const middle = frequency.reduce((sum, hz) => sum + hz / count, 0);
  const mean = phase.reduce((sum, degrees) => sum + degrees / count, 0);
  let products = 0;
  let squares = 0;
  frequency.forEach((hz, index) => {
    products += (hz - middle) * ((phase[index] as number) - mean);
    squares += (hz - middle) ** 2;
  });
  const slope = squares === 0 ? 0 : products / squares;
  return phase.map((degrees, index) => degrees - mean - slope * ((frequency[index] as number) - middle));
}

function largest(
  frequency: Series,
  values: readonly Series[],
  names: readonly string[],
  spreadOf: (figures: readonly number[]) => Extremes,
): Spread {
  let worst = { spread: -1, high: 0, low: 0, at: 0 };
  frequency.forEach((_, at) => {
    const found = spreadOf(values.map((series) => series[at] as number));
    if (found.spread > worst.spread) worst = { ...found, at };
  });
  return {
    value: worst.spread,
    frequency: frequency[worst.at] as number,
    units: [names[worst.high] as string, names[worst.low] as string],
  };
}

function curvesAbout(names: readonly string[], levels: readonly Series[], phases: readonly Series[]): MatchingCurve[] {
  const [first] = phases;
  const near = phases.map((phase) => phase.map((degrees, at) => wrapped(degrees - (first?.[at] as number))));
  const meanLevel = meanOf(levels);
  const meanPhase = meanOf(near);
  return names.map((unit, index) => ({
    unit,
    level: (levels[index] as Series).map((loss, at) => loss - (meanLevel[at] as number)),
    phase: (near[index] as Series).map((degrees, at) => degrees - (meanPhase[at] as number)),
  }));
}

/** The mean of several series, point by point. */
function meanOf(several: readonly Series[]): Series {
  const mean = new Float64Array(several[0]?.length ?? 0);
  for (const series of several)
    series.forEach((figure, at) => (mean[at] = (mean[at] as number) + figure / several.length));
  return mean;
}

function largestStep(sweep: Prepared, stretches: readonly Band[]): number {
  const { frequency } = sweep.network;
  const phase = curvesOf(sweep).phase();
  let most = 0;
  for (let index = 1; index < frequency.length; index += 1) {
    const [below, above] = [frequency[index - 1] as number, frequency[index] as number];
    if (!stretches.some(([from, to]) => above > from && below < to)) continue;
    const step = Math.abs((phase[index] as number) - (phase[index - 1] as number));
    if (step > most) most = step;
  }
  return most;
}
