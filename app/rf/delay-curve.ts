// The group delay of a sweep as a curve: between neighbours or over an aperture, split where the sweep has holes.
import type { Band, Series } from "./contract.ts";
import { segmentsWithin, valueBetween, type Segment } from "./coverage.ts";
import type { Curves } from "./curves.ts";
import { bandOf, locate, sameFrequency } from "./frequency.ts";

export interface DelayOptions {
  /** Hz; absent: central differences over the neighbouring samples. */
  readonly aperture?: number | undefined;
  /** Hz; a wider step is a hole, and the delay beside it one-sided. */
  readonly maxStep?: number | undefined;
  /** Hz; with an aperture the edges of this band become points too. */
  readonly band?: Band | undefined;
}

export interface DelayCurve {
  /** Hz, ascending, n points: the samples, and with an aperture the edges of the band. */
  readonly frequency: Series;
  /** s, n points; NaN at a lone sample, at an exactly zero sample and where the aperture reaches beyond its run. */
  readonly delay: Series;
  /** Hz between the samples each delay was taken over, n points; NaN where there is none. */
  readonly aperture: Series;
}

/** An aperture that passes an end of its run by less than this share of the frequency still fits. */
const EDGE_TOLERANCE = 1e-9;
const DEGREES_PER_TURN = 360;

/**
 * Group delay of S21, τ = -Δφ/(2π Δf), from the phase unwrapped along the whole sweep (IEC 60862-1: group delay time).
 *
 * Without an aperture Δ spans the two neighbours, one-sided at both ends of a run; with an aperture A it spans f ± A/2,
 * phase linear between samples.
 */
export function delayCurve(curves: Curves, { aperture, maxStep, band }: DelayOptions = {}): DelayCurve {
  const { frequency } = curves;
  const phase = curves.phase();
  const runs = segmentsWithin(frequency, phase, bandOf(frequency), maxStep);
  return aperture === undefined
    ? delayOfNeighbours(frequency, phase, runs)
    : withAperture(delayOverAperture(frequency, phase, runs, band ?? bandOf(frequency), aperture), aperture);
}

/** Least and largest aperture in use within a band, Hz; undefined where there is no delay. */
export function aperturesWithin({ frequency, aperture }: DelayCurve, band: Band): Band | undefined {
  let least = Infinity;
  let largest = -Infinity;
  for (let index = 0; index < frequency.length; index += 1) {
    const hz = frequency[index] as number;
    const width = aperture[index] as number;
    if (hz < band[0] || hz > band[1] || Number.isNaN(width)) continue;
    least = Math.min(least, width);
    largest = Math.max(largest, width);
  }
  if (least > largest) return undefined;
  return sameFrequency(least, largest) ? [largest, largest] : [least, largest];
}

function delayOfNeighbours(frequency: Series, phase: Series, runs: readonly Segment[]): DelayCurve {
  const delay = new Float64Array(frequency.length).fill(NaN);
  const aperture = new Float64Array(frequency.length).fill(NaN);
  for (const { first, last } of runs) {
    if (last === first) continue;
    for (let index = first; index <= last; index += 1) {
      const below = Math.max(first, index - 1);
      const above = Math.min(last, index + 1);
      const turns = ((phase[above] as number) - (phase[below] as number)) / DEGREES_PER_TURN;
      const width = (frequency[above] as number) - (frequency[below] as number);
      delay[index] = -turns / width;
      aperture[index] = width;
    }
  }
  return { frequency, delay, aperture };
}

type DelayValues = Pick<DelayCurve, "frequency" | "delay">;

const withAperture = ({ frequency, delay }: DelayValues, aperture: number): DelayCurve => ({
  frequency,
  delay,
  aperture: delay.map((seconds) => (Number.isNaN(seconds) ? NaN : aperture)),
});

/**
 * Delay over a fixed aperture, phase linear between samples, at the samples and at the edges of a band; s, NaN where the
 * aperture reaches beyond its run.
 *
 * @param phase degree, unwrapped
 * @param runs stretches without holes
 * @param aperture Hz
 */
export function delayOverAperture(
  frequency: Series,
  phase: Series,
  runs: readonly Segment[],
  band: Band,
  aperture: number,
): DelayValues {
  const edges = band.filter((hz, index) => band.indexOf(hz) === index && !locate(frequency, hz).exact);
  const grid = Float64Array.from([...frequency, ...edges]).sort();
  const delay = new Float64Array(grid.length).fill(NaN);
  let run = 0;
  grid.forEach((hz, index) => {
    while (run < runs.length - 1 && hz > (runs[run]?.to ?? Infinity)) run += 1;
    const { from, to } = runs[run] ?? { from: Infinity, to: -Infinity };
    const low = hz - aperture / 2;
    const high = hz + aperture / 2;
    if (low < from * (1 - EDGE_TOLERANCE) || high > to * (1 + EDGE_TOLERANCE)) return;
    const difference = phaseAt(frequency, phase, Math.min(high, to)) - phaseAt(frequency, phase, Math.max(low, from));
    delay[index] = -difference / DEGREES_PER_TURN / aperture;
  });
  return { frequency: grid, delay };
}

function phaseAt(frequency: Series, phase: Series, hz: number): number {
  const { index, exact } = locate(frequency, hz);
  if (frequency[index] === hz) return phase[index] as number;
  const below = exact && (frequency[index] as number) < hz ? index : index - 1;
  return valueBetween(frequency, phase, Math.min(Math.max(below, 0), frequency.length - 2), hz);
}
