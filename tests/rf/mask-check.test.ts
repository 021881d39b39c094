// Contradictions of a mask, each with the place worked out by hand.
import { expect, test } from "vitest";
import type { Limit, Requirement } from "../../app/rf/contract.ts";
import { checkMask, describeContradiction } from "../../app/rf/mask-check.ts";

const loss = (from: number, to: number, max: Limit): Requirement => ({
  id: "loss",
  kind: "insertion-loss",
  band: [from, to],
  max,
});
const rejection = (from: number, to: number, min: Limit): Requirement => ({
  id: "rejection",
  kind: "rejection",
  band: [from, to],
  min,
});
const linear = (...points: [number, number][]): Limit => ({ scale: "linear", points });

test("a sound mask has no contradiction", () => {
  const sound: Requirement[] = [
    loss(1.92e9, 1.98e9, 0.95),
    { id: "ripple", kind: "ripple", band: [1.92e9, 1.98e9], max: 0.6 },
    rejection(1.76e9, 1.895e9, linear([1.76e9, 55], [1.895e9, 30])),
    { id: "far", kind: "rejection", band: [2.1e9, 4e9], min: 55, relativeTo: [1.0e9, 1.1e9] },
    { id: "match", kind: "return-loss", port: 1, band: [1.92e9, 1.98e9], min: 16 },
    { id: "reverse", kind: "reverse-isolation", band: [1.92e9, 1.98e9], min: 20 },
  ];
  expect(checkMask(sound)).toEqual([]);
});

test("a passband and a stopband that overlap contradict each other over the overlap", () => {
  const [found, ...more] = checkMask([loss(1.92e9, 1.98e9, 0.95), rejection(1.9e9, 1.93e9, 55)]);
  expect(more).toEqual([]);
  expect(found).toMatchObject({
    code: "excluding",
    lines: ["loss", "rejection"],
    band: [1.92e9, 1.93e9],
    frequency: 1.92e9,
  });
  expect(found && describeContradiction(found, (id) => ({ loss: "2.1", rejection: "3.1" })[id] ?? id)).toBe(
    "Lines 2.1 and 3.1 cannot both hold from 1.9200 to 1.9300 GHz: loss max 0.95 dB, rejection min 55.00 dB.",
  );
});

test("bands that share one edge contradict each other at that frequency", () => {
  expect(checkMask([loss(1.92e9, 1.98e9, 1), rejection(1.98e9, 2.1e9, 30)])).toMatchObject([
    { band: [1.98e9, 1.98e9] },
  ]);
  expect(checkMask([loss(1.92e9, 1.98e9, 1), rejection(1.980001e9, 2.1e9, 30)])).toEqual([]);
});

test("limits that are equal can both hold: the loss is then exactly that", () => {
  expect(checkMask([loss(1e9, 2e9, 3), rejection(1e9, 2e9, 3)])).toEqual([]);
  expect(checkMask([loss(1e9, 2e9, 3), rejection(1e9, 2e9, 3.001)])).toHaveLength(1);
});

test("a slope contradicts only from where it crosses the loss limit", () => {
  // Rejection falls from 30 dB at 1 GHz to 0 dB at 4 GHz: 10 dB is reached at 3 GHz, so 1 to 3 GHz contradict a loss of 10 dB.
  const [found] = checkMask([loss(1e9, 4e9, 10), rejection(1e9, 4e9, linear([1e9, 30], [4e9, 0]))]);
  expect(found?.band?.[0]).toBe(1e9);
  expect(found?.band?.[1]).toBeCloseTo(3e9, -1);
  expect(found?.frequency).toBe(1e9);
});

test("at a step of a limit both values hold", () => {
  const step = linear([1e9, 40], [1.5e9, 40], [1.5e9, 5], [2e9, 5]);
  expect(checkMask([loss(1.5e9, 2e9, 10), rejection(1e9, 2e9, step)])).toMatchObject([{ band: [1.5e9, 1.5e9] }]);
});

test("a straight and a logarithmic slope with equal ends are compared between them too", () => {
  // Both run from 0 to 20 dB over 1 to 4 GHz. The logarithmic one, 20 log4(f), bulges above: the most where 20/(ln 4 · f) = 20/3 per GHz,
  // at f = 3/ln 4 = 2.16404 GHz.
  const bulging: Limit = {
    scale: "log",
    points: [
      [1e9, 0],
      [4e9, 20],
    ],
  };
  const [found] = checkMask([loss(1e9, 4e9, linear([1e9, 0], [4e9, 20])), rejection(1e9, 4e9, bulging)]);
  expect(found?.frequency).toBeCloseTo(2.16404256e9, -2);
  expect(checkMask([loss(1e9, 4e9, bulging), rejection(1e9, 4e9, linear([1e9, 0], [4e9, 20]))])).toEqual([]);
});

test("relative rejection above the allowed loss contradicts it, since the least loss is 0 dB or more", () => {
  const relative: Requirement = {
    id: "relative",
    kind: "rejection",
    band: [1.9e9, 1.93e9],
    min: 20,
    relativeTo: [1.92e9, 1.98e9],
  };
  const [found] = checkMask([loss(1.92e9, 1.98e9, 1), relative]);
  expect(found?.detail).toBe("loss max 1.00 dB, rejection min 20.00 dB relative");
});

test("an ambient line and one over temperature are compared: both hold at ambient", () => {
  const ambient: Requirement = { ...rejection(1.9e9, 1.93e9, 20), temperature: "ambient" };
  const range: Requirement = { ...loss(1.92e9, 1.98e9, 1), temperature: "range" };
  expect(checkMask([ambient, range])).toHaveLength(1);
});

test("inverted limits are named with their line and take no part in comparisons", () => {
  const inverted: Requirement[] = [
    { id: "band", kind: "insertion-loss", band: [2e9, 1e9], max: 1 },
    { id: "reference", kind: "rejection", band: [1e9, 2e9], min: 30, relativeTo: [2e9, 1e9] },
    { id: "slope", kind: "return-loss", port: 1, band: [1e9, 2e9], min: linear([2e9, 16], [1e9, 14]) },
    { id: "short", kind: "reverse-isolation", band: [1e9, 2e9], min: linear([1e9, 16], [1.5e9, 14]) },
    { id: "width", kind: "bandwidth", level: 3, min: 70e6, max: 60e6 },
    { id: "within", kind: "bandwidth", level: 3, min: 70e6, within: [2e9, 1e9] },
    { id: "levels", kind: "shape-factor", levels: [60, 3], max: 2 },
    { id: "factor", kind: "shape-factor", levels: [3, 60], max: 0.5 },
  ];
  const found = checkMask(inverted);
  expect(found.map(({ code, lines }) => [code, ...lines])).toEqual(inverted.map(({ id }) => ["inverted", id]));
  expect(found[0]?.band).toEqual([1e9, 2e9]);
  expect(found[0] && describeContradiction(found[0], () => "2.1")).toBe(
    "Line 2.1: the lower edge lies above the upper.",
  );
});

test("two bandwidth lines contradict each other at one level, and where the wider one is asked at the shallower level", () => {
  const least: Requirement = { id: "least", kind: "bandwidth", level: 3, min: 70e6 };
  const largest: Requirement = { id: "largest", kind: "bandwidth", level: 3, max: 60e6 };
  const between = (one: Requirement, other: Requirement) => checkMask([one, other]);
  expect(between(largest, least)).toMatchObject([{ code: "bandwidths", lines: ["least", "largest"] }]);
  expect(between(least, { ...largest, level: 1 })).toEqual([]);
  const [found] = between(least, { ...largest, level: 30 });
  expect(found && describeContradiction(found, (id) => (id === "least" ? "2.1" : "2.2"))).toBe(
    "Lines 2.1 and 2.2 cannot both hold: bandwidth min 70.00 MHz at 3 dB, max 60.00 MHz at 30 dB.",
  );
  // Sought elsewhere, the other line may speak of another peak.
  expect(between(least, { ...largest, within: [1e9, 2e9] })).toEqual([]);
  expect(between({ ...least, within: [1e9, 2e9] }, { ...largest, within: [1e9, 2e9] })).toHaveLength(1);
});

test("two centre frequencies at one level contradict each other where their tolerances do not meet", () => {
  const centre = (id: string, nominal: number, tolerance: number, level = 3): Requirement => ({
    id,
    kind: "centre-frequency",
    level,
    nominal,
    tolerance,
  });
  const [found] = checkMask([centre("a", 1.95e9, 1e6), centre("b", 1.953e9, 1e6)]);
  expect(found && describeContradiction(found, (id) => id)).toBe(
    "Lines a and b cannot both hold: centre frequency 1.9500 GHz ± 1.00 MHz, 1.9530 GHz ± 1.00 MHz.",
  );
  expect(checkMask([centre("a", 1.95e9, 1e6), centre("b", 1.952e9, 1e6)])).toEqual([]);
  expect(checkMask([centre("a", 1.95e9, 1e6), centre("b", 1.953e9, 1e6, 1)])).toEqual([]);
});
