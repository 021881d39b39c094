// Mail dispatch: takes due rows of the outbox one by one under a lease, renders, sends, and marks them sent or puts them off.
import { randomBytes } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import { QueryTypes } from "sequelize";
import { ZodError } from "zod";
import { sequelize } from "~/db/connection.server";
import { OutboxEmail } from "~/db/models";
import { MailEvent, renderMail } from "~/emails/index";
import type { OutgoingMail } from "~/emails/sender";
import { inTransaction } from "~/services/transaction.server";

export interface DispatchOptions {
  /** Hands one mail to the server; a rejection means it was not taken. */
  readonly send: (mail: OutgoingMail) => Promise<void>;
  /** Mails tried before returning. @default 20 */
  readonly limit?: number;
  /** No further mail is begun once it fires. */
  readonly signal?: AbortSignal;
}

export interface MailLoopOptions {
  readonly send: DispatchOptions["send"];
  readonly signal: AbortSignal;
  /** Told each fault in words, without addresses, secrets or SQL parameters. */
  readonly report?: (message: string) => void;
  /** @default 1000 */
  readonly pollMilliseconds?: number;
}

interface Failure {
  /** Goes into `last_error`: codes and places only. */
  readonly reason: string;
  /** `unreachable`: the server takes no mail at all now; `no-recipient`: it says for good that it has no such recipient. */
  readonly kind: "unreachable" | "no-recipient" | "other";
}

/** Longer than a renewal takes to come round, short enough that a killed dispatcher's mail goes out soon. */
const LEASE_SECONDS = 60;
const RENEWAL_MILLISECONDS = 20_000;
const FIRST_DELAY_SECONDS = 5;
const LONGEST_DELAY_SECONDS = 3600;
/** While the server cannot be reached, so that everything is out within 5 minutes of its return. */
const LONGEST_OUTAGE_DELAY_SECONDS = 300;
/** 5 s · 2⁶ is the first delay beyond that: outages count no further, for they say nothing about the mail. */
const LONGEST_OUTAGE_ATTEMPTS = 6;
const MOST_ATTEMPTS = 20;
const MARK_TRIES = 5;
const STOP_GRACE_MILLISECONDS = 3000;
const SINGLE_USE_LINKS: readonly string[] = ["invitation", "password-reset"];
const UNREACHABLE: readonly string[] = [
  "EAUTH",
  "ECONNECTION",
  "ECONNREFUSED",
  "ECONNRESET",
  "EDNS",
  "EPROTOCOL",
  "ESOCKET",
  "ETIMEDOUT",
  "ETLS",
];

/**
 * Sends what is due, oldest first, until nothing is left, `limit` is reached, or the server turns out unreachable.
 * Dispatchers may run beside each other. A mail whose dispatcher dies is sent by another once the lease has lapsed,
 * with the same Message-ID: at least once, and twice only where the death fell between the server's yes and our mark.
 */
export async function dispatchMail({
  send,
  limit = 20,
  signal,
}: DispatchOptions): Promise<{ sent: number; failed: number }> {
  const done = { sent: 0, failed: 0 };
  while (done.sent + done.failed < limit && signal?.aborted !== true) {
    const row = await claimNext();
    if (row === undefined) break;
    const failure = await underLease(row, () => attempt(row, send));
    if (failure === undefined) {
      await markSent(row);
      done.sent += 1;
    } else {
      await markFailed(row, failure);
      done.failed += 1;
      if (failure.kind === "unreachable") break;
    }
  }
  return done;
}

/** Dispatches each second until the signal fires; a mail in hand then has 3 s to finish, else its lease lapses. */
export async function runMailLoop({ send, signal, report, pollMilliseconds = 1000 }: MailLoopOptions): Promise<void> {
  const loop = dispatchUntil({ send, signal, report, pollMilliseconds });
  await Promise.race([loop, graceAfter(signal)]);
}

async function dispatchUntil({ send, signal, report, pollMilliseconds }: MailLoopOptions): Promise<void> {
  while (!signal.aborted) {
    try {
      const { failed } = await dispatchMail({ send, signal });
      if (failed > 0) report?.(`${failed} mails could not be sent and will be tried again`);
    } catch (error) {
      report?.(`mail dispatch: ${describe(error).reason}`);
    }
    await sleep(pollMilliseconds, undefined, { signal }).catch(() => undefined);
  }
}

function graceAfter(signal: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    const wait = () => void setTimeout(resolve, STOP_GRACE_MILLISECONDS).unref();
    if (signal.aborted) wait();
    else signal.addEventListener("abort", wait, { once: true });
  });
}

async function attempt(row: OutboxEmail, send: DispatchOptions["send"]): Promise<Failure | undefined> {
  try {
    const rendered = await renderMail(MailEvent.parse({ template: row.template, props: row.props }));
    await send({ to: { name: row.recipientName, address: row.recipient }, messageId: row.messageId, ...rendered });
    return undefined;
  } catch (error) {
    return describe(error);
  }
}

/** Renews the lease for as long as the work takes, so that a slow server does not let a second dispatcher in. */
async function underLease<T>(row: OutboxEmail, work: () => Promise<T>): Promise<T> {
  const renewal = setInterval(() => void renewLease(row).catch(() => undefined), RENEWAL_MILLISECONDS);
  renewal.unref();
  try {
    return await work();
  } finally {
    clearInterval(renewal);
  }
}

/** Codes and places of an error; its message may hold addresses and what the server said about them. */
function describe(error: unknown): Failure {
  if (error instanceof ZodError) {
    const places = error.issues.map((issue) => issue.path.join(".") || "address").join(", ");
    return { reason: `not in order: ${places}`.slice(0, 500), kind: "other" };
  }
  if (!(error instanceof Error)) return { reason: "unknown", kind: "other" };
  const { code, command, responseCode } = smtpDetails(error);
  const reason = [code ?? error.name, command, responseCode].filter((part) => part !== undefined).join(" ");
  if (command === "RCPT TO" && responseCode !== undefined && responseCode >= 500)
    return { reason, kind: "no-recipient" };
  const unreachable = responseCode === 421 || (code !== undefined && UNREACHABLE.includes(code)); // RFC 5321, 3.8: 421 closes
  return { reason, kind: unreachable ? "unreachable" : "other" };
}

function smtpDetails(error: Error): { code?: string; command?: string; responseCode?: number } {
  return {
    ...("code" in error && typeof error.code === "string" && { code: error.code }),
    ...("command" in error && typeof error.command === "string" && { command: error.command }),
    ...("responseCode" in error && typeof error.responseCode === "number" && { responseCode: error.responseCode }),
  };
}

/** The next due row, leased to this call and its attempt counted, or undefined. */
function claimNext(): Promise<OutboxEmail | undefined> {
  return inTransaction(async (transaction) => {
    // By next_at, the index's order: only the rows looked at are locked, and a retry does not hold up a new mail.
    const [row] = await sequelize.query(
      `SELECT * FROM outbox_emails
        WHERE state = 'pending' AND next_at <= UTC_TIMESTAMP(3)
          
        ORDER BY next_at, id LIMIT 1 FOR UPDATE SKIP LOCKED`,
      { type: QueryTypes.SELECT, model: OutboxEmail, mapToModel: true, transaction },
    );
    if (row === undefined) return undefined;
    const leaseToken = randomBytes(8).toString("hex");
    await sequelize.query(
      `UPDATE outbox_emails SET lease_token = ?, attempts = attempts + 1,
        leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ?`,
      { type: QueryTypes.UPDATE, replacements: [leaseToken, LEASE_SECONDS, row.id], transaction },
    );
    row.leaseToken = leaseToken;
    row.attempts += 1;
    return row;
  });
}

async function renewLease(row: OutboxEmail): Promise<void> {
  await sequelize.query(
    "UPDATE outbox_emails SET leased_until = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ? AND lease_token = ?",
    { type: QueryTypes.UPDATE, replacements: [LEASE_SECONDS, row.id, row.leaseToken] },
  );
}

/** The server has the mail: a database that is away for a moment is waited for, since without the mark it would go out again. */
async function markSent(row: OutboxEmail): Promise<void> {
  const props = SINGLE_USE_LINKS.includes(row.template) ? "JSON_SET(props, '$.link', '')" : "props";
  for (let tries = 1; ; tries += 1) {
    try {
      await sequelize.query(
        `UPDATE outbox_emails SET state = 'sent', sent_at = UTC_TIMESTAMP(3), leased_until = NULL, lease_token = NULL,
          last_error = NULL, props = ${props} WHERE id = ? AND lease_token = ?`,
        { type: QueryTypes.UPDATE, replacements: [row.id, row.leaseToken] },
      );
      return;
    } catch (error) {
      if (tries === MARK_TRIES) throw error;
      await sleep(1000);
    }
  }
}

async function markFailed(row: OutboxEmail, { reason, kind }: Failure): Promise<void> {
  const outage = kind === "unreachable";
  const longest = outage ? LONGEST_OUTAGE_DELAY_SECONDS : LONGEST_DELAY_SECONDS;
  const attempts = outage ? Math.max(row.attempts - 1, Math.min(row.attempts, LONGEST_OUTAGE_ATTEMPTS)) : row.attempts;
  const over = kind === "no-recipient" || attempts >= MOST_ATTEMPTS;
  await sequelize.query(
    `UPDATE outbox_emails SET state = ?, attempts = ?, last_error = ?, leased_until = NULL, lease_token = NULL,
      next_at = UTC_TIMESTAMP(3) + INTERVAL ? SECOND WHERE id = ? AND lease_token = ?`,
    {
      type: QueryTypes.UPDATE,
      replacements: [
        over ? "failed" : "pending",
        attempts,
        reason,
        Math.min(longest, FIRST_DELAY_SECONDS * 2 ** attempts),
        row.id,
        row.leaseToken,
      ],
    },
  );
}
