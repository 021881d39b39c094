// Checked files in words: the figures of a line, the name of what was read, what is left out and why.
import { valueWithInterval } from "~/charts/words";
import { readResult, type Band, type StoredResult } from "~/rf/index";
import { isMeasured, type SpecificationLine } from "~/rf/line-definition";
import { complies } from "~/rf/verdict";
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedLot, CheckedSweep } from "~/workers/check-messages";
import type { CheckItem } from "./check-queue";
import { celsiusWords, shownResult } from "./compliance-words";
import { formatBand, formatFrequency, formatMargin, formatNumber } from "./format";
import type { QuoteResultLine } from "./quote-result-table";

export const counted = (count: number, noun: string): string => `${count} ${noun}${count === 1 ? "" : "s"}`;

export interface LineFigures {
  /** "1.18 ± 0.10 dB"; "–" where nothing was reached. */
  readonly value: string;
  /** "+0.02 dB" */
  readonly margin: string;
  /** "at 1.9800 GHz", or nothing. */
  readonly place: string;
}

/** A result of a line as it is shown. */
export function lineFigures({ definition }: SpecificationLine, stored: StoredResult): LineFigures {
  const result = readResult(stored);
  const shown = shownResult(definition, { result });
  const bound = result.bound === undefined ? "" : `${result.bound === "at-least" ? "at least" : "at most"} `;
  return {
    value: Number.isNaN(shown.value) ? "–" : `${bound}${valueWithInterval(shown)}`.trim(),
    margin: Number.isNaN(shown.margin) ? "–" : `${formatMargin(shown.margin)} ${shown.unit}`.trim(),
    place: Number.isFinite(result.frequency) ? `at ${formatFrequency(result.frequency)}` : "",
  };
}

/** "2,001 points, 1.7000 to 2.2000 GHz" */
export const sweepWords = (points: number, sweep: Band): string =>
  `${formatNumber(points, 0)} points, ${formatBand(sweep)}`;

export const temperatureWords = (temperature: number | null): string =>
  temperature === null ? "no temperature read" : celsiusWords(temperature);

/** What of the checked files the lot leaves out, a sentence for each thing they lack. */
export function leftOutWords(items: readonly CheckItem[]): string[] {
  const sentence = (what: string, lacksUnit: boolean, lacksTemperature: boolean) => {
    const files = items.filter(
      ({ checked }) =>
        checked && (checked.serial === null) === lacksUnit && (checked.temperature === null) === lacksTemperature,
    );
    if (files.length === 0) return [];
    const enter = `Enter ${lacksUnit && lacksTemperature ? "both" : "it"} once the ${files.length === 1 ? "file is" : "files are"} uploaded.`;
    return [`Left out of this, without a ${what}: ${named(files)}. ${enter}`];
  };
  return [
    ...sentence("temperature", false, true),
    ...sentence("unit", true, false),
    ...sentence("unit and a temperature", true, true),
  ];
}

const MOST_NAMED = 5;

function named(items: readonly CheckItem[]): string {
  const names = items.slice(0, MOST_NAMED).map(({ name }) => name);
  const others = items.length - names.length;
  return others > 0 ? `${names.join(", ")} and ${others} more` : names.join(", ");
}

/** "2 of 10 lines do not comply under simple acceptance" */
export function complianceWords({ lines }: CheckedLot, { decisionRule }: CheckFrame): string {
  const failing = lines.filter(({ verdict }) => !complies(verdict, decisionRule)).length;
  const all = counted(lines.length, "measured line");
  if (failing === 0) return `the ${all} ${lines.length === 1 ? "complies" : "comply"} under ${decisionRule} acceptance`;
  return `${failing} of ${all} ${failing === 1 ? "does" : "do"} not comply under ${decisionRule} acceptance`;
}

/** "3 units, 3 asked; 1 over temperature, 1 asked" */
export function unitsWords({ units, unitsOverRange }: CheckedLot, frame: CheckFrame): string {
  const all = `${counted(units, "unit")}, ${frame.unitsAsked} asked`;
  return unitsOverRange === null ? all : `${all}; ${unitsOverRange} over temperature, ${frame.unitsOverRange} asked`;
}

/** Under what the figures stand. */
export function setupWords({ statedSetup, basis }: CheckFrame): string {
  const setup =
    Object.keys(statedSetup).length === 0
      ? "Measurement setup: as the RFQ assumes it, for this quote states none yet."
      : "Measurement setup: as this quote states it, completed by what the RFQ assumes.";
  const capped = "counts as no measurement of the part: no line is better than a conditional pass";
  if (basis === "measured") return setup;
  return `${setup} Data of a ${basis === "similar" ? "similar part" : "simulation"} ${capped}.`;
}

/** The lot's lines as the table of results takes them. */
export const lotResultLines = ({ lines: checked }: CheckedLot, { lines }: CheckFrame): QuoteResultLine[] =>
  checked.flatMap(({ lineKey, verdict, reason, cells, worst }) => {
    const line = lines.find((one) => one.lineKey === lineKey);
    if (!line || !isMeasured(line.definition)) return [];
    const cell = cells[worst];
    const result = cell && readResult(cell.result);
    return [
      {
        line,
        verdict,
        reason,
        value: finite(result?.value),
        margin: finite(result?.margin),
        limit: finite(result?.limit),
        frequency: finite(result?.frequency),
        unit: cell === undefined ? null : `${cell.unit}${cell.predicted ? ", predicted" : ""}`,
        temperature: cell === undefined ? null : cell.temperature.toFixed(1),
        assumed: result?.assumed ?? false,
      },
    ];
  });

const finite = (value: number | undefined): number | null =>
  value !== undefined && Number.isFinite(value) ? value : null;

/** The line a file stands worst on, with its result. */
export function worstOf(
  { results, worstLineKey }: CheckedSweep,
  { lines }: CheckFrame,
): { readonly line: SpecificationLine; readonly result: StoredResult } | null {
  const line = lines.find(({ lineKey }) => lineKey === worstLineKey);
  const result = results.find(({ id }) => id === worstLineKey);
  return line && result ? { line, result } : null;
}
