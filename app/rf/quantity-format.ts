// Prints a quantity in engineering units without losing a digit: what is printed reads back to the same number.
import { BASE_UNIT, type QuantityKind } from "./quantity-units.ts";

export const MINUS = "\u2212";

export interface FormatOptions {
  /** One of the kind's units; chosen by size where it is left out. */
  readonly unit?: string;
  /** Rounds to this many decimals. Left out: every digit the number has, with the unit's usual number of decimals at least. */
  readonly decimals?: number;
}

interface Scale {
  readonly unit: string;
  readonly exponent: number;
  readonly decimals: number;
}

const SCALES: Record<QuantityKind, readonly Scale[]> = {
  frequency: [
    { unit: "GHz", exponent: 9, decimals: 4 },
    { unit: "MHz", exponent: 6, decimals: 2 },
    { unit: "kHz", exponent: 3, decimals: 0 },
    { unit: "Hz", exponent: 0, decimals: 0 },
  ],
  time: [
    { unit: "s", exponent: 0, decimals: 0 },
    { unit: "ms", exponent: -3, decimals: 0 },
    { unit: "µs", exponent: -6, decimals: 0 },
    { unit: "ns", exponent: -9, decimals: 0 },
    { unit: "ps", exponent: -12, decimals: 0 },
  ],
  level: [{ unit: "dB", exponent: 0, decimals: 0 }],
  impedance: [{ unit: "Ω", exponent: 0, decimals: 0 }],
  temperature: [{ unit: "°C", exponent: 0, decimals: 0 }],
  plain: [{ unit: "", exponent: 0, decimals: 0 }],
};

/**
 * A quantity with its unit: "1.9800 GHz", "14 dB", "−30 °C", "DC" for a frequency of 0.
 * @param value in the kind's own unit: Hz, dB, s, Ω, °C
 * @throws RangeError for a value that is not finite, or a unit the kind does not have
 */
export function formatQuantity(value: number, kind: QuantityKind, options: FormatOptions = {}): string {
  if (!Number.isFinite(value)) throw new RangeError(`${value} cannot be printed as a quantity`);
  if (kind === "frequency" && value === 0 && options.unit === undefined) return "DC";
  const scale = chooseScale(Math.abs(value), kind, options.unit);
  const shifted = shiftedDigits(Math.abs(value), -scale.exponent);
  const digits =
    options.decimals === undefined ? padDecimals(shifted, scale.decimals) : roundDigits(shifted, options.decimals);
  const sign = value < 0 && /[1-9]/.test(digits) ? MINUS : "";
  const unit = options.unit !== undefined && kind === "plain" ? options.unit : scale.unit;
  return unit === "" ? `${sign}${digits}` : `${sign}${digits} ${unit}`;
}

function chooseScale(size: number, kind: QuantityKind, unit: string | undefined): Scale {
  const scales = SCALES[kind];
  const last = scales[scales.length - 1] ?? { unit: BASE_UNIT[kind], exponent: 0, decimals: 0 };
  if (kind === "plain" || (unit === undefined && size === 0)) return kind === "time" ? (scales[0] ?? last) : last;
  if (unit === undefined) return scales.find((scale) => size >= Number(`1e${scale.exponent}`)) ?? last;
  const named = scales.find((scale) => scale.unit === unit);
  if (!named) throw new RangeError(`${unit} is not a unit of ${kind}`);
  return named;
}

/** The shortest decimal that reads back to `size`, its point moved by `shift` places, without exponent. */
function shiftedDigits(size: number, shift: number): string {
  const [mantissa = "0", exponent = "0"] = size.toExponential().split("e");
  const [whole = "0", fraction = ""] = mantissa.split(".");
  const digits = whole + fraction;
  const point = whole.length + Number(exponent) + shift;
  if (point <= 0) return `0.${"0".repeat(-point)}${digits}`;
  if (point >= digits.length) return digits + "0".repeat(point - digits.length);
  return `${digits.slice(0, point)}.${digits.slice(point)}`;
}

function padDecimals(digits: string, decimals: number): string {
  const [whole = "0", fraction = ""] = digits.split(".");
  const kept = fraction.replace(/0+$/, "").padEnd(decimals, "0");
  return kept === "" ? whole : `${whole}.${kept}`;
}

/** Rounds half up on the decimal digits, not on the binary number. */
function roundDigits(digits: string, decimals: number): string {
  const [whole = "0", fraction = ""] = digits.split(".");
  const kept = BigInt(whole + fraction.slice(0, decimals).padEnd(decimals, "0"));
  const rounded = String((fraction[decimals] ?? "0") >= "5" ? kept + 1n : kept).padStart(decimals + 1, "0");
  if (decimals === 0) return rounded;
  return `${rounded.slice(0, -decimals)}.${rounded.slice(-decimals)}`;
}
