// How fine a sweep is, stretch by stretch, in few figures: enough to tell whether an asked step was kept.
import type { Band, Series } from "./contract.ts";

/** A stretch of a sweep and the widest step between neighbouring samples in it, Hz. */
export type StepStretch = readonly [from: number, to: number, step: number];

const SAME_STEP = 0.01;

/**
 * The stretches of a sweep within which the step stays the same to 1 %. Where there are more than `most`, neighbours are joined, the
 * wider step counting: the profile never says that a sweep is finer than it is.
 *
 * @param frequency Hz, ascending, n >= 1
 * @returns ascending and without gaps; empty for a single sample
 */
export function stepProfile(frequency: Series, most = 64): StepStretch[] {
  const stretches: StepStretch[] = [];
  for (let index = 1; index < frequency.length; index += 1) {
    const from = frequency[index - 1] as number;
    const to = frequency[index] as number;
    const last = stretches.at(-1);
    if (last !== undefined && Math.abs(to - from - last[2]) <= SAME_STEP * last[2])
      stretches[stretches.length - 1] = [last[0], to, Math.max(last[2], to - from)];
    else stretches.push([from, to, to - from]);
    if (stretches.length > 4 * most) joinNearest(stretches, most);
  }
  joinNearest(stretches, most);
  return stretches;
}

/** Joins neighbours, those whose steps differ least first, until at most `most` are left. */
function joinNearest(stretches: StepStretch[], most: number): void {
  while (stretches.length > most) {
    let nearest = 0;
    let least = Infinity;
    for (let index = 1; index < stretches.length; index += 1) {
      const ratio = Math.abs(Math.log((stretches[index] as StepStretch)[2] / (stretches[index - 1] as StepStretch)[2]));
      if (ratio < least) [nearest, least] = [index - 1, ratio];
    }
    const [low, high] = [stretches[nearest] as StepStretch, stretches[nearest + 1] as StepStretch];
    stretches.splice(nearest, 2, [low[0], high[1], Math.max(low[2], high[2])]);
  }
}

/** The parts of a band that a sweep reaches with steps no wider than `maxStep`, Hz. */
export function stretchesWithin(profile: readonly StepStretch[], [from, to]: Band, maxStep: number): Band[] {
  const fine: Band[] = [];
  for (const [low, high, step] of profile) {
    if (step > maxStep * (1 + 1e-9) || high <= from || low >= to) continue;
    const last = fine.at(-1);
    if (last !== undefined && last[1] === low) fine[fine.length - 1] = [last[0], Math.min(high, to)];
    else fine.push([Math.max(low, from), Math.min(high, to)]);
  }
  return fine;
}
