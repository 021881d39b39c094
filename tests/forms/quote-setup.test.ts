// Instrument and setup of a quote as they are typed.
import { expect, test } from "vitest";
import type { FieldErrors } from "~/forms/form";
import { instrumentToValues, readInstrument, statedSetup } from "~/forms/quote-setup";
import { isDataField } from "~/forms/setup";

const today = "2026-11-27";

test("analyser, calibration and date are read and written back; blanks are left out", () => {
  const instrument = {
    analyser: "Two-port analyser, 10 MHz to 26.5 GHz",
    calibration: "SOLT, 3.5 mm kit",
    calibratedOn: "2026-11-20",
  };
  const errors: FieldErrors = {};
  expect(readInstrument(instrumentToValues(instrument), today, errors)).toEqual(instrument);
  expect(readInstrument({ "instrument.analyser": "  " }, today, errors)).toEqual({});
  expect(readInstrument({}, today, errors)).toEqual({});
  expect(errors).toEqual({});
});

test("a calibration is no day that is not in the calendar, nor one to come; east of the buyer tomorrow is today", () => {
  const errorsOf = (calibratedOn: string) => {
    const errors: FieldErrors = {};
    readInstrument({ "instrument.calibratedOn": calibratedOn }, today, errors);
    return errors;
  };
  expect(errorsOf("2026-11-28")).toEqual({});
  for (const wrong of ["2026-11-29", "2026-02-30", "27.11.2026"])
    expect(errorsOf(wrong)).toEqual({ "instrument.calibratedOn": [expect.any(String)] });
});

test("words that are too long are refused at their field", () => {
  const errors: FieldErrors = {};
  readInstrument({ "instrument.analyser": "x".repeat(201), "instrument.calibration": "TRL" }, today, errors);
  expect(errors).toEqual({ "instrument.analyser": [expect.stringContaining("201")] });
});

test("a draft's setup holds what can be read, and leaves out what cannot", () => {
  const typed = { "setup.transmission": "0.08 dB", "setup.directivity": "42,5", "setup.noiseFloor": "110" };
  expect(statedSetup(typed)).toEqual({ transmission: 0.08, noiseFloor: 110, noiseFloorKind: "peak" });
  expect(statedSetup({})).toEqual({});
});

test("the fields of the Data sheet are told from those of the other sheets", () => {
  for (const name of ["basis", "setup.transmission", "instrument.analyser", "drift.ppmPerKelvin"])
    expect(isDataField(name), name).toBe(true);
  for (const name of ["nre", "prices.100", "declarations.line61.answer", "setupPrice"])
    expect(isDataField(name), name).toBe(false);
});
