// Colleagues: added by a mailed link, listed once they have a password, and no answer tells which addresses are known here.
import { expect, test } from "vitest";
import { OutboxEmail, User } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { addColleague, readOrganisation } from "~/services/organisation.server";
import { resetPassword } from "~/services/password-reset.server";
import { useDatabase } from "../support/database";
import { buildOrganisation, buildPerson } from "../support/factories";

useDatabase();

function form(fields: Record<string, string>): FormData {
  const data = new FormData();
  for (const [name, value] of Object.entries(fields)) data.set(name, value);
  return data;
}

const colleague = (email: string) => form({ email, name: "Ada Okoro", role: "purchasing" });

test("a colleague is mailed a link and listed once it set a password", async () => {
  const admin = await buildPerson(await buildOrganisation("buyer"), "admin");
  expect(await addColleague(admin, colleague("ada@example.test"))).toBeNull();
  expect((await readOrganisation(admin)).people.map(({ email }) => email)).not.toContain("ada@example.test");
  const mail = await OutboxEmail.findOne({ where: { recipient: "ada@example.test" }, rejectOnEmpty: true });
  const token = (mail.props as { link: string }).link.split("/").at(-1) ?? "";
  const password = "forty decibels below";
  expect((await resetPassword(token, form({ password, passwordAgain: password }))).ok).toBe(true);
  const listed = (await readOrganisation(admin)).people.find(({ email }) => email === "ada@example.test");
  expect(listed).toMatchObject({ role: "purchasing", state: "active" });
});

test("an address with an account elsewhere gets the answer a free one gets, and neither mail nor change", async () => {
  const admin = await buildPerson(await buildOrganisation("buyer"), "admin");
  const elsewhere = await buildPerson(await buildOrganisation("supplier"));
  expect(await addColleague(admin, colleague(elsewhere.email))).toEqual(
    await addColleague(admin, colleague("free@example.test")),
  );
  expect((await OutboxEmail.findAll()).map(({ recipient }) => recipient)).toEqual(["free@example.test"]);
  const same = await User.findOne({ where: { email: elsewhere.email }, actor: SYSTEM, rejectOnEmpty: true });
  expect(same.organisationId).toBe(elsewhere.organisationId);
});

test("a person of the own organisation is not added twice", async () => {
  const organisation = await buildOrganisation("buyer");
  const admin = await buildPerson(organisation, "admin");
  const { email } = await buildPerson(organisation, "engineer");
  expect((await addColleague(admin, colleague(email)))?.errors.email).toEqual(["This person is here already."]);
});
