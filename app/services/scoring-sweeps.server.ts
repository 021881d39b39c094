// What measured sweeps are scored against, and the packed results of one sweep by itself, stored as soon as they are there.
import type { Transaction } from "sequelize";
import { MeasurementResult, MeasurementRow, Quote, SpecificationRevision, type Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM, type QueryActor } from "~/db/scoping";
import { CORE_VERSION, measuredRequirements, type Note, type Setup, type SpecificationLine } from "~/rf/index";
import { withPlannedSteps } from "~/rf/measurement-plan";
import { scoreSweep, setupInUse, statedOf, sweepNotes, type EvaluationFrame, type SweepScore } from "~/rf/score-sweep";
import { sha256 } from "./identifiers.server";
import type { Report } from "./jobs.server";
import { log } from "./log.server";
import { eachNetwork, type MeasuredNetwork } from "./measured-networks.server";
import { canonicalJson } from "./specification-release.server";
import { readLines } from "./specification-lines.server";
import { inTransaction } from "./transaction.server";

/** A revision as the evaluation takes it, with the steps that the RFQ asks for. */
export interface ScoringFrame extends EvaluationFrame {
  readonly revisionId: number;
  /** Measured and declared, in their order. */
  readonly lines: readonly SpecificationLine[];
}

/** Throws where the actor does not see the revision. */
export async function readScoringFrame(
  actor: QueryActor,
  { revisionId, measurementPlan }: Pick<Rfq, "revisionId" | "measurementPlan">,
): Promise<ScoringFrame> {
  const [revision, lines] = await Promise.all([
    SpecificationRevision.findByPk(revisionId, { actor, rejectOnEmpty: true }),
    readLines(actor, revisionId),
  ]);
  const { temperatureFrom: from, temperatureTo: to, lowestTestFrequency } = revision;
  return {
    revisionId,
    lines,
    requirements: withPlannedSteps(measuredRequirements(lines), measurementPlan, lowestTestFrequency ?? 0),
    impedance: [revision.impedance1, revision.impedance2],
    ambient: revision.ambient,
    ...(from === null || to === null ? {} : { range: [from, to] as const }),
    ...(lowestTestFrequency === null ? {} : { lowestTestFrequency }),
  };
}

/** Names a setup in the key of stored results: 32 hexadecimal digits. */
export const setupHash = (setup: Setup): string => sha256(canonicalJson(setup)).toString("hex").slice(0, 32);

type Owner = Pick<MeasurementRow, "id" | "buyerOrganisationId" | "supplierOrganisationId">;

/** The stored row of a sweep's score. */
const resultRow = (
  owner: Owner,
  revisionId: number,
  coreVersion: string,
  setup: Setup,
  score: SweepScore,
  now: Date,
) => ({
  buyerOrganisationId: owner.buyerOrganisationId,
  supplierOrganisationId: owner.supplierOrganisationId,
  measurementId: owner.id,
  revisionId,
  coreVersion,
  setupHash: setupHash(setup),
  results: [...score.results],
  verdict: score.verdict,
  createdAt: now,
});

export const storeSweepScore = (
  owner: Owner,
  frame: ScoringFrame,
  setup: Setup,
  score: SweepScore,
  now: Date,
  transaction: Transaction,
): Promise<MeasurementResult> =>
  MeasurementResult.create(resultRow(owner, frame.revisionId, CORE_VERSION, setup, score, now), { transaction });

/** What the sweeps of a version, or of a draft, are scored by. */
export interface SweepScoring {
  readonly frame: ScoringFrame;
  /** What the quote states of all its sweeps. */
  readonly stated: Setup;
  readonly assumedSetup: Setup;
  readonly coreVersion: string;
}

/** A sweep whose results are stored. */
export interface ScoredSweep extends MeasuredNetwork {
  /** Of the setup in use, from which they follow like the results: kept by whom the sweep is scored for. */
  readonly notes: Note[];
}

/**
 * The sweeps one by one, each scored by itself before it is given on; one that was taken out meanwhile is left out. What is stored
 * already is not evaluated again: a worker that takes over where another was killed goes on behind the last sweep that one finished.
 *
 * @param report told how many sweeps are done
 */
export async function* scoreEachSweep(
  measurementIds: readonly number[],
  scoring: SweepScoring,
  report: Report,
): AsyncGenerator<ScoredSweep, void> {
  const stored = await readStoredKeys(measurementIds, scoring);
  const total = measurementIds.length;
  await report(0, total);
  let done = 0;
  for (const id of measurementIds) {
    const sweep = await readSweep(id);
    const notes = sweep && (await scoreStoredSweep(sweep, scoring, stored));
    await report((done += 1), total);
    if (sweep && notes) yield { ...sweep, notes };
  }
}

/** Undefined for a sweep that is gone, or goes while it is read: a file of a draft can be taken out at any moment. */
async function readSweep(id: number): Promise<MeasuredNetwork | undefined> {
  try {
    for await (const sweep of eachNetwork(SYSTEM, [id])) return sweep;
  } catch (error) {
    if ((await MeasurementRow.count({ where: { id }, actor: SYSTEM })) > 0) throw error;
  }
  return undefined;
}

const keyOf = (measurementId: number, hash: string): string => `${measurementId} ${hash}`;

async function readStoredKeys(measurementIds: readonly number[], { frame, coreVersion }: SweepScoring) {
  const rows = await MeasurementResult.findAll({
    where: { measurementId: [...measurementIds], revisionId: frame.revisionId, coreVersion },
    attributes: ["measurementId", "setupHash"],
    actor: SYSTEM,
  });
  return new Set(rows.map((row) => keyOf(row.measurementId, row.setupHash)));
}

/** Stores the results of a sweep that has none yet; answers its notes. */
async function scoreStoredSweep(
  { measurement, network }: MeasuredNetwork,
  { frame, stated, assumedSetup, coreVersion }: SweepScoring,
  known: ReadonlySet<string>,
): Promise<Note[]> {
  const own = statedOf(stated, measurement.setup);
  const setup = setupInUse(own, assumedSetup);
  if (!known.has(keyOf(measurement.id, setupHash(setup)))) {
    const score = scoreSweep(network, frame, own, assumedSetup);
    const row = resultRow(measurement, frame.revisionId, coreVersion, setup, score, await databaseNow());
    await inTransaction((transaction) => storeResult(measurement, row, transaction));
    log.debug({ measurementId: measurement.id, coreVersion }, "sweep scored");
  }
  return sweepNotes(network, frame, setup);
}

/** A file of a draft can be taken out meanwhile: whoever does holds the quote, and nothing is stored after it. */
async function storeResult(
  { id, quoteId }: MeasurementRow,
  row: ReturnType<typeof resultRow>,
  transaction: Transaction,
): Promise<void> {
  const system = { actor: SYSTEM, transaction } as const;
  await Quote.findByPk(quoteId, { ...system, attributes: ["id"], lock: transaction.LOCK.SHARE });
  if ((await MeasurementRow.count({ where: { id }, ...system })) === 0) return;
  await MeasurementResult.bulkCreate([row], { transaction, ignoreDuplicates: true });
}
