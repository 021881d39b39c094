// Uncertainty and decisions: ends of readings against published figures, the four verdicts, floors and advice.
import { expect, test } from "vitest";
import type { Requirement, Setup } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { isAtFloor, peakNoiseFloor, reflectionTerms, transmissionEnds } from "~/rf/uncertainty";
import { complies, verdictRank, worstVerdict } from "~/rf/verdict";
import { rowOf } from "./check-values/row";
import { item, sweepOf } from "./sweep-of";

test("a source match and a tracking state their terms in dB", () => {
  const terms = reflectionTerms({ sourceMatch: 32, tracking: 0.1, loadMatch: 36 });
  expect(terms.directivity).toBe(0);
  expect(terms.sourceMatch).toBeCloseTo(10 ** -1.6, 12);
  expect(terms.loadMatch).toBeCloseTo(10 ** -1.8, 12);
  expect(terms.tracking).toBeCloseTo(10 ** 0.005 - 1, 12);
});

test("a reading below the floor may be anything beyond it", () => {
  const [low, high] = transmissionEnds(100, { factor: 1, floor: 10 ** (-90 / 20) });
  expect(low).toBeLessThan(90);
  expect(high).toBe(Infinity);
  expect(transmissionEnds(Infinity, { factor: 1, floor: 10 ** (-90 / 20) })[0]).toBeCloseTo(90, 9);
});

test("an rms floor is lowered by 10 log10 ln N, by nothing for a few points", () => {
  expect(peakNoiseFloor({ noiseFloor: 100, noiseFloorKind: "rms" }, 10001)).toBeCloseTo(
    100 - 10 * Math.log10(Math.log(10001)),
    12,
  );
  expect(peakNoiseFloor({ noiseFloor: 100, noiseFloorKind: "rms" }, 2)).toBe(100);
  expect(peakNoiseFloor({ noiseFloor: 100 }, 10001)).toBe(100);
  expect(peakNoiseFloor({}, 10001)).toBe(Infinity);
});

test("a reading within 6 dB of the floor is at it", () => {
  expect([83.9, 84, 95].map((loss) => isAtFloor(loss, 90))).toEqual([false, true, true]);
  expect(isAtFloor(Infinity, Infinity)).toBe(false);
});

test("verdicts are ordered fail, not covered, conditional fail, conditional pass, pass", () => {
  const order = ["fail", "not-covered", "conditional-fail", "conditional-pass", "pass"] as const;
  expect(order.map(verdictRank)).toEqual([0, 1, 2, 3, 4]);
  order.forEach((verdict, index) => expect(worstVerdict([...order].slice(index).reverse())).toBe(verdict));
  expect(worstVerdict([])).toBe("not-covered");
});

test("simple acceptance takes a conditional pass, guarded acceptance does not", () => {
  const verdicts = ["pass", "conditional-pass", "conditional-fail", "fail", "not-covered"] as const;
  expect(verdicts.filter((verdict) => complies(verdict, "simple"))).toEqual(["pass", "conditional-pass"]);
  expect(verdicts.filter((verdict) => complies(verdict, "guarded"))).toEqual(["pass"]);
});

const flat = (loss: number, returnLoss = 20) =>
  sweepOf({ frequency: [1e9, 2e9], loss: [loss, loss], returnLoss: [returnLoss, returnLoss] });
const verdictAt = (loss: number, setup: Setup) =>
  item(evaluate(flat(loss), [{ id: "1", kind: "insertion-loss", band: [1e9, 2e9], max: 1 }], { setup }));

test("a loss goes through the four verdicts as it crosses its limit by the uncertainty", () => {
  const setup = { transmission: 0.1 };
  const verdicts = [0.85, 0.95, 1.05, 1.15].map((loss) => verdictAt(loss, setup).verdict);
  expect(verdicts).toEqual(["pass", "conditional-pass", "conditional-fail", "fail"]);
  expect(verdictAt(0.9, setup).verdict).toBe("pass");
  expect(verdictAt(1, setup).verdict).toBe("conditional-pass");
});

test("each end of the margin has its minimum on its own, and the deciding point may be another than the reported one", () => {
  // 59.5 dB against 50 has the least margin, 9.5 dB; 80 dB against 70 has 10 dB, but stands below a floor of 72 dB.
  const network = sweepOf({ frequency: [1e9, 2e9], loss: [59.5, 80] });
  const points: [number, number][] = [
    [1e9, 50],
    [2e9, 70],
  ];
  const line: Requirement = { id: "1", kind: "rejection", band: [1e9, 2e9], min: { points, scale: "linear" } };
  const [result] = evaluate(network, [line], { setup: { noiseFloor: 72 } });
  expect(result).toMatchObject({ verdict: "conditional-pass", frequency: 1e9, decidingFrequency: 2e9 });
  expect(result?.marginInterval[0]).toBeCloseTo(-20 * Math.log10(10 ** -4 + 10 ** -3.6) - 70, 9);
});

test("where the floor lies above the limit no reading can pass, and the floor that would is named", () => {
  const line: Requirement = { id: "1", kind: "rejection", band: [1e9, 2e9], min: 80 };
  const [result] = evaluate(flat(90), [line], { setup: { noiseFloor: 78 } });
  expect(result).toMatchObject({ verdict: "conditional-pass", bound: "at-least" });
  const needed = -20 * Math.log10(10 ** -4 - 10 ** -4.5);
  expect(result?.reason).toContain("no reading can pass 80.00 dB");
  expect(result?.reason).toContain(`${needed.toFixed(2)} dB or better`);
  // With that floor it does pass.
  expect(item(evaluate(flat(90), [line], { setup: { noiseFloor: needed + 1e-6 } })).verdict).toBe("pass");
});

test("a conditional verdict names the reading that settles it, and that reading does", () => {
  const setup: Setup = {
    transmission: 0.1,
    noiseFloor: 60,
    directivity: 36,
    sourceMatch: 32,
    loadMatch: 36,
    tracking: 0.1,
  };
  const settled = (requirement: Requirement, reading: number, better: (figure: number) => ReturnType<typeof flat>) => {
    const [undecided] = evaluate(better(reading), [requirement], { setup });
    expect(undecided?.verdict).toMatch(/^conditional/);
    const figure = Number(/a reading of ([\d.]+) dB/.exec(undecided?.reason ?? "")?.[1]);
    const step = requirement.kind === "insertion-loss" ? -0.006 : 0.006; // the figure is printed with two decimals
    expect(item(evaluate(better(figure + step), [requirement], { setup })).verdict).toBe("pass");
    expect(item(evaluate(better(figure - step), [requirement], { setup })).verdict).toBe("conditional-pass");
  };
  settled({ id: "1", kind: "insertion-loss", band: [1e9, 2e9], max: 1 }, 0.95, (loss) => flat(loss));
  settled({ id: "2", kind: "rejection", band: [1e9, 2e9], min: 50 }, 50.5, (loss) => flat(loss));
  settled({ id: "3", kind: "return-loss", port: 2, band: [1e9, 2e9], min: 14 }, 14.5, (returnLoss) =>
    flat(1, returnLoss),
  );
});

test("a direction that was not measured does not make the load match's term vanish", () => {
  const line: Requirement = { id: "1", kind: "return-loss", port: 1, band: [1e9, 2e9], min: 14 };
  const setup = { loadMatch: 30 };
  const both = item(evaluate(flat(1), [line], { setup }));
  const onePath = sweepOf({ frequency: [1e9, 2e9], loss: [1, 1], reverse: [Infinity, Infinity] });
  expect(item(evaluate(onePath, [line], { setup })).interval[0]).toBeCloseTo(both.interval[0], 9);
});

test("a return loss of a reading above 1 is negative and lies within its ends", () => {
  // check-values.json "rl-gain": |Γ| = 1.1 is -0.8278537031645015 dB, by definition.
  const line: Requirement = { id: "1", kind: "return-loss", port: 1, band: [1e9, 2e9], min: 10 };
  const gain = rowOf("rl-gain").value as number;
  const result = item(evaluate(flat(1, gain), [line], { setup: { directivity: 36 } }));
  expect(result.verdict).toBe("fail");
  expect(result.value).toBeCloseTo(gain, 9);
  expect(result.interval[0]).toBeLessThanOrEqual(result.value);
  expect(result.interval[1]).toBeGreaterThanOrEqual(result.value);
});

test("a setup with a negative figure is refused", () => {
  expect(() => verdictAt(1, { transmission: -0.1 })).toThrow(RangeError);
  expect(() => verdictAt(1, { noiseFloor: NaN })).toThrow(/noiseFloor/);
});

test("a moved level that is never crossed leaves that end of a bandwidth open", () => {
  const tent = sweepOf({ frequency: [1e9, 2e9, 3e9], loss: [4, 1, 4] });
  const line: Requirement = { id: "1", kind: "bandwidth", level: 2.9, max: 3e9 };
  const [result] = evaluate(tent, [line], { setup: { transmission: 0.1 } });
  expect(result?.value).toBeCloseTo(2e9 * (2.9 / 3), 0);
  expect(result?.interval[0]).toBeCloseTo(2e9 * (2.7 / 3), 0);
  expect(result?.interval[1]).toBe(Infinity);
  expect(result?.verdict).toBe("conditional-pass");
  expect(evaluate(tent, [{ ...line, level: 4 }])[0]).toMatchObject({ verdict: "not-covered" });
});
