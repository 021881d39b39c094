// How figures are written: decibels, margins, frequencies, money and times, with the same signs and digits everywhere.

/** U+2212, as wide as a plus; a hyphen is not a minus. */
const minus = "−";
const noBreakSpace = "\u00a0";
const mostDecimals = 12;

interface LevelOptions {
  /** @default 2 */
  decimals?: number;
  /** Given for a failing value: the limit it fails against. It then never reads as if it met the limit. */
  failingAgainst?: number;
}

/** "−1,247.50"; NaN is an en dash; an infinity is a word, for the font has no sign of it. */
export function formatNumber(value: number, decimals: number): string {
  if (Number.isNaN(value)) return "–";
  const size = Math.abs(value) === Infinity ? "infinite" : grouped(Math.abs(value).toFixed(decimals));
  const isNegative = value < 0 && (value === -Infinity || Number(value.toFixed(decimals)) !== 0);
  return isNegative ? `${minus}${size}` : size;
}

const grouped = (digits: string): string => {
  const [whole = "", fraction] = digits.split(".");
  const marked = whole.replace(/\B(?=(\d{3})+$)/g, ",");
  return fraction === undefined ? marked : `${marked}.${fraction}`;
};

/**
 * A level in dB, or another value in its requirement's unit, without the unit. A failing value never rounds to its
 * limit or past it: it takes as many more digits as it needs.
 */
export function formatLevel(value: number, options: LevelOptions = {}): string {
  const { decimals = 2, failingAgainst } = options;
  return formatNumber(
    value,
    failingAgainst === undefined ? decimals : failingDecimals(value, failingAgainst, decimals),
  );
}

/** The least number of decimals, from `decimals` on, at which the written value lies on its own side of the limit. */
function failingDecimals(value: number, limit: number, decimals: number): number {
  if (!Number.isFinite(value) || value === limit) return decimals;
  const side = Math.sign(value - limit);
  let shown = decimals;
  while (shown < mostDecimals && Math.sign(Number(value.toFixed(shown)) - limit) !== side) shown += 1;
  return shown;
}

/** A margin with its sign, positive complies: "+0.54", "−0.06"; a negative one never reads as zero. */
export function formatMargin(margin: number, options: { decimals?: number } = {}): string {
  if (Number.isNaN(margin)) return formatNumber(margin, 0);
  const text = formatLevel(margin, { ...options, ...(margin < 0 ? { failingAgainst: 0 } : {}) });
  return text.startsWith(minus) ? text : `+${text}`;
}

export type FrequencyUnit = "GHz" | "MHz" | "kHz" | "Hz";

const exponents: Record<FrequencyUnit, number> = { GHz: 9, MHz: 6, kHz: 3, Hz: 0 };
const usualDecimals: Record<FrequencyUnit, number> = { GHz: 4, MHz: 3, kHz: 3, Hz: 0 };

interface FrequencyOptions {
  /** @default GHz from 1 GHz on, MHz from 1 MHz on, kHz from 1 kHz on */
  unit?: FrequencyUnit;
  /** @default 4 in GHz, 3 in MHz and kHz, 0 in Hz */
  decimals?: number;
}

/** The unit a frequency is usually written in. */
export function frequencyUnit(hz: number): FrequencyUnit {
  if (hz >= 1e9) return "GHz";
  if (hz >= 1e6) return "MHz";
  return hz >= 1e3 ? "kHz" : "Hz";
}

/** A frequency with its unit, rounded to equal decimals for its unit: "1.9800 GHz", "433.920 MHz". */
export function formatFrequency(hz: number, options: FrequencyOptions = {}): string {
  const { unit = frequencyUnit(hz), decimals = usualDecimals[unit] } = options;
  return `${formatNumber(inUnit(hz, unit), decimals)}${noBreakSpace}${unit}`;
}

const inUnit = (hz: number, unit: FrequencyUnit): number => hz / 10 ** exponents[unit];

/** Decimals at which every one of the frequencies is written exactly, at least the unit's usual ones, at most to the hertz. */
export function frequencyDecimals(frequencies: readonly number[], unit: FrequencyUnit): number {
  const isExact = (hz: number, decimals: number) =>
    Math.abs(Number(inUnit(hz, unit).toFixed(decimals)) - inUnit(hz, unit)) * 10 ** exponents[unit] < 0.5;
  let decimals = usualDecimals[unit];
  while (decimals < exponents[unit] && !frequencies.every((hz) => isExact(hz, decimals))) decimals += 1;
  return decimals;
}

interface BandOptions extends FrequencyOptions {
  /** Hz; said beside a band that starts at DC. */
  lowestTestFrequency?: number;
}

/**
 * A band with both edges exact and in equal decimals: "1.9200 to 1.9800 GHz", "DC (tested from 9 kHz) to 1.8000 GHz".
 * An edge under a thousandth of the other keeps a unit of its own: "9 kHz to 1.0000 GHz".
 */
export function formatBand([from, to]: readonly [number, number], options: BandOptions = {}): string {
  const { unit = frequencyUnit(to), lowestTestFrequency } = options;
  if (from === 0) {
    const tested = lowestTestFrequency === undefined ? "" : ` (tested from ${shortFrequency(lowestTestFrequency)})`;
    return `DC${tested} to ${exactFrequency(to, unit, options.decimals)}`;
  }
  if (from < to / 1000) return `${shortFrequency(from)} to ${exactFrequency(to, unit, options.decimals)}`;
  const decimals = options.decimals ?? frequencyDecimals([from, to], unit);
  const number = (hz: number) => formatNumber(inUnit(hz, unit), decimals);
  return from === to ? exactFrequency(to, unit, decimals) : `${number(from)} to ${number(to)}${noBreakSpace}${unit}`;
}

const exactFrequency = (hz: number, unit: FrequencyUnit, decimals = frequencyDecimals([hz], unit)): string =>
  formatFrequency(hz, { unit, decimals });

/** Without trailing zeros: "9 kHz". */
function shortFrequency(hz: number): string {
  const unit = frequencyUnit(hz);
  const digits = inUnit(hz, unit).toFixed(frequencyDecimals([hz], unit));
  return `${digits.includes(".") ? digits.replace(/\.?0+$/, "") : digits}${noBreakSpace}${unit}`;
}

const decimalPattern = /^(-?)(\d+)(?:\.(\d+))?$/;

/**
 * Money from its decimal string, never through binary floats and never rounded: "EUR 64,500.00", "0.1234".
 *
 * @param currency ISO 4217 code, written before the figure; left out where the column's head names it
 * @throws RangeError if the amount is not a plain decimal
 */
export function formatMoney(amount: string, currency?: string): string {
  const match = decimalPattern.exec(amount);
  if (match === null) throw new RangeError(`not a decimal amount: ${amount}`);
  const [, sign, whole = "0", written = ""] = match;
  const least = currency === undefined ? 2 : minorDigits(currency);
  const fraction = written.replace(/0+$/, "").padEnd(least, "0");
  const figure = grouped(`${whole.replace(/^0+(?=\d)/, "")}${fraction === "" ? "" : `.${fraction}`}`);
  const isNegative = sign === "-" && /[1-9]/.test(figure);
  return `${currency === undefined ? "" : `${currency}${noBreakSpace}`}${isNegative ? minus : ""}${figure}`;
}

/** Digits of a currency's minor unit, of ISO 4217: 2 for EUR, 0 for JPY. */
const minorDigits = (currency: string): number =>
  new Intl.NumberFormat("en", { style: "currency", currency }).resolvedOptions().minimumFractionDigits ?? 2;

const months = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"] as const;

type Instant = string | number | Date;

function zoned(instant: Instant, zone: string): Record<string, string> {
  const parts = new Intl.DateTimeFormat("en", {
    timeZone: zone,
    year: "numeric",
    month: "numeric",
    day: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    hourCycle: "h23",
    timeZoneName: "longOffset",
  }).formatToParts(new Date(instant));
  return Object.fromEntries(parts.map((part) => [part.type, part.value]));
}

/**
 * "27 Nov 2026" in the zone.
 *
 * @throws RangeError if the instant or the IANA zone is unknown
 */
export function formatDate(instant: Instant, zone: string): string {
  const { day, month, year } = zoned(instant, zone);
  return `${day} ${months[Number(month) - 1] ?? ""} ${year}`;
}

/**
 * "27 Nov 2026 17:00 +01:00" in the zone, with its offset at that instant.
 *
 * @throws RangeError if the instant or the IANA zone is unknown
 */
export function formatDateTime(instant: Instant, zone: string): string {
  const { hour, minute, timeZoneName = "" } = zoned(instant, zone);
  const offset = timeZoneName.replace("GMT", "").replace("-", minus) || "+00:00";
  return `${formatDate(instant, zone)} ${hour}:${minute} ${offset}`;
}

/**
 * Beside an RFQ's due date: "in 3 days", "2 hours ago", or "closed early" where it takes no quotes any more before that date.
 *
 * @param isRunning it is open, or not opened yet
 */
export function formatDue(dueAt: Instant, now: Instant, isRunning: boolean): string {
  const isAhead = new Date(dueAt).getTime() > new Date(now).getTime();
  return isAhead && !isRunning ? "closed early" : formatRelative(dueAt, now);
}

const spans: readonly (readonly [ms: number, one: string, many: string])[] = [
  [86_400_000, "day", "days"],
  [3_600_000, "hour", "hours"],
  [60_000, "minute", "minutes"],
];

/** "in 3 days", "2 hours ago", "now": whole units rounded down, so that a due date never seems farther than it is. */
export function formatRelative(instant: Instant, now: Instant): string {
  const ahead = new Date(instant).getTime() - new Date(now).getTime();
  const span = spans.find(([ms]) => Math.abs(ahead) >= ms);
  if (span === undefined) return "now";
  const count = Math.floor(Math.abs(ahead) / span[0]);
  const words = `${count} ${count === 1 ? span[1] : span[2]}`;
  return ahead > 0 ? `in ${words}` : `${words} ago`;
}
