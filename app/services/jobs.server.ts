// Work for the worker: queued in the transaction of what it follows, run under a lease, its progress told.
import { randomBytes } from "node:crypto";
import type { Transaction } from "sequelize";
import { Job, Quote, QuoteSummary } from "~/db/models";
import { finishJob, leaseJob, lockDueJob, putOffJob, reportJob, type LeasedJob } from "~/db/queries/jobs";
import type { Person } from "./person.server";
import { databaseErrorNumber, inTransaction } from "./transaction.server";

/** Longer than a renewal takes to come round, short enough that a killed worker's job is soon done by another. */
const LEASE_SECONDS = 30;
const RENEWAL_MILLISECONDS = 8_000;
const MOST_ATTEMPTS = 6;
const FIRST_DELAY_SECONDS = 2;

const SCORE = "score";

/** Queues the scoring of a submitted version. */
export async function queueScoring(versionId: number, now: Date, transaction: Transaction): Promise<void> {
  const job = { kind: SCORE, key: String(versionId), payload: { versionId }, runAt: now, createdAt: now };
  await Job.create(job, { transaction });
}

export type Report = (done: number, total: number) => Promise<void>;

/**
 * Runs the next due job of scoring under a lease; false where none is due. A job whose worker dies is run again by another
 * once the lease has lapsed, so `work` has to leave the same behind however often it runs.
 */
export async function runNextScoring(
  work: (versionId: number, report: Report) => Promise<void>,
  onFault: (error: unknown) => void = () => undefined,
): Promise<boolean> {
  const held = await claimNext();
  if (!held) return false;
  if (held === "given-up") return true;
  const progress = { done: 0, total: 0 };
  const report: Report = async (done, total) => {
    Object.assign(progress, { done, total });
    await reportJob(held.lease, done, total, LEASE_SECONDS);
  };
  const renew = () => void report(progress.done, progress.total).catch(() => undefined);
  const renewal = setInterval(renew, RENEWAL_MILLISECONDS);
  try {
    await work(held.versionId, report);
    await finishJob(held.lease);
  } catch (error) {
    onFault(error);
    await putOff(held, error);
  } finally {
    clearInterval(renewal);
  }
  return true;
}

interface HeldJob {
  readonly lease: LeasedJob;
  readonly versionId: number;
  readonly attempts: number;
}

/** A job whose worker died at every attempt may be what kills it: it is given up like one that failed as often. */
function claimNext(): Promise<HeldJob | "given-up" | undefined> {
  return inTransaction(async (transaction) => {
    const job = await lockDueJob(SCORE, transaction);
    if (!job) return undefined;
    if (job.attempts >= MOST_ATTEMPTS) {
      await job.update(
        { state: "failed", lastError: "worker lost", leaseToken: null, leasedUntil: null },
        { transaction },
      );
      return "given-up";
    }
    const lease = { id: job.id, leaseToken: randomBytes(8).toString("hex") };
    await leaseJob(lease, LEASE_SECONDS, transaction);
    return { lease, versionId: Number(job.key), attempts: job.attempts + 1 };
  });
}

/** What is kept of a fault is its name and the database's number: a message may carry what somebody typed. */
async function putOff({ lease, attempts }: HeldJob, error: unknown): Promise<void> {
  const number = databaseErrorNumber(error);
  const reason = `${error instanceof Error ? error.name : "unknown"}${number === undefined ? "" : ` ${number}`}`;
  const state = attempts >= MOST_ATTEMPTS ? "failed" : "pending";
  await putOffJob(lease, state, reason, FIRST_DELAY_SECONDS * 2 ** attempts);
}

export interface ScoringProgress {
  /** "none" before the first submission; "failed" where the worker gave up. */
  readonly state: "none" | "pending" | "done" | "failed";
  /** Files read. */
  readonly done: number;
  readonly total: number;
  /** Of the quote, once it is scored. */
  readonly verdict?: string;
}

/** How far the scoring of a quote's current version is, or null where the person does not see the quote. */
export async function readScoringProgress(person: Person, quotePublicId: string): Promise<ScoringProgress | null> {
  const quote = await Quote.findOne({ where: { publicId: quotePublicId }, actor: person });
  if (!quote) return null;
  const versionId = quote.currentVersionId;
  if (versionId === null) return { state: "none", done: 0, total: 0 };
  const [job, summary] = await Promise.all([
    Job.findOne({ where: { kind: SCORE, key: String(versionId) } }),
    QuoteSummary.findOne({ where: { versionId }, order: [["createdAt", "DESC"]], actor: person }),
  ]);
  const { done = 0, total = 0 } = job ?? {};
  if (summary) return { state: "done", done: total, total, verdict: summary.verdict };
  return { state: job?.state === "failed" ? "failed" : "pending", done, total };
}
