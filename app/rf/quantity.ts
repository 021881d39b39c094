// The one grammar for entries as engineers write them: "1.92G", "1920 MHz", "14.0 dB", "1.5:1", "±0.25 dB", "DC".
import type { Band } from "./contract.ts";
import { formatQuantity, MINUS } from "./quantity-format.ts";
import { decimalLiteral, normaliseSpaces, readNumber } from "./quantity-number.ts";
import { BASE_UNIT, readUnit, type QuantityKind } from "./quantity-units.ts";

export { formatQuantity, MINUS, type FormatOptions } from "./quantity-format.ts";
export type { QuantityKind } from "./quantity-units.ts";

/** What a level stands for: decides whether a VSWR or a ± figure can be meant, and that a loss is positive. */
export type LevelMeaning = "loss" | "ripple" | "return-loss";

export interface QuantityOptions {
  readonly kind: QuantityKind;
  /** The unit of the column or field: what a bare number is in. Default: the kind's own (Hz, dB, s, ohm, °C). */
  readonly unit?: string;
  /** Only for levels. Left out, every way to write a level is read. */
  readonly meaning?: LevelMeaning;
}

/** `value` in Hz, dB, s, ohm or °C; `echo` what was understood, as "= 1.9800 GHz"; `reason` a sentence with the remedy. */
export type ParsedQuantity =
  | { readonly ok: true; readonly value: number; readonly echo: string }
  | { readonly ok: false; readonly reason: string };

export type ParsedBand =
  | { readonly ok: true; readonly value: Band; readonly echo: string }
  | { readonly ok: false; readonly reason: string; readonly edge: "from" | "to" };

const LONGEST_ENTRY = 64;
/** In the kind's own unit: beyond any figure of a filter, and the echo of what lies between is short enough to be typed again. */
const TOO_LARGE = 1e18;
const TOO_SMALL = 1e-18;
const refuse = (reason: string) => ({ ok: false, reason }) as const;

/**
 * Reads one entry. Nothing is guessed: what can be read two ways is refused with both readings.
 * The value is the double nearest to the written decimal in the kind's own unit (the exponent is shifted, nothing is multiplied).
 */
export function parseQuantity(text: string, options: QuantityOptions): ParsedQuantity {
  const { kind, meaning } = options;
  const unit = options.unit ?? BASE_UNIT[kind];
  const entry = normaliseSpaces(text);
  if (entry === "") return refuse("Enter a value.");
  if (entry.length > LONGEST_ENTRY) return refuse(`Use at most ${LONGEST_ENTRY} characters.`);
  if (entry.startsWith("=")) return refuse("Arithmetic is not read yet. Write the result.");
  if (kind === "frequency" && /^d\.?c\.?$/i.test(entry)) return { ok: true, value: 0, echo: "= DC" };
  if (/^(±|\+\/[-\u2212])/u.test(entry)) return parsePlusMinus(entry, unit, options);
  if (entry.includes(":")) return parseVswr(entry, options);

  const read = parseSigned(entry, kind, unit);
  if (!read.ok) return read;
  const wrongSign = signProblem(read.value, kind, meaning);
  if (wrongSign) return refuse(wrongSign);
  const echo = formatQuantity(read.value, kind, kind === "plain" ? { unit } : {});
  return { ok: true, value: read.value, echo: `= ${echo}${meaning === "ripple" ? " p-p" : ""}` };
}

function parseSigned(entry: string, kind: QuantityKind, unit: string) {
  const read = readNumber(entry, unit);
  if (!read.ok) return read;
  const written = read.number.rest === "" ? unit : read.number.rest;
  const scale = written === "" ? ({ ok: true, exponent: 0 } as const) : readUnit(written, kind, unit);
  if (!scale.ok) return scale;
  const value = Number(decimalLiteral(read.number, scale.exponent));
  const size = Math.abs(value);
  if (!(size < TOO_LARGE)) return refuse(`“${entry}” is too large.`);
  if (size > 0 && size < TOO_SMALL) return refuse(`“${entry}” is too small. Write 0 if that is meant.`);
  return { ok: true, value: value === 0 ? 0 : value } as const;
}

function signProblem(value: number, kind: QuantityKind, meaning: LevelMeaning | undefined): string | undefined {
  const positive = formatQuantity(Math.abs(value), kind);
  if (kind === "frequency" && value < 0) return `A frequency is not negative. Write ${positive}.`;
  if (kind === "time" && value < 0) return `A time is not negative. Write ${positive}.`;
  if (kind === "impedance" && value <= 0) return "An impedance is more than 0 Ω.";
  if (kind === "temperature" && value < -273.15) return `Nothing is colder than ${MINUS}273.15 °C.`;
  if (kind === "level" && meaning !== undefined && value < 0)
    return `Losses are written as positive dB. Write ${positive}.`;
  return undefined;
}

/** A ripple of ± a is 2a peak to peak; doubling a double is exact. */
function parsePlusMinus(entry: string, unit: string, options: QuantityOptions): ParsedQuantity {
  if (options.kind !== "level" || (options.meaning !== undefined && options.meaning !== "ripple")) {
    return refuse("± is read only for a ripple. Give the limit itself.");
  }
  const half = parseSigned(entry.replace(/^(±|\+\/[-\u2212]) ?/u, ""), "level", unit);
  if (!half.ok) return half;
  if (half.value <= 0) return refuse("± takes a figure above 0 dB.");
  return { ok: true, value: 2 * half.value, echo: `= ${formatQuantity(2 * half.value, "level")} p-p` };
}

/**
 * A VSWR s as return loss, dB: −20 log10((s − 1)/(s + 1)), from VSWR = (1 + |Γ|)/(1 − |Γ|) and return loss = −20 log10|Γ|
 * (T. S. Bird, IEEE Antennas and Propagation Magazine 51(2), 2009).
 */
function parseVswr(entry: string, options: QuantityOptions): ParsedQuantity {
  if (options.kind !== "level") return refuse("A ratio is read only as the VSWR of a return loss.");
  if (options.meaning !== undefined && options.meaning !== "return-loss") {
    return refuse("A VSWR limits the match, not this line. Give a level in dB.");
  }
  const match = /^([^:]+?) ?: ?1$/.exec(entry);
  if (!match) return refuse("Write a VSWR as 1.5:1.");
  const ratio = parseSigned(match[1] ?? "", "plain", "");
  if (!ratio.ok) return ratio;
  if (ratio.value <= 1) return refuse("A VSWR limit is more than 1:1.");
  const returnLoss = -20 * Math.log10((ratio.value - 1) / (ratio.value + 1));
  if (!(returnLoss > 0)) return refuse("A VSWR this large is no limit.");
  return { ok: true, value: returnLoss, echo: `= ${formatQuantity(returnLoss, "level", { decimals: 2 })} return loss` };
}

/** A band from two fields; each takes the column's unit where it has none. A spot has equal edges. */
export function parseBandEdges(from: string, to: string, unit = "Hz"): ParsedBand {
  const lower = parseQuantity(from, { kind: "frequency", unit });
  if (!lower.ok) return { ...lower, edge: "from" };
  const upper = parseQuantity(to, { kind: "frequency", unit });
  if (!upper.ok) return { ...upper, edge: "to" };
  if (lower.value > upper.value) {
    const shown = `${formatQuantity(lower.value, "frequency")} to ${formatQuantity(upper.value, "frequency")}`;
    return { ...refuse(`The lower edge lies above the upper: ${shown}.`), edge: "to" };
  }
  if (upper.value === 0) return { ...refuse("The upper edge is above DC."), edge: "to" };
  return { ok: true, value: [lower.value, upper.value], echo: `= ${formatBand([lower.value, upper.value])}` };
}

/**
 * A band from one entry: "1.92 to 1.98 GHz", "1920-1980 MHz", "DC to 9 kHz"; a single frequency is a spot.
 * A bare lower edge takes the unit of the upper one, as it is said; a bare upper edge after a lower one with a unit is refused.
 */
export function parseBand(text: string, unit = "Hz"): ParsedBand {
  const entry = normaliseSpaces(text);
  if (entry.length > 2 * LONGEST_ENTRY)
    return { ...refuse(`Use at most ${2 * LONGEST_ENTRY} characters.`), edge: "from" };
  // A hyphen after "e" belongs to an exponent, not to a range.
  const match = /^(.+?) ?(?: to |\u2026|\.{2,3}|[\u2013\u2014\u2212]|(?<![eE])-) ?(.+)$/u.exec(entry);
  if (!match) return parseBandEdges(entry, entry, unit);
  const [, from = "", to = ""] = match;
  const lower = readNumber(from, unit);
  const upper = readNumber(to, unit);
  if (!lower.ok || !upper.ok) return parseBandEdges(from, to, unit);
  if (lower.number.rest !== "" && upper.number.rest === "") {
    return { ...refuse(`Give the unit after the upper edge: ${from} to ${to} ${lower.number.rest}.`), edge: "to" };
  }
  return parseBandEdges(lower.number.rest === "" ? `${from} ${upper.number.rest}` : from, to, unit);
}

/** "1.9200 to 1.9800 GHz", one unit where both edges share it; a spot as one frequency. */
export function formatBand([from, to]: Band): string {
  const upper = formatQuantity(to, "frequency");
  if (from === to) return upper;
  const lower = formatQuantity(from, "frequency");
  const shared = upper.slice(upper.indexOf(" "));
  return lower.endsWith(shared) ? `${lower.slice(0, -shared.length)} to ${upper}` : `${lower} to ${upper}`;
}
