// The production outlook: the share that units speak for, why there is none, and lines together.
import { expect, test } from "vitest";
import type { Cell, Result } from "~/rf/contract";
import { conformingShare, jointShare, productionOutlook, toleranceFactor } from "~/rf/production-outlook";

const resultOf = (margin: number, more: Partial<Result> = {}): Result => ({
  id: "loss",
  verdict: margin < 0 ? "fail" : "pass",
  value: 1 - margin,
  frequency: 2e9,
  limit: 1,
  margin,
  interval: [1 - margin, 1 - margin],
  marginInterval: [margin, margin],
  decidingFrequency: 2e9,
  ...more,
});
const cell = (unit: string, margin: number, more: Partial<Cell> = {}, result: Partial<Result> = {}): Cell => ({
  unit,
  temperature: 25,
  sweepId: unit,
  predicted: false,
  scored: true,
  result: resultOf(margin, result),
  ...more,
});
const cellsOf = (...margins: number[]): Cell[] => margins.map((margin, index) => cell(`U-${index}`, margin));
const shareOf = (cells: readonly Cell[], aliases?: ReadonlyMap<string, string>): number => {
  const outlook = productionOutlook(cells, aliases);
  return outlook.kind === "found" ? outlook.conforming : NaN;
};
const reasonOf = (cells: readonly Cell[], aliases?: ReadonlyMap<string, string>) => {
  const outlook = productionOutlook(cells, aliases);
  return outlook.kind === "none" ? outlook.reason : outlook.kind;
};

test("a mean of k1 deviations is worth the table's share: 6.155 for 90 % and 7.656 for 95 % of three units, 2.911 for 95 % of ten", () => {
  // One-sided factors at 95 % confidence of ISO 16269-6 and Natrella, NBS Handbook 91, table A-7: from memory, printed to three digits.
  expect(conformingShare(3, 6.155)).toBeCloseTo(0.9, 4);
  expect(conformingShare(3, 7.656)).toBeCloseTo(0.95, 4);
  expect(conformingShare(10, 2.911)).toBeCloseTo(0.95, 4);
});

test("the handbook's example: 43 units with a mean of 1.8740 deviations speak for 90 % with 99 % confidence", () => {
  // NIST/SEMATECH e-Handbook, 7.2.6.3, n = 43: exact factor 1.8740 (from memory).
  expect(conformingShare(43, 1.874, 0.99)).toBeCloseTo(0.9, 4);
});

test("mean, deviation and share of five margins are those worked by hand", () => {
  // Margins of the losses 1.32 1.41 1.28 1.37 1.45 dB against 1.65 dB: mean 0.284, deviation √(0.01852/4) = 0.0680441.
  const outlook = productionOutlook(cellsOf(0.33, 0.24, 0.37, 0.28, 0.2));
  expect(outlook).toMatchObject({ kind: "found" });
  if (outlook.kind !== "found") return;
  expect(outlook.mean).toBeCloseTo(0.284, 12);
  expect(outlook.deviation).toBeCloseTo(0.06804410334481595, 12);
  // 0.284 / 0.0680441 = 4.17376 lies just under the factor 4.2027 of 95 % for five units.
  expect(outlook.conforming).toBeLessThan(0.95);
  expect(outlook.conforming).toBeGreaterThan(0.948);
  expect(toleranceFactor(5, outlook.conforming)).toBeCloseTo(outlook.mean / outlook.deviation, 9);
});

test("the share is the one whose tolerance factor is the ratio, from 3 to 200 units and shares from 0.001 to 0.9999", () => {
  for (const units of [3, 4, 8, 30, 200])
    for (const share of [0.001, 0.2, 0.5, 0.9, 0.99, 0.9999])
      expect(conformingShare(units, toleranceFactor(units, share))).toBeCloseTo(share, 9);
});

test("a mean below zero has a small share, one far below none, one far above never all", () => {
  expect(shareOf(cellsOf(-0.1, -0.2, 0.1))).toBeGreaterThan(0);
  expect(shareOf(cellsOf(-0.1, -0.2, 0.1))).toBeLessThan(0.5);
  expect(conformingShare(3, -1e9)).toBe(0);
  expect(conformingShare(3, 1e9)).toBe(1 - 1e-6);
});

test("the share depends neither on the unit of the margins nor on their order, and more units of one kind raise it", () => {
  const margins = [0.33, 0.24, 0.37, 0.28, 0.2];
  const share = shareOf(cellsOf(...margins));
  expect(shareOf(cellsOf(...margins.map((margin) => margin * 1e-9)))).toBeCloseTo(share, 9);
  expect(shareOf(cellsOf(...margins.toReversed()))).toBeCloseTo(share, 12);
  expect(shareOf(cellsOf(...margins, ...margins))).toBeGreaterThan(share);
});

test("of 4,000 lots of five units from a known production, the stated share is exceeded in no more than 5 % of them by more than chance", () => {
  // The statement itself: with 95 % confidence at least p conform. True share Φ(2) = 0.97725; a linear congruential generator of fixed seed.
  let state = 20260214;
  const uniform = () => (state = (state * 1103515245 + 12345) % 2147483648) / 2147483648;
  const normal = () => Math.sqrt(-2 * Math.log(uniform() + 1e-12)) * Math.cos(2 * Math.PI * uniform());
  const lots = 4000;
  let wrong = 0;
  for (let lot = 0; lot < lots; lot += 1) {
    const margins = Array.from({ length: 5 }, () => 2 + normal());
    if (shareOf(cellsOf(...margins)) > 0.97724987) wrong += 1;
  }
  console.log(`stated share above the true one in ${((100 * wrong) / lots).toFixed(2)} % of lots`);
  // 5 % with a standard error of 0.34 %.
  expect(wrong / lots).toBeGreaterThan(0.037);
  expect(wrong / lots).toBeLessThan(0.063);
});

test("two units, predictions, parts of a band and copies are no sample of three, and each is named", () => {
  expect(reasonOf([])).toBe("too-few-units");
  expect(reasonOf(cellsOf(0.1, 0.2))).toBe("too-few-units");
  expect(reasonOf(cellsOf(0.1, 0.2, 0.3).map((one) => ({ ...one, predicted: true })))).toBe("predicted");
  const part = (unit: string) => cell(unit, 0.3, {}, { covered: [[1e9, 2e9]], verdict: "not-covered" });
  expect(reasonOf([...cellsOf(0.1, 0.2), part("U-9")])).toBe("not-covered");
  expect(reasonOf([...cellsOf(0.1, 0.2), cell("U-9", NaN, {}, { verdict: "not-covered" })])).toBe("not-covered");
  // Serial U-2 holds the data of U-0.
  expect(reasonOf(cellsOf(0.1, 0.2, 0.1), new Map([["U-2", "U-0"]]))).toBe("duplicate-data");
});

test("predictions beside three measured units change nothing, and a unit measured twice counts once with its least margin", () => {
  const measured = cellsOf(0.1, 0.2, 0.3);
  const share = shareOf(measured);
  expect(shareOf([...measured, cell("U-9", 5, { predicted: true })])).toBe(share);
  expect(shareOf([...measured, cell("U-1", 7, { temperature: 26 })])).toBe(share);
  expect(shareOf([...measured, cell("U-9", 0.2)], new Map([["U-9", "U-1"]]))).toBe(share);
});

test("equal margins have no spread and infinite ones no mean", () => {
  expect(reasonOf(cellsOf(0.1, 0.1, 0.1))).toBe("no-spread");
  expect(reasonOf(cellsOf(0.1, 0.1 + 1e-12, 0.1))).toBe("no-spread");
  expect(reasonOf(cellsOf(0, 0, 0))).toBe("no-spread");
  expect(reasonOf(cellsOf(0.1, Infinity, 0.2))).toBe("infinite-margin");
  expect(reasonOf(cellsOf(0.1, -Infinity, 0.2))).toBe("infinite-margin");
});

test("lines together lose what each leaves open, never below nothing", () => {
  // By hand: 1 − (0.02 + 0.05 + 0.1).
  expect(jointShare([0.98, 0.95, 0.9])).toBeCloseTo(0.83, 12);
  expect(jointShare([0.4, 0.5])).toBe(0);
  expect(jointShare([])).toBe(1);
});

test("a unit that fails on the part of the band it was measured over stays in the sample: without it the others are a chosen one", () => {
  const part = (unit: string, margin: number, verdict: "fail" | "not-covered") =>
    cell(unit, margin, {}, { covered: [[1e9, 2e9]], verdict });
  const good = cellsOf(1, 1.1, 0.9, 1.05);
  const failing = [...good, part("U-8", -4, "fail"), part("U-9", -3, "fail")];
  expect(shareOf(good)).toBeGreaterThan(0.99);
  expect(shareOf(failing)).toBeLessThan(0.5);
  const outlook = productionOutlook(failing);
  expect(outlook.margins.map(({ unit }) => unit)).toEqual(["U-0", "U-1", "U-2", "U-3", "U-8", "U-9"]);
  // A part without a fail says nothing of the rest of the band.
  expect(shareOf([...good, part("U-8", 0.2, "not-covered")])).toBe(shareOf(good));
});
