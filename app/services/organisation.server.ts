// The buying organisation as its own people see it: who works here, by which policy.
import { UniqueConstraintError } from "sequelize";
import { config } from "~/config.server";
import { Organisation, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { parseColleagueForm } from "~/forms/organisation";
import { invalid, ok, type Result } from "~/forms/form";
import type { FormState } from "~/forms/form";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import { queueMail } from "./outbox.server";
import type { Person } from "./person.server";
import { issueToken } from "./tokens.server";
import { inTransaction } from "./transaction.server";

const LINK_VALID_MS = 7 * 24 * 60 * 60 * 1000;

/** People and policy of the person's own organisation. */
export async function readOrganisation(person: Person) {
  const organisation = await Organisation.findByPk(person.organisationId, { actor: person, rejectOnEmpty: true });
  const users = await User.findAll({ order: [["name", "ASC"]], actor: person });
  return {
    name: organisation.name,
    timeZone: organisation.timeZone,
    currency: organisation.currency,
    secondPerson: organisation.secondPerson,
    decisionRule: organisation.decisionRule,
    people: users.map((user) => ({
      publicId: user.publicId,
      name: user.name,
      email: user.email,
      role: user.role,
      state: user.disabledAt ? "disabled" : user.passwordHash ? "active" : "invited",
    })),
  };
}

/** Adds a colleague, who sets a password by a mailed link. */
export async function addColleague(person: Person, form: FormData): Promise<Result<null> & { state?: FormState }> {
  const input = parseColleagueForm(form);
  if (!input.ok) return { ...invalid(input.errors), state: { values: input.values, errors: input.errors } };
  const { email, name, role } = input.value;
  try {
    await inTransaction(async (transaction) => {
      const now = await databaseNow(transaction);
      const organisation = await Organisation.findByPk(person.organisationId, {
        actor: person,
        transaction,
        rejectOnEmpty: true,
      });
      const user = await User.create(
        {
          publicId: newPublicId(),
          organisationId: organisation.id,
          organisationKind: organisation.kind,
          email,
          name,
          role,
          timeZone: organisation.timeZone,
          createdAt: now,
        },
        { transaction },
      );
      const expiresAt = new Date(now.getTime() + LINK_VALID_MS);
      const token = await issueToken({ purpose: "password-reset", userId: user.id }, now, expiresAt, transaction);
      const link = `${config().appUrl}/password-reset/${token}`;
      const event = { subject: "user", action: "added", buyerOrganisationId: organisation.id, detail: { name, role } };
      await recordEvent(person, now, event, transaction);
      await queueMail(
        {
          template: "password-reset",
          props: { requestedAt: now.toISOString(), timeZone: organisation.timeZone, link },
        },
        { email, name },
        `colleague:${user.id}`,
        now,
        transaction,
      );
    });
    return ok(null);
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error;
    const known = await User.findOne({ where: { email }, actor: SYSTEM });
    // Only of the own organisation may it be said that an address is here already.
    const sentence =
      known?.organisationId === person.organisationId
        ? "This person is here already."
        : "This address cannot be added. Use another one.";
    const errors = { email: [sentence] };
    return { ...invalid(errors), state: { values: input.value, errors } };
  }
}
