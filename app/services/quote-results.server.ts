// The results of a submitted quote: each line over units and temperatures, and what the data does not show.
import { Op } from "sequelize";
import {
  MeasurementRow,
  QuoteDeclaration,
  StoredFile,
  VersionMeasurement,
  type QuoteVersion,
  type Rfq,
} from "~/db/models";
import type { LineVerdict } from "~/emails/index";
import { mergeSetup } from "~/rf/assumed-setup";
import { evidenceOf, type Evidence } from "~/rf/evidence";
import {
  readCell,
  type Cell,
  type Note,
  type RequirementDefinition,
  type Setup,
  type SpecificationLine,
} from "~/rf/index";
import { unitsAlike, type LotNote } from "~/rf/lot-notes";
import { statedOf } from "~/rf/score-sweep";
import type { Person } from "./person.server";
import { lineVerdict, readScores, type QuoteScore } from "./quote-scores.server";
import { readSpecificationView, type SpecificationView } from "./specification-view.server";
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

/** One doubt about the data, with each sweep, measurement or unit it was raised on. */
export interface DataNote {
  readonly code: string;
  readonly severity: Note["severity"];
  readonly lineNumber: string | null;
  readonly places: readonly NotePlace[];
}

export interface NotePlace {
  readonly unit: string;
  /** Null for a note on a unit at all temperatures. */
  readonly celsius: number | null;
  /** Names of the files, where it is about several. */
  readonly files?: readonly string[];
  readonly message: string;
}

export interface QuoteEvidence {
  readonly units: number;
  readonly temperatures: number;
  /** What was asked, delivered and missing. */
  readonly grid: Evidence;
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
  /** Ohm, port 1 and port 2 of the specification; null until the version is scored. */
  readonly impedances: readonly [number, number] | null;
}

/** The results of a quote's current version, or null where the person does not see it. */
export async function readQuoteResults(person: Person, quotePublicId: string): Promise<QuoteResults | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const { version, rfq } = found;
  const score = (await readScores(person, [version])).get(version.id);
  // Of the revision the figures speak of, which after an amendment need not be the one the version was submitted to.
  const [specification, declarations, sweeps] = await Promise.all([
    readSpecificationView(person, score?.summary.revisionId ?? version.revisionId),
    QuoteDeclaration.findAll({ where: { versionId: version.id }, actor: person }),
    readVersionSweeps(person, version.id),
  ]);
  const answers = new Map(declarations.map((row) => [row.lineKey, { answer: row.answer, text: row.text }]));
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
    notes: [
      ...(await lotNotesOf(person, score?.summary.notes ?? [], sweeps)),
      ...notesOf(sweeps, specification?.lines ?? []),
    ],
    evidence: score && specification ? quoteEvidenceOf(score, rfq, version, specification, sweeps) : null,
    worstLineKey: score?.summary.worstLineKey ?? null,
    lowestTestFrequency: specification?.lowestTestFrequency ?? null,
    impedances: specification?.impedances ?? null,
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

/** Notes on how finely a line's band was sampled. */
const SAMPLING: readonly Note["code"][] = ["wide-step", "few-samples"];

/** Whether another sweep of the measurement shows the note's line as finely as this one should: a wide sweep beside a fine one is as usual. */
function isAnswered(
  note: Note,
  sweep: MeasurementRow,
  sweeps: readonly MeasurementRow[],
  lines: readonly SpecificationLine[],
) {
  const definition = lines.find(({ lineKey }) => lineKey === note.requirementId)?.definition;
  if (!SAMPLING.includes(note.code) || !definition || !("band" in definition)) return false;
  const [from, to] = definition.band;
  return sweeps.some(
    (other) =>
      other.id !== sweep.id &&
      other.serial === sweep.serial &&
      other.temperature === sweep.temperature &&
      other.frequencyFrom <= from &&
      other.frequencyTo >= to &&
      !other.notes.some(({ code, requirementId }) => code === note.code && requirementId === note.requirementId),
  );
}

/** Notes on the sweeps, those that say the same of several sweeps as one. */
function notesOf(sweeps: readonly MeasurementRow[], lines: readonly SpecificationLine[]): DataNote[] {
  const numbers = new Map(lines.map(({ lineKey, lineNumber }) => [lineKey, lineNumber]));
  const notes = new Map<string, { note: Note; places: DataNote["places"][number][] }>();
  for (const sweep of sweeps)
    for (const note of sweep.notes) {
      if (isAnswered(note, sweep, sweeps, lines)) continue;
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

/** Notes on the lot, those of a kind as one, with the names of the files that they are about. */
async function lotNotesOf(
  person: Person,
  notes: readonly LotNote[],
  sweeps: readonly MeasurementRow[],
): Promise<DataNote[]> {
  const named = new Set(notes.flatMap(({ sweepIds }) => sweepIds ?? []));
  const rows = sweeps.filter(({ publicId }) => named.has(publicId));
  const files = await StoredFile.findAll({
    where: { id: { [Op.in]: rows.map(({ fileId }) => fileId) } },
    attributes: ["id", "name"],
    actor: person,
  });
  const fileNames = new Map(files.map(({ id, name }) => [id, name]));
  const nameOf = new Map(rows.map(({ publicId, fileId }) => [publicId, fileNames.get(fileId)]));
  const placeOf = ({ unit, temperature, message, sweepIds = [] }: LotNote): NotePlace => ({
    unit,
    celsius: temperature ?? null,
    message,
    files: sweepIds.flatMap((id) => nameOf.get(id) ?? []),
  });
  return [...new Set(notes.map(({ code }) => code))].map((code) => ({
    code,
    severity: "doubtful",
    lineNumber: null,
    places: notes.filter((note) => note.code === code).map(placeOf),
  }));
}

function quoteEvidenceOf(
  { summary }: QuoteScore,
  rfq: Rfq,
  version: QuoteVersion,
  { ambient, temperatureRange, lowestTestFrequency }: SpecificationView,
  sweeps: readonly MeasurementRow[],
): QuoteEvidence {
  const assumed = sweeps.flatMap(({ setup }) => [
    ...mergeSetup(statedOf(version.setup, setup), rfq.assumedSetup).assumed,
  ]);
  const asked = {
    units: rfq.unitsAsked,
    unitsOverRange: rfq.unitsOverRange,
    ambient,
    plan: rfq.measurementPlan,
    basis: version.basis,
    ...(temperatureRange === null ? {} : { range: temperatureRange }),
    ...(lowestTestFrequency === null ? {} : { lowestTestFrequency }),
  };
  return {
    units: summary.units,
    temperatures: summary.temperatures,
    grid: evidenceOf(asked, sweeps.map(deliveredSweep), unitsAlike(summary.notes)),
    assumed: [...new Set(assumed)],
  };
}

/** A stored sweep as the evidence grid counts it. */
export const deliveredSweep = ({ serial, temperature, frequencyFrom, frequencyTo, points, steps }: MeasurementRow) => ({
  unit: serial,
  temperature: temperature === null ? null : Number(temperature),
  from: frequencyFrom,
  to: frequencyTo,
  points,
  steps,
});
