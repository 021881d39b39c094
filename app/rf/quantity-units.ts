// Units an entry may carry, as powers of ten of the core's own unit, and why the others are refused.

export type QuantityKind = "frequency" | "level" | "time" | "impedance" | "temperature" | "plain";

/** The unit each kind is stored in. */
export const BASE_UNIT: Record<QuantityKind, string> = {
  frequency: "Hz",
  level: "dB",
  time: "s",
  impedance: "Ω",
  temperature: "°C",
  plain: "",
};

const FREQUENCY: Record<string, number> = {
  Hz: 0,
  kHz: 3,
  MHz: 6,
  GHz: 9,
  THz: 12,
  k: 3,
  K: 3,
  M: 6,
  G: 9,
  g: 9,
  T: 12,
};
const TIME: Record<string, number> = { s: 0, ms: -3, us: -6, ns: -9, ps: -12, fs: -15, m: -3, u: -6, n: -9, p: -12 };
const IMPEDANCE: Record<string, number> = { Ω: 0, ohm: 0, ohms: 0, R: 0, mΩ: -3, kΩ: 3, kohm: 3, k: 3, MΩ: 6 };

export type UnitRead =
  { readonly ok: true; readonly exponent: number } | { readonly ok: false; readonly reason: string };

/**
 * The power of ten between a written unit and the kind's own.
 * @param written what stood after the number, not empty
 * @param plainUnit the unit of a plain kind (a count, ppm): the only one it accepts
 */
export function readUnit(written: string, kind: QuantityKind, plainUnit: string): UnitRead {
  // Micro sign and ohm sign have twins in the Greek block.
  const unit = written.replace(/[\u00B5\u03BC]/gu, "u").replace(/\u2126/gu, "Ω");
  const found = (exponent: number | undefined): UnitRead =>
    exponent === undefined ? { ok: false, reason: wrongUnit(written, kind, plainUnit) } : { ok: true, exponent };
  if (kind === "frequency") return found(FREQUENCY[unit] ?? FREQUENCY[frequencySpelling(unit)]);
  if (kind === "time") return found(TIME[unit]);
  if (kind === "impedance") return found(IMPEDANCE[unit] ?? IMPEDANCE[unit.toLowerCase()]);
  if (kind === "level") return found(unit.toLowerCase() === "db" ? 0 : undefined);
  if (kind === "temperature") return found(/^(°|º|deg ?)?C$|^℃$/u.test(unit) ? 0 : undefined);
  return found(plainUnit !== "" && unit === plainUnit ? 0 : undefined);
}

/** "mhz" and "GHZ" are spellings of one unit; "mHz" is another one, a millihertz, and stays what it is. */
function frequencySpelling(unit: string): string {
  const lower = unit.toLowerCase();
  if (unit === "mHz") return unit;
  return { hz: "Hz", khz: "kHz", mhz: "MHz", ghz: "GHz", thz: "THz" }[lower] ?? unit;
}

function wrongUnit(written: string, kind: QuantityKind, plainUnit: string): string {
  if (kind === "frequency") {
    if (written === "mHz" || written === "m") return `“${written}” is milli. Write MHz for megahertz.`;
    return `“${written}” is not a unit of frequency. Use Hz, kHz, MHz or GHz.`;
  }
  if (kind === "level") {
    if (/^dbm$/i.test(written)) return "dBm is a power. Give a loss in dB.";
    if (/^db[a-z]/i.test(written)) return `“${written}” is not a loss. Give it in dB.`;
    return `“${written}” is not a unit of level. Use dB.`;
  }
  if (kind === "time") return `“${written}” is not a unit of time. Use s, ms, us, ns or ps.`;
  if (kind === "impedance") return `“${written}” is not a unit of impedance. Use ohm.`;
  if (kind === "temperature") return `“${written}” is not read. Give the temperature in °C.`;
  return plainUnit === ""
    ? `“${written}” is not expected after the number.`
    : `“${written}” is not expected. Use ${plainUnit}.`;
}
