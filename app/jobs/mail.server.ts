// Mail dispatch: takes due rows of the outbox one by one under a lease, renders, sends, and marks them sent or puts them off.
import { randomBytes } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import { ZodError } from "zod";
import type { OutboxEmail } from "~/db/models";
import {
  leaseMail,
  lockDueMail,
  markMailRefused,
  markMailSent,
  renewMailLease,
  type LeasedMail,
} from "~/db/queries/outbox";
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
    const mail = await claimNext();
    if (mail === undefined) break;
    const failure = await underLease(mail.lease, () => attempt(mail.row, send));
    if (failure === undefined) {
      await markSent(mail);
      done.sent += 1;
    } else {
      await markFailed(mail, failure);
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
async function underLease<T>(lease: LeasedMail, work: () => Promise<T>): Promise<T> {
  const renewal = setInterval(
    () => void renewMailLease(lease, LEASE_SECONDS).catch(() => undefined),
    RENEWAL_MILLISECONDS,
  );
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

/** A mail this dispatcher holds. */
interface HeldMail {
  readonly row: OutboxEmail;
  readonly lease: LeasedMail;
  readonly attempts: number;
}

/** The next due row, leased to this call and its attempt counted, or undefined. */
function claimNext(): Promise<HeldMail | undefined> {
  return inTransaction(async (transaction) => {
    const row = await lockDueMail(transaction);
    if (row === undefined) return undefined;
    const lease = { id: row.id, leaseToken: randomBytes(8).toString("hex") };
    await leaseMail(lease, LEASE_SECONDS, transaction);
    return { row, lease, attempts: row.attempts + 1 };
  });
}

/** The server has the mail: a database that is away for a moment is waited for, since without the mark it would go out again. */
async function markSent({ row, lease }: HeldMail): Promise<void> {
  for (let tries = 1; ; tries += 1) {
    try {
      await markMailSent(lease, SINGLE_USE_LINKS.includes(row.template));
      return;
    } catch (error) {
      if (tries === MARK_TRIES) throw error;
      await sleep(1000);
    }
  }
}

async function markFailed(mail: HeldMail, { reason, kind }: Failure): Promise<void> {
  const outage = kind === "unreachable";
  const longest = outage ? LONGEST_OUTAGE_DELAY_SECONDS : LONGEST_DELAY_SECONDS;
  const attempts = outage
    ? Math.max(mail.attempts - 1, Math.min(mail.attempts, LONGEST_OUTAGE_ATTEMPTS))
    : mail.attempts;
  const over = kind === "no-recipient" || attempts >= MOST_ATTEMPTS;
  await markMailRefused(mail.lease, {
    state: over ? "failed" : "pending",
    attempts,
    reason,
    delaySeconds: Math.min(longest, FIRST_DELAY_SECONDS * 2 ** attempts),
    forgetLink: over && SINGLE_USE_LINKS.includes(mail.row.template),
  });
}
