// The measurement plan in the RFQ's form: what is typed, what it comes to, and where a mistake is shown.
import { expect, test } from "vitest";
import type { FormValues } from "~/forms/fields";
import { planToValues, readPlan } from "~/forms/measurement-plan";
import { SETUP_FIELDS } from "~/forms/setup";
import { SETUP_HELP } from "~/forms/setup-help";
import { MOST_PLANNED_SWEEPS } from "~/rf/measurement-plan";

function read(values: FormValues) {
  const errors: Record<string, string[]> = {};
  return { plan: readPlan(values, errors), errors };
}
const errorsOf = (values: FormValues) => read(values).errors;
const sweep = (from: string, to: string, maxStep: string, index = 0): FormValues => ({
  [`sweeps.${index}.from`]: from,
  [`sweeps.${index}.to`]: to,
  [`sweeps.${index}.maxStep`]: maxStep,
});

test("a plan is read from engineering units, its sweeps in order, and comes back as it was", () => {
  const { plan, errors } = read({
    ...sweep("1.92G", "1980", "600 kHz", 3),
    ...sweep("DC", "2.14 GHz", "2"),
    ...sweep("", " ", "", 1),
    "plan.temperatures": "50 °C, −10",
    "plan.ifBandwidth": "1k",
    "plan.power": "-10 dBm",
    "plan.delayAperture": "0.5",
    "plan.referencePlane": "fixture",
    "plan.referencePlaneWords": " 2x-thru on the same panel ",
  });
  expect(errors).toEqual({});
  expect(plan).toEqual({
    sweeps: [
      { band: [0, 2.14e9], maxStep: 2e6 },
      { band: [1.92e9, 1.98e9], maxStep: 600e3 },
    ],
    temperatures: [-10, 50],
    ifBandwidth: 1000,
    power: -10,
    delayAperture: 500e3,
    referencePlane: "fixture",
    referencePlaneWords: "2x-thru on the same panel",
  });
  expect(read(planToValues(plan)).plan).toEqual(plan);
});

test("what is blank is not asked for", () => {
  expect(read({})).toEqual({ plan: {}, errors: {} });
  expect(read(planToValues({}))).toEqual({ plan: {}, errors: {} });
});

test("a sweep has its ends in order and a step narrower than itself, each with its reason", () => {
  expect(errorsOf(sweep("1980", "1920", "1"))).toEqual({
    "sweeps.0.to": ["The upper end lies above the lower: 1.9800 GHz to 1.9200 GHz."],
  });
  expect(errorsOf(sweep("1920", "1920", "1"))).toHaveProperty(["sweeps.0.to"]);
  expect(errorsOf(sweep("1920", "1980", "60"))).toEqual({
    "sweeps.0.maxStep": ["A step is narrower than its range, 60.00 MHz."],
  });
  expect(errorsOf(sweep("1920", "1980", "0"))).toEqual({ "sweeps.0.maxStep": ["A step is above 0."] });
  expect(errorsOf(sweep("1920", "", "1 dB"))).toEqual({
    "sweeps.0.to": ["Enter the upper end."],
    "sweeps.0.maxStep": ["“dB” is not a unit of frequency. Use Hz, kHz, MHz or GHz."],
  });
  expect(errorsOf(sweep("1 GHz", "20 THz", "1"))).toHaveProperty(["sweeps.0.to"]);
  expect(errorsOf({ ...sweep("1920", "1980", "1"), ...sweep("1.92G", "1.98G", "2", 1) })).toEqual({
    "sweeps.1.from": ["This range is listed twice."],
  });
});

test("twelve sweeps are taken and no more", () => {
  const rows = (count: number) =>
    Object.assign(
      {},
      ...Array.from({ length: count }, (_, k) => sweep(`${k + 1}G`, `${k + 2}G`, "10", k)),
    ) as FormValues;
  expect(read(rows(MOST_PLANNED_SWEEPS)).plan.sweeps).toHaveLength(12);
  expect(errorsOf(rows(MOST_PLANNED_SWEEPS + 1))).toEqual({ "sweeps.12.from": ["At most 12 sweeps."] });
});

test("a list of temperatures is never read two ways", () => {
  const temperatures = (text: string) => read({ "plan.temperatures": text }).plan.temperatures;
  for (const text of ["-10, 50", "50;-10", "−10 °C and +50 °C", "-10 50", " 50 , -10 "])
    expect(temperatures(text), text).toEqual([-10, 50]);
  expect(errorsOf({ "plan.temperatures": "12,5" })["plan.temperatures"]?.[0]).toContain("12.5");
  expect(errorsOf({ "plan.temperatures": "50, 50.0" })).toEqual({ "plan.temperatures": ["50 °C is listed twice."] });
  expect(errorsOf({ "plan.temperatures": "-300" })).toHaveProperty(["plan.temperatures"]);
  expect(errorsOf({ "plan.temperatures": "600" })).toHaveProperty(["plan.temperatures"]);
  expect(errorsOf({ "plan.temperatures": "1;2;3;4;5;6;7;8;9" })).toHaveProperty(["plan.temperatures"]);
});

test("figures out of reach and units of another kind are refused at their field", () => {
  for (const [field, text] of [
    ["ifBandwidth", "0"],
    ["ifBandwidth", "1 GHz"],
    ["ifBandwidth", "10 ns"],
    ["power", "-121"],
    ["power", "61"],
    ["power", "0 dB"],
    ["delayAperture", "-1"],
  ] as const)
    expect(Object.keys(errorsOf({ [`plan.${field}`]: text })), `${field} ${text}`).toEqual([`plan.${field}`]);
});

test("a fixture says how it is de-embedded, and words say of which plane they speak", () => {
  expect(errorsOf({ "plan.referencePlane": "fixture" })).toEqual({
    "plan.referencePlaneWords": ["Say how the fixture is de-embedded."],
  });
  expect(errorsOf({ "plan.referencePlaneWords": "at the pads" })).toHaveProperty(["plan.referencePlane"]);
  expect(errorsOf({ "plan.referencePlane": "antenna" })).toHaveProperty(["plan.referencePlane"]);
  expect(errorsOf({ "plan.referencePlane": "connector" })).toEqual({});
  expect(errorsOf({ "plan.referencePlane": "board", "plan.referencePlaneWords": "x".repeat(201) })).toHaveProperty([
    "plan.referencePlaneWords",
  ]);
});

test("every field of a setup has its help", () => {
  for (const { field } of SETUP_FIELDS) expect(SETUP_HELP[field], field).toMatch(/^[A-Z].{80,}\.$/);
});
