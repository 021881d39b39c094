// What the notes on steps say of a sweep is what the evaluation counts as covered.
import { expect, test } from "vitest";
import { checkSampling } from "~/rf/check-sampling";
import type { Requirement } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { item, sweepOf } from "./sweep-of";

/** 1,000 points over 35 MHz, written in whole hertz: steps of 35,035 and 35,036 Hz. */
const ROUNDED = Array.from({ length: 1000 }, (_, k) => Math.round(1.92e9 + (k * 35e6) / 999));
const network = sweepOf({ frequency: ROUNDED, loss: ROUNDED.map(() => 1) });
const loss = (maxStep: number): Requirement => ({
  id: "2.1",
  kind: "insertion-loss",
  band: [1.92e9, 1.955e9],
  max: 2,
  maxStep,
});

test("a step rounded to whole hertz is not noted as too wide where the evaluation counts it as covered, and is where it does not", () => {
  // Frequencies within 1e-9 are one: 1.92 Hz here, more than the 0.965 Hz that rounding adds to 35,035.035 Hz.
  expect(item(evaluate(network, [loss(35e6 / 999)])).verdict).toBe("pass");
  expect(checkSampling(network, [loss(35e6 / 999)])).toEqual([]);
  expect(item(evaluate(network, [loss(35_030)])).verdict).toBe("not-covered");
  const [note] = checkSampling(network, [loss(35_030)]);
  expect(note).toMatchObject({ code: "wide-step", requirementId: "2.1" });
  expect(note?.message).toContain("the stretch is not covered by this sweep");
});
