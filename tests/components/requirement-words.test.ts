// The words of requirement lines, and the impedance offset beside them.
import { expect, test } from "vitest";
import {
  describeDefinition,
  impedanceOffsetDb,
  impedanceOffsetWords,
  numberedRequirements,
  requirementLines,
  requirementUnit,
  shortFrequency,
} from "~/components/requirement-words";
import type { RequirementDefinition, SpecificationLine } from "~/rf/line-definition";

const band = [1.92e9, 1.98e9] as const;
const plain = (text: string) => text.replaceAll("\u00a0", " ");
const words = (definition: RequirementDefinition, lowest?: number) => {
  const { requirement, band: where, limit } = describeDefinition(definition, lowest);
  return plain([requirement, where, limit].join(" | "));
};

test("every kind reads in the trade's words with its band, conditions and limit", () => {
  const sloped = {
    scale: "linear",
    points: [
      [1.87e9, 55],
      [1.895e9, 30],
    ],
  } as const;
  expect([
    words({ kind: "insertion-loss", band, max: 0.95, temperature: "range" }),
    words({ kind: "ripple", band, max: 0.6, window: 5e6, temperature: "ambient" }),
    words({ kind: "rejection", band: [1.87e9, 1.895e9], min: sloped }),
    words({ kind: "rejection", band: [2.005e9, 2.04e9], min: 34.5, relativeTo: band }),
    words({ kind: "return-loss", port: 2, band, min: 13.979400086720377 }),
    words({ kind: "reverse-isolation", band: [2e9, 2e9], min: 20 }),
    words({ kind: "group-delay-variation", band, max: 20e-9, aperture: 1e6 }),
    words({ kind: "centre-frequency", level: 3, nominal: 1.95e9, tolerance: 2e6 }),
    words({ kind: "bandwidth", level: 3, min: 60e6, max: 72.5e6 }),
    words({ kind: "shape-factor", levels: [3, 60], max: 2.5 }),
    words({ kind: "bandwidth", level: 3, min: 60e6, within: [1.9e9, 2e9], maxStep: 500e3 }),
    words({ kind: "group-delay", band, max: 0.85e-9, maxStep: 250e3, temperature: "range" }),
    words({ kind: "phase-linearity", band, max: 2.5 }),
    words({ kind: "declared", name: "Connectors", limit: "SMA female" }),
  ]).toEqual([
    "Insertion loss | 1.9200 to 1.9800 GHz, over temperature | max 0.95 dB",
    "Ripple, peak to peak | 1.9200 to 1.9800 GHz, in any 5 MHz, at ambient | max 0.6 dB",
    "Rejection, sloped | 1.8700 to 1.8950 GHz | min 55 to 30 dB",
    "Rejection, relative | 2.0050 to 2.0400 GHz, below the least loss of 1.9200 to 1.9800 GHz | min 34.5 dB",
    "Return loss, port 2 | 1.9200 to 1.9800 GHz | min 13.979 dB",
    "Reverse isolation | 2.0000 GHz | min 20 dB",
    "Group delay variation | 1.9200 to 1.9800 GHz, aperture 1 MHz | max 20 ns",
    "Centre frequency | at 3 dB | 1.9500 GHz ± 2 MHz",
    "Bandwidth | at 3 dB | 60 MHz to 72.5 MHz",
    "Shape factor | 3 to 60 dB | max 2.5",
    "Bandwidth | peak within 1.9000 to 2.0000 GHz, at 3 dB, steps of 500 kHz at most | min 60 MHz",
    "Group delay | 1.9200 to 1.9800 GHz, steps of 250 kHz at most, over temperature | max 850 ps",
    "Phase linearity | 1.9200 to 1.9800 GHz | max 2.5°",
    "Connectors |  | SMA female",
  ]);
});

test("a centre frequency is said to the last digit it was typed with", () => {
  expect(words({ kind: "centre-frequency", level: 3, nominal: 1.95005e9, tolerance: 500e3 })).toBe(
    "Centre frequency | at 3 dB | 1.95005 GHz ± 500 kHz",
  );
});

test("a band from DC says where it is tested from", () => {
  expect(words({ kind: "rejection", band: [0, 1.8e9], min: 40 }, 9e3)).toBe(
    "Rejection | DC (tested from 9 kHz) to 1.8000 GHz | min 40 dB",
  );
});

const line = (lineNumber: string, definition: RequirementDefinition): SpecificationLine => ({
  lineKey: `key-${lineNumber}`,
  lineNumber,
  definition,
});
const specification = {
  impedances: [50, 75],
  ambient: 25,
  temperatureRange: [-30, 70],
  lowestTestFrequency: null,
  lines: [
    line("3.10", { kind: "rejection", band: [2.1e9, 2.2e9], min: 40 }),
    line("6.1", { kind: "declared", name: "Size", limit: "60 mm" }),
    line("3.2", { kind: "rejection", band: [2e9, 2.1e9], min: 30 }),
    line("2.1", { kind: "insertion-loss", band, max: 1 }),
  ],
} as const;

test("the table begins with impedance and temperature and follows the line numbers as a reader counts", () => {
  const lines = requirementLines(specification);
  expect(lines.map(({ lineNumber }) => lineNumber)).toEqual(["1.1", "1.2", "2.1", "3.2", "3.10", "6.1"]);
  expect(lines[0]).toMatchObject({ requirement: "Reference impedance", limit: "50 / 75 Ω" });
  expect(lines[1]).toMatchObject({ requirement: "Temperature", band: "ambient 25 °C", limit: "−30 to +70 °C" });
  const atAmbient = requirementLines({ ...specification, temperatureRange: null });
  expect(atAmbient[1]).toMatchObject({ band: "ambient", limit: "25 °C" });
});

test("walls are drawn from the measured lines alone, by their numbers", () => {
  expect(numberedRequirements(specification.lines).map(({ id, lineNumber }) => `${id} ${lineNumber}`)).toEqual([
    "key-3.10 3.10",
    "key-3.2 3.2",
    "key-2.1 2.1",
  ]);
});

test("the offset to insertion attenuation is 0 between equal impedances and 0.177 dB from 50 to 75 ohm, either way", () => {
  // By hand: (50 + 75)² / (4 · 50 · 75) = 15625 / 15000, 10 log10 of it 0.17729 dB.
  expect(impedanceOffsetDb([50, 75])).toBeCloseTo(0.17729, 5);
  expect(impedanceOffsetDb([75, 50])).toBe(impedanceOffsetDb([50, 75]));
  expect(impedanceOffsetDb([50, 50])).toBe(0);
  expect(impedanceOffsetWords([50, 50])).toBeNull();
  expect(impedanceOffsetWords([50, 75])).toContain("0.177 dB less");
});

test("figures are shown in the unit of their kind", () => {
  expect(requirementUnit("group-delay")).toEqual({ unit: "ns", scale: 1e9 });
  expect(requirementUnit("bandwidth")).toEqual({ unit: "MHz", scale: 1e-6 });
  expect(requirementUnit("return-loss")).toEqual({ unit: "dB", scale: 1 });
  expect([9e3, 10e6, 2.5e6, 100, 0.5e9].map((hz) => plain(shortFrequency(hz)))).toEqual([
    "9 kHz",
    "10 MHz",
    "2.5 MHz",
    "100 Hz",
    "500 MHz",
  ]);
});
