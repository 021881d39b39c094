// Checked files in words: figures with their uncertainty, what the lot leaves out, what is asked and what is there.
import { expect, test } from "vitest";
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedLot, CheckedSweep } from "~/workers/check-messages";
import type { CheckItem } from "~/components/check-queue";
import {
  complianceWords,
  leftOutWords,
  lineFigures,
  lotResultLines,
  setupWords,
  unitsWords,
} from "~/components/check-words";
import { evaluate, measuredRequirements, storeResult, type StoredResult, type TwoPort } from "~/rf/index";
import type { SpecificationLine } from "~/rf/line-definition";
import { sweepOf } from "../rf/sweep-of";

const LINE: SpecificationLine = {
  lineKey: "lineloss",
  lineNumber: "2.1",
  definition: { kind: "insertion-loss", band: [1e9, 2e9], max: 1.2 },
};

function resultOf(network: TwoPort, setup = {}): StoredResult {
  const [result] = evaluate(network, measuredRequirements([LINE]), { setup });
  if (!result) throw new Error("no result");
  return storeResult(result);
}

test("a value stands with its uncertainty, its margin and its place", () => {
  const result = resultOf(sweepOf({ frequency: [1e9, 1.5e9, 2e9], loss: [0.5, 0.8, 1.1] }), { transmission: 0.1 });
  expect(lineFigures(LINE, result)).toEqual({
    value: "1.10 ± 0.10 dB",
    margin: "+0.10 dB",
    place: "at 2.0000\u00a0GHz",
  });
});

test("a failing value never reads as its limit, and nothing reached is a dash", () => {
  const failing = resultOf(sweepOf({ frequency: [1e9, 2e9], loss: [0.5, 1.2001] }));
  expect(lineFigures(LINE, failing)).toMatchObject({ value: "1.2001 dB", margin: "−0.0001 dB" });
  const elsewhere = resultOf(sweepOf({ frequency: [3e9, 4e9], loss: [0.5, 0.5] }));
  expect(lineFigures(LINE, elsewhere)).toMatchObject({ value: "–", margin: "–" });
});

const item = (name: string, serial: string | null, temperature: number | null): CheckItem => ({
  id: 1,
  name,
  size: 1,
  state: "checked",
  checked: { serial, temperature } as CheckedSweep,
});

test("files that are left out are named by what they lack", () => {
  const items = [item("a", "A1", 25), item("b", "A1", null), item("c", null, 25), item("d", null, null)];
  expect(leftOutWords(items)).toEqual([
    "Left out of this, without a temperature: b. Enter it once the file is uploaded.",
    "Left out of this, without a unit: c. Enter it once the file is uploaded.",
    "Left out of this, without a unit and a temperature: d. Enter both once the file is uploaded.",
  ]);
  expect(leftOutWords([item("a", "A1", 25)])).toEqual([]);
  const many = Array.from({ length: 7 }, (_, index) => item(`f${index}`, "A1", null));
  expect(leftOutWords(many)[0]).toContain("f0, f1, f2, f3, f4 and 2 more. Enter it once the files are uploaded.");
});

const FRAME = {
  lines: [LINE],
  decisionRule: "simple",
  unitsAsked: 3,
  unitsOverRange: 1,
  statedSetup: {},
  basis: "measured",
} as unknown as CheckFrame;

const lotOf = (...verdicts: CheckedLot["verdict"][]): CheckedLot => ({
  ids: [1],
  lines: verdicts.map((verdict) => ({ lineKey: LINE.lineKey, verdict, reason: null, cells: [], worst: -1 })),
  verdict: "fail",
  notes: [],
  units: 1,
  unitsOverRange: 0,
});

test("compliance is told under the RFQ's rule", () => {
  const lot = lotOf("pass", "conditional-pass", "fail");
  expect(complianceWords(lot, FRAME)).toBe("1 of 3 measured lines does not comply under simple acceptance");
  const guarded: CheckFrame = { ...FRAME, decisionRule: "guarded" };
  expect(complianceWords(lot, guarded)).toBe("2 of 3 measured lines do not comply under guarded acceptance");
  expect(complianceWords(lotOf("pass"), FRAME)).toBe("the 1 measured line complies under simple acceptance");
});

test("units are told against what is asked, over temperature where there is a range", () => {
  expect(unitsWords(lotOf(), FRAME)).toBe("1 unit, 3 asked; 0 over temperature, 1 asked");
  expect(unitsWords({ ...lotOf(), unitsOverRange: null }, FRAME)).toBe("1 unit, 3 asked");
});

test("the setup in use is said, and what other data than measured can reach", () => {
  expect(setupWords(FRAME)).toContain("as the RFQ assumes it");
  expect(setupWords({ ...FRAME, statedSetup: { transmission: 0.05 } })).toContain("as this quote states it");
  expect(setupWords({ ...FRAME, basis: "simulated" })).toContain("simulation");
});

test("the lot's lines become rows of the table of results, a prediction marked", () => {
  const result = resultOf(sweepOf({ frequency: [1e9, 2e9], loss: [0.5, 1.1] }));
  const cell = { unit: "A1", temperature: 70, sweepId: "1", scored: true, result };
  const line = (predicted: boolean): CheckedLot => ({
    ...lotOf(),
    lines: [{ lineKey: LINE.lineKey, verdict: "pass", reason: null, cells: [{ ...cell, predicted }], worst: 0 }],
  });
  expect(lotResultLines(line(false), FRAME)).toMatchObject([{ unit: "A1", temperature: "70.0", limit: 1.2 }]);
  expect(lotResultLines(line(true), FRAME)[0]?.unit).toBe("A1, predicted");
});
