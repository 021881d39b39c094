// The worker's jobs: queued again, claimed past other workers' locks, their progress told, and marked only while still leased.
import { QueryTypes, type Transaction } from "sequelize";
import { sequelize } from "../connection.server";
import { Job } from "../models";

export interface LeasedJob {
  readonly id: number;
  readonly leaseToken: string;
}

export interface QueuedJob {
  readonly kind: string;
  readonly key: string;
  readonly payload: object;
}

const INSERT = "INSERT INTO jobs (kind, `key`, payload, state, run_at, created_at) VALUES (?, ?, ?, 'pending', ?, ?)";

const insertion = ({ kind, key, payload }: QueuedJob, now: Date) => [kind, key, JSON.stringify(payload), now, now];

/**
 * Queues a job anew, whatever became of an earlier one with its key. One that is being done loses its lease: what it was
 * begun for has changed, so that it is done again and its end marks nothing.
 */
export async function restartJob(job: QueuedJob, now: Date, transaction: Transaction): Promise<void> {
  await sequelize.query(
    `${INSERT} ON DUPLICATE KEY UPDATE payload = VALUES(payload), state = 'pending', run_at = VALUES(run_at),
      attempts = 0, done = 0, total = 0, leased_until = NULL, lease_token = NULL, last_error = NULL, finished_at = NULL`,
    { type: QueryTypes.INSERT, replacements: insertion(job, now), transaction },
  );
}

/** Queues a job, or again one that is done; one that waits, is being done or was given up stays as it is. */
export async function ensureJob(job: QueuedJob, now: Date, transaction?: Transaction): Promise<void> {
  // Assignments run in their order: `state` comes last, since the others look at it.
  const anew = (column: string, value: string) => `${column} = IF(state = 'done', ${value}, ${column})`;
  const assignments = [
    anew("run_at", "VALUES(run_at)"),
    ...["attempts", "done", "total"].map((column) => anew(column, "0")),
    anew("finished_at", "NULL"),
    anew("state", "'pending'"),
  ];
  await sequelize.query(`${INSERT} ON DUPLICATE KEY UPDATE ${assignments.join(", ")}`, {
    type: QueryTypes.INSERT,
    replacements: insertion(job, now),
    transaction,
  });
}

/** The next due job of a kind nobody holds, locked until the transaction ends. */
export async function lockDueJob(kind: string, transaction: Transaction): Promise<Job | undefined> {
  const [row] = await sequelize.query(
    `SELECT * FROM jobs
      WHERE state = 'pending' AND kind = ? AND run_at <= UTC_TIMESTAMP(3)
        AND (leased_until IS NULL OR leased_until < UTC_TIMESTAMP(3))
      ORDER BY run_at, id LIMIT 1 FOR UPDATE SKIP LOCKED`,
    { type: QueryTypes.SELECT, model: Job, mapToModel: true, replacements: [kind], transaction },
  );
  return row;
}

/** Leases a locked job and counts the attempt. */
export async function leaseJob(
  { id, leaseToken }: LeasedJob,
  seconds: number,
  transaction: Transaction,
): Promise<void> {
  await sequelize.query(
    `UPDATE jobs SET lease_token = ?, attempts = attempts + 1,
      leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ?`,
    { type: QueryTypes.UPDATE, replacements: [leaseToken, seconds, id], transaction },
  );
}

export async function renewJobLease({ id, leaseToken }: LeasedJob, seconds: number): Promise<void> {
  await sequelize.query(
    "UPDATE jobs SET leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ? AND lease_token = ?",
    { type: QueryTypes.UPDATE, replacements: [seconds, id, leaseToken] },
  );
}

/** Tells how far a job is and renews its lease. One that is taken up again does not fall behind what was told before. */
export async function reportJob(
  { id, leaseToken }: LeasedJob,
  done: number,
  total: number,
  seconds: number,
): Promise<void> {
  await sequelize.query(
    `UPDATE jobs SET done = IF(total = ?, GREATEST(done, ?), ?), total = ?,
      leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND
      WHERE id = ? AND lease_token = ?`,
    { type: QueryTypes.UPDATE, replacements: [total, done, done, total, seconds, id, leaseToken] },
  );
}

export async function finishJob({ id, leaseToken }: LeasedJob): Promise<void> {
  await sequelize.query(
    `UPDATE jobs SET state = 'done', finished_at = UTC_TIMESTAMP(3), leased_until = NULL, lease_token = NULL,
      last_error = NULL WHERE id = ? AND lease_token = ?`,
    { type: QueryTypes.UPDATE, replacements: [id, leaseToken] },
  );
}

/** Puts a job off, or gives it up. */
export async function putOffJob(
  { id, leaseToken }: LeasedJob,
  state: "pending" | "failed",
  reason: string,
  delaySeconds: number,
): Promise<void> {
  await sequelize.query(
    `UPDATE jobs SET state = ?, last_error = ?, leased_until = NULL, lease_token = NULL,
      run_at = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ? AND lease_token = ?`,
    { type: QueryTypes.UPDATE, replacements: [state, reason.slice(0, 500), delaySeconds, id, leaseToken] },
  );
}
