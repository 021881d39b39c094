// How figures are written: expected texts follow the design's rules and are worked out by hand.
import fc from "fast-check";
import { expect, test } from "vitest";
import {
  formatBand,
  formatDate,
  formatDateTime,
  formatDue,
  formatFrequency,
  formatLevel,
  formatMargin,
  formatMoney,
  formatNumber,
  formatRelative,
} from "~/components/format";

test("numbers have U+2212 as minus, thousands marks, no negative zero, and words where there is no figure", () => {
  expect(formatNumber(-1247.5, 2)).toBe("\u22121,247.50");
  expect(formatNumber(1234567, 0)).toBe("1,234,567");
  expect(formatNumber(-0.001, 2)).toBe("0.00");
  expect(formatNumber(-0, 2)).toBe("0.00");
  expect(formatNumber(Number.NaN, 2)).toBe("–");
  expect(formatNumber(Infinity, 2)).toBe("infinite");
  expect(formatNumber(-Infinity, 2)).toBe("\u2212infinite");
});

test("a failing value never rounds to its limit: it takes a digit more", () => {
  expect(formatLevel(0.9504)).toBe("0.95");
  expect(formatLevel(0.9531, { failingAgainst: 0.95 })).toBe("0.953");
  expect(formatLevel(0.9504, { failingAgainst: 0.95 })).toBe("0.9504");
  expect(formatLevel(54.96, { failingAgainst: 55, decimals: 1 })).toBe("54.96");
  expect(formatLevel(1.2, { failingAgainst: 0.95 })).toBe("1.20");
});

test("a failing value does not round past a limit that has more digits than are shown", () => {
  // max 0.953: two digits would give 0.95 and three the limit itself.
  expect(formatLevel(0.9534, { failingAgainst: 0.953 })).toBe("0.9534");
});

test("whatever fails by 1e-9 or more is written on its own side of the limit", () => {
  const centi = fc.integer({ min: 0, max: 12_000 }).map((n) => n / 100);
  const excess = fc.double({ min: 1e-9, max: 5, noNaN: true });
  fc.assert(
    fc.property(centi, excess, fc.boolean(), (limit, by, isAbove) => {
      const value = isAbove ? limit + by : limit - by;
      const written = Number(formatLevel(value, { failingAgainst: limit }).replace("\u2212", "-").replaceAll(",", ""));
      return isAbove ? written > limit : written < limit;
    }),
  );
});

test("margins carry their sign, and a negative one never reads as zero", () => {
  expect(formatMargin(0.54)).toBe("+0.54");
  expect(formatMargin(-0.062)).toBe("\u22120.06");
  expect(formatMargin(-0.0004)).toBe("\u22120.0004");
  expect(formatMargin(0.0004)).toBe("+0.00");
  expect(formatMargin(0)).toBe("+0.00");
  expect(formatMargin(-0)).toBe("+0.00");
  expect(formatMargin(6.9, { decimals: 1 })).toBe("+6.9");
  expect(formatMargin(Infinity)).toBe("+infinite");
  expect(formatMargin(Number.NaN)).toBe("–");
});

test("frequencies take the unit engineers write and its equal decimals, with a space that does not break", () => {
  expect(formatFrequency(1.98e9)).toBe("1.9800\u00a0GHz");
  expect(formatFrequency(1_979_983_421.3)).toBe("1.9800\u00a0GHz");
  expect(formatFrequency(433.92e6)).toBe("433.920\u00a0MHz");
  expect(formatFrequency(9e3)).toBe("9.000\u00a0kHz");
  expect(formatFrequency(50)).toBe("50\u00a0Hz");
  expect(formatFrequency(0.9e9, { unit: "GHz" })).toBe("0.9000\u00a0GHz");
});

test("both edges of a band are exact, in one unit and equal decimals", () => {
  expect(formatBand([1.92e9, 1.98e9])).toBe("1.9200 to 1.9800\u00a0GHz");
  expect(formatBand([2.40005e9, 2.5e9])).toBe("2.40005 to 2.50000\u00a0GHz");
  expect(formatBand([880e6, 1.2e9])).toBe("0.8800 to 1.2000\u00a0GHz");
  expect(formatBand([1.95e9, 1.95e9])).toBe("1.9500\u00a0GHz");
});

test("an edge far below the other keeps a unit of its own, and 0 Hz is DC with what it is tested from", () => {
  expect(formatBand([9e3, 1e9])).toBe("9\u00a0kHz to 1.0000\u00a0GHz");
  expect(formatBand([150, 1e9])).toBe("150\u00a0Hz to 1.0000\u00a0GHz");
  expect(formatBand([0, 1.8e9])).toBe("DC to 1.8000\u00a0GHz");
  expect(formatBand([0, 1.8e9], { lowestTestFrequency: 9e3 })).toBe("DC (tested from 9\u00a0kHz) to 1.8000\u00a0GHz");
});

test("money keeps every digit it was given, and the minor digits of its currency", () => {
  expect(formatMoney("64500", "EUR")).toBe("EUR\u00a064,500.00");
  expect(formatMoney("121.0000", "EUR")).toBe("EUR\u00a0121.00");
  expect(formatMoney("0.1234")).toBe("0.1234");
  expect(formatMoney("12345678901234567890.10")).toBe("12,345,678,901,234,567,890.10");
  expect(formatMoney("1500", "JPY")).toBe("JPY\u00a01,500");
  expect(formatMoney("-12.5", "USD")).toBe("USD\u00a0\u221212.50");
  expect(formatMoney("-0.00")).toBe("0.00");
  for (const wrong of ["", "1e3", "1,000", "NaN", "12.", ".5"]) expect(() => formatMoney(wrong)).toThrow(RangeError);
});

test("an instant is written in the zone with the offset of that day", () => {
  // Central Europe is at +01:00 from the last Sunday of October to the last of March, else at +02:00 (directive 2000/84/EC).
  expect(formatDateTime("2026-11-27T16:00:00.000Z", "Europe/Berlin")).toBe("27 Nov 2026 17:00 +01:00");
  expect(formatDateTime("2026-07-01T22:30:00.000Z", "Europe/Berlin")).toBe("2 Jul 2026 00:30 +02:00");
  expect(formatDateTime("2026-09-05T00:05:00.000Z", "UTC")).toBe("5 Sep 2026 00:05 +00:00");
  expect(formatDateTime("2026-01-15T12:00:00.000Z", "America/New_York")).toBe("15 Jan 2026 07:00 \u221205:00");
  expect(formatDateTime("2026-01-15T12:00:00.000Z", "Asia/Kolkata")).toBe("15 Jan 2026 17:30 +05:30");
  expect(formatDate("2026-10-13T23:30:00.000Z", "Europe/Berlin")).toBe("14 Oct 2026");
});

test("an unknown zone or a date that is none is refused", () => {
  expect(() => formatDateTime("2026-01-15T12:00:00.000Z", "Europe/Nowhere")).toThrow(RangeError);
  expect(() => formatDateTime("soon", "UTC")).toThrow(RangeError);
});

test("relative times count whole units down, so that a due date never seems farther than it is", () => {
  const now = "2026-11-20T12:00:00.000Z";
  expect(formatRelative("2026-11-23T11:59:00.000Z", now)).toBe("in 2 days");
  expect(formatRelative("2026-11-21T12:00:00.000Z", now)).toBe("in 1 day");
  expect(formatRelative("2026-11-20T14:00:00.000Z", now)).toBe("in 2 hours");
  expect(formatRelative("2026-11-20T11:59:00.000Z", now)).toBe("1 minute ago");
  expect(formatRelative("2026-11-20T12:00:30.000Z", now)).toBe("now");
});

test("beside a due date stands how far it lies, unless the RFQ takes no quotes any more before it", () => {
  const now = "2026-11-20T12:00:00.000Z";
  expect(formatDue("2026-11-23T12:00:00.000Z", now, true)).toBe("in 3 days");
  expect(formatDue("2026-11-23T12:00:00.000Z", now, false)).toBe("closed early");
  expect(formatDue("2026-11-19T12:00:00.000Z", now, false)).toBe("1 day ago");
  expect(formatDue(now, now, false)).toBe("now");
});
