// Step profiles: never finer than the sweep is, few, and fine enough to tell an asked step from a wider one.
import fc from "fast-check";
import { expect, test } from "vitest";
import { coverageOfBands, segmentsWithin } from "~/rf/coverage";
import { stepProfile, stretchesWithin, type StepStretch } from "~/rf/step-profile";

const grid = (...frequency: number[]) => Float64Array.from(frequency);
const even = (from: number, step: number, points: number) => Array.from({ length: points }, (_, k) => from + k * step);

/** Steps over seven decades, in any order, from any start; up to 400 of them. */
const grids = fc
  .tuple(
    fc.double({ min: 0, max: 1e10, noNaN: true }),
    fc.array(
      fc.double({ min: 1, max: 8, noNaN: true }).map((exponent) => 10 ** exponent),
      { minLength: 1, maxLength: 400 },
    ),
  )
  .map(([start, steps]) => {
    const frequency = steps.reduce((grown, step) => [...grown, (grown.at(-1) as number) + step], [start]);
    return Float64Array.from(new Set(frequency));
  });
const mosts = fc.integer({ min: 1, max: 64 });

const stepsOf = (frequency: Float64Array) => [...frequency].slice(1).map((hz, k) => hz - (frequency[k] as number));

test("a profile is as long as asked at most, without gaps from the first sample to the last", () => {
  fc.assert(
    fc.property(grids, mosts, (frequency, most) => {
      fc.pre(frequency.length > 1);
      const profile = stepProfile(frequency, most);
      expect(profile.length).toBeLessThanOrEqual(most);
      expect(profile[0]?.[0]).toBe(frequency[0]);
      expect(profile.at(-1)?.[1]).toBe(frequency.at(-1));
      profile.slice(1).forEach(([from], k) => {
        expect(from).toBe(profile[k]?.[1]);
      });
    }),
  );
});

test("it never says that a sweep is finer than it is, and no step that the sweep does not have", () => {
  fc.assert(
    fc.property(grids, mosts, (frequency, most) => {
      const steps = stepsOf(frequency);
      for (const [from, to, step] of stepProfile(frequency, most)) {
        const own = steps.filter((_, k) => (frequency[k] as number) >= from && (frequency[k + 1] as number) <= to);
        expect(Math.max(...own)).toBe(step);
      }
    }),
  );
});

test("what it says is reached within a step, the evaluation counts as covered with that step", () => {
  fc.assert(
    fc.property(grids, mosts, fc.nat(), fc.double({ min: 0.5, max: 2, noNaN: true }), (frequency, most, pick, by) => {
      fc.pre(frequency.length > 1);
      const steps = stepsOf(frequency);
      const maxStep = (steps[pick % steps.length] as number) * by;
      const band = [frequency[0] as number, frequency.at(-1) as number] as const;
      const zeros = new Float64Array(frequency.length);
      const covered = segmentsWithin(frequency, zeros, band, maxStep).map(({ from, to }) => [from, to] as const);
      for (const stretch of stretchesWithin(stepProfile(frequency, most), band, maxStep)) {
        const inside = covered.flatMap(([from, to]) =>
          to > stretch[0] && from < stretch[1] ? [[Math.max(from, stretch[0]), Math.min(to, stretch[1])] as const] : [],
        );
        expect(coverageOfBands(inside, stretch).missing).toEqual([]);
      }
    }),
  );
});

test("an even sweep is one stretch, a fine passband in a coarse sweep three, a lone sample none", () => {
  expect(stepProfile(grid(...even(1e9, 1e6, 10_001)))).toEqual([[1e9, 1.1e10, 1e6]]);
  const segmented = [...even(1e9, 10e6, 10), ...even(1.1e9, 1e6, 100), ...even(1.2e9, 10e6, 11)];
  expect(stepProfile(grid(...segmented))).toEqual([
    [1e9, 1.1e9, 10e6],
    [1.1e9, 1.2e9, 1e6],
    [1.2e9, 1.3e9, 10e6],
  ]);
  expect(stepProfile(grid(1e9))).toEqual([]);
});

test("a logarithmic sweep keeps its fine low end: steps that creep are not one step", () => {
  // 1,001 samples over three decades: each step is 0.69 % wider than the one before.
  const log = Array.from({ length: 1001 }, (_, k) => 1e7 * 10 ** ((3 * k) / 1000));
  const profile = stepProfile(grid(...log));
  expect(profile.length).toBeGreaterThan(32);
  for (const [from, to, step] of profile) {
    // Widest over narrowest step of a stretch, which grow with the frequency: never more than 18 % apart (1.01 to the 16th).
    expect(step / ((10 ** 0.003 - 1) * from)).toBeLessThan(1.01 ** 16 + 1e-6);
    expect(to).toBeGreaterThan(from);
  }
});

test("steps of two sizes in turn, as rounding of written frequencies makes them, are one stretch of the wider", () => {
  const rounded = Array.from({ length: 2001 }, (_, k) => Math.round(1e4 + k * 1.5) * 1e5);
  expect(stepProfile(grid(...rounded))).toEqual([[1e9, 1.3e9, 2e5]]);
});

test("a million samples without any order are told in passes, not in comparisons of all with all", () => {
  const frequency = new Float64Array(1_000_000);
  let state = 1;
  for (let k = 1; k < frequency.length; k += 1) {
    // Park and Miller's generator, Communications of the ACM 31, 1988.
    state = (state * 48271) % 2147483647;
    frequency[k] = (frequency[k - 1] as number) + 1 + state / 1e5;
  }
  const start = performance.now();
  expect(stepProfile(frequency).length).toBeLessThanOrEqual(64);
  expect(performance.now() - start).toBeLessThan(5_000);
});

test("stretches within a step are cut to the band, joined where they touch, and none where the step is too wide", () => {
  const profile: StepStretch[] = [
    [1e9, 1.1e9, 10e6],
    [1.1e9, 1.2e9, 1e6],
    [1.2e9, 1.3e9, 2e6],
  ];
  expect(stretchesWithin(profile, [1.05e9, 1.25e9], 2e6)).toEqual([[1.1e9, 1.25e9]]);
  expect(stretchesWithin(profile, [1.05e9, 1.25e9], 10e6)).toEqual([[1.05e9, 1.25e9]]);
  expect(stretchesWithin(profile, [1.05e9, 1.25e9], 0.9e6)).toEqual([]);
  expect(stretchesWithin(profile, [2e9, 3e9], 10e6)).toEqual([]);
});
