// The results of a submitted quote: each line over units and temperatures, and what the data does not show.
import { Op } from "sequelize";
import { MeasurementRow, QuoteDeclaration, VersionMeasurement, type QuoteVersion, type Rfq } from "~/db/models";
import type { LineVerdict } from "~/emails/index";
import { mergeSetup } from "~/rf/assumed-setup";
import { readCell, type Cell, type Note, type RequirementDefinition, type Setup } from "~/rf/index";
import type { Person } from "./person.server";
import { lineVerdict, readScores, type QuoteScore } from "./quote-scores.server";
import { readSpecificationView } from "./specification-view.server";
import { findSubmittedQuote, headOf, type SubmittedQuoteHead } from "./submitted-quotes.server";

export interface QuoteLine {
  readonly lineKey: string;
  /** "3.1" */
  readonly lineNumber: string;
  readonly definition: RequirementDefinition;
  readonly verdict: LineVerdict;
  /** Unit (serial) and temperature (°C) of the reported cell; null where none was scored. */
  readonly unit: string | null;
  readonly temperature: number | null;
  /** In parts of full credit; null where there is no margin. */
  readonly creditedMargin: number | null;
  readonly cells: readonly Cell[];
  readonly reason: string | null;
  /** What the supplier declares; null for measured lines. */
  readonly declaration: { readonly answer: "comply" | "exception"; readonly text: string | null } | null;
}

/** The columns of one unit, by temperature. */
export interface UnitColumns {
  readonly unit: string;
  readonly temperatures: readonly { readonly celsius: number; readonly predicted: boolean }[];
}

/** One doubt about the data, with each sweep it was raised on. */
export interface DataNote {
  readonly code: string;
  readonly severity: Note["severity"];
  readonly lineNumber: string | null;
  readonly places: readonly { readonly unit: string; readonly celsius: number; readonly message: string }[];
}

export interface QuoteEvidence {
  readonly unitsAsked: number;
  readonly unitsOverRangeAsked: number;
  readonly units: number;
  readonly unitsOverRange: number;
  readonly temperatures: number;
  /** Fields of the measurement setup the supplier did not state for every sweep. */
  readonly assumed: readonly (keyof Setup)[];
}

export interface QuoteResults {
  readonly head: SubmittedQuoteHead;
  /** In their order. Empty until the version is scored. */
  readonly lines: readonly QuoteLine[];
  readonly units: readonly UnitColumns[];
  readonly notes: readonly DataNote[];
  readonly evidence: QuoteEvidence | null;
  /** Of the line that decides; null until the version is scored. */
  readonly worstLineKey: string | null;
  /** Hz; for the words of a band from DC. */
  readonly lowestTestFrequency: number | null;
}

/** The results of a quote's current version, or null where the person does not see it. */
export async function readQuoteResults(person: Person, quotePublicId: string): Promise<QuoteResults | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const { version, rfq } = found;
  const [scores, specification, declarations, sweeps] = await Promise.all([
    readScores(person, [version]),
    readSpecificationView(person, version.revisionId),
    QuoteDeclaration.findAll({ where: { versionId: version.id }, actor: person }),
    readVersionSweeps(person, version.id),
  ]);
  const score = scores.get(version.id);
  const answers = new Map(declarations.map((row) => [row.lineKey, { answer: row.answer, text: row.text }]));
  const numbers = new Map(specification?.lines.map(({ lineKey, lineNumber }) => [lineKey, lineNumber]));
  const lines = (score && specification ? specification.lines : []).flatMap((line): QuoteLine[] => {
    const result = score?.lines.get(line.lineKey);
    if (!result) return [];
    return [
      {
        ...line,
        verdict: lineVerdict(result.verdict),
        unit: result.unit,
        temperature: result.temperature === null ? null : Number(result.temperature),
        creditedMargin: result.creditedMargin,
        cells: result.cells.map(readCell),
        reason: result.reason,
        declaration: answers.get(line.lineKey) ?? null,
      },
    ];
  });
  return {
    head: await headOf(person, found, score),
    lines,
    units: unitColumns(lines),
    notes: notesOf(sweeps, numbers),
    evidence: score ? evidenceOf(score, rfq, version, sweeps) : null,
    worstLineKey: score?.summary.worstLineKey ?? null,
    lowestTestFrequency: specification?.lowestTestFrequency ?? null,
  };
}

/** The sweeps of a version, by unit and temperature. */
export async function readVersionSweeps(person: Person, versionId: number): Promise<MeasurementRow[]> {
  const links = await VersionMeasurement.findAll({ where: { versionId }, actor: person });
  const sweeps = await MeasurementRow.findAll({
    where: { id: { [Op.in]: links.map(({ measurementId }) => measurementId) } },
    actor: person,
  });
  return sweeps.sort(
    (a, b) =>
      compareNames(a.serial ?? "", b.serial ?? "") || Number(a.temperature) - Number(b.temperature) || a.id - b.id,
  );
}

const names = new Intl.Collator("en", { numeric: true });
const compareNames = (a: string, b: string): number => names.compare(a, b);

/** Every unit and temperature any line has a cell for, in their order. */
export function unitColumns(lines: readonly Pick<QuoteLine, "cells">[]): UnitColumns[] {
  const units = new Map<string, Map<number, boolean>>();
  for (const { unit, temperature, predicted } of lines.flatMap(({ cells }) => cells)) {
    const columns = units.get(unit) ?? new Map<number, boolean>();
    columns.set(temperature, predicted && (columns.get(temperature) ?? true));
    units.set(unit, columns);
  }
  return [...units]
    .sort(([a], [b]) => compareNames(a, b))
    .map(([unit, columns]) => ({
      unit,
      temperatures: [...columns].sort(([a], [b]) => a - b).map(([celsius, predicted]) => ({ celsius, predicted })),
    }));
}

/** Notes on the sweeps, those that say the same of several sweeps as one. */
function notesOf(sweeps: readonly MeasurementRow[], numbers: ReadonlyMap<string, string>): DataNote[] {
  const notes = new Map<string, { note: Note; places: DataNote["places"][number][] }>();
  for (const sweep of sweeps)
    for (const note of sweep.notes) {
      const key = `${note.code} ${note.requirementId ?? ""}`;
      const known = notes.get(key) ?? { note, places: [] };
      known.places.push({ unit: sweep.serial ?? "", celsius: Number(sweep.temperature), message: note.message });
      notes.set(key, known);
    }
  return [...notes.values()].map(({ note, places }) => ({
    code: note.code,
    severity: note.severity,
    lineNumber: note.requirementId === undefined ? null : (numbers.get(note.requirementId) ?? null),
    places,
  }));
}

function evidenceOf(
  { summary }: QuoteScore,
  rfq: Rfq,
  version: QuoteVersion,
  sweeps: readonly MeasurementRow[],
): QuoteEvidence {
  const assumed = sweeps.flatMap(({ setup }) => [
    ...mergeSetup({ ...version.setup, ...(setup ?? {}) }, rfq.assumedSetup).assumed,
  ]);
  return {
    unitsAsked: rfq.unitsAsked,
    unitsOverRangeAsked: rfq.unitsOverRange,
    units: summary.units,
    unitsOverRange: summary.unitsOverRange,
    temperatures: summary.temperatures,
    assumed: [...new Set(assumed)],
  };
}
