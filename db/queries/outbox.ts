// The outbox's queries: claiming a due mail past other dispatchers' locks, and marking it only while still leased.
import { QueryTypes, type Transaction } from "sequelize";
import { sequelize } from "../connection.server";
import { OutboxEmail } from "../models";

/** Names a mail by the lease it is held under: a mark that comes after the lease was lost changes nothing. */
export interface LeasedMail {
  readonly id: number;
  readonly leaseToken: string;
}

/** The next due mail nobody holds, locked until the transaction ends. */
export async function lockDueMail(transaction: Transaction): Promise<OutboxEmail | undefined> {
  // By next_at, the index's order: only the rows looked at are locked, and a retry does not hold up a new mail.
  const [row] = await sequelize.query(
    `SELECT * FROM outbox_emails
      WHERE state = 'pending' AND next_at <= UTC_TIMESTAMP(3)
        AND (leased_until IS NULL OR leased_until < UTC_TIMESTAMP(3))
      ORDER BY next_at, id LIMIT 1 FOR UPDATE SKIP LOCKED`,
    { type: QueryTypes.SELECT, model: OutboxEmail, mapToModel: true, transaction },
  );
  return row;
}

/** Leases a locked mail and counts the attempt. */
export async function leaseMail(
  { id, leaseToken }: LeasedMail,
  seconds: number,
  transaction: Transaction,
): Promise<void> {
  await sequelize.query(
    `UPDATE outbox_emails SET lease_token = ?, attempts = attempts + 1,
      leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ?`,
    { type: QueryTypes.UPDATE, replacements: [leaseToken, seconds, id], transaction },
  );
}

export async function renewMailLease({ id, leaseToken }: LeasedMail, seconds: number): Promise<void> {
  await sequelize.query(
    "UPDATE outbox_emails SET leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ? AND lease_token = ?",
    { type: QueryTypes.UPDATE, replacements: [seconds, id, leaseToken] },
  );
}

const propsAfter = (forgetLink: boolean) => (forgetLink ? "JSON_SET(props, '$.link', '')" : "props");

/** @param forgetLink blanks the single-use link, so that no usable token stays behind */
export async function markMailSent({ id, leaseToken }: LeasedMail, forgetLink: boolean): Promise<void> {
  await sequelize.query(
    `UPDATE outbox_emails SET state = 'sent', sent_at = UTC_TIMESTAMP(3), leased_until = NULL, lease_token = NULL,
      last_error = NULL, props = ${propsAfter(forgetLink)} WHERE id = ? AND lease_token = ?`,
    { type: QueryTypes.UPDATE, replacements: [id, leaseToken] },
  );
}

export interface MailRefusal {
  readonly state: "pending" | "failed";
  readonly attempts: number;
  /** Codes and places only. */
  readonly reason: string;
  readonly delaySeconds: number;
  /** Blanks the single-use link of a mail that is given up. */
  readonly forgetLink: boolean;
}

export async function markMailRefused({ id, leaseToken }: LeasedMail, refusal: MailRefusal): Promise<void> {
  await sequelize.query(
    `UPDATE outbox_emails SET state = ?, attempts = ?, last_error = ?, leased_until = NULL, lease_token = NULL,
      next_at = UTC_TIMESTAMP(3) + INTERVAL ? SECOND, props = ${propsAfter(refusal.forgetLink)}
      WHERE id = ? AND lease_token = ?`,
    {
      type: QueryTypes.UPDATE,
      replacements: [refusal.state, refusal.attempts, refusal.reason, refusal.delaySeconds, id, leaseToken],
    },
  );
}
