// Every number read is the very double that the language's own conversion gives; frequencies the one nearest to the decimal in Hz.
import fc from "fast-check";
import { expect, test } from "vitest";
import { parseTouchstone } from "~/rf/touchstone";
import { NOT_A_NUMBER, NumberScanner, OUT_OF_RANGE } from "~/rf/touchstone-number";

const encoder = new TextEncoder();
const out = new Float64Array(1);

/** The number as scanned, or what the scanner returned instead of a position. */
function scan(text: string, exponentShift = 0): number {
  const end = new NumberScanner(encoder.encode(`${text} \n`)).scan(0, exponentShift, out, 0);
  if (end < 0) return end;
  expect(end).toBe(text.length);
  return out[0] as number;
}

const digits = (from: number, to: number) =>
  fc.array(fc.integer({ min: 0, max: 9 }), { minLength: from, maxLength: to }).map((list) => list.join(""));
const decimal = fc
  .record({
    sign: fc.constantFrom("", "+", "-"),
    whole: digits(1, 22),
    fraction: fc.option(digits(0, 22)),
    exponent: fc.option(fc.integer({ min: -345, max: 290 })),
    letter: fc.constantFrom("e", "E"),
  })
  .map((part) => ({
    mantissa: `${part.sign}${part.whole}${part.fraction === null ? "" : `.${part.fraction}`}`,
    exponent: part.exponent,
    letter: part.letter,
  }));

test("any decimal is read to the double that Number gives, the sign of zero too", () => {
  fc.assert(
    fc.property(decimal, ({ mantissa, exponent, letter }) => {
      const text = exponent === null ? mantissa : `${mantissa}${letter}${exponent}`;
      const wanted = Number(text);
      expect(Object.is(scan(text), Number.isFinite(wanted) ? wanted : OUT_OF_RANGE), text).toBe(true);
    }),
    { numRuns: 20_000 },
  );
});

test("decimals as instruments write them, of 1 to 17 digits, are read to the double that Number gives", () => {
  fc.assert(
    fc.property(
      fc.double({ noNaN: true, noDefaultInfinity: true }),
      fc.integer({ min: 0, max: 16 }),
      (value, places) => {
        for (const text of [value.toExponential(places), value.toPrecision(places + 1), String(value)]) {
          const wanted = Number(text);
          expect(Object.is(scan(text), Number.isFinite(wanted) ? wanted : OUT_OF_RANGE), text).toBe(true);
        }
      },
    ),
    { numRuns: 10_000 },
  );
});

test("decimals at the edges of the exact path are read right", () => {
  const edges = ["9007199254740991", "9007199254740992", "9007199254740993", "9007199254740993e22", "1e22", "1e23"];
  const more = [
    "123456789012345e22",
    "123456789012345e-22",
    "0.1e-21",
    "1e-22",
    "1e-23",
    "5e-324",
    "2e-324",
    "1.7976931348623157e308",
  ];
  const zeros = [
    "0",
    "-0",
    "0e999",
    "0.000e-400",
    "000000000000000000001",
    "1000000000000000000000000",
    "1.00000000000000000000",
  ];
  for (const text of [...edges, ...more, ...zeros]) expect(Object.is(scan(text), Number(text)), text).toBe(true);
});

test("a shift of the decimal exponent gives the double nearest to the shifted decimal", () => {
  fc.assert(
    fc.property(decimal, fc.constantFrom(0, 3, 6, 9), ({ mantissa, exponent }, shift) => {
      const written = exponent === null ? mantissa : `${mantissa}e${exponent}`;
      const wanted = Number(`${mantissa}e${(exponent ?? 0) + shift}`);
      expect(Object.is(scan(written, shift), Number.isFinite(wanted) ? wanted : OUT_OF_RANGE), written).toBe(true);
    }),
    { numRuns: 5_000 },
  );
});

test("frequencies are the doubles nearest to the written decimals, where a product with the unit is not", () => {
  const written = Array.from(
    { length: 2000 },
    (_, k) => `${Math.floor(k / 1000) + 1}.${String(k % 1000).padStart(3, "0")}7`,
  );
  const rows = written.map((frequency) => `${frequency} 0 0 1 0 1 0 0 0`);
  const { frequency } = parseTouchstone(["# GHz S RI R 50", ...rows].join("\n"));
  const nearest = written.map((text) => Number(text.replace(".", "")) * 100_000); // whole numbers: exact
  expect([...frequency]).toEqual(nearest);
  const products = written.filter((text, k) => Number(text) * 1e9 !== nearest[k]);
  expect(products.length).toBeGreaterThan(0);
});

test("what is no decimal number is not read", () => {
  for (const text of [
    "",
    "+",
    "-",
    ".",
    "e5",
    "1e",
    "1e+",
    "1.5.2",
    "1_000",
    "0x10",
    "1f",
    "1d5e2",
    "−1",
    "nan",
    "1x",
  ]) {
    expect(scan(text), text).toBe(NOT_A_NUMBER);
  }
  expect(scan("1e400")).toBe(OUT_OF_RANGE);
});
