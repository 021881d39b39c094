// Delay, phase and crossings by hand: one-sided ends, holes, nulls, apertures, sides that never cross.
import { expect, test } from "vitest";
import type { Requirement, Result, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { item, sweepOf } from "./sweep-of";

const one = (requirement: Requirement, network: TwoPort, options: Parameters<typeof evaluate>[2] = {}): Result =>
  item(evaluate(network, [requirement], options));

const NANOSECOND = 1e-9;
/** Phase in degrees of a delay that is `delays[k]` ns between samples k and k + 1. */
function phaseOf(frequency: readonly number[], delays: readonly number[]): number[] {
  const phase = [0];
  delays.forEach((delay, index) =>
    phase.push(
      (phase[index] as number) -
        360 * delay * NANOSECOND * ((frequency[index + 1] as number) - (frequency[index] as number)),
    ),
  );
  return phase;
}

const frequency = [1e9, 1.01e9, 1.02e9, 1.03e9, 1.04e9];
const network = sweepOf({ frequency, loss: [1, 1, 1, 1, 1], phase: phaseOf(frequency, [10, 20, 30, 20]) });
const delay = (band: [number, number], max: number, more: object = {}): Requirement => ({
  id: "d",
  kind: "group-delay",
  band,
  max,
  ...more,
});

test("group delay is the central difference over both neighbours and one-sided at the ends of the sweep", () => {
  // By hand: 10, 15, 25, 25, 20 ns.
  expect(one(delay([1e9, 1e9], 1), network).value).toBeCloseTo(10e-9, 15);
  expect(one(delay([1.01e9, 1.01e9], 1), network).value).toBeCloseTo(15e-9, 15);
  expect(one(delay([1.04e9, 1.04e9], 1), network).value).toBeCloseTo(20e-9, 15);
  expect(one(delay([1e9, 1.04e9], 1), network).value).toBeCloseTo(25e-9, 15);
});

test("group delay is interpolated at the edges of a band", () => {
  expect(one(delay([1.015e9, 1.015e9], 1), network).value).toBeCloseTo(20e-9, 15);
});

test("phase is unwrapped along the whole sweep, also over several turns", () => {
  const wide = [1e9, 1.02e9, 1.04e9];
  const turning = sweepOf({ frequency: wide, loss: [1, 1, 1], phase: phaseOf(wide, [24, 24]) });
  expect(one(delay([1e9, 1.04e9], 1), turning).value).toBeCloseTo(24e-9, 14);
});

test("delay variation is the largest delay less the least, reported where the delay is largest", () => {
  const result = one({ id: "v", kind: "group-delay-variation", band: [1e9, 1.04e9], max: 20e-9 }, network);
  expect(result.value).toBeCloseTo(15e-9, 15);
  expect(result.frequency).toBe(1.02e9);
  const narrow = one({ id: "v", kind: "group-delay-variation", band: [1e9, 1.04e9], max: 20e-9, window: 1e7 }, network);
  expect(narrow.value).toBeCloseTo(10e-9, 15);
  expect(narrow.frequency).toBe(1.01e9);
});

test("delay beside a hole is one-sided, and the hole is not covered", () => {
  const holed = [1e9, 1.01e9, 1.02e9, 1.05e9, 1.06e9];
  const gap = sweepOf({ frequency: holed, loss: [1, 1, 1, 1, 1], phase: phaseOf(holed, [10, 20, 3, 5]) });
  const at = (hz: number) => one(delay([hz, hz], 1, { maxStep: 1e7 }), gap).value;
  expect(at(1.02e9)).toBeCloseTo(20e-9, 15);
  expect(at(1.05e9)).toBeCloseTo(5e-9, 15);
  const whole = one(delay([1e9, 1.06e9], 100e-9, { maxStep: 1e7 }), gap);
  expect(whole).toMatchObject({ verdict: "not-covered" });
  expect(whole.reason).toContain("1.0200 to 1.0500 GHz");
  expect(one(delay([1e9, 1.06e9], 19e-9, { maxStep: 1e7 }), gap).verdict).toBe("fail");
});

test("an exactly zero sample has no phase: its neighbours' delays are one-sided and the stretch is not covered", () => {
  const nulled = sweepOf({ frequency, loss: [1, 1, Infinity, 1, 1], phase: phaseOf(frequency, [10, 20, 30, 20]) });
  expect(one(delay([1.01e9, 1.01e9], 1), nulled).value).toBeCloseTo(10e-9, 15);
  expect(one(delay([1.03e9, 1.03e9], 1), nulled).value).toBeCloseTo(20e-9, 15);
  const whole = one(delay([1e9, 1.04e9], 1), nulled);
  expect(whole.verdict).toBe("not-covered");
  expect(whole.reason).toContain("1.0100 to 1.0300 GHz");
  expect(one({ id: "p", kind: "phase-linearity", band: [1e9, 1.04e9], max: 90 }, nulled).verdict).toBe("not-covered");
});

test("delay over an aperture reads the phase half of it to either side, and needs it within the sweep", () => {
  const at = (hz: number) => one(delay([hz, hz], 1, { aperture: 2e7 }), network);
  expect(at(1.01e9).value).toBeCloseTo(15e-9, 15);
  // From 1.005 to 1.025 GHz: half a step of 10 ns, one of 20, half a step of 30.
  expect(at(1.015e9).value).toBeCloseTo(20e-9, 15);
  expect(at(1.005e9).verdict).toBe("not-covered");
  expect(one(delay([1e9, 1.04e9], 1, { aperture: 2e7 }), network)).toMatchObject({
    verdict: "not-covered",
    covered: [[1.01e9, 1.03e9]],
  });
});

test("a delay's uncertainty is its figure, a variation's √2 times it", () => {
  const options = { setup: { groupDelay: 1e-9 } };
  const single = one(delay([1e9, 1.04e9], 1), network, options);
  expect(single.interval[1] - single.value).toBeCloseTo(1e-9, 15);
  const variation = one({ id: "v", kind: "group-delay-variation", band: [1e9, 1.04e9], max: 20e-9 }, network, options);
  expect(variation.value - variation.interval[0]).toBeCloseTo(Math.SQRT2 * 1e-9, 15);
});

test("phase linearity is the largest distance from the least-squares line, over three samples or more", () => {
  // By hand: phases 0, 0, 3 degrees at -1, 0, 1: the line is 1 + 1.5 x, the distances 0.5, 1, 0.5.
  const bent = sweepOf({ frequency: [1e9, 1.1e9, 1.2e9], loss: [1, 1, 1], phase: [0, 0, 3] });
  const line: Requirement = { id: "p", kind: "phase-linearity", band: [1e9, 1.2e9], max: 2 };
  expect(one(line, bent).value).toBeCloseTo(1, 9);
  expect(one(line, bent).frequency).toBe(1.1e9);
  const two = one({ ...line, band: [1e9, 1.15e9] }, bent);
  expect(two).toMatchObject({ verdict: "not-covered" });
  expect(two.reason).toContain("three samples");
  // A fail on a part does not stand: the line through the whole band would be another one.
  expect(one({ ...line, band: [1e9, 1.3e9], max: 0.1 }, bent).verdict).toBe("not-covered");
});

// Peak of 1 dB at 2 GHz; 3 dB below it at 1.5 and, between samples, at 2.75 GHz.
const peak = sweepOf({ frequency: [1e9, 1.5e9, 2e9, 2.5e9, 3e9], loss: [20, 4, 1, 3, 5] });

test("centre and bandwidth come from the first crossings outwards, linear in dB", () => {
  const centre = one({ id: "c", kind: "centre-frequency", level: 3, nominal: 2.1e9, tolerance: 5e7 }, peak);
  expect(centre.value).toBeCloseTo((1.5e9 + 2.75e9) / 2, 0);
  expect(centre).toMatchObject({ verdict: "pass", limit: 5e7 });
  expect(centre.margin).toBeCloseTo(5e7 - 2.5e7, 0);
  const width = one({ id: "b", kind: "bandwidth", level: 3, min: 1.2e9, max: 1.26e9 }, peak);
  expect(width.value).toBeCloseTo(1.25e9, 0);
  expect(width).toMatchObject({ verdict: "pass", limit: 1.26e9 });
  expect(width.margin).toBeCloseTo(1e7, 0);
});

test("a level that one side never reaches is not covered, and the side is named", () => {
  const result = one({ id: "b", kind: "bandwidth", level: 10, min: 1e9 }, peak);
  expect(result.verdict).toBe("not-covered");
  expect(result.reason).toContain("above its peak");
});

test("a hole between the peak and a crossing ends the search", () => {
  const line: Requirement = { id: "b", kind: "bandwidth", level: 3, min: 1e9, maxStep: 0.5e9 };
  expect(one(line, peak).verdict).toBe("pass");
  expect(one({ ...line, maxStep: 0.4e9 }, peak).verdict).toBe("not-covered");
});

test("within limits the search for the peak only", () => {
  const twin = sweepOf({ frequency: [1e9, 2e9, 3e9, 4e9, 5e9], loss: [20, 1, 20, 0.5, 20] });
  const line = (within?: [number, number]): Requirement => ({
    id: "c",
    kind: "centre-frequency",
    level: 3,
    nominal: 2e9,
    tolerance: 1e8,
    ...(within ? { within } : {}),
  });
  expect(one(line([1.5e9, 2.5e9]), twin).verdict).toBe("pass");
  expect(one(line(), twin).frequency).toBeCloseTo(4e9, 0);
  expect(one(line([4.5e9, 6e9]), twin).verdict).toBe("not-covered");
});

test("beside a null the crossing lies at the last finite sample", () => {
  const nulled = sweepOf({ frequency: [1e9, 2e9, 3e9], loss: [Infinity, 1, 7] });
  expect(one({ id: "b", kind: "bandwidth", level: 3, min: 0 }, nulled).value).toBeCloseTo(0.5e9, 0);
});

test("with a drift the worst temperature and sign are kept, as a prediction that never exceeds a conditional pass", () => {
  const line: Requirement = { id: "c", kind: "centre-frequency", level: 3, nominal: 2.125e9, tolerance: 5e6 };
  const drift = { ppmPerKelvin: 10, from: 25, to: [-35, 85] };
  expect(one(line, peak).verdict).toBe("pass");
  const moved = one(line, peak, { drift });
  expect(moved).toMatchObject({ verdict: "conditional-pass" });
  expect(moved.margin).toBeCloseTo(5e6 - 2.125e9 * 600e-6, 0);
  expect(one(line, peak, { drift: { ...drift, ppmPerKelvin: 50, either: true } }).verdict).toBe("fail");
});
