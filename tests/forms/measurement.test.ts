// Unit and temperature as typed.
import { expect, test } from "vitest";
import { parseSweepLabels, temperatureText } from "~/forms/measurement";

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
