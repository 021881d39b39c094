// How the people of the demo's buyer come to their accounts.
import { Organisation, User } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { makeFirstAdministrator } from "~/services/first-administrator.server";
import { addColleague } from "~/services/organisation.server";
import { resetPassword } from "~/services/password-reset.server";
import type { Person } from "~/services/person.server";
import { BUYER, PASSWORD, PEOPLE, TIME_ZONE } from "./demo-cast";
import { filledForm, lastPart, made, mailedToken, personOf } from "./demo-steps";

/** Makes the buyer with its administrator, who adds the two colleagues; each sets the password by a link. */
export async function foundBuyer(): Promise<Record<"engineer" | "purchasing" | "admin", Person>> {
  const { admin, engineer, purchasing } = PEOPLE;
  const line = await makeFirstAdministrator(admin.email, BUYER);
  await setPassword(lastPart(line));
  await nameFounder();
  const founder = await personOf(admin.email);
  for (const [role, { name, email }] of [["engineer", engineer] as const, ["purchasing", purchasing] as const]) {
    if (await addColleague(founder, filledForm({ email, name, role }))) throw new Error(`${email} could not be added`);
    await setPassword(await mailedToken(email));
  }
  return {
    admin: founder,
    engineer: await personOf(engineer.email),
    purchasing: await personOf(purchasing.email),
  };
}

async function setPassword(token: string): Promise<void> {
  made("set a password", await resetPassword(token, filledForm({ password: PASSWORD, passwordAgain: PASSWORD })));
}

/** The command takes name and zone from the address and the machine; a scenario has its own. */
async function nameFounder(): Promise<void> {
  const { email, name } = PEOPLE.admin;
  const founder = await User.findOne({ where: { email }, actor: SYSTEM, rejectOnEmpty: true });
  await founder.update({ name, timeZone: TIME_ZONE });
  await Organisation.update({ timeZone: TIME_ZONE }, { where: { id: founder.organisationId }, actor: SYSTEM });
}
