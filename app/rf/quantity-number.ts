// Reads the number at the start of an entry: decimal points only, thousands marks where they cannot be anything else.

/** A decimal kept as text, so that a change of unit shifts the exponent and never rounds: value = digits × 10^exponent. */
export interface DecimalText {
  readonly negative: boolean;
  /** Digits with at most one point, no marks, no sign: "1920.0". */
  readonly digits: string;
  readonly exponent: number;
  /** What follows the number, trimmed: the unit. */
  readonly rest: string;
}

export type ReadNumber =
  { readonly ok: true; readonly number: DecimalText } | { readonly ok: false; readonly reason: string };

const refuse = (reason: string): ReadNumber => ({ ok: false, reason });
const withUnit = (number: string, unit: string) => (unit === "" ? number : `${number} ${unit}`);

/** Spaces of every width become one kind, both ends trimmed. */
export function normaliseSpaces(text: string): string {
  return text.replace(/[\s\u00A0\u2000-\u200A\u202F]+/gu, " ").trim();
}

/**
 * Reads a plain number and leaves what follows.
 *
 * A comma or space is a thousands mark only where the first group has one to three digits and does not start with 0, every further group
 * has exactly three, and (for commas) a point or a unit follows. Everything else is refused with the remedy.
 *
 * @param text an entry without leading "±" or "="; U+2212, hyphen and en dash in front are a minus
 * @param unit the unit a bare number would take, for the wording of a refusal
 */
export function readNumber(text: string, unit: string): ReadNumber {
  const entry = normaliseSpaces(text);
  const match =
    /^([+\-\u2212\u2013]?) ?([\d.,](?:[\d., ']*[\d.,])?)(?:[eE]([+\-\u2212]?\d{1,3})(?![\d.,]))? ?(.*)$/u.exec(entry);
  if (!match) return refuse(`“${entry}” does not start with a number.`);
  const [, sign = "", written = "", exponent = "0", rest = ""] = match;
  const plain = plainDigits(written, rest, unit);
  if (!plain.ok) return plain;
  return {
    ok: true,
    number: {
      negative: sign !== "" && sign !== "+",
      digits: plain.digits,
      exponent: Number(exponent.replace("\u2212", "-")),
      rest,
    },
  };
}

/** The number as a decimal literal: "-1.92e9". `shift` moves the point, for a unit's prefix. */
export function decimalLiteral(number: DecimalText, shift = 0): string {
  return `${number.negative ? "-" : ""}${number.digits}e${number.exponent + shift}`;
}

type Plain = { readonly ok: true; readonly digits: string } | { readonly ok: false; readonly reason: string };

function plainDigits(written: string, rest: string, unit: string): Plain {
  if (/^(\d+\.?\d*|\.\d+)$/.test(written)) return { ok: true, digits: written };
  const no = (reason: string): Plain => ({ ok: false, reason });
  const bare = written.replace(/[, ']/g, "");
  const shownUnit = rest === "" ? unit : rest;
  if (/^[1-9]\d{0,2}( \d{3})+(\.\d+)?$/.test(written)) return { ok: true, digits: bare };
  if (/^[1-9]\d{0,2}(,\d{3})+$/.test(written) && rest === "") return no(bothReadings(written, bare, unit));
  if (/^[1-9]\d{0,2}(,\d{3})+(\.\d*)?$/.test(written)) return { ok: true, digits: bare };
  const decimalComma = /^(\d*(?:[. ']\d{3})*),(\d+)$/.exec(written);
  if (decimalComma) {
    const whole = (decimalComma[1] ?? "").replace(/[. ']/g, "");
    const remedy = `${whole === "" ? "0" : whole}.${decimalComma[2] ?? ""}`;
    return no(`A comma is not a decimal mark here. Write ${withUnit(remedy, shownUnit)}.`);
  }
  if (/^\d{1,3}(\.\d{3}){2,}$/.test(written)) {
    return no(`A point is the decimal mark and stands once. Write ${withUnit(written.replace(/\./g, ""), shownUnit)}.`);
  }
  if (written.includes("'")) return no(`An apostrophe is not read. Write ${withUnit(bare, shownUnit)}.`);
  return no(`“${written}” is not a number: give digits with one decimal point, as in 1920.5.`);
}

function bothReadings(written: string, bare: string, unit: string): string {
  if (written.indexOf(",") !== written.lastIndexOf(",")) {
    return `“${written}” has marks between its digits but no point or unit. Write ${withUnit(bare, unit)}.`;
  }
  const decimal = written.replace(",", ".");
  return `“${written}” can be read as ${withUnit(bare, unit)} or as ${withUnit(decimal, unit)}. Write the one you mean.`;
}
