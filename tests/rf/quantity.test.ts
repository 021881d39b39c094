// Entries as engineers write them: what is read, to which exact number, and what is refused with which words.
import fc from "fast-check";
import { expect, test } from "vitest";
import {
  formatBand,
  formatQuantity,
  parseBand,
  parseBandEdges,
  parseQuantity,
  type QuantityOptions,
} from "../../app/rf/quantity.ts";

const megahertz: QuantityOptions = { kind: "frequency", unit: "MHz" };
const decibel: QuantityOptions = { kind: "level", unit: "dB" };

const value = (text: string, options: QuantityOptions) => {
  const parsed = parseQuantity(text, options);
  if (!parsed.ok) throw new Error(`${text}: ${parsed.reason}`);
  return parsed.value;
};
const reason = (text: string, options: QuantityOptions) => {
  const parsed = parseQuantity(text, options);
  if (parsed.ok) throw new Error(`${text} was read as ${parsed.value}`);
  return parsed.reason;
};

test("one frequency written in every accepted way is the same number of hertz", () => {
  const ways = [
    "1.92G",
    "1.92 G",
    "1.92 GHz",
    "1.92GHz",
    "1920 MHz",
    "1920M",
    "1920",
    "1,920.0",
    "1,920 MHz",
    "1 920",
    "1\u202F920.0 MHz",
    "1920000 kHz",
    "1,920,000 kHz",
    "1920000000Hz",
    "1.92e9 Hz",
    "1.92E3",
    "  1920  ",
    "1.92ghz",
    "1920mhz",
    "+1920",
    "1920.",
    "1920.000",
  ];
  for (const way of ways) expect([way, value(way, megahertz)]).toEqual([way, 1.92e9]);
});

test("a value is the double nearest to the written decimal, where multiplying would miss it", () => {
  // Thousandths of a gigahertz whose product with 1e9 rounds away from the whole number of megahertz.
  const missed = Array.from({ length: 9999 }, (_, k) => k + 1).filter((k) => Number(`${k}e-3`) * 1e9 !== k * 1e6);
  expect(missed.length).toBeGreaterThan(100);
  for (const k of missed) expect(value(`${(k / 1000).toFixed(3)} GHz`, megahertz)).toBe(k * 1e6);
  expect(value("0.1 ns", { kind: "time" })).toBe(1e-10);
});

test("a frequency of 0 is DC however it is written", () => {
  for (const way of ["DC", "dc", "D.C.", "0", "0 Hz", "0.000 GHz"]) {
    expect(parseQuantity(way, megahertz)).toEqual({ ok: true, value: 0, echo: "= DC" });
  }
});

test("the echo shows what was understood, normalised", () => {
  const echo = (text: string, options: QuantityOptions) => {
    const parsed = parseQuantity(text, options);
    return parsed.ok ? parsed.echo : parsed.reason;
  };
  expect(echo("1980 MHz", megahertz)).toBe("= 1.9800 GHz");
  expect(echo("1.98765432G", megahertz)).toBe("= 1.98765432 GHz");
  expect(echo("10.7", megahertz)).toBe("= 10.70 MHz");
  expect(echo("9k", megahertz)).toBe("= 9 kHz");
  expect(echo("14.0 dB", decibel)).toBe("= 14 dB");
  expect(echo("±0.25 dB", decibel)).toBe("= 0.5 dB p-p");
  expect(echo("0.6", { ...decibel, meaning: "ripple" })).toBe("= 0.6 dB p-p");
  expect(echo("1.5:1", decibel)).toBe("= 13.98 dB return loss");
  expect(echo("20 ns", { kind: "time" })).toBe("= 20 ns");
  expect(echo("-30", { kind: "temperature" })).toBe("= \u221230 °C");
  expect(echo("2.5", { kind: "plain", unit: "ppm" })).toBe("= 2.5 ppm");
});

test("a VSWR is read as return loss", () => {
  // VSWR to return loss as tabulated in any microwave handbook: 1.5 is 13.98 dB, 2.0 is 9.54 dB, 1.2 is 20.83 dB (two decimals, from
  // memory); the first by hand: |Γ| = 0.5/2.5 = 0.2 and −20 log10 0.2 = 13.9794 dB.
  expect(value("1.5:1", decibel)).toBeCloseTo(13.9794, 4);
  expect(value("2.0 : 1", decibel)).toBeCloseTo(9.54, 2);
  expect(value("1.2:1", { ...decibel, meaning: "return-loss" })).toBeCloseTo(20.83, 2);
  expect(reason("1:1.5", decibel)).toMatch(/1\.5:1/);
  expect(reason("1.0:1", decibel)).toMatch(/more than 1:1/);
  expect(reason("0.5:1", decibel)).toMatch(/more than 1:1/);
  expect(reason("1.5:1", { ...decibel, meaning: "loss" })).toMatch(/limits the match/);
  expect(reason("1.5:1", megahertz)).toMatch(/VSWR of a return loss/);
  expect(reason("1,5:1", decibel)).toMatch(/Write 1\.5/);
});

test("± is a ripple's peak-to-peak figure halved, and nothing else's", () => {
  for (const way of ["±0.25 dB", "± 0.25", "+/-0.25 dB", "+/\u22120.25"]) expect(value(way, decibel)).toBe(0.5);
  expect(reason("±0.25 dB", { ...decibel, meaning: "return-loss" })).toMatch(/only for a ripple/);
  expect(reason("±30", { kind: "temperature" })).toMatch(/only for a ripple/);
  expect(reason("±0", decibel)).toMatch(/above 0/);
  expect(reason("±-0.25", decibel)).toMatch(/above 0/);
});

test("a bare comma between groups of three is refused with both readings", () => {
  expect(reason("1,234", megahertz)).toContain("1234 MHz");
  expect(reason("1,234", megahertz)).toContain("1.234 MHz");
  expect(reason("1,234,567", megahertz)).toContain("1234567 MHz");
});

test("a comma is a thousands mark only in groups of three with a point or a unit after it", () => {
  expect(value("1,234 MHz", megahertz)).toBe(1.234e9);
  expect(value("1,234.5", megahertz)).toBe(1.2345e9);
  expect(value("12,345,678.9 kHz", megahertz)).toBe(12345678900);
  for (const wrong of ["1,23.4", "12,34 MHz", "1234,567.0", ",234.0", "1,,234.0", "0,123.5"]) {
    expect(parseQuantity(wrong, megahertz)).toMatchObject({ ok: false });
  }
});

test("a decimal comma is refused and the remedy is the same figure with a point", () => {
  expect(reason("1,92 GHz", megahertz)).toBe("A comma is not a decimal mark here. Write 1.92 GHz.");
  expect(reason("0,95", decibel)).toContain("0.95 dB");
  expect(reason("0,950 dB", decibel)).toContain("0.950 dB");
  expect(reason("1.920,5", megahertz)).toContain("1920.5 MHz");
  expect(reason("1 234,50", megahertz)).toContain("1234.50 MHz");
  expect(reason(",5 dB", decibel)).toContain("0.5 dB");
});

test("signs: U+2212, hyphen and en dash are a minus; losses, times and frequencies are not negative", () => {
  for (const way of ["-30", "\u221230", "\u201330 °C", "- 30 C"]) expect(value(way, { kind: "temperature" })).toBe(-30);
  expect(reason("-55 dB", { ...decibel, meaning: "loss" })).toContain("Write 55 dB");
  expect(value("-3", decibel)).toBe(-3);
  expect(reason("-1", megahertz)).toMatch(/not negative/);
  expect(reason("-300", { kind: "temperature" })).toMatch(/colder/);
  expect(reason("0", { kind: "impedance" })).toMatch(/more than 0/);
});

test("units of other kinds and powers are refused by name", () => {
  expect(reason("0.95 dBm", decibel)).toBe("dBm is a power. Give a loss in dB.");
  expect(reason("55 dBc", decibel)).toMatch(/dBc/);
  expect(reason("3 dB", megahertz)).toMatch(/not a unit of frequency/);
  expect(reason("1920 mHz", megahertz)).toMatch(/milli/);
  expect(reason("1920m", megahertz)).toMatch(/milli/);
  expect(reason("70 F", { kind: "temperature" })).toMatch(/°C/);
  expect(reason("5 apples", { kind: "plain" })).toMatch(/apples/);
});

test("units in their usual spellings", () => {
  expect(value("50 ohm", { kind: "impedance" })).toBe(50);
  expect(value("50 \u2126", { kind: "impedance" })).toBe(50);
  expect(value("50\u03A9", { kind: "impedance" })).toBe(50);
  expect(value("0.05 kΩ", { kind: "impedance" })).toBe(50);
  expect(value("1.5 \u00B5s", { kind: "time" })).toBe(1.5e-6);
  expect(value("1.5 \u03BCs", { kind: "time" })).toBe(1.5e-6);
  expect(value("20", { kind: "time", unit: "ns" })).toBe(20e-9);
  expect(value("70 °C", { kind: "temperature" })).toBe(70);
});

test("what is not a number is refused with a sentence, never thrown", () => {
  const wrong = [
    "",
    "  ",
    "abc",
    "=1950 MHz - 30 MHz",
    "1.2.3",
    "1.234.567",
    "--5",
    "1e999",
    "NaN",
    "Infinity",
    "0x10",
    "1'920",
    "１９２０",
    "5 5 5",
    "1 92",
    "1.92 GHz 5",
    "e9",
    ".",
    ",",
    "9".repeat(65),
  ];
  for (const text of wrong) expect(reason(text, megahertz)).toMatch(/^[“\p{Lu}].*[.]$/u);
  expect(reason("=1950 MHz - 30 MHz", megahertz)).toMatch(/Arithmetic/);
});

test("a figure beyond what its echo could be typed back as is refused, and the largest and smallest ones read back", () => {
  expect(reason("7E70", megahertz)).toMatch(/too large/);
  expect(reason("1e18", { kind: "plain" })).toMatch(/too large/);
  expect(reason("1e-19", { kind: "time" })).toMatch(/too small/);
  expect(value("0e-70", decibel)).toBe(0);
  for (const [text, how] of [
    ["9.99999999999999872e11 MHz", megahertz],
    ["1.2345678901234567e-18 dB", decibel],
    ["1.2345678901234567e-18", { kind: "time" }],
  ] as const) {
    const parsed = parseQuantity(text, how);
    if (!parsed.ok) throw new Error(parsed.reason);
    expect(value(parsed.echo.slice(2), how)).toBe(parsed.value);
  }
});

test("any text gives an answer, and a number that is printed reads back to the same bits", () => {
  const options = fc.constantFrom<QuantityOptions>(
    megahertz,
    decibel,
    { kind: "time" },
    { kind: "temperature" },
    { kind: "plain" },
  );
  fc.assert(
    fc.property(
      fc.string({ unit: "grapheme", maxLength: 80 }),
      options,
      (text, how) => typeof parseQuantity(text, how).ok === "boolean",
    ),
  );
  const characters = fc.string({ unit: fc.constantFrom(...Array.from("0123456789.,:-+eEGMkHzdB ±")), maxLength: 12 });
  fc.assert(
    fc.property(characters, options, (text, how) => {
      const parsed = parseQuantity(text, how);
      if (!parsed.ok) return;
      // An echo of a VSWR or a ripple adds words and rounds: figures with a plain echo must survive.
      if (!/return loss|p-p/.test(parsed.echo)) expect(value(parsed.echo.slice(2), how)).toBe(parsed.value);
    }),
  );
  fc.assert(
    fc.property(fc.double({ min: 1e-3, max: 1e13, noNaN: true }), (hz) => {
      expect(value(formatQuantity(hz, "frequency"), megahertz)).toBe(hz);
    }),
  );
});

test("formatQuantity chooses the unit by size, rounds decimals half up and refuses what is not finite", () => {
  expect(formatQuantity(1.92e9, "frequency")).toBe("1.9200 GHz");
  expect(formatQuantity(999e6, "frequency")).toBe("999.00 MHz");
  expect(formatQuantity(1.92e9, "frequency", { unit: "MHz", decimals: 1 })).toBe("1920.0 MHz");
  expect(formatQuantity(0, "frequency", { unit: "GHz" })).toBe("0.0000 GHz");
  expect(formatQuantity(0.125, "level", { decimals: 2 })).toBe("0.13 dB");
  // 1.005 lies below its decimal in binary: rounding works on the decimal digits.
  expect(formatQuantity(1.005, "level", { decimals: 2 })).toBe("1.01 dB");
  expect(formatQuantity(-0.001, "level", { decimals: 2 })).toBe("0.00 dB");
  expect(formatQuantity(9.995, "level", { decimals: 2 })).toBe("10.00 dB");
  expect(formatQuantity(0.04, "level", { decimals: 0 })).toBe("0 dB");
  expect(() => formatQuantity(Infinity, "level")).toThrow(RangeError);
  expect(() => formatQuantity(1, "frequency", { unit: "dB" })).toThrow(RangeError);
});

test("a band in one entry: a bare lower edge takes the unit of the upper one", () => {
  for (const way of [
    "1.92 to 1.98 GHz",
    "1.92-1.98 GHz",
    "1.92 – 1.98 GHz",
    "1.92…1.98GHz",
    "1.92 .. 1.98 GHz",
    "1920 MHz to 1.98 GHz",
    "1920 to 1980",
    "1.92e9-1.98e9 Hz",
  ]) {
    expect([way, parseBand(way, "MHz")]).toEqual([
      way,
      { ok: true, value: [1.92e9, 1.98e9], echo: "= 1.9200 to 1.9800 GHz" },
    ]);
  }
  expect(parseBand("DC to 9 kHz")).toMatchObject({ ok: true, value: [0, 9000] });
  expect(parseBand("1.95 GHz")).toMatchObject({ ok: true, value: [1.95e9, 1.95e9], echo: "= 1.9500 GHz" });
  expect(parseBand("1.92 GHz to 1.98", "MHz")).toMatchObject({ ok: false, edge: "to" });
  expect(parseBand("1.92 to", "MHz")).toMatchObject({ ok: false });
});

test("a band in two fields: each takes the column's unit, inverted edges are refused with both", () => {
  expect(parseBandEdges("1920", "1.98 GHz", "MHz")).toMatchObject({ ok: true, value: [1.92e9, 1.98e9] });
  expect(parseBandEdges("1980", "1920", "MHz")).toEqual({
    ok: false,
    edge: "to",
    reason: "The lower edge lies above the upper: 1.9800 GHz to 1.9200 GHz.",
  });
  expect(parseBandEdges("1,920", "1980", "MHz")).toMatchObject({ ok: false, edge: "from" });
  expect(parseBandEdges("DC", "DC", "MHz")).toMatchObject({ ok: false, edge: "to" });
  expect(formatBand([0, 1.8e9])).toBe("DC to 1.8000 GHz");
  expect(formatBand([900e6, 1.8e9])).toBe("900.00 MHz to 1.8000 GHz");
});
