// The buying organisation as its own people see it: who works here, by which policy.
import { UniqueConstraintError } from "sequelize";
import { config } from "~/config.server";
import { Organisation, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import type { FormState } from "~/forms/form";
import { parseColleagueForm, type ColleagueInput } from "~/forms/organisation";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import { queueMail } from "./outbox.server";
import type { Person } from "./person.server";
import { issueToken } from "./tokens.server";
import { inTransaction } from "./transaction.server";

const LINK_VALID_MS = 7 * 24 * 60 * 60 * 1000;

/** People and policy of the person's own organisation; somebody added is among them once the password is set. */
export async function readOrganisation(person: Person) {
  const organisation = await Organisation.findByPk(person.organisationId, { actor: person, rejectOnEmpty: true });
  const users = await User.findAll({ order: [["name", "ASC"]], actor: person });
  return {
    name: organisation.name,
    timeZone: organisation.timeZone,
    currency: organisation.currency,
    secondPerson: organisation.secondPerson,
    decisionRule: organisation.decisionRule,
    people: users
      .filter(({ passwordHash }) => passwordHash !== null)
      .map((user) => ({
        publicId: user.publicId,
        name: user.name,
        email: user.email,
        role: user.role,
        state: user.disabledAt ? "disabled" : "active",
      })),
  };
}

/**
 * Adds a colleague, who sets a password by a mailed link. An address that has an account elsewhere gets no mail and the same
 * answer: nothing tells a buyer which addresses are known here.
 */
export async function addColleague(person: Person, form: FormData): Promise<FormState | null> {
  const input = parseColleagueForm(form);
  if (!input.ok) return { values: input.values, errors: input.errors };
  const { email } = input.value;
  const known = await User.findOne({ where: { email }, actor: SYSTEM });
  if (known?.organisationId === person.organisationId)
    return { values: input.value, errors: { email: ["This person is here already."] } };
  try {
    if (!known) await inviteColleague(person, input.value);
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error; // somebody added the address a moment ago
  }
  return null;
}

async function inviteColleague(person: Person, { email, name, role }: ColleagueInput): Promise<void> {
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
    const event = { subject: "user", action: "added", buyerOrganisationId: organisation.id, detail: { name, role } };
    await recordEvent(person, now, event, transaction);
    await queueMail(
      {
        template: "password-reset",
        props: {
          requestedAt: now.toISOString(),
          timeZone: organisation.timeZone,
          link: `${config().appUrl}/password-reset/${token}`,
          addedTo: organisation.name,
        },
      },
      { email, name },
      `colleague:${user.id}`,
      now,
      transaction,
    );
  });
}
