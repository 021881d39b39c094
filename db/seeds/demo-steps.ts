// How the demo takes a step: forms are filled as people fill them, an expected refusal ends the seed with its sentences.
import { OutboxEmail, Organisation, User } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { newIdempotencyKey } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";

type Outcome<T> =
  | { readonly ok: true; readonly value: T }
  | { readonly ok: false; readonly errors: object }
  | { readonly ok: false; readonly state: { readonly errors: object } };

/** The value of a step that the scenario needs. */
export function made<T>(step: string, outcome: Outcome<T> | null): T {
  if (outcome?.ok) return outcome.value;
  const errors =
    outcome === null ? "not found" : JSON.stringify("state" in outcome ? outcome.state.errors : outcome.errors);
  throw new Error(`the demo's step “${step}” was refused: ${errors}`);
}

/** A form as a page posts it, with a key of its own. */
export function filledForm(fields: Readonly<Record<string, string>>): FormData {
  const form = new FormData();
  for (const [name, value] of Object.entries({ idempotencyKey: newIdempotencyKey(), ...fields })) form.set(name, value);
  return form;
}

/** The person as a signed-in request carries it. */
export async function personOf(email: string): Promise<Person> {
  const user = await User.findOne({ where: { email }, actor: SYSTEM, rejectOnEmpty: true });
  const organisation = await Organisation.findByPk(user.organisationId, { actor: SYSTEM, rejectOnEmpty: true });
  const { id: userId, publicId, organisationId, organisationKind, role, name, timeZone } = user;
  const organisationName = organisation.name;
  return { userId, publicId, organisationId, organisationKind, organisationName, role, name, email, timeZone };
}

/** The token of the newest link mailed to an address: the part of the mail that nobody but its reader knows. */
export async function mailedToken(email: string): Promise<string> {
  const mail = await OutboxEmail.findOne({ where: { recipient: email }, order: [["id", "DESC"]], rejectOnEmpty: true });
  const link: unknown = "link" in mail.props ? mail.props.link : undefined;
  if (typeof link !== "string") throw new Error("the demo's mail carries no link");
  return lastPart(link);
}

export const lastPart = (link: string): string => link.slice(link.lastIndexOf("/") + 1);
