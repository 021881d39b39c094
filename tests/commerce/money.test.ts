// Exact money: sums and products a binary float gets wrong, and rounding half up.
import { expect, test } from "vitest";
import { add, compare, formatAmount, isAmount, multiply, printExact, subtract } from "../../app/commerce/money.ts";

test("sums and products are exact where binary floats are not", () => {
  // 0.1 + 0.2 in floats is 0.30000000000000004.
  expect(add("0.1", "0.2")).toBe("0.3");
  expect(subtract("1", "0.9")).toBe("0.1");
  expect(add()).toBe("0");
  // By hand: 12345678901234.5678 × 10,000,000 moves the point seven places.
  expect(multiply("12345678901234.5678", 10_000_000)).toBe("123456789012345678000");
  // One factor less takes 12,345,678,901,234.5678 off: 25 digits.
  expect(multiply("12345678901234.5678", 9_999_999)).toBe("123456776666666776765.4322");
  expect(multiply("98.7654", 3)).toBe("296.2962");
  expect(multiply("100", "0.0825")).toBe("8.25");
});

test("rounding to two decimals goes half up, away from zero, on the decimal digits", () => {
  // 1.005 in binary lies below 1.005 and rounds to 1.00 there.
  const cases = {
    "1.005": "1.01",
    "1.0049": "1.00",
    "2.675": "2.68",
    "-1.005": "-1.01",
    "-0.004": "0.00",
    "1234567.5": "1234567.50",
    "0": "0.00",
  };
  for (const [amount, rounded] of Object.entries(cases))
    expect([amount, formatAmount(amount)]).toEqual([amount, rounded]);
  expect(formatAmount("0.00005", 4)).toBe("0.0001");
});

test("exact printing keeps every digit and drops trailing zeros, never an exponent", () => {
  expect(printExact("1234.5000")).toBe("1234.5");
  expect(printExact("0.0000")).toBe("0");
  expect(printExact("-0")).toBe("0");
  expect(printExact("0.0001")).toBe("0.0001");
  expect(printExact("99999999999999999999")).toBe("99999999999999999999");
});

test("comparison reads the value, not the text", () => {
  expect(compare("10", "9.9999")).toBe(1);
  expect(compare("1.50", "1.5")).toBe(0);
  expect(compare("-2", "1")).toBe(-1);
});

test("what is not a decimal amount is a fault", () => {
  for (const wrong of ["", "1,5", "1e3", "NaN", "Infinity", " 1", "1.", ".5", "0x1"]) {
    expect(isAmount(wrong)).toBe(false);
    expect(() => add(wrong)).toThrow(RangeError);
  }
  expect(() => multiply("1", 0.1)).toThrow(RangeError);
});
