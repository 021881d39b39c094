// How fine a sweep is, stretch by stretch, in few figures: enough to tell whether an asked step was kept.
import type { Band, Series } from "./contract.ts";

/** A stretch of a sweep and the widest step between neighbouring samples in it, Hz. */
export type StepStretch = readonly [from: number, to: number, step: number];

/** Within a stretch the widest step is at most this many times the narrowest. */
const SAME_STEP = 1.01;
/** Frequencies within this, relative, are one. */
const TOLERANCE = 1e-9;

/**
 * The stretches of a sweep within which the step stays the same to 1 %; to 2, 4, 8 … % where there are more than `most`
 * such stretches. The widest step of a stretch counts: the profile never says that a sweep is finer than it is.
 *
 * @param frequency Hz, strictly ascending, n >= 1
 * @param most stretches at most, 1 or more
 * @returns ascending and without gaps from the first sample to the last; empty for a single sample
 */
export function stepProfile(frequency: Series, most = 64): StepStretch[] {
  let ratio = SAME_STEP;
  let stretches = stretchesOf(frequency, ratio, most);
  // Squared each time, so that even a grid without any order is told in a few passes.
  while (stretches === undefined) {
    ratio *= ratio;
    stretches = stretchesOf(frequency, ratio, most);
  }
  return stretches;
}

/** The fewest stretches in which steps differ by no more than a ratio, from left to right; undefined if more than `most`. */
function stretchesOf(frequency: Series, ratio: number, most: number): StepStretch[] | undefined {
  const stretches: StepStretch[] = [];
  let from = frequency[0] as number;
  let [narrowest, widest] = [Infinity, 0];
  for (let index = 1; index < frequency.length; index += 1) {
    const low = frequency[index - 1] as number;
    const step = (frequency[index] as number) - low;
    if (Math.max(widest, step) > ratio * Math.min(narrowest, step)) {
      stretches.push([from, low, widest]);
      if (stretches.length >= most) return undefined;
      [from, narrowest, widest] = [low, step, step];
      continue;
    }
    narrowest = Math.min(narrowest, step);
    widest = Math.max(widest, step);
  }
  if (widest > 0) stretches.push([from, frequency[frequency.length - 1] as number, widest]);
  return stretches;
}

/** The parts of a band that a sweep reaches with steps no wider than `maxStep`, Hz, ascending; those that touch are one. */
export function stretchesWithin(profile: readonly StepStretch[], [from, to]: Band, maxStep: number): Band[] {
  const fine: Band[] = [];
  for (const [low, high, step] of profile) {
    if (isWider(step, maxStep, low) || high <= from || low >= to) continue;
    const last = fine.at(-1);
    if (last !== undefined && last[1] === low) fine[fine.length - 1] = [last[0], Math.min(high, to)];
    else fine.push([Math.max(low, from), Math.min(high, to)]);
  }
  return fine;
}

/** Whether a step is wider than asked, as the evaluation sees it: two frequencies within 1e-9 are one. */
function isWider(step: number, maxStep: number, hz: number): boolean {
  return step - maxStep > TOLERANCE * Math.max(maxStep, hz);
}
