// The first administrator of an empty installation, with the buying organisation and a link that sets the password.
import { config } from "~/config.server";
import { Organisation, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import { issueToken } from "./tokens.server";
import { inTransaction } from "./transaction.server";

const LINK_VALID_MS = 24 * 60 * 60 * 1000;

/** Returns the line to print. Throws if the address has an account already. */
export async function makeFirstAdministrator(email: string, organisationName: string): Promise<string> {
  return inTransaction(async (transaction) => {
    const now = await databaseNow(transaction);
    if (await User.findOne({ where: { email }, actor: SYSTEM, transaction }))
      throw new Error(
        `${email} has an account already: ask for a new password at ${config().appUrl}/forgotten-password`,
      );
    const zone = Intl.DateTimeFormat().resolvedOptions().timeZone;
    const organisation = await Organisation.create(
      {
        publicId: newPublicId(),
        kind: "buyer",
        name: organisationName,
        timeZone: zone,
        currency: "EUR",
        createdAt: now,
      },
      { transaction },
    );
    const user = await User.create(
      {
        publicId: newPublicId(),
        organisationId: organisation.id,
        organisationKind: "buyer",
        email,
        name: email.split("@")[0] ?? email,
        role: "admin",
        timeZone: zone,
        createdAt: now,
      },
      { transaction },
    );
    const expiresAt = new Date(now.getTime() + LINK_VALID_MS);
    const token = await issueToken({ purpose: "password-reset", userId: user.id }, now, expiresAt, transaction);
    await recordEvent(
      null,
      now,
      { subject: "user", action: "first administrator made", buyerOrganisationId: organisation.id },
      transaction,
    );
    return `Administrator ${email} of “${organisationName}”. Set the password within 24 hours: ${config().appUrl}/password-reset/${token}`;
  });
}
