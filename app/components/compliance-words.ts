// A scored cell in words: its value, margin and limit in the line's unit, and what its verdict means.
import { isMeasured, type Cell, type RequirementDefinition } from "~/rf/index";
import { formatLevel, formatMargin, formatNumber } from "./format";
import { requirementUnit } from "./requirement-words";
import type { ShownVerdict } from "./verdict-mark";

/** A line of the results, as `readQuoteResults` answers it. */
export interface ComplianceLine {
  readonly lineKey: string;
  readonly lineNumber: string;
  readonly definition: RequirementDefinition;
  readonly verdict: ShownVerdict;
  readonly unit: string | null;
  readonly temperature: number | null;
  readonly creditedMargin: number | null;
  readonly cells: readonly Cell[];
  readonly reason: string | null;
  readonly declaration: { readonly answer: "comply" | "exception"; readonly text: string | null } | null;
}

export interface ComplianceColumns {
  readonly unit: string;
  readonly temperatures: readonly { readonly celsius: number; readonly predicted: boolean }[];
}

/** Figures of a result in the unit its line is shown in. */
export interface ShownResult {
  /** "dB", "ns", "MHz", "°"; empty for a ratio. */
  readonly unit: string;
  readonly value: number;
  readonly limit: number;
  readonly margin: number;
  readonly interval: readonly [number, number];
  readonly marginInterval: readonly [number, number];
}

export function shownResult(definition: RequirementDefinition, { result }: Pick<Cell, "result">): ShownResult {
  const { unit, scale } = isMeasured(definition) ? requirementUnit(definition.kind) : { unit: "", scale: 1 };
  const pair = ([from, to]: readonly [number, number]) => [from * scale, to * scale] as const;
  return {
    unit,
    value: result.value * scale,
    limit: result.limit * scale,
    margin: result.margin * scale,
    interval: pair(result.interval),
    marginInterval: pair(result.marginInterval),
  };
}

/** Two digits after the point, one from 10 dB and from 100 of other units on. */
export const valueDecimals = (value: number, unit: string): number =>
  Math.abs(value) < (unit === "dB" ? 10 : 100) ? 2 : 1;

/** A cell's value without its unit; a failing one never reads as its limit. */
export function cellFigure({ value, limit, margin, unit }: ShownResult): string {
  const decimals = valueDecimals(value, unit);
  return formatLevel(value, { decimals, ...(margin < 0 ? { failingAgainst: limit } : {}) });
}

/**
 * What a matrix cell says under its value: "± 0.10", "57.1 to 59.6" where the ends lie unevenly, "from 57.1" where one is
 * open; in brackets where it rests on the assumed setup. Null where there is no interval.
 */
export function cellInterval({ value, interval: [low, high], unit }: ShownResult, isAssumed: boolean): string | null {
  const decimals = valueDecimals(value, unit);
  const words = intervalWords(value, low, high, decimals);
  return words === null || !isAssumed ? words : `(${words})`;
}

function intervalWords(value: number, low: number, high: number, decimals: number): string | null {
  if (!Number.isFinite(value) || Number.isNaN(low) || Number.isNaN(high) || low === high) return null;
  if (high === Infinity) return low === -Infinity ? null : `from ${formatNumber(low, decimals)}`;
  if (low === -Infinity) return `to ${formatNumber(high, decimals)}`;
  const [below, above] = [(value - low).toFixed(decimals), (high - value).toFixed(decimals)];
  if (below === above) return Number(below) === 0 ? null : `± ${formatNumber(Number(below), decimals)}`;
  return `${formatNumber(low, decimals)} to ${formatNumber(high, decimals)}`;
}

/** Hz, where the verdict is read from another frequency than the reported one; else null. */
export function decidedElsewhere({ frequency, decidingFrequency }: Cell["result"]): number | null {
  if (!Number.isFinite(frequency) || !Number.isFinite(decidingFrequency)) return null;
  return Math.abs(decidingFrequency - frequency) > 1e-9 * decidingFrequency ? decidingFrequency : null;
}

/** Whether what a result says besides is what would settle it: a conditional verdict's reason is that and nothing else. */
export const isConditional = (verdict: ShownVerdict): boolean =>
  verdict === "conditional-pass" || verdict === "conditional-fail";

/** "+0.34 ± 0.10 dB"; "+10.98 dB (10.35 to 11.65)" where the ends lie unevenly. */
export function marginWithInterval({
  margin,
  marginInterval: [low, high],
  unit,
}: Pick<ShownResult, "margin" | "marginInterval" | "unit">): string {
  const figure = formatMargin(margin);
  const withUnit = (text: string) => (unit === "" ? text : `${text} ${unit}`);
  const decimals = figure.split(".")[1]?.length ?? 0;
  const [below, above] = [(margin - low).toFixed(decimals), (high - margin).toFixed(decimals)];
  if (![margin, low, high].every(Number.isFinite)) return withUnit(figure);
  if (below === above) return withUnit(Number(below) === 0 ? figure : `${figure} ± ${below}`);
  return `${withUnit(figure)} (${formatNumber(low, decimals)} to ${formatNumber(high, decimals)})`;
}

/** Which side of its limit a value may not pass; told from the figures, since a bandwidth has two limits. */
export function limitSense({ value, limit, margin }: ShownResult, definition: RequirementDefinition): "max" | "min" {
  if (value === limit) return "min" in definition ? "min" : "max";
  return Math.abs(limit - value - margin) <= Math.abs(value - limit - margin) ? "max" : "min";
}

/** "+70 °C", "−30 °C" */
export const celsiusWords = (celsius: number): string =>
  `${celsius > 0 ? "+" : ""}${formatNumber(celsius, Number.isInteger(celsius) ? 0 : 1)} °C`;

/** What a verdict says about value, interval and limit. */
export const VERDICT_SENTENCES: Record<ShownVerdict, string> = {
  pass: "The whole interval lies within the limit.",
  "conditional-pass": "The value meets the limit, the end of its interval does not.",
  "conditional-fail": "The value misses the limit, the end of its interval meets it.",
  fail: "The whole interval lies beyond the limit.",
  "not-covered": "The data does not reach all that the line asks for.",
  declared: "The supplier states that it complies.",
  exception: "The supplier takes an exception. It is not accepted, and counts as a fail.",
};

/** Finds the cell of a line for a unit and a temperature. */
export const cellAt = (line: ComplianceLine, unit: string, celsius: number): Cell | undefined =>
  line.cells.find((cell) => cell.unit === unit && cell.temperature === celsius);

/** Names a cell in the page's address. */
export function cellSearch(lineNumber: string, unit: string, celsius: number): string {
  return `?${new URLSearchParams({ line: lineNumber, unit, temperature: String(celsius) }).toString()}`;
}
