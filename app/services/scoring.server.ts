// Scores a submitted version: every line over all units and temperatures, the summary that lists read, and what that sets off.
import type { Transaction } from "sequelize";
import {
  MeasurementRow,
  Quote,
  QuoteDeclaration,
  QuoteLineResult,
  QuoteSummary,
  QuoteVersion,
  Rfq,
  SpecificationRevision,
  VersionMeasurement,
} from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { CORE_VERSION, evaluateLot, type Measurement } from "~/rf/index";
import { checkLot, type LotNote } from "~/rf/lot-notes";
import { lotOptionsOf, statedOf } from "~/rf/score-sweep";
import { isRescored } from "~/workflow/rescoring";
import { recordEvent } from "./audit.server";
import type { JobPayloads, Report } from "./jobs.server";
import type { MeasuredNetwork } from "./measured-networks.server";
import { resultLines } from "./result-lines.server";
import { mailResults } from "./scoring-mails.server";
import { lineColumns, summarise, type LineColumns, type Summary } from "./scoring-summary.server";
import { readScoringFrame, scoreEachSweep, type ScoredSweep, type ScoringFrame } from "./scoring-sweeps.server";
import { canonicalJson } from "./specification-release.server";
import { inTransaction } from "./transaction.server";

interface Subject {
  readonly version: QuoteVersion;
  readonly quote: Quote;
  readonly rfq: Rfq;
  readonly frame: ScoringFrame;
  readonly coreVersion: string;
}

const unheard: Report = () => Promise.resolve();

/**
 * Scores a version against the revision it was submitted to and stores what came out; run again it leaves the same. The first
 * score of a version is mailed and recorded in the transaction that stores it. Figures come from the bytes as uploaded.
 *
 * @param report told how many of the version's files are done
 */
export async function scoreVersion(
  versionId: number,
  report: Report = unheard,
  coreVersion: string = CORE_VERSION,
): Promise<void> {
  const { revisionId } = await QuoteVersion.findByPk(versionId, { actor: SYSTEM, rejectOnEmpty: true });
  const subject = await readSubject({ versionId, revisionId, coreVersion });
  await score(subject, report, () => Promise.resolve(true));
}

/**
 * Scores a version again, for another revision or another core. Nothing comes of it where that has become pointless: the RFQ
 * moved on, was decided or cancelled, or the quote was withdrawn or submitted again; asked before, and again while the RFQ is
 * held, so that the figures a decision was taken by stay.
 */
export async function rescoreVersion(
  { versionId, revisionId }: Pick<JobPayloads["rescore"], "versionId" | "revisionId">,
  report: Report = unheard,
  coreVersion: string = CORE_VERSION,
): Promise<void> {
  const subject = await readSubject({ versionId, revisionId, coreVersion });
  const { version, quote, rfq, frame } = subject;
  if (!isRescored(version.id, quote, rfq) || rfq.revisionId !== frame.revisionId) return;
  const where = { versionId: version.id, revisionId: frame.revisionId, coreVersion };
  if ((await QuoteSummary.count({ where, actor: SYSTEM })) > 0) return;
  await score(subject, report, async (transaction) => {
    const system = { actor: SYSTEM, transaction, rejectOnEmpty: true } as const;
    const held = await Rfq.findByPk(rfq.id, { ...system, lock: transaction.LOCK.SHARE });
    const now = await Quote.findByPk(quote.id, system);
    return isRescored(version.id, now, held) && held.revisionId === frame.revisionId;
  });
}

async function readSubject({ versionId, revisionId, coreVersion }: JobPayloads["rescore"]): Promise<Subject> {
  const system = { actor: SYSTEM, rejectOnEmpty: true } as const;
  const version = await QuoteVersion.findByPk(versionId, system);
  const [quote, rfq] = await Promise.all([
    Quote.findByPk(version.quoteId, system),
    Rfq.findByPk(version.rfqId, system),
  ]);
  const frame = await readScoringFrame(SYSTEM, { revisionId, measurementPlan: rfq.measurementPlan });
  return { version, quote, rfq, frame, coreVersion };
}

/** @param isWanted asked in the transaction that stores, before it locks the quote */
async function score(
  subject: Subject,
  report: Report,
  isWanted: (transaction: Transaction) => Promise<boolean>,
): Promise<void> {
  const sweeps = await scoredSweeps(subject, report);
  const scores = await computeScores(subject, sweeps);
  await inTransaction(async (transaction) => {
    if (await isWanted(transaction)) await storeScores(subject, sweeps, scores, transaction);
  });
}

async function scoredSweeps({ version, rfq, frame, coreVersion }: Subject, report: Report): Promise<ScoredSweep[]> {
  const links = await VersionMeasurement.findAll({
    where: { versionId: version.id },
    order: [["measurementId", "ASC"]],
    actor: SYSTEM,
  });
  const ids = links.map(({ measurementId }) => measurementId);
  const scoring = { frame, stated: version.setup, assumedSetup: rfq.assumedSetup, coreVersion };
  const sweeps: ScoredSweep[] = [];
  for await (const sweep of scoreEachSweep(ids, scoring, report)) sweeps.push(sweep);
  return sweeps;
}

/** What a version's scoring stores. */
interface Scores {
  readonly results: readonly LineColumns[];
  readonly summary: Summary;
  readonly notes: readonly LotNote[];
}

/** All that takes long, done before anything is locked: whoever submits to the same RFQ meanwhile does not wait for it. */
async function computeScores({ version, rfq, frame }: Subject, sweeps: readonly ScoredSweep[]): Promise<Scores> {
  const declarations = await QuoteDeclaration.findAll({ where: { versionId: version.id }, actor: SYSTEM });
  const lot = lotOf(version, sweeps);
  const options = { ...lotOptionsOf(frame, rfq, version.drift), basis: version.basis };
  const results = lineColumns(frame, evaluateLot(lot, frame.requirements, options), declarations);
  const counted = sweeps.map((sweep) => ({ ...placeOf(sweep), network: sweep.network }));
  return {
    results,
    summary: summarise(frame, rfq.decisionRule, counted, results),
    notes: checkLot(lot, { impedance: frame.impedance, assumedSetup: rfq.assumedSetup }),
  };
}

const placeOf = ({ measurement }: MeasuredNetwork) => ({
  unit: measurement.serial ?? "",
  temperature: Number(measurement.temperature),
});

/** A sweep goes by its measurement's public id, so that a cell leads to its file. */
const lotOf = ({ setup }: QuoteVersion, sweeps: readonly MeasuredNetwork[]): Measurement[] =>
  sweeps.map((sweep) => {
    const { publicId, setup: own } = sweep.measurement;
    return { ...placeOf(sweep), sweeps: [{ id: publicId, network: sweep.network, setup: statedOf(setup, own) }] };
  });

async function storeScores(
  subject: Subject,
  sweeps: readonly ScoredSweep[],
  { results, summary, notes }: Scores,
  transaction: Transaction,
): Promise<void> {
  const { version, frame, coreVersion } = subject;
  const system = { actor: SYSTEM, transaction } as const;
  await storeSweepNotes(version, sweeps, transaction);
  // Two workers that score the same version stand in line here.
  await QuoteVersion.findByPk(version.id, { ...system, lock: transaction.LOCK.UPDATE });
  const earlier = await QuoteSummary.findAll({
    where: { versionId: version.id },
    order: [["createdAt", "ASC"]],
    ...system,
  });
  const key = { versionId: version.id, revisionId: frame.revisionId, coreVersion };
  const now = await databaseNow(transaction);
  await QuoteLineResult.destroy({ where: key, ...system });
  await QuoteSummary.destroy({ where: key, ...system });
  const own = { ...key, ...tenantsOf(version) };
  const columns = results.map(({ standing: _, ...line }) => ({ ...own, ...line }));
  await QuoteLineResult.bulkCreate(columns, { transaction });
  await QuoteSummary.create({ ...own, ...summary, notes, createdAt: now }, { transaction });
  if (earlier.length === 0) await tellFirstScore(subject, summary, results, now, transaction);
  else await recordRescore(subject, summary, earlier, now, transaction);
}

/** The notes of sweeps are shown beside the figures of the quote's current version: they come with those, and of no other version. */
async function storeSweepNotes(
  version: QuoteVersion,
  sweeps: readonly ScoredSweep[],
  transaction: Transaction,
): Promise<void> {
  const system = { actor: SYSTEM, transaction } as const;
  const held = await Quote.findByPk(version.quoteId, { ...system, lock: transaction.LOCK.SHARE, rejectOnEmpty: true });
  if (held.currentVersionId !== version.id) return;
  for (const { measurement, notes } of sweeps)
    if (canonicalJson(notes) !== canonicalJson(measurement.notes))
      await MeasurementRow.update({ notes }, { where: { id: measurement.id }, ...system });
}

const tenantsOf = ({ buyerOrganisationId, supplierOrganisationId }: QuoteVersion) => ({
  buyerOrganisationId,
  supplierOrganisationId,
});

const about = ({ version, quote, rfq }: Subject) => ({
  subject: "quote",
  ...tenantsOf(version),
  rfqId: rfq.id,
  quoteId: quote.id,
});

const outcomeOf = ({ version, coreVersion }: Subject, { verdict, conforming }: Summary) => ({
  version: version.number,
  verdict,
  conforming,
  coreVersion,
});

async function tellFirstScore(
  subject: Subject,
  summary: Summary,
  results: readonly LineColumns[],
  now: Date,
  transaction: Transaction,
): Promise<void> {
  await mailResults(subject, summary, resultLines(subject.frame.lines, results), now, transaction);
  const detail = outcomeOf(subject, summary);
  await recordEvent(null, now, { action: "scored", ...about(subject), detail }, transaction);
}

/** The figures that were shown until now, and the new ones; nothing where the same scoring ran twice. */
async function recordRescore(
  subject: Subject,
  summary: Summary,
  earlier: readonly QuoteSummary[],
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const { frame, coreVersion } = subject;
  const isSame = (other: QuoteSummary) => other.revisionId === frame.revisionId && other.coreVersion === coreVersion;
  const last = earlier.at(-1);
  if (!last || earlier.some(isSame)) return;
  const letter = async (id: number) =>
    (await SpecificationRevision.findByPk(id, { actor: SYSTEM, transaction, rejectOnEmpty: true })).letter;
  const detail = {
    ...outcomeOf(subject, summary),
    revision: await letter(frame.revisionId),
    previousVerdict: last.verdict,
    previousConforming: last.conforming,
    previousCoreVersion: last.coreVersion,
    previousRevision: await letter(last.revisionId),
  };
  await recordEvent(null, now, { action: "rescored", ...about(subject), detail }, transaction);
}
