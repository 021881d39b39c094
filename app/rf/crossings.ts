// The peak of a passband and the frequencies where it has fallen by a level, searched outwards.
import type { Band, Series } from "./contract.ts";
import { segmentsWithin } from "./coverage.ts";
import { bandOf } from "./frequency.ts";

/** Hz, below and above the peak; NaN on a side that never crosses, or not before a hole. */
export type Crossings = readonly [lower: number, upper: number];

/** Index of the sample with the least loss within a band, the lowest of equals; -1 where the band holds no sample. */
export function peakIndex(frequency: Series, loss: Series, within: Band): number {
  let peak = -1;
  for (const { first, last } of segmentsWithin(frequency, loss, within)) {
    for (let index = first; index <= last; index += 1) {
      if (peak < 0 || (loss[index] as number) < (loss[peak] as number)) peak = index;
    }
  }
  return peak;
}

/**
 * First crossings outwards from the peak, linear in dB between samples. Beside a null, where the loss is infinite at
 * once, the crossing lies at the last finite sample.
 *
 * @param level dB below the peak
 * @param maxStep Hz; a wider step is a hole that no search passes
 */
export function crossingsAt(
  frequency: Series,
  loss: Series,
  peak: number,
  level: number,
  maxStep = Infinity,
): Crossings {
  if (level <= 0) return [NaN, NaN];
  const sweep = bandOf(frequency);
  const run = segmentsWithin(frequency, loss, sweep, maxStep).find(({ first, last }) => first <= peak && peak <= last);
  if (run === undefined) return [NaN, NaN];
  const target = (loss[peak] as number) + level;
  return [
    crossingTowards(frequency, loss, peak, target, -1, run.first),
    crossingTowards(frequency, loss, peak, target, 1, run.last),
  ];
}

function crossingTowards(
  frequency: Series,
  loss: Series,
  peak: number,
  target: number,
  direction: 1 | -1,
  end: number,
): number {
  for (let index = peak; index !== end; index += direction) {
    const inner = loss[index] as number;
    const outer = loss[index + direction] as number;
    if (outer < target) continue;
    const fraction = outer === Infinity ? 0 : (target - inner) / (outer - inner);
    return (
      (frequency[index] as number) +
      ((frequency[index + direction] as number) - (frequency[index] as number)) * fraction
    );
  }
  return NaN;
}
