// The evaluation by hand: point-wise levels, coverage, spots, bands from DC, nulls, sloped limits, refusals.
import { expect, test } from "vitest";
import type { Requirement, Result, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { prepare } from "~/rf/prepare";
import { item, sweepOf } from "./sweep-of";

const GHZ = 1e9;
// A passband of 1 dB to 2 dB between 1 and 3 GHz, 10 dB at 0 and at 4 GHz.
const sweep = sweepOf({ frequency: [0, 1e9, 2e9, 3e9, 4e9], loss: [10, 1, 2, 1.5, 10] });

function one(requirement: Requirement, network: TwoPort = sweep, options: Parameters<typeof evaluate>[2] = {}): Result {
  return item(evaluate(network, [requirement], options));
}

const loss = (band: [number, number], max: number, more: object = {}): Requirement => ({
  id: "loss",
  kind: "insertion-loss",
  band,
  max,
  ...more,
});

test("insertion loss reports the largest loss of the samples in the band, where it lies and what is left", () => {
  const result = one(loss([1e9, 3e9], 2.5));
  expect(result).toMatchObject({ id: "loss", verdict: "pass", limit: 2.5, frequency: 2e9, decidingFrequency: 2e9 });
  expect(result.value).toBeCloseTo(2, 12);
  expect(result.margin).toBeCloseTo(0.5, 12);
  expect(result.interval[0]).toBeCloseTo(2, 12);
  expect(result.covered).toBeUndefined();
  expect(result.reason).toBeUndefined();
});

test("a corner of the band between two samples fails by its interpolated value, linear in dB", () => {
  const result = one(loss([1e9, 3.2e9], 3));
  expect(result.verdict).toBe("fail");
  expect(result.frequency).toBe(3.2e9);
  expect(result.value).toBeCloseTo(1.5 + 0.2 * 8.5, 12);
});

test("a spot requirement between samples is the interpolated value, on a sample the sample", () => {
  expect(one(loss([1.5e9, 1.5e9], 2)).value).toBeCloseTo(1.5, 12);
  expect(one(loss([2e9, 2e9], 2)).value).toBeCloseTo(2, 12);
  expect(one(loss([5e9, 5e9], 2)).verdict).toBe("not-covered");
});

test("a sweep of one point covers a spot requirement there and nothing else", () => {
  const point = sweepOf({ frequency: [2e9], loss: [1] });
  expect(one(loss([2e9, 2e9], 2), point).verdict).toBe("pass");
  const wide = one(loss([1.9e9, 2.1e9], 2), point);
  expect(wide.verdict).toBe("not-covered");
  expect(wide.value).toBeCloseTo(1, 12);
  expect(wide.covered).toEqual([]);
  expect(wide.reason).toContain("1.9000 to 2.1000 GHz");
});

test("of equal margins the lowest frequency is reported", () => {
  const flat = sweepOf({ frequency: [1e9, 2e9, 3e9], loss: [2, 2, 2] });
  expect(one(loss([1e9, 3e9], 3), flat).frequency).toBe(1e9);
});

test("a margin within 1e-9 dB of zero is zero and complies, one of 2e-9 dB does not", () => {
  const flat = (level: number) => sweepOf({ frequency: [1e9, 2e9], loss: [level, level] });
  const exact = one(loss([1e9, 2e9], 2), flat(2 + 4e-10));
  expect(exact).toMatchObject({ verdict: "pass", margin: 0 });
  expect(one(loss([1e9, 2e9], 2), flat(2 + 2e-9)).verdict).toBe("fail");
});

test("beyond the sweep nothing is extrapolated: the covered part's worst is given with what is missing", () => {
  const result = one(loss([2e9, 5e9], 20));
  expect(result.verdict).toBe("not-covered");
  expect(result.covered).toEqual([[2e9, 4e9]]);
  expect(result.value).toBeCloseTo(10, 12);
  expect(result.reason).toContain("Not covered: 4.0000 to 5.0000 GHz");
  expect(result.reason).toContain("10.00 dB at 4.0000 GHz");
});

test("a fail on the covered part of a band stands, a conditional fail there does not", () => {
  expect(one(loss([2e9, 5e9], 9)).verdict).toBe("fail");
  expect(one(loss([2e9, 5e9], 9.9), sweep, { setup: { transmission: 0.2 } }).verdict).toBe("not-covered");
});

test("a band that is not reached has no value, and no error", () => {
  const result = one(loss([6e9, 7e9], 9));
  expect(result.verdict).toBe("not-covered");
  for (const figure of [result.value, result.frequency, result.margin, ...result.interval]) expect(figure).toBeNaN();
  expect(result.limit).toBe(9);
  expect(result.covered).toEqual([]);
});

test("a step wider than maxStep is a hole; neither edge nor breakpoint is interpolated across it", () => {
  const holed = sweepOf({ frequency: [1e9, 1.1e9, 1.2e9, 1.8e9, 1.9e9], loss: [1, 1, 1, 9, 1] });
  const result = one(loss([1e9, 1.9e9], 20, { maxStep: 0.1e9 }), holed);
  expect(result.verdict).toBe("not-covered");
  expect(result.covered).toEqual([
    [1e9, 1.2e9],
    [1.8e9, 1.9e9],
  ]);
  expect(one(loss([1e9, 1.7e9], 1.1, { maxStep: 0.1e9 }), holed).verdict).toBe("not-covered");
  expect(one(loss([1e9, 1.7e9], 1.1), holed).verdict).toBe("fail");
});

test("a lone sample between wide steps is evaluated but covers nothing, and the gaps beside it are one", () => {
  const lone = sweepOf({ frequency: [1e9, 1.1e9, 1.5e9, 1.9e9, 2e9], loss: [1, 1, 3, 1, 1] });
  const result = one(loss([1e9, 2e9], 5, { maxStep: 0.1e9 }), lone);
  expect(result).toMatchObject({ verdict: "not-covered", frequency: 1.5e9 });
  expect(result.reason).toContain("Not covered: 1.1000 to 1.9000 GHz.");
  expect(one(loss([1e9, 2e9], 2, { maxStep: 0.1e9 }), lone).verdict).toBe("fail");
});

test("a band edge within 1e-9 of the last sample is reached", () => {
  expect(one(loss([1e9, 4e9 * (1 + 5e-10)], 20)).verdict).toBe("pass");
  expect(one(loss([1e9, 4e9 * (1 + 5e-9)], 20)).verdict).toBe("not-covered");
});

test("only a band from exactly 0 Hz starts at the lowest test frequency", () => {
  const network = sweepOf({ frequency: [1e6, 1e9], loss: [1, 1] });
  const options = { lowestTestFrequency: 1e6 };
  expect(one(loss([0, 1e9], 2), network, options).verdict).toBe("pass");
  expect(one(loss([0, 1e9], 2), network).verdict).toBe("not-covered");
  expect(one(loss([1, 1e9], 2), network, options).verdict).toBe("not-covered");
  expect(one(loss([0, 1e5], 2), network, options).reason).toContain("lowest test frequency");
});

test("between a finite sample and a null the loss is infinite, never NaN", () => {
  const nulled = sweepOf({ frequency: [1e9, 2e9, 3e9], loss: [30, Infinity, 40] });
  const rejection = (band: [number, number]): Requirement => ({ id: "r", kind: "rejection", band, min: 25 });
  expect(one(rejection([1.5e9, 2.5e9]), nulled)).toMatchObject({ verdict: "pass", value: Infinity, margin: Infinity });
  expect(one(rejection([1.5e9, 2.5e9]), nulled).frequency).toBe(1.5e9);
  expect(one(loss([1e9, 1.5e9], 50), nulled)).toMatchObject({ verdict: "fail", value: Infinity, margin: -Infinity });
  const ripple: Requirement = { id: "p", kind: "ripple", band: [1e9, 3e9], max: 3 };
  expect(one(ripple, nulled)).toMatchObject({ verdict: "fail", value: Infinity, frequency: 2e9 });
  expect(one({ ...ripple, window: 0.5e9 }, nulled)).toMatchObject({ verdict: "fail", value: Infinity });
});

test("ripple is the peak-to-peak loss over the band and reports where the loss is largest", () => {
  const result = one({ id: "p", kind: "ripple", band: [1e9, 3.1e9], max: 2 });
  expect(result.value).toBeCloseTo(2.35 - 1, 12);
  expect(result.frequency).toBe(3.1e9);
});

test("ripple in a window slides continuously and reports the window's start", () => {
  // A peak of 3 dB at 2 GHz, 1 dB/GHz up and 1 dB/GHz down: a window of 1 GHz sees 1 dB at most, first from 1 GHz on.
  const tent = sweepOf({ frequency: [0, 2e9, 4e9], loss: [1, 3, 1] });
  const result = one({ id: "p", kind: "ripple", band: [0.5e9, 3.5e9], max: 2, window: GHZ }, tent);
  expect(result.value).toBeCloseTo(1, 9);
  expect(result.frequency).toBe(0.5e9);
  // With a steeper far flank the worst window starts at the peak.
  const steep = sweepOf({ frequency: [0, 2e9, 4e9], loss: [1, 3, -1] });
  const flank = one({ id: "p", kind: "ripple", band: [0.5e9, 3.5e9], max: 2, window: GHZ }, steep);
  expect(flank.value).toBeCloseTo(2, 9);
  expect(flank.frequency).toBe(2e9);
});

test("a window that fails beside a hole stands; without a fail the hole is not covered", () => {
  const holed = sweepOf({ frequency: [1e9, 1.1e9, 1.2e9, 1.8e9, 1.9e9], loss: [1, 1, 2, 1, 1] });
  const ripple = (max: number): Requirement => ({
    id: "p",
    kind: "ripple",
    band: [1e9, 1.9e9],
    max,
    window: 0.1e9,
    maxStep: 0.1e9,
  });
  expect(one(ripple(0.5), holed).verdict).toBe("fail");
  expect(one(ripple(1.5), holed).verdict).toBe("not-covered");
});

test("relative rejection counts from the least loss of its passband, which must be covered", () => {
  const line = (relativeTo: [number, number], min: number, band: [number, number] = [3.5e9, 4e9]): Requirement => ({
    id: "r",
    kind: "rejection",
    band,
    min,
    relativeTo,
  });
  const result = one(line([1e9, 3e9], 4));
  expect(result.value).toBeCloseTo(5.75 - 1, 12);
  expect(result).toMatchObject({ verdict: "pass", frequency: 3.5e9 });
  expect(one(line([4e9, 5e9], 4)).verdict).toBe("not-covered");
  expect(one(line([1e9, 3e9], 9, [3.5e9, 5e9])).verdict).toBe("not-covered");
});

test("a sloped limit is read between its points and at its breakpoints, where both sides of a step hold", () => {
  const falling = sweepOf({ frequency: [1e9, 4e9], loss: [40, 10] });
  const step: Requirement = {
    id: "r",
    kind: "rejection",
    band: [1e9, 3e9],
    min: {
      points: [
        [1e9, 35],
        [2e9, 29],
        [2e9, 20],
        [3e9, 15],
      ],
      scale: "linear",
    },
  };
  // By hand: at 2 GHz the loss is 30 dB against 29 and 20; at 3 GHz 20 against 15; at 1 GHz 40 against 35.
  expect(one(step, falling)).toMatchObject({ verdict: "pass", frequency: 2e9, limit: 29 });
  expect(one(step, falling).margin).toBeCloseTo(1, 12);
  // A band that starts at the step still meets the limit that ends there.
  expect(one({ ...step, band: [2e9, 3e9] }, falling).limit).toBe(29);
});

test("a limit that slopes with the logarithm is halfway at the geometric mean", () => {
  const flat = sweepOf({ frequency: [1e9, 2e9, 4e9], loss: [50, 30, 50] });
  const points: [number, number][] = [
    [1e9, 40],
    [4e9, 20],
  ];
  const line: Requirement = { id: "r", kind: "rejection", band: [2e9, 2e9], min: { points, scale: "log" } };
  expect(one(line, flat).margin).toBeCloseTo(0, 12);
  expect(one({ ...line, min: { points, scale: "linear" } }, flat).margin).toBeCloseTo(30 - (40 - 20 / 3), 12);
});

test("an S-parameter below 200 dB at every point was not measured", () => {
  const onePath = sweepOf({ frequency: [1e9, 2e9], loss: [1, 1], reverse: [Infinity, Infinity] });
  const isolation: Requirement = { id: "i", kind: "reverse-isolation", band: [1e9, 2e9], min: 20 };
  const [first, second] = evaluate(onePath, [isolation, loss([1e9, 2e9], 2)]);
  expect(first).toMatchObject({ verdict: "not-covered", limit: 20 });
  expect(first?.reason).toContain("S12 was not measured");
  expect(second?.verdict).toBe("pass");
});

test("a file with a column not measured that must be renormalised is not covered throughout", () => {
  const onePath = sweepOf({ frequency: [1e9, 2e9], loss: [1, 1], reverse: [Infinity, Infinity] });
  const [result] = evaluate(onePath, [loss([1e9, 2e9], 0.1)], { impedance: [75, 75] });
  expect(result).toMatchObject({ verdict: "not-covered", covered: [] });
  expect(result?.reason).toContain("cannot be renormalised");
});

test("a through seen between 75 and 50 ohm has the mismatch loss of 0.177 dB", () => {
  // -10 log10(1 - |Γ|²) with Γ = (75 - 50)/(75 + 50) = 0.2; check-values.json "vswr-1.5" gives 0.17728766960431602
  // (T. S. Bird, IEEE Antennas and Propagation Magazine 51(2), 2009; recomputed in closed form).
  const through = sweepOf({ frequency: [1e9, 2e9], loss: [0, 0], returnLoss: [Infinity, Infinity] });
  const matched = {
    ...through,
    s11: { ...through.s11, re: new Float64Array([1e-9, 1e-9]) },
    s22: { ...through.s22, re: new Float64Array([1e-9, 1e-9]) },
  };
  const [result] = evaluate(matched, [loss([1e9, 2e9], 1)], { impedance: [75, 50] });
  expect(result?.value).toBeCloseTo(0.17728766960431602, 8);
});

test("a prepared network gives what the network gives, and keeps its impedances where none are asked for", () => {
  const requirements: Requirement[] = [
    loss([1e9, 3e9], 2.5),
    { id: "s", kind: "return-loss", port: 1, band: [1e9, 3e9], min: 18 },
  ];
  const prepared = prepare(sweep, [75, 75]);
  expect(prepared.network.referenceImpedance).toEqual([75, 75]);
  expect(evaluate(prepared, requirements)).toEqual(evaluate(sweep, requirements, { impedance: [75, 75] }));
  const back = evaluate(prepared, requirements, { impedance: [50, 50] });
  const direct = evaluate(sweep, requirements);
  back.forEach((result, index) => expect(result.value).toBeCloseTo(item(direct, index).value, 9));
});

test("malformed requirements are refused with a RangeError that names them", () => {
  const base = { id: "7.2", band: [1e9, 2e9] as [number, number] };
  const wrong: unknown[] = [
    { ...base, kind: "insertion-loss", band: [2e9, 1e9], max: 1 },
    { ...base, kind: "insertion-loss", band: [NaN, 1e9], max: 1 },
    { ...base, kind: "insertion-loss", band: [-1, 1e9], max: 1 },
    { ...base, kind: "insertion-loss", max: NaN },
    { ...base, kind: "insertion-loss", max: 1, maxStep: 0 },
    { ...base, kind: "ripple", max: 1, window: -1 },
    { ...base, kind: "ripple", max: -1 },
    { ...base, kind: "rejection", min: 20, relativeTo: [3e9, 2e9] },
    { ...base, kind: "rejection", min: { points: [], scale: "linear" } },
    {
      ...base,
      kind: "rejection",
      min: {
        points: [
          [1.1e9, 2],
          [2e9, 2],
        ],
        scale: "linear",
      },
    },
    {
      ...base,
      kind: "rejection",
      min: {
        points: [
          [2e9, 2],
          [1e9, 2],
        ],
        scale: "linear",
      },
    },
    {
      ...base,
      kind: "rejection",
      min: {
        points: [
          [0, 2],
          [2e9, 2],
        ],
        scale: "log",
      },
    },
    {
      ...base,
      kind: "rejection",
      min: {
        points: [
          [1e9, 2],
          [2e9, 2],
          [2e9, 3],
          [2e9, 4],
        ],
        scale: "linear",
      },
    },
    { ...base, kind: "return-loss", port: 3, min: 10 },
    { ...base, kind: "group-delay", max: 1, aperture: 0 },
    { id: "7.2", kind: "bandwidth", level: 3 },
    { id: "7.2", kind: "bandwidth", level: 3, min: 2, max: 1 },
    { id: "7.2", kind: "bandwidth", level: 0, min: 2 },
    { id: "7.2", kind: "shape-factor", levels: [3, -1], max: 2 },
    { id: "7.2", kind: "centre-frequency", level: 3, nominal: 0, tolerance: 1 },
    { ...base, kind: "vswr", max: 2 },
  ];
  for (const requirement of wrong) {
    expect(() => evaluate(sweep, [requirement as Requirement]), JSON.stringify(requirement)).toThrow(RangeError);
    expect(() => evaluate(sweep, [requirement as Requirement])).toThrow(/7\.2/);
  }
});
