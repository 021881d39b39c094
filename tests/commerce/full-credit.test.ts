// Full credit per kind of line: the margin beyond which more of it earns nothing.
import { expect, test } from "vitest";
import { creditedMargin, fullCredit } from "~/commerce/full-credit";

test("levels earn full credit at a fixed margin in dB", () => {
  const figures = ["insertion-loss", "ripple", "rejection", "reverse-isolation", "return-loss"].map((kind) =>
    fullCredit({ kind }),
  );
  expect(figures).toEqual([0.2, 0.1, 3, 3, 2]);
});

test("delay earns it at 10 % of the limit, a centre at half its tolerance, a bandwidth at 1 %", () => {
  expect(fullCredit({ kind: "group-delay", limit: 20e-9 })).toBeCloseTo(2e-9, 20);
  expect(fullCredit({ kind: "centre-frequency", limit: 500e3 })).toBe(250e3);
  expect(fullCredit({ kind: "bandwidth", limit: 60e6 })).toBe(600e3);
});

test("a kind without a figure, or without the limit its figure is a share of, is refused", () => {
  expect(() => fullCredit({ kind: "declared" })).toThrow(RangeError);
  expect(() => fullCredit({ kind: "group-delay" })).toThrow(RangeError);
  expect(() => fullCredit({ kind: "bandwidth", limit: 0 })).toThrow(RangeError);
});

test("credited margins are not capped and keep their sign", () => {
  expect(creditedMargin(9, { kind: "rejection" })).toBe(3);
  expect(creditedMargin(-0.1, { kind: "insertion-loss" })).toBe(-0.5);
});
