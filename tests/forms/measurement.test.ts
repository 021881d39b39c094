// Unit, temperature and setup of sweeps as typed, and the place several are put at.
import { expect, test } from "vitest";
import { parsePlacement, parseSweepLabels, parseSweepSetup, placeValue, temperatureText } from "~/forms/measurement";
import { setupToValues } from "~/forms/setup";

test("temperatures are read with sign and unit, kept to a tenth, and written back as they read", () => {
  for (const [typed, kept, shown] of [
    ["-30", "-30.0", "−30"],
    ["−30 °C", "-30.0", "−30"],
    ["+70.5", "70.5", "70.5"],
    ["0", "0.0", "0"],
  ] as const) {
    expect(parseSweepLabels({ serial: " 0411 ", temperature: typed })).toEqual({
      ok: true,
      value: { serial: "0411", temperature: kept },
    });
    expect(temperatureText(kept)).toBe(shown);
    expect(parseSweepLabels({ temperature: temperatureText(kept) })).toMatchObject({ value: { temperature: kept } });
  }
});

test("blank fields leave the figures open", () => {
  expect(parseSweepLabels({ serial: "  ", temperature: "" })).toEqual({
    ok: true,
    value: { serial: null, temperature: null },
  });
});

test("what is no temperature, too fine, or too far out is refused with the remedy", () => {
  for (const temperature of ["warm", "25.05", "600", "-300", "1,5"])
    expect(parseSweepLabels({ serial: "1", temperature })).toMatchObject({
      ok: false,
      errors: { temperature: [expect.any(String)] },
      values: { temperature },
    });
  expect(parseSweepLabels({ serial: "x".repeat(61) })).toMatchObject({
    ok: false,
    errors: { serial: [expect.any(String)] },
  });
});

const [first, second] = ["a1b2c3d4e5f6g7h8", "h8g7f6e5d4c3b2a1"] as const;
const ticked = { [`select.${first}`]: "on", [`select.${second}`]: "on" };

test("ticked files go to a place there is, or to a unit and a temperature typed, or keep what is left open", () => {
  const measurements = [first, second];
  const place = placeValue("HR2 0411", "-30.0");
  expect(parsePlacement({ ...ticked, place })).toEqual({
    ok: true,
    value: { measurements, serial: "HR2 0411", temperature: "-30.0" },
  });
  expect(parsePlacement({ ...ticked, place, placeTemperature: "25 °C" })).toEqual({
    ok: true,
    value: { measurements, serial: "HR2 0411", temperature: "25.0" },
  });
  expect(parsePlacement({ ...ticked, placeSerial: " HR2-0412 " })).toEqual({
    ok: true,
    value: { measurements, serial: "HR2-0412" },
  });
  expect(parsePlacement({ ...ticked, placeTemperature: "−30" })).toEqual({
    ok: true,
    value: { measurements, temperature: "-30.0" },
  });
});

test("a placing without files, without a place, or with what is no temperature is refused at its field", () => {
  const errorsOf = (values: Record<string, string>) => {
    const parsed = parsePlacement(values);
    return parsed.ok ? {} : parsed.errors;
  };
  expect(errorsOf({ placeSerial: "1" })).toEqual({ form: [expect.any(String)] });
  expect(errorsOf(ticked)).toEqual({ place: [expect.any(String)] });
  expect(errorsOf({ ...ticked, placeTemperature: "warm" })).toEqual({ placeTemperature: [expect.any(String)] });
  expect(errorsOf({ ...ticked, placeSerial: "x".repeat(61) })).toEqual({ placeSerial: [expect.any(String)] });
  expect(errorsOf({ "select.../etc": "on", placeSerial: "1" })).toEqual({ form: [expect.any(String)] });
});

test("a sweep's own setup reads back as it was written, and is none where every field is blank", () => {
  const setup = { transmission: 0.05, groupDelay: 2e-10, noiseFloor: 112, noiseFloorKind: "rms" } as const;
  expect(parseSweepSetup({ ...setupToValues(setup), scope: "unit" })).toEqual({
    ok: true,
    value: { setup, scope: "unit" },
  });
  expect(parseSweepSetup(setupToValues({}))).toEqual({ ok: true, value: { setup: null, scope: "sweep" } });
  expect(parseSweepSetup({ "setup.tracking": "0" })).toMatchObject({
    ok: false,
    errors: { "setup.tracking": [expect.any(String)] },
  });
  expect(parseSweepSetup({ scope: "everything" })).toMatchObject({
    ok: false,
    errors: { scope: [expect.any(String)] },
  });
});
