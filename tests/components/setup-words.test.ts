// What is stated of a measurement, in words.
import { expect, test } from "vitest";
import { blankWords, setupInUseFacts, setupWords, statedFacts } from "~/components/setup-words";
import { PROPOSED_SETUP, SETUP_FIELDS, type SetupField } from "~/forms/setup";

const field = (name: string) => SETUP_FIELDS.find((one) => one.field === name) as SetupField;

test("a setup in words says each figure with its unit, a noise floor with its kind", () => {
  expect(setupWords({ directivity: 40, noiseFloor: 110, noiseFloorKind: "rms", groupDelay: 2e-10, phase: 1.5 })).toBe(
    "directivity 40 dB; noise floor below a through 110 dB, rms; group delay 200 ps; phase 1.5 deg",
  );
  expect(setupWords({})).toBe("");
});

test("of each figure it is told whether it is stated or assumed", () => {
  const facts = new Map(setupInUseFacts({ transmission: 0.05 }, PROPOSED_SETUP));
  expect(facts.get("Transmission, expanded uncertainty")).toBe("0.05 dB");
  expect(facts.get("Directivity")).toBe("not stated, assumed 36 dB");
  expect(facts.get("Noise floor below a through")).toBe("not stated, assumed 90 dB, peak");
  expect(facts.get("Phase, expanded uncertainty")).toBe("not stated");
});

test("a blank field says what it takes: the quote's figure before the assumed one", () => {
  expect(blankWords(field("directivity"), PROPOSED_SETUP)).toBe("assumed 36 dB");
  expect(blankWords(field("directivity"), PROPOSED_SETUP, { directivity: 42 })).toBe("42 dB of the quote");
  expect(blankWords(field("phase"), PROPOSED_SETUP)).toBe("nothing assumed");
});

test("instrument and drift in words", () => {
  const facts = new Map(
    statedFacts({ analyser: "Two-port analyser" }, { ppmPerKelvin: 2, either: true, lossPerKelvin: 0.0039 }),
  );
  expect(facts.get("Analyser")).toBe("Two-port analyser");
  expect(facts.get("Calibrated on")).toBe("not stated");
  expect(facts.get("Temperature drift")).toBe("±2 ppm/K; resistance 0.0039 a kelvin");
  expect(new Map(statedFacts({}, null)).get("Temperature drift")).toBe("not stated");
});
