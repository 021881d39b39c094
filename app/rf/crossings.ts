// The frequencies where a passband has fallen by a level from its peak, searched outwards.
import { isHole } from "./coverage.ts";
import type { Series } from "./contract.ts";

/** Hz, below and above the peak; NaN on a side that never crosses, or not before a hole. */
export type Crossings = readonly [lower: number, upper: number];

/** Losses of a sweep's S21, computed where they are asked for. */
interface Losses {
  readonly frequency: Series;
  readonly points: number;
  readonly lossWithin: (parameter: "s21", first: number, last: number) => Series;
}

/** Samples whose losses are computed at once on the way outwards. */
const STRIDE = 64;

/**
 * First crossings of |S21| outwards from the peak, linear in dB between samples. Beside a null, where the loss is infinite at
 * once, the crossing lies at the last finite sample.
 *
 * @param peak index of the sample with the least loss
 * @param level dB below the peak
 * @param maxStep Hz; a wider step is a hole that no search passes
 */
export function crossingsAt(curves: Losses, peak: number, level: number, maxStep = Infinity): Crossings {
  if (level <= 0) return [NaN, NaN];
  return [crossingTowards(curves, peak, level, -1, maxStep), crossingTowards(curves, peak, level, 1, maxStep)];
}

function crossingTowards(curves: Losses, peak: number, level: number, direction: 1 | -1, maxStep: number): number {
  const { frequency, points } = curves;
  const loss = curves.lossWithin("s21", peak, peak);
  const target = (loss[peak] as number) + level;
  for (let index = peak; index + direction >= 0 && index + direction < points; index += direction) {
    const next = index + direction;
    if ((index - peak) % STRIDE === 0) {
      const farthest = index + direction * STRIDE;
      curves.lossWithin("s21", Math.min(next, farthest), Math.max(next, farthest));
    }
    const inner = loss[index] as number;
    const outer = loss[next] as number;
    if (outer < target && maxStep === Infinity) continue;
    if (isHole(frequency, loss, Math.min(index, next), maxStep)) return NaN;
    if (outer < target) continue;
    const fraction = outer === Infinity ? 0 : (target - inner) / (outer - inner);
    return (frequency[index] as number) + ((frequency[next] as number) - (frequency[index] as number)) * fraction;
  }
  return NaN;
}
