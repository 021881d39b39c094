// The scored lines of a version as mails show them: requirement, worst point and margin in words.
import { QuoteLineResult } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import type { ResultLine } from "~/emails/index";
import { formatFigure, formatFrequency } from "~/rf/describe";
import { readNumber, type Limit, type SpecificationLine, type StoredResult } from "~/rf/index";
import type { MeasuredDefinition } from "~/rf/line-definition";
import { formatQuantity, MINUS } from "~/rf/quantity";
import type { Transaction } from "sequelize";

type ScoredLine = Pick<QuoteLineResult, "lineKey" | "verdict" | "cells" | "unit" | "temperature" | "reason">;

/** Lines of a version's results in the order of the specification; a line without a result is left out. */
export function resultLines(lines: readonly SpecificationLine[], scored: readonly ScoredLine[]): ResultLine[] {
  const byKey = new Map(scored.map((row) => [row.lineKey, row]));
  return lines.flatMap((line) => {
    const row = byKey.get(line.lineKey);
    return row ? [resultLine(line, row)] : [];
  });
}

/** The same for a version that was scored, read from the database; an actor sees its own quotes alone. */
export async function readResultLines(
  actor: QueryActor,
  versionId: number,
  revisionId: number,
  coreVersion: string,
  lines: readonly SpecificationLine[],
  transaction?: Transaction,
): Promise<ResultLine[]> {
  const where = { versionId, revisionId, coreVersion };
  return resultLines(lines, await QuoteLineResult.findAll({ where, actor, transaction }));
}

function resultLine({ lineNumber, definition }: SpecificationLine, row: ScoredLine): ResultLine {
  const verdict = row.verdict as ResultLine["verdict"];
  if (definition.kind === "declared") {
    const words = { line: lineNumber, requirement: `${definition.name}, ${definition.limit}`, verdict };
    return row.reason === null ? words : { ...words, value: row.reason };
  }
  const words = { line: lineNumber, requirement: requirementWords(definition), verdict };
  const worst = worstResult(row);
  const value = worst ? readNumber(worst.value) : NaN;
  if (!worst || Number.isNaN(value)) return words;
  const frequency = readNumber(worst.frequency);
  const margin = readNumber(worst.margin);
  return {
    ...words,
    value: `${formatFigure(value, definition.kind)}${conditions(row)}`,
    ...(Number.isFinite(frequency) ? { frequency: frequencyWords(frequency) } : {}),
    ...(Number.isFinite(margin) ? { margin: signed(margin, definition.kind) } : {}),
  };
}

const frequencyWords = (hz: number): string => formatFrequency(Math.round(hz));

/** The cell the roll-up reports. */
export function worstResult({ cells, unit, temperature }: ScoredLine): StoredResult | undefined {
  if (unit === null || temperature === null) return undefined;
  return cells.find((cell) => cell.scored && cell.unit === unit && cell.temperature === Number(temperature))?.result;
}

const conditions = ({ unit, temperature }: ScoredLine): string =>
  unit === null || temperature === null ? "" : ` (${unit}, ${formatQuantity(Number(temperature), "temperature")})`;

function signed(margin: number, kind: MeasuredDefinition["kind"]): string {
  const figure = formatFigure(Math.abs(margin), kind);
  return `${margin < 0 ? MINUS : "+"}${figure}`;
}

const NAMES: Record<MeasuredDefinition["kind"], string> = {
  "insertion-loss": "Insertion loss",
  ripple: "Ripple",
  rejection: "Rejection",
  "return-loss": "Return loss",
  "reverse-isolation": "Reverse isolation",
  "group-delay": "Group delay",
  "group-delay-variation": "Group delay variation",
  "phase-linearity": "Phase linearity",
  "centre-frequency": "Centre frequency",
  bandwidth: "Bandwidth",
  "shape-factor": "Shape factor",
};

function requirementWords(definition: MeasuredDefinition): string {
  const port = definition.kind === "return-loss" ? `, port ${definition.port}` : "";
  const relative = definition.kind === "rejection" && definition.relativeTo ? ", relative" : "";
  return `${NAMES[definition.kind]}${port}${relative}, ${limitWords(definition)}`;
}

function limitWords(definition: MeasuredDefinition): string {
  const figure = (value: number) => formatFigure(value, definition.kind);
  switch (definition.kind) {
    case "insertion-loss":
    case "ripple":
      return `max ${levels(definition.max)}`;
    case "rejection":
    case "return-loss":
    case "reverse-isolation":
      return `min ${levels(definition.min)}`;
    case "centre-frequency":
      return `${figure(definition.nominal)} ± ${figure(definition.tolerance)}`;
    case "bandwidth":
      return [
        ...(definition.min === undefined ? [] : [`min ${figure(definition.min)}`]),
        ...(definition.max === undefined ? [] : [`max ${figure(definition.max)}`]),
      ].join(", ");
    default:
      return `max ${figure(definition.max)}`;
  }
}

function levels(limit: Limit): string {
  const values = typeof limit === "number" ? [limit] : limit.points.map(([, level]) => level);
  const distinct = values.filter((value, index) => value !== values[index - 1]);
  return `${distinct.map((value) => formatQuantity(value, "plain")).join(" to ")} dB`;
}
