// What is missing of the asked evidence, one sentence each.
import type { Band } from "./contract.ts";
import { formatFrequency } from "./describe.ts";
import type { EvidenceAsked, EvidenceCell, EvidenceColumn, EvidenceRow, SweepGap } from "./evidence-types.ts";
import { celsiusList, listed } from "./lot-words.ts";
import { formatBand } from "./quantity.ts";

export interface Counted {
  readonly asked: EvidenceAsked;
  readonly columns: readonly EvidenceColumn[];
  readonly rows: readonly EvidenceRow[];
  /** Files without a unit or a temperature. */
  readonly unplaced: number;
  /** Units that cover the range. */
  readonly covering: number;
}

/** Stretches named in a sentence. */
const MOST_NAMED = 6;

/** Units in all, units over temperature, then each measurement that is missing or incomplete, then files without a place. */
export function inWords({ asked, columns, rows, unplaced, covering }: Counted): string[] {
  const delivered = rows.filter(({ unit }) => unit !== null);
  const { units, unitsOverRange: over, range } = asked;
  return [
    ...(delivered.length < units ? [`${counted(units, "unit")} asked, ${count(delivered.length)} measured.`] : []),
    ...(range !== undefined && covering < over
      ? [
          `${counted(over, "unit")} over temperature asked (${overWords(columns)}), ${count(covering)} measured${basisWords(asked)}.`,
        ]
      : []),
    ...placeSentences(delivered, columns),
    ...delivered.flatMap(({ unit, copies }) =>
      copies.length === 0
        ? []
        : [`Units ${listed([unit ?? "", ...copies])} have the same data: they count as one unit.`],
    ),
    ...(unplaced === 0
      ? []
      : [
          `${counted(unplaced, "file")} without a unit or a temperature ${unplaced === 1 ? "counts" : "count"} for nothing.`,
        ]),
  ];
}

function basisWords({ basis = "measured" }: EvidenceAsked): string {
  if (basis === "measured") return "";
  return `: data of a ${basis === "similar" ? "similar part" : "simulation"} does not count`;
}

/** "−30, +25 and +70 °C": what a unit over temperature is asked at. */
const overWords = (columns: readonly EvidenceColumn[]): string =>
  celsiusList(columns.filter(({ roles }) => roles.length > 0).map(({ celsius }) => celsius));

/** Places that lack the same are told together: temperatures of a unit, then units. */
function placeSentences(rows: readonly EvidenceRow[], columns: readonly EvidenceColumn[]): string[] {
  const byLack = new Map<string, Map<string, number[]>>();
  for (const { unit, cells } of rows)
    cells.forEach((cell, at) => {
      const words = lackWords(cell);
      if (words === null) return;
      const units = byLack.get(words) ?? new Map<string, number[]>();
      units.set(unit ?? "", [...(units.get(unit ?? "") ?? []), columns[at]?.celsius ?? NaN]);
      byLack.set(words, units);
    });
  return [...byLack].flatMap(([words, units]) => {
    const byPlaces = new Map<string, string[]>();
    for (const [unit, temperatures] of units) {
      const places = celsiusList(temperatures);
      byPlaces.set(places, [...(byPlaces.get(places) ?? []), unit]);
    }
    return [...byPlaces].map(
      ([places, named]) => `${named.length === 1 ? "Unit" : "Units"} ${listed(named)} at ${places}: ${words}.`,
    );
  });
}

/** What a cell lacks; null where it lacks nothing. */
export function lackWords({ state, gaps, apart }: EvidenceCell): string | null {
  if (state === "missing") return "no measurement";
  if (state !== "partly") return null;
  const words = gaps.map(gapWords).join("; ");
  if (apart === undefined) return words;
  return `${words}; its sweeps at ${celsiusList(apart)} are measurements of their own`;
}

function gapWords({ planned, kind, stretches, step }: SweepGap): string {
  const where = bandsInWords(stretches);
  if (kind === "not-reached") return `${where} not swept`;
  if (kind === "step-unknown") return `the steps over ${where} were not kept`;
  const found = step === undefined ? "" : ` of up to ${hertz(step)}`;
  return `${where} in steps${found}, ${hertz(planned.maxStep)} asked`;
}

function bandsInWords(stretches: readonly Band[]): string {
  const words = stretches.slice(0, MOST_NAMED).map(([from, to]) => formatBand([tidy(from), tidy(to)]));
  return stretches.length > MOST_NAMED
    ? `${words.join(", ")} and ${stretches.length - MOST_NAMED} more stretches`
    : listed(words);
}

const tidy = (hz: number): number => Number(hz.toPrecision(12));

/** A step in the digits that matter: a difference of two frequencies carries their rounding. */
const hertz = (step: number): string => formatFrequency(Number(step.toPrecision(6)));

const counted = (number: number, noun: string): string => `${number} ${noun}${number === 1 ? "" : "s"}`;
const count = (number: number): string => (number === 0 ? "none" : String(number));
