// Unit matching: against numpy and scikit-rf, live, and by hand where the answer is known.
import { expect, test } from "vitest";
import { circularSpread } from "~/rf/circular-spread";
import type { TwoPort } from "~/rf/contract";
import { formatTouchstone } from "~/rf/format-touchstone";
import { prepare } from "~/rf/prepare";
import { matchUnits, type MatchingOptions, type UnitMatching } from "~/rf/unit-matching";
import { runPython } from "../support/python";
import { sweepOf } from "./sweep-of";

const BAND = [1e9, 1.1e9] as const;
type Found = Extract<UnitMatching, { kind: "found" }>;

const match = (networks: readonly TwoPort[], options: Partial<MatchingOptions> = {}): UnitMatching =>
  matchUnits(
    networks.map((network, index) => ({ unit: `U-${index}`, sweeps: [prepare(network)] })),
    { band: BAND, removesDelay: false, ...options },
  );
function found(...given: Parameters<typeof match>): Found {
  const matching = match(...given);
  if (matching.kind === "none") throw new Error(matching.reason);
  return matching;
}

/** A unit with a loss that bends, a delay of some turns over the band, a curved phase and a grid of its own. */
function unitOf(index: number, points: number, from = 0.98e9, to = 1.13e9): TwoPort {
  const frequency = Array.from({ length: points }, (_, k) => from + ((to - from) * k) / (points - 1));
  const place = (hz: number) => (hz - 1.05e9) / 0.05e9;
  return sweepOf({
    frequency,
    loss: frequency.map((hz) => 0.4 + 0.05 * index + (0.2 + 0.03 * index) * place(hz) ** 2),
    phase: frequency.map(
      (hz) => 40 * index - 360 * (hz - 1e9) * (30e-9 + 0.4e-9 * index) - (6 + index) * place(hz) ** 3,
    ),
  });
}

test("spreads, their places and pairs are those of numpy and scikit-rf for five units on grids of their own", () => {
  const units = [
    unitOf(0, 301),
    unitOf(1, 151),
    unitOf(2, 407, 1.0031e9),
    unitOf(3, 301),
    unitOf(4, 997, 0.9e9, 1.0973e9),
  ];
  const truth = runPython("match_units.py", [], { units: units.map(formatTouchstone), band: BAND }) as Record<
    "level" | "measured" | "removed",
    { value: number; frequency: number; units: number[] }
  > & { points: number };
  const measured = found(units);
  const removed = found(units, { removesDelay: true });
  expect(measured.frequency).toHaveLength(truth.points);
  for (const [spread, wanted] of [
    [measured.level, truth.level],
    [removed.level, truth.level],
    [measured.phase, truth.measured],
    [removed.phase, truth.removed],
  ] as const) {
    expect(spread.value).toBeCloseTo(wanted.value, 7);
    expect(spread.frequency).toBe(wanted.frequency);
    expect([...spread.units].sort()).toEqual(wanted.units.map((index) => `U-${index}`));
  }
  // Neither trivial nor all the way round, which would hide a wrong branch.
  expect(truth.level.value).toBeGreaterThan(0.2);
  expect(truth.removed.value).toBeGreaterThan(1);
  expect(measured.covered).toEqual([[1.0031e9, 1.0973e9]]);
  expect(measured.missing).toEqual([
    [1e9, 1.0031e9],
    [1.0973e9, 1.1e9],
  ]);
});

test("a constant and a delay alone are a phase spread as measured and none once removed", () => {
  const frequency = Array.from({ length: 101 }, (_, k) => 1e9 + k * 1e6);
  const line = (degrees: number, delay: number) =>
    sweepOf({
      frequency,
      loss: frequency.map(() => 1),
      phase: frequency.map((hz) => degrees - 360 * (hz - 1e9) * delay),
    });
  // By hand: 10 degrees at the lower edge and 360 · 0.1 GHz · 0.5 ns = 18 more at the upper one.
  const units = [line(0, 20e-9), line(-10, 20.5e-9)];
  const measured = found(units).phase;
  expect(measured.value).toBeCloseTo(28, 9);
  expect(measured).toMatchObject({ frequency: 1.1e9, units: ["U-0", "U-1"] });
  expect(found(units, { removesDelay: true }).phase.value).toBeLessThan(1e-8);
});

test("phases of many turns apart are compared on the circle: 350 and -5 degrees differ by 5", () => {
  const flat = (degrees: number) => sweepOf({ frequency: [1e9, 1.1e9], loss: [1, 1], phase: [degrees, degrees] });
  expect(found([flat(350), flat(-5)]).phase.value).toBeCloseTo(5, 9);
  expect(found([flat(0), flat(90), flat(181)]).phase.value).toBeCloseTo(179, 9);
});

test("the level spread names the unit with more loss first, and between samples nothing is larger than on the grid", () => {
  // One unit has a corner where the other has no sample: by hand 1.5 − 1.0 dB there.
  const one = sweepOf({ frequency: [1e9, 1.1e9], loss: [1, 1] });
  const other = sweepOf({ frequency: [1e9, 1.04e9, 1.1e9], loss: [1, 1.5, 1] });
  const { level, curves, frequency } = found([one, other]);
  expect(level.value).toBeCloseTo(0.5, 9);
  expect(level).toMatchObject({ frequency: 1.04e9, units: ["U-1", "U-0"] });
  expect([...frequency]).toEqual([1e9, 1.04e9, 1.1e9]);
  expect(curves.map((curve) => curve.level[1])).toEqual([expect.closeTo(-0.25, 9), expect.closeTo(0.25, 9)]);
});

test("curves are about the mean of the units, whatever turn a phase was unwrapped on", () => {
  const flat = (degrees: number) => sweepOf({ frequency: [1e9, 1.1e9], loss: [1, 1], phase: [degrees, degrees] });
  // By hand: −10, 0 and 20 degrees about their mean of 10/3; the second stands a turn away, the third two.
  const { curves } = found([flat(170), flat(180 - 360), flat(200 + 360)]);
  expect(curves.map(({ phase }) => phase[0])).toEqual(
    [-40 / 3, -10 / 3, 50 / 3].map((degrees) => expect.closeTo(degrees, 9) as number),
  );
});

test("a sweep that ends in the band, a hole wider than the step asked for and a null are missing, never extrapolated", () => {
  const whole = sweepOf({ frequency: [0.9e9, 1e9, 1.05e9, 1.1e9], loss: [1, 1, 1, 1] });
  const short = sweepOf({ frequency: [0.9e9, 1.02e9, 1.06e9], loss: [1, 1.2, 1] });
  expect(found([whole, short])).toMatchObject({ covered: [[1e9, 1.06e9]], missing: [[1.06e9, 1.1e9]] });
  expect(found([whole, short], { maxStep: 0.05e9 })).toMatchObject({ covered: [[1.02e9, 1.06e9]] });
  const nulled = sweepOf({ frequency: [1e9, 1.03e9, 1.05e9, 1.07e9, 1.1e9], loss: [1, 1, Infinity, 1, 1] });
  expect(found([whole, nulled]).missing).toEqual([[1.03e9, 1.07e9]]);
});

test("of several sweeps of a unit the one that reaches most of the band is compared, of equals the finer one", () => {
  const coarse = prepare(sweepOf({ frequency: [0.9e9, 1.2e9], loss: [1, 1] }));
  const fine = prepare(sweepOf({ frequency: [0.9e9, 1.02e9, 1.05e9, 1.2e9], loss: [1, 1.3, 1, 1] }));
  const part = prepare(sweepOf({ frequency: [1.01e9, 1.02e9, 1.03e9], loss: [9, 9, 9] }));
  const matching = matchUnits(
    [
      { unit: "A", sweeps: [coarse] },
      { unit: "B", sweeps: [coarse, part, fine] },
    ],
    { band: BAND, removesDelay: false },
  );
  expect(matching).toMatchObject({ kind: "found", level: { frequency: 1.02e9, units: ["B", "A"] } });
});

test("one unit, units that share no part of the band and unmeasured transmission are told", () => {
  const low = sweepOf({ frequency: [0.9e9, 1.02e9], loss: [1, 1] });
  const high = sweepOf({ frequency: [1.05e9, 1.2e9], loss: [1, 1] });
  const silent = sweepOf({ frequency: [0.9e9, 1.2e9], loss: [Infinity, Infinity] });
  expect(match([low])).toEqual({ kind: "none", reason: "too-few-units" });
  expect(match([low, high])).toEqual({ kind: "none", reason: "no-common-band" });
  expect(match([low, silent])).toEqual({ kind: "none", reason: "no-common-band" });
});

test("a phase step near half a turn between samples is told, for then the branch is a guess", () => {
  const frequency = [1e9, 1.05e9, 1.1e9];
  const unit = (step: number) => sweepOf({ frequency, loss: [1, 1, 1], phase: [0, -step, -2 * step] });
  expect(found([unit(20), unit(170)]).largestPhaseStep).toBeCloseTo(170, 9);
});

test("the circular spread is that of the farthest pair, for any angles", () => {
  let state = 7;
  const uniform = () => (state = (state * 16807) % 2147483647) / 2147483647;
  for (let round = 0; round < 500; round += 1) {
    const width = round % 3 === 0 ? 60 : 720;
    const angles = Array.from({ length: 1 + Math.floor(uniform() * 7) }, () => (uniform() - 0.5) * width);
    const apart = (one: number, other: number) => Math.abs(one - other - 360 * Math.round((one - other) / 360));
    const farthest = Math.max(...angles.flatMap((one) => angles.map((other) => apart(one, other))));
    const { spread, high, low } = circularSpread(angles);
    expect(spread).toBeCloseTo(farthest, 9);
    expect(apart(angles[high] ?? NaN, angles[low] ?? NaN)).toBeCloseTo(spread, 9);
  }
});

test("two hundred units on grids of their own are compared at every so many points, which is told, and in bounded time", () => {
  const units = Array.from({ length: 200 }, (_, index) => ({
    unit: `U-${index}`,
    sweeps: [prepare(unitOf(index % 5, 1500, 0.98e9 - index * 1234.5))],
  }));
  const options = { band: BAND, removesDelay: true };
  const before = process.cpuUsage().user;
  const matching = matchUnits(units, options);
  // Without a bound: 133,000 points of 200 units, 27 million figures in each of five series.
  expect((process.cpuUsage().user - before) / 1e6).toBeLessThan(15);
  if (matching.kind === "none") throw new Error(matching.reason);
  expect(matching.every).toBeGreaterThan(1);
  expect(matching.frequency.length * 200).toBeLessThanOrEqual(4_000_000 + 200);
  // A few units of these are compared at each point; smooth curves differ little between the points left out.
  const few = units.slice(0, 5);
  const [whole, thinned] = [matchUnits(few, options), matchUnits(few, options, 500)];
  if (whole.kind === "none" || thinned.kind === "none") throw new Error("none");
  expect([whole.every, thinned.every > 10]).toEqual([1, true]);
  expect(thinned.level.value).toBeLessThanOrEqual(whole.level.value);
  expect(thinned.level.value).toBeGreaterThan(0.9 * whole.level.value);
}, 120_000);
