// How far scoring is: of one quote, for the page that waits for it, and of all whose older figures are shown meanwhile.
import { Op, type Transaction } from "sequelize";
import { Job, Quote, QuoteVersion, Rfq, SpecificationRevision } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { CORE_VERSION } from "~/rf/index";
import { rescoreKey } from "./jobs.server";
import type { Person } from "./person.server";
import { readScoreHeads, type ScoreHead } from "./quote-scores.server";

export interface ScoringProgress {
  /** "none" before the first submission; "failed" where the worker gave up. */
  readonly state: "none" | "pending" | "done" | "failed";
  /** Files. */
  readonly done: number;
  readonly total: number;
  /** Of the quote, once it is scored; while it is scored again the one it has until then. */
  readonly verdict?: string;
}

/** What a page says while figures of another core or revision are shown. */
export interface Rescoring {
  /** Of the core that gave the figures shown. */
  readonly coreVersion: string;
  /** Of the revision they were scored against. */
  readonly letter: string;
  /** That revision is not the RFQ's, so that the figures say nothing of what is asked now. */
  readonly isOtherRevision: boolean;
  readonly state: "pending" | "failed";
  /** Files. */
  readonly done: number;
  readonly total: number;
}

/** How far the scoring of a quote's current version is, or null where the person does not see the quote. */
export async function readScoringProgress(
  person: Person,
  quotePublicId: string,
  coreVersion: string = CORE_VERSION,
): Promise<ScoringProgress | null> {
  const quote = await Quote.findOne({ where: { publicId: quotePublicId }, actor: person });
  if (!quote) return null;
  const versionId = quote.currentVersionId;
  const version = versionId === null ? null : await QuoteVersion.findByPk(versionId, { actor: person });
  if (!version) return { state: "none", done: 0, total: 0 };
  const [score] = await readScoreHeads(person, [version], undefined, coreVersion);
  if (!score) {
    const rfq = await Rfq.findByPk(quote.rfqId, { actor: person, rejectOnEmpty: true });
    const progress = await readFirstScoring([version.id], rfq.revisionId, undefined, coreVersion);
    return progress(version.id);
  }
  const { verdict } = score.summary;
  if (score.isStale) return { ...progressOf(await findRescoreJob(score)), verdict };
  const job = await Job.findOne({ where: { kind: "score", key: String(version.id) } });
  const { total = 0 } = job ?? {};
  return { state: "done", done: total, total, verdict };
}

const progressOf = (job: Job | null | undefined) => {
  const { done = 0, total = 0 } = job ?? {};
  return { state: job?.state === "failed" ? ("failed" as const) : ("pending" as const), done, total };
};

/** How far the first scoring is, of versions by their ids. One that was given up is tried once more as a rescoring. */
export async function readFirstScoring(
  versionIds: readonly number[],
  revisionId: number,
  transaction?: Transaction,
  coreVersion: string = CORE_VERSION,
): Promise<(versionId: number) => ReturnType<typeof progressOf>> {
  const againKey = (versionId: number) => rescoreKey({ versionId, revisionId, coreVersion });
  const where = { kind: ["score", "rescore"], key: [...versionIds.map(String), ...versionIds.map(againKey)] };
  const jobs = versionIds.length === 0 ? [] : await Job.findAll({ where, transaction });
  const byKey = new Map(jobs.map((job) => [job.key, job]));
  return (versionId) => progressOf(byKey.get(againKey(versionId)) ?? byKey.get(String(versionId)));
}

const keyOf = ({ summary: { versionId }, wanted }: ScoreHead): string => rescoreKey({ versionId, ...wanted });

const findRescoreJob = (score: ScoreHead): Promise<Job | null> =>
  Job.findOne({ where: { kind: "rescore", key: keyOf(score) } });

/** Of the scores that are stale, by version id. */
export async function readRescoring(
  scores: Iterable<ScoreHead>,
  transaction?: Transaction,
): Promise<Map<number, Rescoring>> {
  const stale = [...scores].filter(({ isStale }) => isStale);
  if (stale.length === 0) return new Map();
  const [jobs, revisions] = await Promise.all([
    Job.findAll({ where: { kind: "rescore", key: { [Op.in]: stale.map(keyOf) } }, transaction }),
    // The letter alone, of revisions whose results the person was given: a supplier sees no older revision of an RFQ itself.
    SpecificationRevision.findAll({
      where: { id: { [Op.in]: stale.map(({ summary }) => summary.revisionId) } },
      attributes: ["id", "letter"],
      actor: SYSTEM,
      transaction,
    }),
  ]);
  const byKey = new Map(jobs.map((job) => [job.key, job]));
  const letters = new Map(revisions.map(({ id, letter }) => [id, letter]));
  return new Map(
    stale.map((score) => {
      const { versionId, revisionId, coreVersion } = score.summary;
      const isOtherRevision = revisionId !== score.wanted.revisionId;
      const letter = letters.get(revisionId) ?? "";
      return [versionId, { coreVersion, letter, isOtherRevision, ...progressOf(byKey.get(keyOf(score))) }];
    }),
  );
}
