// The specification form: what a post comes to, and where each mistake is shown.
import { expect, test } from "vitest";
import {
  fromDefinition,
  parseSpecificationForm,
  proposeLowestTestFrequency,
  specificationToValues,
  toDefinition,
} from "~/forms/specification";

const block = {
  title: "Transmit band-pass",
  z1: "50",
  z2: "75 Ω",
  temperatureFrom: "-30",
  temperatureTo: "+70",
  ambient: "",
  lowestTestFrequency: "",
};
const rows = (...lines: Record<string, string>[]) =>
  Object.fromEntries(
    lines.flatMap((line, index) => Object.entries(line).map(([field, value]) => [`lines.${index}.${field}`, value])),
  );
const band = { from: "1920", to: "1.98G" };
let count = 0;
const newLineKey = () => `line-${(count += 1)}`;
const parse = (...lines: Record<string, string>[]) =>
  parseSpecificationForm({ ...block, ...rows(...lines) }, { newLineKey });
const errorsOf = (...lines: Record<string, string>[]) => {
  const parsed = parse(...lines);
  return parsed.ok ? {} : parsed.errors;
};

test("every offered kind is read from engineering units into the core's requirement", () => {
  count = 0;
  const parsed = parse(
    { kind: "insertion-loss", ...band, limit: "0.95 dB", temperature: "range" },
    { kind: "ripple", ...band, limit: "±0.3", window: "5", temperature: "ambient" },
    { kind: "rejection", from: "DC", to: "1,870.0", limit: "55", lineKey: "kept" },
    { kind: "rejection", from: "1870", to: "1895", limit: "55", limitEnd: "30" },
    { kind: "rejection", from: "2005", to: "2040", limit: "34.5", relativeFrom: "1920", relativeTo: "1980" },
    { kind: "reverse-isolation", ...band, limit: "20" },
    { kind: "return-loss", ...band, limit: "1.5:1", port: "2" },
    { kind: "declared", name: "Input power, continuous", limit: "min 20 W, average, 25 °C" },
  );
  expect(parsed).toEqual({
    ok: true,
    value: {
      title: "Transmit band-pass",
      z1: 50,
      z2: 75,
      temperatureRange: [-30, 70],
      ambient: 25,
      lowestTestFrequency: null,
      requirements: [
        { id: "line-1", kind: "insertion-loss", band: [1.92e9, 1.98e9], max: 0.95, temperature: "range" },
        { id: "line-2", kind: "ripple", band: [1.92e9, 1.98e9], max: 0.6, window: 5e6, temperature: "ambient" },
        { id: "kept", kind: "rejection", band: [0, 1.87e9], min: 55 },
        {
          id: "line-3",
          kind: "rejection",
          band: [1.87e9, 1.895e9],
          min: {
            scale: "linear",
            points: [
              [1.87e9, 55],
              [1.895e9, 30],
            ],
          },
        },
        { id: "line-4", kind: "rejection", band: [2.005e9, 2.04e9], min: 34.5, relativeTo: [1.92e9, 1.98e9] },
        { id: "line-5", kind: "reverse-isolation", band: [1.92e9, 1.98e9], min: 20 },
        // By hand: |Γ| of 1.5:1 is 0.2, −20 log10 0.2 = 13.9794 dB.
        {
          id: "line-6",
          kind: "return-loss",
          port: 2,
          band: [1.92e9, 1.98e9],
          min: expect.closeTo(13.9794, 4) as number,
        },
        { id: "line-7", kind: "declared", name: "Input power, continuous", limit: "min 20 W, average, 25 °C" },
      ],
    },
  });
  if (!parsed.ok) return;
  // What was read is shown again and read to the same draft.
  expect(parseSpecificationForm(specificationToValues(parsed.value))).toEqual(parsed);
  for (const line of parsed.value.requirements) {
    const { lineKey, definition } = toDefinition(line);
    expect(definition).not.toHaveProperty("id");
    expect(fromDefinition(lineKey, definition)).toEqual(line);
  }
});

test("a match limit comes back as it was typed: as a VSWR where that is what has few digits", () => {
  const shown = (limit: string) => {
    const parsed = parse({ kind: "return-loss", ...band, port: "1", limit });
    return parsed.ok ? specificationToValues(parsed.value)["lines.0.limit"] : undefined;
  };
  expect(["1.4:1", "1.5 : 1", "1.4375:1", "2:1"].map(shown)).toEqual(["1.4:1", "1.5:1", "1.4375:1", "2:1"]);
  expect(["15 dB", "15.5631", "20"].map(shown)).toEqual(["15 dB", "15.5631 dB", "20 dB"]);
  // Typed in decibels with more digits than a VSWR of four decimals gives: every digit stays.
  expect(shown("15.56302500")).toBe("15.563025 dB");
  expect(shown("1.43751:1")).toMatch(/^14\.9\d{10,} dB$/);
  const sloped = parse({ kind: "return-loss", ...band, port: "1", limit: "1.4:1", limitEnd: "1.6:1" });
  expect(sloped.ok && specificationToValues(sloped.value)).toMatchObject({
    "lines.0.limit": "1.4:1",
    "lines.0.limitEnd": "1.6:1",
  });
});

test("a post of a plain HTML form is read like its fields", () => {
  const post = new FormData();
  for (const [name, value] of Object.entries({ ...block, ...rows({ kind: "declared", name: "Size", limit: "60 mm" }) }))
    post.set(name, value);
  post.set("file", new Blob(["x"]), "x.s2p");
  expect(parseSpecificationForm(post)).toMatchObject({
    ok: true,
    value: { requirements: [{ id: expect.stringMatching(/^[a-z2-9]{16}$/) as string }] },
  });
});

test("rows that were never begun are no rows, whatever their lists stand at", () => {
  expect(parse({ kind: "", port: "1", temperature: "range", lineKey: "" }, { kind: "", from: " " })).toMatchObject({
    ok: true,
    value: { requirements: [] },
  });
});

test("each mistake stands at its field with the remedy, and the input is kept", () => {
  const parsed = parseSpecificationForm({
    ...block,
    title: " ",
    z1: "fifty",
    temperatureTo: "",
    ...rows(
      { kind: "insertion-loss", from: "1,920", to: "1,98 GHz", limit: "0,95" },
      { kind: "", from: "1920" },
      { kind: "return-loss", ...band, limit: "16", port: "3" },
      { kind: "declared", name: "", limit: "" },
    ),
  });
  expect(parsed.ok).toBe(false);
  if (parsed.ok) return;
  expect(Object.keys(parsed.errors).sort()).toEqual([
    "lines.0.from",
    "lines.0.limit",
    "lines.0.to",
    "lines.1.kind",
    "lines.2.port",
    "lines.3.limit",
    "lines.3.name",
    "title",
    "z1",
  ]);
  expect(parsed.errors["lines.0.from"]).toEqual([
    "“1,920” can be read as 1920 MHz or as 1.920 MHz. Write the one you mean.",
  ]);
  expect(parsed.errors["lines.0.limit"]).toEqual(["A comma is not a decimal mark here. Write 0.95 dB."]);
  expect(parsed.values["lines.0.from"]).toBe("1,920");
});

test("limits out of order, out of reach or of no use are refused at their field", () => {
  expect(errorsOf({ kind: "ripple", from: "1980", to: "1920", limit: "0.5" })).toHaveProperty(["lines.0.to"]);
  expect(errorsOf({ kind: "ripple", ...band, limit: "0.5", window: "61" })).toHaveProperty(["lines.0.window"]);
  expect(errorsOf({ kind: "rejection", ...band, limit: "-55" })).toHaveProperty(["lines.0.limit"]);
  expect(errorsOf({ kind: "rejection", ...band, limit: "0" })).toEqual({
    "lines.0.limit": ["A limit is more than 0 dB."],
  });
  expect(errorsOf({ kind: "rejection", ...band, limit: "1,234 dB" })).toEqual({
    "lines.0.limit": ["A limit is at most 200 dB; this reads as 1234 dB."],
  });
  expect(errorsOf({ kind: "rejection", ...band, limit: "1.5:1" })).toHaveProperty(["lines.0.limit"]);
  expect(errorsOf({ kind: "rejection", ...band, limit: "30", relativeFrom: "1920" })).toHaveProperty([
    "lines.0.relativeTo",
  ]);
  expect(errorsOf({ kind: "rejection", from: "1920", to: "1920", limit: "30", limitEnd: "40" })).toHaveProperty([
    "lines.0.limitEnd",
  ]);
  expect(errorsOf({ kind: "rejection", from: "DC", to: "DC", limit: "30" })).toHaveProperty(["lines.0.to"]);
  expect(errorsOf({ kind: "rejection", from: "1 GHz", to: "20 THz", limit: "30" })).toHaveProperty(["lines.0.to"]);
  expect(errorsOf({ kind: "noise-figure", ...band, limit: "30" })).toHaveProperty(["lines.0.kind"]);
});

test("text in a field the kind does not take is refused, not dropped", () => {
  expect(errorsOf({ kind: "ripple", ...band, limit: "0.5", limitEnd: "0.6" })).toEqual({
    "lines.0.limitEnd": ["Ripple does not take this. Clear the field."],
  });
  expect(errorsOf({ kind: "insertion-loss", ...band, limit: "1", window: "5" })).toHaveProperty(["lines.0.window"]);
  expect(errorsOf({ kind: "declared", name: "Size", limit: "60 mm", from: "1920" })).toHaveProperty(["lines.0.from"]);
  expect(errorsOf({ kind: "declared", name: "Size", limit: "60 mm", temperature: "range" })).toHaveProperty([
    "lines.0.temperature",
  ]);
});

test("a mask that contradicts itself is refused at both lines, by their numbers", () => {
  const errors = errorsOf(
    { kind: "rejection", from: "1900", to: "1930", limit: "55" },
    { kind: "insertion-loss", ...band, limit: "0.95" },
  );
  const sentence =
    "Lines 2.1 and 3.1 cannot both hold from 1.9200 to 1.9300 GHz: loss max 0.95 dB, rejection min 55.00 dB.";
  expect(errors).toEqual({ "lines.1.limit": [sentence], "lines.0.limit": [sentence] });
});

test("a contradiction of bandwidths stands where each has its limit", () => {
  const errors = errorsOf(
    { kind: "bandwidth", level: "3", least: "70" },
    { kind: "bandwidth", level: "30", largest: "60" },
  );
  const sentence = "Lines 2.1 and 2.2 cannot both hold: bandwidth min 70.00 MHz at 3 dB, max 60.00 MHz at 30 dB.";
  expect(errors).toEqual({ "lines.0.least": [sentence], "lines.1.largest": [sentence] });
});

test("temperatures come as a pair in order, and a line over temperature needs them", () => {
  const withRange = (temperatureFrom: string, temperatureTo: string, temperature = "") =>
    parseSpecificationForm({
      ...block,
      temperatureFrom,
      temperatureTo,
      ...rows({ kind: "ripple", ...band, limit: "1", temperature }),
    });
  expect(withRange("70", "-30")).toMatchObject({ errors: { temperatureTo: [expect.anything()] } });
  expect(withRange("", "70")).toMatchObject({ errors: { temperatureFrom: [expect.anything()] } });
  expect(withRange("", "", "range")).toMatchObject({ errors: { "lines.0.temperature": [expect.anything()] } });
  expect(withRange("", "", "ambient")).toMatchObject({ ok: true, value: { temperatureRange: null } });
  expect(parseSpecificationForm({ ...block, lowestTestFrequency: "DC" })).toMatchObject({
    errors: { lowestTestFrequency: [expect.anything()] },
  });
});

test("titles are counted in characters, and a key that repeats or is damaged is refused", () => {
  expect(parseSpecificationForm({ ...block, title: "Ω".repeat(90) })).toMatchObject({ ok: true });
  expect(parseSpecificationForm({ ...block, title: "Ω".repeat(91) })).toMatchObject({
    errors: { title: ["Use at most 90 characters; this has 91."] },
  });
  const line = { kind: "ripple", ...band, limit: "1", lineKey: "same" };
  expect(errorsOf(line, line)).toHaveProperty("form");
  expect(errorsOf({ ...line, lineKey: "<script>" })).toHaveProperty(["lines.0.lineKey"]);
});

test("what the form cannot show is a fault, since saving it again would lose a part", () => {
  const draft = { title: "t", z1: 50, z2: 50, temperatureRange: null, ambient: 25, lowestTestFrequency: null };
  const log = {
    scale: "log",
    points: [
      [1e9, 1],
      [2e9, 2],
    ],
  } as const;
  const line = { id: "a", kind: "insertion-loss", band: [1e9, 2e9] } as const;
  expect(() => specificationToValues({ ...draft, requirements: [{ ...line, max: log }] })).toThrow(RangeError);
  const bent = {
    scale: "linear",
    points: [
      [1e9, 1],
      [1.5e9, 1.5],
      [2e9, 3],
    ],
  } as const;
  expect(() => specificationToValues({ ...draft, requirements: [{ ...line, max: bent }] })).toThrow(RangeError);
});

test("the lowest test frequency is proposed as the lower of 10 MHz and a tenth of the lowest edge", () => {
  const stopband = (from: number, to: number) => ({ id: "a", kind: "rejection", band: [from, to], min: 30 }) as const;
  expect(proposeLowestTestFrequency([stopband(0, 1.8e9)])).toBe(10e6);
  expect(proposeLowestTestFrequency([stopband(0, 50e6), stopband(60e6, 80e6)])).toBe(5e6);
  expect(proposeLowestTestFrequency([stopband(1e9, 2e9)])).toBeNull();
});
