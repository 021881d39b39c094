// Forgotten passwords: a link by mail, the same answer whether or not the address has an account.
import { config } from "~/config.server";
import { Organisation, Session, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { parseResetForm } from "~/forms/account";
import { invalid, ok, type Result } from "~/forms/form";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import { log } from "./log.server";
import { queueMail } from "./outbox.server";
import { hashPassword } from "./passwords.server";
import { findToken, issueToken, revokeTokens, useToken } from "./tokens.server";
import { inTransaction } from "./transaction.server";

const VALID_MS = 60 * 60 * 1000;

/** Begins it and comes back at once: neither the time it takes nor a fault of it tells whether the address has an account. */
export function beginPasswordReset(email: string): void {
  requestPasswordReset(email).catch((error: unknown) => log.error({ err: error }, "password reset failed"));
}

/** Mails a link if the address has an account. */
export async function requestPasswordReset(email: string): Promise<void> {
  await inTransaction(async (transaction) => {
    // Locked: of links asked for at once only the last one stays good.
    const lock = transaction.LOCK.UPDATE;
    const user = await User.findOne({ where: { email }, actor: SYSTEM, transaction, lock });
    if (!user || user.disabledAt) return;
    const now = await databaseNow(transaction);
    const subject = { purpose: "password-reset", userId: user.id } as const;
    const token = await issueToken(subject, now, new Date(now.getTime() + VALID_MS), transaction);
    const link = `${config().appUrl}/password-reset/${token}`;
    await queueMail(
      {
        template: "password-reset",
        props: { requestedAt: now.toISOString(), timeZone: user.timeZone, link },
      },
      user,
      `password-reset:${user.id}:${newPublicId()}`,
      now,
      transaction,
    );
    await recordEvent(
      null,
      now,
      { subject: "user", action: "password reset asked", detail: { userId: user.id } },
      transaction,
    );
  });
}

/** Whether a link can still be used; uses nothing up. */
export async function passwordResetIsOpen(token: string): Promise<boolean> {
  return (await findToken("password-reset", token, await databaseNow())) !== null;
}

export const LINK_SPENT = "This link is no longer valid: it was used, it has expired, or a newer one was sent.";

/** Sets the new password, ends every session of the account and mails that it happened. Does not sign in. */
export async function resetPassword(token: string, form: FormData): Promise<Result<null>> {
  const before = await findToken("password-reset", token, await databaseNow());
  if (!before?.userId) return invalid({ form: [LINK_SPENT] });
  const account = await User.findByPk(before.userId, { actor: SYSTEM, rejectOnEmpty: true });
  const organisation = await Organisation.findByPk(account.organisationId, { actor: SYSTEM, rejectOnEmpty: true });
  const context = { email: account.email, name: account.name, organisation: organisation.name };
  const input = parseResetForm(form, context);
  if (!input.ok) return invalid(input.errors);
  const passwordHash = await hashPassword(input.value.password);

  return inTransaction(async (transaction) => {
    const now = await databaseNow(transaction);
    const row = await findToken("password-reset", token, now, transaction);
    if (!row?.userId || !(await useToken(row, now, transaction))) return invalid({ form: [LINK_SPENT] });
    const { userId } = row;
    await User.update({ passwordHash }, { where: { id: userId }, actor: SYSTEM, transaction });
    await Session.update({ revokedAt: now }, { where: { userId, revokedAt: null }, transaction });
    await revokeTokens({ purpose: "password-reset", userId }, now, transaction);
    await recordEvent(null, now, { subject: "user", action: "password reset", detail: { userId } }, transaction);
    await queueMail(
      {
        template: "password-changed",
        props: {
          changedAt: now.toISOString(),
          timeZone: account.timeZone,
          link: `${config().appUrl}/forgotten-password`,
        },
      },
      account,
      `password-changed:${userId}:${now.getTime()}`,
      now,
      transaction,
    );
    return ok(null);
  });
}
