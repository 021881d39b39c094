// The measurement plan as the overview and the invitation say it.
import { expect, test } from "vitest";
import { planFacts } from "~/components/measurement-plan-words";

const plain = (facts: ReturnType<typeof planFacts>) =>
  facts.map(([label, lines]) => `${label}: ${lines.join(" | ")}`.replaceAll("\u00a0", " "));

test("what is asked is said with its units, in the order of the form", () => {
  const facts = planFacts(
    {
      sweeps: [
        { band: [0, 1.8e9], maxStep: 2e6 },
        { band: [1.92e9, 1.98e9], maxStep: 600e3 },
      ],
      temperatures: [-10, 50],
      ifBandwidth: 1000,
      power: -5,
      delayAperture: 1e6,
      referencePlane: "fixture",
      referencePlaneWords: "2x-thru on the same panel",
    },
    9e3,
  );
  expect(plain(facts)).toEqual([
    "Further temperatures: −10 °C, 50 °C",
    "Sweeps: DC (tested from 9 kHz) to 1.8000 GHz, steps of 2 MHz at most | 1.9200 to 1.9800 GHz, steps of 600 kHz at most",
    "IF bandwidth: 1 kHz",
    "Power at the input: −5 dBm",
    "Group-delay aperture: 1 MHz, where a line states none",
    "Reference plane: in a fixture, de-embedded | 2x-thru on the same panel",
  ]);
});

test("nothing is said of what is left open, and 0 dBm is a power", () => {
  expect(planFacts({}, null)).toEqual([]);
  expect(plain(planFacts({ power: 0 }, null))).toEqual(["Power at the input: 0 dBm"]);
});
