// The worker's jobs: claiming one past other workers' locks, telling progress, and marking it only while still leased.
import { QueryTypes, type Transaction } from "sequelize";
import { sequelize } from "../connection.server";
import { Job } from "../models";

export interface LeasedJob {
  readonly id: number;
  readonly leaseToken: string;
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

/** Tells how far a job is and renews its lease. */
export async function reportJob(
  { id, leaseToken }: LeasedJob,
  done: number,
  total: number,
  seconds: number,
): Promise<void> {
  await sequelize.query(
    `UPDATE jobs SET done = ?, total = ?, leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND
      WHERE id = ? AND lease_token = ?`,
    { type: QueryTypes.UPDATE, replacements: [done, total, seconds, id, leaseToken] },
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
