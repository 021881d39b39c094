// Rows of the kinds that are not levels over a band: delay, phase, and what is read where the response crosses a level.
import { expect, test } from "vitest";
import type { FormValues } from "~/forms/fields";
import { parseLine } from "~/forms/specification-line";
import { isBlankLine, LINE_FIELDS, LINE_KINDS, TEXT_FIELDS } from "~/forms/specification-line-kinds";
import { lineToValues } from "~/forms/specification-line-values";

const band = { from: "1920", to: "1.98G" };
const edges = [1.92e9, 1.98e9];

function parse(fields: FormValues) {
  const errors: Record<string, string[]> = {};
  const line = parseLine(fields, () => "key", errors, "");
  return { line, errors };
}
const errorsOf = (fields: FormValues) => parse(fields).errors;

/** One filled row of every kind, as typed and as the core takes it. */
const ROWS: readonly (readonly [typed: FormValues, read: object])[] = [
  [
    { kind: "insertion-loss", ...band, limit: "1.2", maxStep: "0.5" },
    { band: edges, max: 1.2, maxStep: 500e3 },
  ],
  [
    { kind: "ripple", ...band, limit: "±0.3", window: "5", maxStep: "100 kHz" },
    { max: 0.6, window: 5e6, maxStep: 1e5 },
  ],
  [
    { kind: "centre-frequency", nominal: "1950.05", limit: "± 500 kHz", level: "3 dB", temperature: "range" },
    { nominal: 1.95005e9, tolerance: 500e3, level: 3, temperature: "range" },
  ],
  [
    { kind: "bandwidth", least: "64", level: "3" },
    { min: 64e6, level: 3 },
  ],
  [
    { kind: "bandwidth", least: "64", largest: "72.5 MHz", level: "3", withinFrom: "1.9G", withinTo: "2G" },
    { min: 64e6, max: 72.5e6, level: 3, within: [1.9e9, 2e9] },
  ],
  [
    { kind: "rejection", ...band, limit: "55", relativeFrom: "1G", relativeTo: "1.1G", maxStep: "1" },
    { min: 55, relativeTo: [1e9, 1.1e9], maxStep: 1e6 },
  ],
  [
    { kind: "reverse-isolation", ...band, limit: "20", maxStep: "1" },
    { min: 20, maxStep: 1e6 },
  ],
  [
    { kind: "shape-factor", level: "3", levelEnd: "60 dB", limit: "2.5", maxStep: "50 kHz" },
    { levels: [3, 60], max: 2.5, maxStep: 50e3 },
  ],
  [
    { kind: "return-loss", ...band, limit: "15", port: "2", maxStep: "1" },
    { min: 15, port: 2, maxStep: 1e6 },
  ],
  [
    { kind: "group-delay", ...band, limit: "30", aperture: "1" },
    { max: 30e-9, aperture: 1e6 },
  ],
  [{ kind: "group-delay", ...band, limit: "0.12 us" }, { max: 120e-9 }],
  [
    { kind: "group-delay-variation", ...band, limit: "850 ps", window: "5", aperture: "0.5", temperature: "ambient" },
    { max: 850e-12, window: 5e6, aperture: 500e3, temperature: "ambient" },
  ],
  [
    { kind: "phase-linearity", ...band, limit: "2.5", maxStep: "1" },
    { max: 2.5, maxStep: 1e6 },
  ],
  [{ kind: "phase-linearity", ...band, limit: "3°" }, { max: 3 }],
  [{ kind: "phase-linearity", ...band, limit: "3 deg" }, { max: 3 }],
  [
    { kind: "declared", name: "Size", limit: "60 mm" },
    { name: "Size", limit: "60 mm" },
  ],
];

test("every kind is read in its units, and its row reads back to the same requirement", () => {
  expect(new Set(ROWS.map(([{ kind }]) => kind))).toEqual(new Set(LINE_KINDS));
  for (const [typed, read] of ROWS) {
    const { line, errors } = parse(typed);
    expect(errors, typed.kind).toEqual({});
    expect(line, typed.kind).toMatchObject({ id: "key", kind: typed.kind, ...read });
    const values = line && lineToValues(line);
    expect(values && parse(values).line, typed.kind).toEqual(line);
  }
});

test("figures that were measured elsewhere come back to the last digit", () => {
  for (const max of [1.23456789e-8, 1e-12, 0.1 + 0.2, 1 / 3]) {
    const line = { id: "key", kind: "group-delay", band: [1.92e9, 1.98e9], max, maxStep: 1e6 / 3 } as const;
    expect(parse(lineToValues(line)).line).toEqual(line);
  }
});

test("a field that the kind does not take is refused when filled, for each kind and each field", () => {
  let refused = 0;
  for (const kind of LINE_KINDS) {
    const [typed] = ROWS.find(([row]) => row.kind === kind) ?? [{}];
    for (const field of TEXT_FIELDS.filter((other) => !LINE_FIELDS[kind].includes(other))) {
      const { line, errors } = parse({ ...typed, [field]: "5" });
      expect(Object.keys(errors), `${kind} ${field}`).toEqual([field]);
      expect(errors[field]?.[0]).toContain("does not take this");
      expect(line).toBeUndefined();
      refused += 1;
    }
  }
  expect(refused).toBeGreaterThan(100);
});

test("text in any field begins a row", () => {
  expect(isBlankLine({ kind: "", port: "1", temperature: "range" })).toBe(true);
  for (const field of TEXT_FIELDS) expect(isBlankLine({ kind: "", [field]: "1" }), field).toBe(false);
});

test("steps, windows and apertures have to fit the band", () => {
  const delay = { kind: "group-delay-variation", ...band, limit: "30" };
  expect(errorsOf({ ...delay, maxStep: "60" })).toEqual({ maxStep: ["A step is narrower than the band, 60.00 MHz."] });
  expect(errorsOf({ ...delay, maxStep: "0" })).toHaveProperty("maxStep");
  expect(errorsOf({ ...delay, window: "61" })).toHaveProperty("window");
  expect(errorsOf({ ...delay, aperture: "0" })).toHaveProperty("aperture");
  expect(errorsOf({ ...delay, aperture: "61" })).toHaveProperty("aperture");
  // A single frequency has no width: the step says how far its neighbours may lie, the aperture reaches beyond it.
  const spot = { kind: "group-delay", from: "1950", to: "1950", limit: "30" };
  expect(errorsOf({ ...spot, maxStep: "1", aperture: "1" })).toEqual({});
});

test("limits of delay, phase and ratio are refused out of reach, with what was read", () => {
  const delay = { kind: "group-delay", ...band };
  expect(errorsOf({ ...delay, limit: "" })).toEqual({ limit: ["Enter the limit."] });
  expect(errorsOf({ ...delay, limit: "0" })).toEqual({ limit: ["A limit is more than 0 ns."] });
  expect(errorsOf({ ...delay, limit: "30 dB" })).toHaveProperty("limit");
  expect(errorsOf({ ...delay, limit: "2 s" })).toEqual({ limit: ["A limit is at most 1 s; this reads as 2 s."] });
  expect(errorsOf({ kind: "phase-linearity", ...band, limit: "361" })).toEqual({
    limit: ["A limit is at most 360°; this reads as 361°."],
  });
  expect(errorsOf({ kind: "phase-linearity", ...band, limit: "0,5" })).toHaveProperty("limit");
  const shape = { kind: "shape-factor", level: "3", levelEnd: "60" };
  expect(errorsOf({ ...shape, limit: "0.9" })).toEqual({ limit: ["A shape factor is 1 or more."] });
  expect(errorsOf({ ...shape, levelEnd: "3", limit: "2" })).toEqual({
    levelEnd: ["The second level lies deeper than the first, 3 dB."],
  });
});

test("a bandwidth has an end, ends in order, and a level; a centre has a tolerance less than itself", () => {
  const width = { kind: "bandwidth", level: "3" };
  expect(errorsOf(width)).toEqual({ least: ["Enter the least bandwidth, the largest, or both."] });
  expect(errorsOf({ ...width, least: "70", largest: "60" })).toHaveProperty("largest");
  expect(errorsOf({ kind: "bandwidth", least: "70" })).toEqual({ level: ["Enter the level below the peak."] });
  const centre = { kind: "centre-frequency", nominal: "1950", level: "3" };
  expect(errorsOf({ ...centre, limit: "2 GHz" })).toHaveProperty("limit");
  expect(errorsOf({ ...centre, limit: "" })).toEqual({ limit: ["Enter the tolerance."] });
});

test("a search band has both edges, in order and apart", () => {
  const width = { kind: "bandwidth", level: "3", least: "60" };
  expect(errorsOf({ ...width, withinFrom: "1900" })).toEqual({
    withinTo: ["Give both edges of the search band, or neither."],
  });
  expect(errorsOf({ ...width, withinFrom: "2000", withinTo: "1900" })).toHaveProperty("withinTo");
  expect(errorsOf({ ...width, withinFrom: "2000", withinTo: "2000" })).toHaveProperty("withinTo");
});
