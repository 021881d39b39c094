// What the sweeps of one measurement leave out of the sweeps that were planned: stretches not reached, steps too wide.
import type { Band } from "./contract.ts";
import { coverageOfBands } from "./coverage.ts";
import type { EvidenceAsked, PlacedSweep, SweepGap } from "./evidence-types.ts";
import type { PlannedSweep } from "./measurement-plan.ts";
import { stretchesWithin } from "./step-profile.ts";

/** What the sweeps, taken together, do not deliver of the planned ones; in the plan's order. */
export function gapsOf(
  sweeps: readonly PlacedSweep[],
  { plan, lowestTestFrequency }: Pick<EvidenceAsked, "plan" | "lowestTestFrequency">,
): SweepGap[] {
  return (plan.sweeps ?? []).flatMap((planned) => gapsOfPlanned(sweeps, planned, lowestTestFrequency));
}

/** Hz that a measurement lacks, to tell which of several lacks least. */
export const lackOf = (gaps: readonly SweepGap[]): number =>
  gaps.flatMap(({ stretches }) => stretches).reduce((sum, [from, to]) => sum + to - from, 0);

function gapsOfPlanned(sweeps: readonly PlacedSweep[], planned: PlannedSweep, lowest = 0): SweepGap[] {
  const [from, to] = planned.band;
  const band: Band = [from === 0 ? Math.min(lowest, to) : from, to];
  const fine = coverageOfBands(reachedWithin(sweeps, band, planned.maxStep), band);
  if (fine.missing.length === 0) return [];
  const reached = coverageOfBands(reachedWithin(sweeps, band, Infinity), band);
  const unsure = sweeps.flatMap((sweep) => (sweep.steps === null ? stretchOf(sweep, band) : []));
  const absent = coverageOfBands([...reached.covered, ...unsure], band).missing;
  const coarse = coverageOfBands([...fine.covered, ...reached.missing], band).missing;
  const unknown = coverageOfBands([...reached.covered, ...absent], band).missing;
  const gaps: SweepGap[] = [
    { planned, kind: "not-reached", stretches: absent },
    { planned, kind: "too-coarse", stretches: coarse, step: finestStep(sweeps, band, coarse) },
    { planned, kind: "step-unknown", stretches: unknown },
  ];
  return gaps.filter(({ stretches }) => stretches.length > 0);
}

const reachedWithin = (sweeps: readonly PlacedSweep[], band: Band, maxStep: number): Band[] =>
  sweeps.flatMap(({ steps }) => stretchesWithin(steps ?? [], band, maxStep));

/** The part of a band that a sweep spans, whatever its steps. */
function stretchOf({ from, to, points }: PlacedSweep, band: Band): Band[] {
  const [low, high] = [Math.max(from, band[0]), Math.min(to, band[1])];
  return points > 1 && high > low ? [[low, high]] : [];
}

/** The smallest step, Hz, at which the sweeps together still reach all of some stretches that they reach. */
function finestStep(sweeps: readonly PlacedSweep[], band: Band, stretches: readonly Band[]): number {
  const steps = [...new Set(sweeps.flatMap(({ steps }) => (steps ?? []).map(([, , step]) => step)))];
  steps.sort((a, b) => a - b);
  const isEnough = (step: number) => {
    const reached = reachedWithin(sweeps, band, step);
    return stretches.every((stretch) => coverageOfBands(clipped(reached, stretch), stretch).missing.length === 0);
  };
  let [low, high] = [0, steps.length - 1];
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (isEnough(steps[middle] as number)) high = middle;
    else low = middle + 1;
  }
  return steps[low] ?? NaN;
}

const clipped = (bands: readonly Band[], [from, to]: Band): Band[] =>
  bands.flatMap(([low, high]): Band[] => (high > from && low < to ? [[Math.max(low, from), Math.min(high, to)]] : []));
