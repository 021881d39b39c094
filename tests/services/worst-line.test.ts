// Which line stands worst: by verdict, then by margin in parts of full credit.
import { expect, test } from "vitest";
import type { StoredResult } from "~/rf/index";
import { standingOf, worstStanding } from "~/services/worst-line.server";

const result = (margin: StoredResult["margin"], limit: StoredResult["limit"] = 10): StoredResult => ({
  id: "x",
  verdict: "pass",
  value: 1,
  frequency: 1e9,
  limit,
  margin,
  interval: [0, 2],
  marginInterval: [0, 2],
  decidingFrequency: 1e9,
});
const loss = {
  lineKey: "loss",
  lineNumber: "2.1",
  definition: { kind: "insertion-loss", band: [1, 2], max: 1 },
} as const;
const rejection = {
  lineKey: "rejection",
  lineNumber: "3.1",
  definition: { kind: "rejection", band: [1, 2], min: 50 },
} as const;
const delay = {
  lineKey: "delay",
  lineNumber: "5.1",
  definition: { kind: "group-delay", band: [1, 2], max: 20e-9 },
} as const;

test("0.1 dB of loss is half of full credit, 3 dB of rejection all of it, 1 ns of 20 ns delay half", () => {
  // Full credit: loss 0.2 dB, rejection 3 dB, delay 10 % of the limit.
  expect(standingOf(loss, "pass", result(0.1)).creditedMargin).toBeCloseTo(0.5, 12);
  expect(standingOf(rejection, "pass", result(3)).creditedMargin).toBe(1);
  expect(standingOf(delay, "pass", result(1e-9, 20e-9)).creditedMargin).toBeCloseTo(0.5, 12);
});

test("what was not reached, or is infinite, has no margin, and a limit of zero earns no credit", () => {
  expect(standingOf(loss, "not-covered", result(null))).toMatchObject({ margin: null, creditedMargin: null });
  expect(standingOf(rejection, "pass", result("inf"))).toMatchObject({ margin: null, creditedMargin: null });
  expect(standingOf(delay, "pass", result(1, 0))).toMatchObject({ margin: 1, creditedMargin: null });
  expect(standingOf(loss, "not-covered", undefined)).toMatchObject({ margin: null });
});

test("the worst verdict comes before a smaller margin, and among equals the least credited margin counts", () => {
  const small = standingOf(loss, "pass", result(0.01));
  const failing = standingOf(rejection, "fail", result(-0.01));
  const roomy = standingOf(rejection, "pass", result(6));
  const open = standingOf(delay, "pass", undefined);
  expect(worstStanding([small, failing, roomy])).toBe(failing);
  expect(worstStanding([roomy, open, small])).toBe(small);
  expect(worstStanding([open, roomy])).toBe(roomy);
  expect(worstStanding([])).toBeUndefined();
});

test("a margin without end is the least there is, not one that is missing", () => {
  const slight = standingOf(rejection, "fail", result(-0.01));
  const endless = standingOf(loss, "fail", result("-inf"));
  expect(worstStanding([slight, endless])).toBe(endless);
  expect(worstStanding([endless, slight])).toBe(endless);
});
