// The stated temperature drift as it is typed.
import { expect, test } from "vitest";
import type { FieldErrors } from "~/forms/form";
import { driftText, driftToValues, readDrift } from "~/forms/stated-drift";

function read(ppmPerKelvin: string, lossPerKelvin = "") {
  const errors: FieldErrors = {};
  const drift = readDrift({ "drift.ppmPerKelvin": ppmPerKelvin, "drift.lossPerKelvin": lossPerKelvin }, errors);
  return { drift, errors };
}

test.each([
  ["2 ppm", { ppmPerKelvin: 2 }, "2 ppm/K"],
  ["+3", { ppmPerKelvin: 3 }, "3 ppm/K"],
  ["−12.5 ppm/K", { ppmPerKelvin: -12.5 }, "−12.5 ppm/K"],
  ["-12.5 ppm/°C", { ppmPerKelvin: -12.5 }, "−12.5 ppm/K"],
  ["±2 ppm/K", { ppmPerKelvin: 2, either: true }, "±2 ppm/K"],
  ["+/-0.8ppm per K", { ppmPerKelvin: 0.8, either: true }, "±0.8 ppm/K"],
  ["0", { ppmPerKelvin: 0 }, "0 ppm/K"],
])("a drift written %s is read, and written back so that it reads the same", (typed, drift, shown) => {
  expect(read(typed)).toEqual({ drift, errors: {} });
  expect(driftText(drift)).toBe(shown);
  expect(readDrift(driftToValues(drift), {})).toEqual(drift);
});

test("the rise of the resistance is a share a kelvin, or a percentage; it needs a drift beside it", () => {
  for (const typed of ["0.0039", "0.0039 /K", "0.0039 1/K", "0.39 %", "0.39 %/K"])
    expect(read("±2 ppm/K", typed)).toEqual({
      drift: { ppmPerKelvin: 2, either: true, lossPerKelvin: 0.0039 },
      errors: {},
    });
  const drift = { ppmPerKelvin: 1, lossPerKelvin: 0.0039 };
  expect(readDrift(driftToValues(drift), {})).toEqual(drift);
  expect(read("", "0.0039")).toEqual({ drift: null, errors: { "drift.ppmPerKelvin": [expect.any(String)] } });
  expect(read("", "")).toEqual({ drift: null, errors: {} });
});

test.each([
  ["±0", /above 0/],
  ["±-2", /above 0/],
  ["2 MHz", /ppm\/K/],
  ["2,5 ppm", /comma/],
  ["1001", /1000/],
  ["warm", /number/],
])("%s is no drift, and the reason is told", (typed, reason) => {
  expect(read(typed)).toEqual({ drift: null, errors: { "drift.ppmPerKelvin": [expect.stringMatching(reason)] } });
});

test.each(["0", "-0.0039", "3.9", "copper", "0.0039 dB"])("%s is no rise of the resistance", (typed) => {
  expect(read("2", typed).errors).toEqual({ "drift.lossPerKelvin": [expect.any(String)] });
});
