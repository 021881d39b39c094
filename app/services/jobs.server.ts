// Work for the worker: queued in the transaction of what it follows, run under a lease, its progress told.
import { randomBytes } from "node:crypto";
import type { Transaction } from "sequelize";
import { config } from "~/config.server";
import { Job } from "~/db/models";
import {
  ensureJob,
  finishJob,
  leaseJob,
  lockDueJob,
  putOffJob,
  renewJobLease,
  reportJob,
  restartJob,
  type LeasedJob,
} from "~/db/queries/jobs";
import { CORE_VERSION } from "~/rf/index";
import { databaseErrorNumber, inTransaction } from "./transaction.server";

const MOST_ATTEMPTS = 6;
const FIRST_DELAY_SECONDS = 2;

/** What each kind of job is told. */
export interface JobPayloads {
  /** A version that was submitted: the only kind that mails. */
  readonly score: { readonly versionId: number };
  /** The sweeps of a quote that is being prepared. */
  readonly "draft-score": { readonly quoteId: number; readonly coreVersion: string };
  /** A version scored before, with another core or against another revision. */
  readonly rescore: { readonly versionId: number; readonly revisionId: number; readonly coreVersion: string };
}

export type JobKind = keyof JobPayloads;

/** What waits for somebody comes before what only brings figures up to date. */
const KINDS: readonly JobKind[] = ["score", "draft-score", "rescore"];

/** Queues the scoring of a submitted version. */
export async function queueScoring(versionId: number, now: Date, transaction: Transaction): Promise<void> {
  const payload: JobPayloads["score"] = { versionId };
  await Job.create({ kind: "score", key: String(versionId), payload, runAt: now, createdAt: now }, { transaction });
}

/**
 * Queues the scoring of a quote's sweeps with the setup and the revision in use once `transaction` is committed. A quote has
 * one such job: called while one is under way, that one is done again.
 */
export function queueDraftScoring(
  quoteId: number,
  now: Date,
  transaction: Transaction,
  coreVersion: string = CORE_VERSION,
): Promise<void> {
  const payload: JobPayloads["draft-score"] = { quoteId, coreVersion };
  return restartJob({ kind: "draft-score", key: String(quoteId), payload }, now, transaction);
}

export const rescoreKey = ({ versionId, revisionId, coreVersion }: JobPayloads["rescore"]): string =>
  `${versionId}:${revisionId}:${coreVersion}`;

/** Queues a version to be scored again; one that waits for the same already, or was given up, stays as it is. */
export function queueRescoring(payload: JobPayloads["rescore"], now: Date, transaction?: Transaction): Promise<void> {
  return ensureJob({ kind: "rescore", key: rescoreKey(payload), payload }, now, transaction);
}

/** Told how many of the files are done. */
export type Report = (done: number, total: number) => Promise<void>;

export type JobHandlers = {
  readonly [Kind in JobKind]?: (payload: JobPayloads[Kind], report: Report) => Promise<void>;
};

/**
 * Runs the next due job of the kinds there is work for, under a lease; false where none is due. A job whose worker dies is
 * run again by another once the lease has lapsed, so the work has to leave the same behind however often it runs.
 */
export async function runNextJob(
  handlers: JobHandlers,
  onFault: (error: unknown) => void = () => undefined,
): Promise<boolean> {
  for (const kind of KINDS) if (await tryKind(handlers, kind, onFault)) return true;
  return false;
}

function tryKind<Kind extends JobKind>(
  handlers: Pick<JobHandlers, Kind>,
  kind: Kind,
  onFault: (error: unknown) => void,
): Promise<boolean> {
  const work: JobHandlers[Kind] = handlers[kind];
  return work ? runNextOf(kind, work, onFault) : Promise.resolve(false);
}

/** The same for the scoring of submitted versions alone. */
export const runNextScoring = (
  work: (versionId: number, report: Report) => Promise<void>,
  onFault?: (error: unknown) => void,
): Promise<boolean> => runNextJob({ score: ({ versionId }, report) => work(versionId, report) }, onFault);

async function runNextOf<Kind extends JobKind>(
  kind: Kind,
  work: (payload: JobPayloads[Kind], report: Report) => Promise<void>,
  onFault: (error: unknown) => void,
): Promise<boolean> {
  const leaseSeconds = config().scoringLeaseSeconds;
  const held = await claimNext(kind, leaseSeconds);
  if (!held) return false;
  if (held === "given-up") return true;
  const report: Report = (done, total) => reportJob(held.lease, done, total, leaseSeconds);
  const renew = () => void renewJobLease(held.lease, leaseSeconds).catch(() => undefined);
  const renewal = setInterval(renew, (leaseSeconds * 1000) / 4);
  try {
    await work(held.payload, report);
    await finishJob(held.lease);
  } catch (error) {
    onFault(error);
    await putOff(held, error);
  } finally {
    clearInterval(renewal);
  }
  return true;
}

interface HeldJob<Kind extends JobKind> {
  readonly lease: LeasedJob;
  readonly payload: JobPayloads[Kind];
  readonly attempts: number;
}

/** A job whose worker died at every attempt may be what kills it: it is given up like one that failed as often. */
function claimNext<Kind extends JobKind>(
  kind: Kind,
  leaseSeconds: number,
): Promise<HeldJob<Kind> | "given-up" | undefined> {
  return inTransaction(async (transaction) => {
    const job = await lockDueJob(kind, transaction);
    if (!job) return undefined;
    if (job.attempts >= MOST_ATTEMPTS) {
      await job.update(
        { state: "failed", lastError: "worker lost", leaseToken: null, leasedUntil: null },
        { transaction },
      );
      return "given-up";
    }
    const lease = { id: job.id, leaseToken: randomBytes(8).toString("hex") };
    await leaseJob(lease, leaseSeconds, transaction);
    return { lease, payload: job.payload as JobPayloads[Kind], attempts: job.attempts + 1 };
  });
}

/** What is kept of a fault is its name and the database's number: a message may carry what somebody typed. */
async function putOff({ lease, attempts }: Pick<HeldJob<JobKind>, "lease" | "attempts">, error: unknown) {
  const number = databaseErrorNumber(error);
  const reason = `${error instanceof Error ? error.name : "unknown"}${number === undefined ? "" : ` ${number}`}`;
  const state = attempts >= MOST_ATTEMPTS ? "failed" : "pending";
  await putOffJob(lease, state, reason, FIRST_DELAY_SECONDS * 2 ** attempts);
}
