// The files of a quote as its supplier sees them while it is prepared: what each is of, and how it scores by itself.
import { Op } from "sequelize";
import { Job, MeasurementResult, MeasurementRow, StoredFile, type Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { statedSetup } from "~/forms/quote-setup";
import { evidenceOf, type Evidence } from "~/rf/evidence";
import {
  CORE_VERSION,
  readNumber,
  type Setup,
  type SpecificationLine,
  type StoredResult,
  type Verdict,
} from "~/rf/index";
import { coversRange } from "~/rf/lot-temperature";
import { setupInUse, standingOfSweep, statedOf } from "~/rf/score-sweep";
import { quoteRefusal } from "~/workflow/quote";
import { rfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";
import { findQuote, type FoundQuote } from "./quotes.server";
import { readScoringFrame, setupHash, type ScoringFrame } from "./scoring-sweeps.server";
import { standingOf, worstStanding } from "./worst-line.server";

export interface MeasurementEntry {
  readonly publicId: string;
  readonly fileId: string;
  readonly fileName: string;
  /** Bytes. */
  readonly size: number;
  readonly serial: string | null;
  /** °C, exact decimal text; null where it is not known yet. */
  readonly temperature: string | null;
  readonly points: number;
  /** Hz. */
  readonly sweep: readonly [number, number];
  /** Hz, finest and widest step; null for a file whose steps were not kept, and for a single sample. */
  readonly step: readonly [number, number] | null;
  /** What is stated of this sweep alone; null where the quote's setup counts. */
  readonly setup: Setup | null;
  readonly notes: readonly { readonly severity: "repaired" | "doubtful"; readonly message: string }[];
  /** Worst over the lines it covers; null while it is not scored against this revision with the setup in use. */
  readonly verdict: Verdict | null;
  /** Measured lines it covers by itself, of how many. */
  readonly coverage: { readonly lines: number; readonly of: number } | null;
  readonly worst: WorstEntry | null;
}

export interface WorstEntry {
  readonly lineNumber: string;
  readonly definition: SpecificationLine["definition"];
  /** In the line's unit. */
  readonly margin: number | null;
  readonly value: number | null;
  /** Hz. */
  readonly frequency: number | null;
}

/** What the RFQ asks of the data, and how much of it is there. */
export interface DataAsked {
  readonly units: number;
  readonly unitsAsked: number;
  /** Null where the specification gives no temperature range. */
  readonly overRange: { readonly units: number; readonly asked: number } | null;
  readonly withoutSerial: number;
  readonly withoutTemperature: number;
}

export interface MeasurementList {
  readonly entries: readonly MeasurementEntry[];
  readonly asked: DataAsked;
  readonly evidence: Evidence;
  /** "pending": sweeps without a verdict get one soon; "failed": the worker gave them up. */
  readonly scoring: "done" | "pending" | "failed";
}

/** Files by unit, temperature and name, or null where the person does not see the quote. */
export async function listMeasurements(person: Person, quotePublicId: string): Promise<MeasurementList | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const { quote, rfq } = found;
  const where = { quoteId: quote.id, removedAt: null };
  const [measurements, frame] = await Promise.all([
    MeasurementRow.findAll({ where, order: [["id", "ASC"]], actor: person }),
    readScoringFrame(person, rfq),
  ]);
  const [files, results] = await Promise.all([
    StoredFile.findAll({ where: { id: { [Op.in]: measurements.map(({ fileId }) => fileId) } }, actor: person }),
    MeasurementResult.findAll({
      where: {
        measurementId: { [Op.in]: measurements.map(({ id }) => id) },
        revisionId: frame.revisionId,
        coreVersion: CORE_VERSION,
      },
      actor: person,
    }),
  ]);
  const fileById = new Map(files.map((file) => [file.id, file]));
  const scores = new Map(results.map((result) => [`${result.measurementId} ${result.setupHash}`, result]));
  const stated = statedSetup({ ...quote.draft.values });
  const entries = measurements.flatMap((row) => {
    const file = fileById.get(row.fileId);
    const setup = setupInUse(statedOf(stated, row.setup), rfq.assumedSetup);
    return file ? [entryOf(row, file, scores.get(`${row.id} ${setupHash(setup)}`), frame)] : [];
  });
  return {
    entries: entries.sort(byUnit),
    asked: dataAsked(entries, rfq, frame),
    evidence: deliveredEvidence(measurements, rfq, frame),
    scoring: await scoringOf(found, entries),
  };
}

async function scoringOf({ quote, rfq }: FoundQuote, entries: readonly MeasurementEntry[]) {
  if (entries.every(({ verdict }) => verdict !== null)) return "done";
  const [job, now] = await Promise.all([
    Job.findOne({ where: { kind: "draft-score", key: String(quote.id) } }),
    databaseNow(),
  ]);
  const isOver = quoteRefusal("edit", quote.state, rfqState(rfq, now)) !== null;
  return isOver || job?.state === "failed" ? "failed" : "pending";
}

/** What the RFQ asks for against the sweeps there are. */
function deliveredEvidence(measurements: readonly MeasurementRow[], rfq: Rfq, frame: ScoringFrame): Evidence {
  const { ambient, range, lowestTestFrequency } = frame;
  const asked = {
    units: rfq.unitsAsked,
    unitsOverRange: rfq.unitsOverRange,
    ambient,
    plan: rfq.measurementPlan,
    ...(range === undefined ? {} : { range }),
    ...(lowestTestFrequency === undefined ? {} : { lowestTestFrequency }),
  };
  return evidenceOf(
    asked,
    measurements.map(({ serial, temperature, frequencyFrom, frequencyTo, points, steps }) => ({
      unit: serial,
      temperature: temperature === null ? null : Number(temperature),
      from: frequencyFrom,
      to: frequencyTo,
      points,
      steps,
    })),
  );
}

function byUnit(a: MeasurementEntry, b: MeasurementEntry): number {
  const unit = (a.serial ?? "").localeCompare(b.serial ?? "", "en", { numeric: true });
  const temperature = Number(a.temperature ?? Infinity) - Number(b.temperature ?? Infinity);
  return unit || temperature || a.fileName.localeCompare(b.fileName, "en", { numeric: true });
}

function entryOf(
  row: MeasurementRow,
  file: StoredFile,
  scored: MeasurementResult | undefined,
  frame: ScoringFrame,
): MeasurementEntry {
  const standing = scored && standingOfSweep(scored.results);
  return {
    publicId: row.publicId,
    fileId: file.publicId,
    fileName: file.name,
    size: file.size,
    serial: row.serial,
    temperature: row.temperature,
    points: row.points,
    sweep: [row.frequencyFrom, row.frequencyTo],
    step: stepsOf(row),
    setup: row.setup,
    notes: row.notes.map(({ severity, message }) => ({ severity, message })),
    verdict: standing?.verdict ?? null,
    coverage: standing ? { lines: standing.linesCovered, of: standing.lines } : null,
    worst: standing ? worstEntry(standing.results, frame.lines) : null,
  };
}

function stepsOf({ steps }: MeasurementRow): readonly [number, number] | null {
  if (steps === null || steps.length === 0) return null;
  const widths = steps.map(([, , step]) => step);
  return [Math.min(...widths), Math.max(...widths)];
}

function worstEntry(results: readonly StoredResult[], lines: readonly SpecificationLine[]): WorstEntry | null {
  const byKey = new Map(results.map((result) => [result.id, result]));
  const standings = lines.flatMap((line) => {
    const result = byKey.get(line.lineKey);
    return result ? [standingOf(line, result.verdict, result)] : [];
  });
  const worst = worstStanding(standings);
  const line = lines.find(({ lineKey }) => lineKey === worst?.lineKey);
  const result = line && byKey.get(line.lineKey);
  if (!worst || !line || !result) return null;
  const finite = (value: number) => (Number.isFinite(value) ? value : null);
  return {
    lineNumber: line.lineNumber,
    definition: line.definition,
    margin: worst.margin,
    value: finite(readNumber(result.value)),
    frequency: finite(readNumber(result.frequency)),
  };
}

/** Counts units, and those whose temperatures cover the specification's range. */
export function dataAsked(
  entries: readonly Pick<MeasurementEntry, "serial" | "temperature">[],
  rfq: Pick<Rfq, "unitsAsked" | "unitsOverRange">,
  { range, ambient }: Pick<ScoringFrame, "range" | "ambient">,
): DataAsked {
  const temperatures = new Map<string, number[]>();
  for (const { serial, temperature } of entries) {
    if (serial === null) continue;
    const known = temperatures.get(serial) ?? [];
    temperatures.set(serial, temperature === null ? known : [...known, Number(temperature)]);
  }
  const covering = range && [...temperatures.values()].filter((taken) => coversRange(taken, { range, ambient })).length;
  return {
    units: temperatures.size,
    unitsAsked: rfq.unitsAsked,
    overRange: covering === undefined ? null : { units: covering, asked: rfq.unitsOverRange },
    withoutSerial: entries.filter(({ serial }) => serial === null).length,
    withoutTemperature: entries.filter(({ temperature }) => temperature === null).length,
  };
}
