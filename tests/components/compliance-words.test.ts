// The words of a scored cell: its interval, where it was decided, and marks of what was assumed.
import { expect, test } from "vitest";
import { cellInterval, decidedElsewhere, type ShownResult } from "~/components/compliance-words";
import type { Result } from "~/rf/index";

const shown = (value: number, low: number, high: number, unit = "dB"): ShownResult => ({
  ...{ unit, value, limit: 1, margin: 0, marginInterval: [0, 0] },
  interval: [low, high],
});

test("an even interval is written ±, an uneven one by its ends, in the value's own digits", () => {
  expect(cellInterval(shown(1.2, 1.1, 1.3), false)).toBe("± 0.10");
  expect(cellInterval(shown(58.2, 57.1, 59.6), false)).toBe("57.1 to 59.6");
  expect(cellInterval(shown(-3.5, -3.75, -3.25, "MHz"), false)).toBe("± 0.25");
});

test("an open end is said, and no interval at all is nothing", () => {
  expect(cellInterval(shown(88, 82.5, Infinity), false)).toBe("from 82.5");
  expect(cellInterval(shown(88, -Infinity, 90), false)).toBe("to 90.0");
  expect(cellInterval(shown(1.2, 1.2, 1.2), false)).toBeNull();
  expect(cellInterval(shown(NaN, NaN, NaN), false)).toBeNull();
  expect(cellInterval(shown(Infinity, 80, Infinity), false)).toBeNull();
});

test("what rests on the assumed setup stands in brackets", () => {
  expect(cellInterval(shown(1.2, 1.1, 1.3), true)).toBe("(± 0.10)");
  expect(cellInterval(shown(1.2, 1.2, 1.2), true)).toBeNull();
});

test("a deciding frequency is told where it is not the reported one", () => {
  const result = (frequency: number, decidingFrequency: number): Result => ({
    ...{
      id: "1",
      verdict: "conditional-pass",
      value: 1,
      limit: 1,
      margin: 0,
      interval: [1, 1],
      marginInterval: [0, 0],
    },
    frequency,
    decidingFrequency,
  });
  expect(decidedElsewhere(result(1.95e9, 1.98e9))).toBe(1.98e9);
  expect(decidedElsewhere(result(1.98e9, 1.98e9 + 0.5))).toBeNull();
  expect(decidedElsewhere(result(NaN, NaN))).toBeNull();
});
