// Compared cost with the arithmetic written out.
import { expect, test } from "vitest";
import { compareCost } from "../../app/commerce/cost.ts";
import { CURRENCIES, isCurrency } from "../../app/commerce/currencies.ts";
import { INCOTERMS, isIncoterm, isWaterwayOnly } from "../../app/commerce/incoterms.ts";

const prices = [
  { quantity: 100, unitPrice: "48.50" },
  { quantity: 10, unitPrice: "61.00" },
  { quantity: 500, unitPrice: "39.2000" },
];

test("the price is that of the largest break not above the bought quantity", () => {
  // 250 × 48.50 = 12,125.00; with NRE 4,800: 16,925.00.
  expect(compareCost({ prices, asked: 250, nre: "4800" })).toEqual({
    boughtQuantity: 250,
    unitPrice: "48.5",
    goods: "12125",
    nre: "4800",
    total: "16925",
  });
  // At the break itself: 100 × 48.50 = 4,850.
  expect(compareCost({ prices, asked: 100, nre: "0" })).toMatchObject({ unitPrice: "48.5", total: "4850" });
});

test("the bought quantity is the asked one or the minimum, rounded up to the order multiple", () => {
  // max(12, 20) = 20, next multiple of 15 is 30; 30 × 61.00 = 1,830.
  expect(compareCost({ prices, asked: 12, minimum: 20, multiple: 15, nre: "0" })).toMatchObject({
    boughtQuantity: 30,
    total: "1830",
  });
  expect(compareCost({ prices, asked: 30, minimum: null, multiple: 15, nre: "0" })).toMatchObject({
    boughtQuantity: 30,
  });
});

test("a higher break that costs less in all is named with what it saves", () => {
  // 90 × 61.00 = 5,490; 100 × 48.50 = 4,850: 640 less. 500 × 39.20 = 19,600 costs more.
  expect(compareCost({ prices, asked: 90, nre: "1000" })?.cheaperBreak).toEqual({
    boughtQuantity: 100,
    unitPrice: "48.5",
    goods: "4850",
    nre: "1000",
    total: "5850",
    saving: "640",
  });
  // 79 × 61.00 = 4,819 is below 4,850, 80 × 61.00 = 4,880 above.
  expect(compareCost({ prices, asked: 79, nre: "0" })?.cheaperBreak).toBeUndefined();
  expect(compareCost({ prices, asked: 80, nre: "0" })?.cheaperBreak?.saving).toBe("30");
});

test("a higher break is bought in multiples too", () => {
  // 90 in multiples of 30 is 90: 5,490. The break of 100 needs 120: 120 × 48.50 = 5,820, which is more.
  expect(compareCost({ prices, asked: 90, multiple: 30, nre: "0" })?.cheaperBreak).toBeUndefined();
});

test("a break that costs the same is not cheaper", () => {
  const equal = [
    { quantity: 1, unitPrice: "2" },
    { quantity: 20, unitPrice: "1" },
  ];
  expect(compareCost({ prices: equal, asked: 10, nre: "0" })).toEqual({
    boughtQuantity: 10,
    unitPrice: "2",
    goods: "20",
    nre: "0",
    total: "20",
  });
});

test("below the lowest break there is no price", () => {
  expect(compareCost({ prices, asked: 9, nre: "0" })).toBeNull();
  expect(compareCost({ prices: [], asked: 9, nre: "0" })).toBeNull();
  // A minimum of 10 lifts the bought quantity to the break: 10 × 61.00 = 610.
  expect(compareCost({ prices, asked: 9, minimum: 10, nre: "0" })?.total).toBe("610");
});

test("prices of four decimals stay exact at a large quantity", () => {
  // 0.0333 × 9,999,999 = 333,000 − 0.0333 − … by hand: 0.0333 × 10,000,000 = 333,000; less 0.0333 is 332,999.9667.
  expect(compareCost({ prices: [{ quantity: 1, unitPrice: "0.0333" }], asked: 9_999_999, nre: "0" })?.total).toBe(
    "332999.9667",
  );
});

test("a quantity that is no whole number of one or more is a fault", () => {
  for (const asked of [0, -1, 1.5, NaN]) expect(() => compareCost({ prices, asked, nre: "0" })).toThrow(RangeError);
  expect(() => compareCost({ prices, asked: 10, nre: "1,5" })).toThrow(RangeError);
});

test("every currency code is known to the runtime's own list, and each stands once", () => {
  // Unicode CLDR, which the runtime carries, also lists codes no longer in use.
  const known = new Set(Intl.supportedValuesOf("currency"));
  expect(CURRENCIES.filter((code) => !known.has(code))).toEqual([]);
  expect(new Set(CURRENCIES).size).toBe(CURRENCIES.length);
  expect(["EUR", "USD", "JPY"].every(isCurrency)).toBe(true);
  expect(["DEM", "XXX", "eur", ""].some(isCurrency)).toBe(false);
});

test("Incoterms 2020 has seven rules for any mode and four for ships", () => {
  expect(INCOTERMS.filter((rule) => !isWaterwayOnly(rule))).toEqual(["EXW", "FCA", "CPT", "CIP", "DAP", "DPU", "DDP"]);
  expect(INCOTERMS.filter(isWaterwayOnly)).toEqual(["FAS", "FOB", "CFR", "CIF"]);
  expect(isIncoterm("DAT")).toBe(false);
});
