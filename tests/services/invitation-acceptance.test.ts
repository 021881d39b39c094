// Answering an invitation by its link: each way in, each refusal, and that a link counts once.
import { expect, test } from "vitest";
import {
  AuditEvent,
  Invitation,
  OneTimeToken,
  Organisation,
  OutboxEmail,
  Rfq,
  Supplier,
  SupplierContact,
  User,
} from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { acceptAsMember, acceptAsNew, declineInvitation, readOffer } from "~/services/invitation-acceptance.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { addInvitations, resendInvitation, revokeInvitation } from "~/services/invitations.server";
import { passwordFits } from "~/services/passwords.server";
import { buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";

useDatabase();

const PASSWORD = "cobalt lantern ferry 71";
const input = {
  organisationName: "Kestrel Cavity Filters",
  name: "Ines Varga",
  password: PASSWORD,
  passwordAgain: PASSWORD,
};

async function openRfq(overrides: Parameters<typeof buildRfq>[1] = {}) {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, overrides);
  return { buyer, engineer, rfq };
}

/** Invites and returns the token out of the mail that was queued last for the address. */
async function invite(
  engineer: Awaited<ReturnType<typeof buildPerson>>,
  rfq: Rfq,
  email = "ines@kestrel.example",
  company = "Kestrel Cavity Filters",
) {
  const added = await addInvitations(engineer, newIdempotencyKey(), rfq.publicId, [{ company, email, index: 0 }]);
  expect(added?.ok).toBe(true);
  const invitation = await Invitation.findOne({ where: { rfqId: rfq.id, email }, actor: SYSTEM, rejectOnEmpty: true });
  return { invitation, token: await tokenMailedTo(email) };
}

async function tokenMailedTo(email: string): Promise<string> {
  const mail = await OutboxEmail.findOne({ where: { recipient: email }, order: [["id", "DESC"]], rejectOnEmpty: true });
  return (mail.props as { link: string }).link.split("/").at(-1) ?? "";
}

test("a new address makes a supplier organisation with its first user, joins the directory entry and uses the link up", async () => {
  const { buyer, engineer, rfq } = await openRfq();
  const { invitation, token } = await invite(engineer, rfq);
  const answer = await acceptAsNew(token, invitation.publicId, input, { requestId: "r", ip: "127.0.0.1" });
  expect(answer).toMatchObject({ ok: true, value: { invitation: invitation.publicId } });

  const user = await User.findOne({
    where: { email: "ines@kestrel.example" },
    actor: SYSTEM,
    rejectOnEmpty: true,
  });
  expect(user).toMatchObject({ name: "Ines Varga", role: "supplier", organisationKind: "supplier" });
  expect(await passwordFits(user.passwordHash, PASSWORD)).toBe(true);
  const organisation = await Organisation.findByPk(user.organisationId, { actor: SYSTEM, rejectOnEmpty: true });
  expect(organisation).toMatchObject({ kind: "supplier", name: "Kestrel Cavity Filters" });
  const row = await Invitation.findByPk(invitation.id, { actor: engineer });
  expect(row).toMatchObject({ state: "accepted", supplierOrganisationId: organisation.id });
  const entry = await Supplier.findByPk(invitation.supplierId, { actor: engineer });
  expect(entry?.supplierOrganisationId).toBe(organisation.id);
  const event = await AuditEvent.findOne({ where: { action: "accepted" }, actor: SYSTEM });
  expect(event).toMatchObject({
    actorName: "Ines Varga",
    buyerOrganisationId: buyer.id,
    supplierOrganisationId: organisation.id,
    rfqId: rfq.id,
  });
  expect(await readOffer(token)).toBeNull();
  expect(await acceptAsNew(token, invitation.publicId, input, {})).toBeNull();
});

test("reading an offer fifty times uses nothing up and says nothing of the specification", async () => {
  const { buyer, engineer, rfq } = await openRfq();
  const { invitation, token } = await invite(engineer, rfq);
  for (let k = 0; k < 50; k += 1) await readOffer(token);
  const offer = await readOffer(token);
  expect(Object.keys(offer ?? {}).sort()).toEqual(
    ["buyerName", "company", "dueAt", "dueZone", "email", "invitation", "rfqNumber", "rfqTitle"].sort(),
  );
  expect(offer).toMatchObject({ buyerName: buyer.name, invitation: invitation.publicId });
});

test("of twenty redemptions at once exactly one succeeds", async () => {
  const { engineer, rfq } = await openRfq();
  const { invitation, token } = await invite(engineer, rfq);
  const answers = await Promise.all(
    Array.from({ length: 20 }, () => acceptAsNew(token, invitation.publicId, input, {})),
  );
  expect(answers.filter((answer) => answer?.ok)).toHaveLength(1);
  expect(await User.count({ where: { email: "ines@kestrel.example" }, actor: SYSTEM })).toBe(1);
  expect(await AuditEvent.count({ where: { action: "accepted" }, actor: SYSTEM })).toBe(1);
});

test("the database keeps no token: only its hash, and one altered letter opens nothing", async () => {
  const { engineer, rfq } = await openRfq();
  const { token } = await invite(engineer, rfq);
  const rows = await OneTimeToken.findAll();
  expect(rows).toHaveLength(1);
  expect(JSON.stringify(rows.map((row) => row.tokenHash.toString("latin1")))).not.toContain(token);
  const altered = `${token.startsWith("A") ? "B" : "A"}${token.slice(1)}`;
  expect(await readOffer(altered)).toBeNull();
});

test("a link ends when it is sent again, when it is revoked, when the RFQ closes and at the due millisecond", async () => {
  const { engineer, rfq } = await openRfq();
  const { invitation, token: first } = await invite(engineer, rfq);
  await resendInvitation(engineer, rfq.publicId, invitation.publicId);
  const second = await tokenMailedTo(invitation.email);
  expect(await readOffer(first)).toBeNull();
  expect(await readOffer(second)).not.toBeNull();
  await revokeInvitation(engineer, rfq.publicId, invitation.publicId);
  expect(await readOffer(second)).toBeNull();

  await resendInvitation(engineer, rfq.publicId, invitation.publicId);
  const third = await tokenMailedTo(invitation.email);
  expect(await readOffer(third)).not.toBeNull();
  await Rfq.update({ status: "closed" }, { where: { id: rfq.id }, actor: SYSTEM });
  expect(await readOffer(third)).toBeNull();
  await Rfq.update({ status: "open", dueAt: new Date() }, { where: { id: rfq.id }, actor: SYSTEM });
  expect(await readOffer(third)).toBeNull();
  expect(await acceptAsNew(third, invitation.publicId, input, {})).toBeNull();
});

test("a member of a supplier accepts for the organisation, without a new one", async () => {
  const { engineer, rfq } = await openRfq();
  const kestrel = await buildOrganisation("supplier");
  const member = await buildPerson(kestrel, "supplier", { email: "ines@kestrel.example" });
  const { invitation, token } = await invite(engineer, rfq);
  expect(await acceptAsMember(member, token, invitation.publicId, false)).toMatchObject({ ok: true });
  expect(await Organisation.count({ where: { kind: "supplier" }, actor: SYSTEM })).toBe(1);
  expect(await Rfq.findByPk(rfq.id, { actor: member })).not.toBeNull();
});

test("another address than the invited one has to confirm, and never joins silently", async () => {
  const { engineer, rfq } = await openRfq();
  const colleague = await buildPerson(await buildOrganisation("supplier"));
  const { invitation, token } = await invite(engineer, rfq);
  const silent = await acceptAsMember(colleague, token, invitation.publicId, false);
  expect(silent).toMatchObject({ ok: false, errors: { confirmed: [expect.stringContaining("another address")] } });
  expect(await readOffer(token)).not.toBeNull();
  expect(await acceptAsMember(colleague, token, invitation.publicId, true)).toMatchObject({ ok: true });
  const event = await AuditEvent.findOne({ where: { action: "accepted" }, actor: SYSTEM });
  expect(event?.detail).toMatchObject({ email: "ines@kestrel.example", acceptedBy: colleague.email });
});

test("a buyer cannot accept, whichever buyer it is, and the link stays good", async () => {
  const { engineer, rfq } = await openRfq();
  const stranger = await buildPerson(await buildOrganisation("buyer"));
  const { invitation, token } = await invite(engineer, rfq);
  for (const person of [engineer, stranger])
    expect(await acceptAsMember(person, token, invitation.publicId, true)).toMatchObject({ ok: false });
  expect(await readOffer(token)).not.toBeNull();
});

test("an address that has an account is told to sign in, and its password stays as it is", async () => {
  const { engineer, rfq } = await openRfq();
  const holder = await buildPerson(await buildOrganisation("supplier"), "supplier", { email: "ines@kestrel.example" });
  const { invitation, token } = await invite(engineer, rfq);
  const answer = await acceptAsNew(token, invitation.publicId, input, {});
  expect(answer).toMatchObject({ ok: false, errors: { form: [expect.stringContaining("Sign in")] } });
  expect((await User.findByPk(holder.userId, { actor: SYSTEM }))?.passwordHash).toBeNull();
  expect(await readOffer(token)).not.toBeNull();
});

test("a second contact of a company that is joined already founds no second organisation", async () => {
  const { engineer, rfq } = await openRfq();
  const first = await invite(engineer, rfq);
  await acceptAsNew(first.token, first.invitation.publicId, input, {});
  const { rfq: next } = await buildRfq(engineer);
  const { invitation, token } = await invite(engineer, next, "second@kestrel.example");
  const answer = await acceptAsNew(token, invitation.publicId, input, {});
  expect(answer).toMatchObject({ ok: false, errors: { form: [expect.stringContaining("colleague")] } });
  expect(await Organisation.count({ where: { kind: "supplier" }, actor: SYSTEM })).toBe(1);
  const outsider = await buildPerson(await buildOrganisation("supplier"));
  expect(await acceptAsMember(outsider, token, invitation.publicId, true)).toMatchObject({ ok: false });
});

test("a company the buyer keeps under two names: the invitation moves to the entry that is joined", async () => {
  const { engineer, rfq } = await openRfq();
  const member = await buildPerson(await buildOrganisation("supplier"), "supplier", { email: "ines@kestrel.example" });
  const first = await invite(engineer, rfq);
  await acceptAsMember(member, first.token, first.invitation.publicId, false);
  const { rfq: next } = await buildRfq(engineer);
  const second = await invite(engineer, next, member.email, "Kestrel, Bristol works");
  expect(await acceptAsMember(member, second.token, second.invitation.publicId, false)).toMatchObject({ ok: true });
  const moved = await Invitation.findByPk(second.invitation.id, { actor: SYSTEM });
  expect(moved?.supplierId).toBe(first.invitation.supplierId);

  // The same organisation twice on one RFQ: one invitation is answered, not both.
  const third = await invite(engineer, next, "other@kestrel.example", "Kestrel, Leeds works");
  expect(await acceptAsMember(member, third.token, third.invitation.publicId, true)).toMatchObject({ ok: false });
  expect(await SupplierContact.count({ actor: engineer })).toBe(3);
});

test("declining needs no account, keeps the reason for the buyer and uses the link up", async () => {
  const { engineer, rfq } = await openRfq();
  const { invitation, token } = await invite(engineer, rfq);
  expect(await declineInvitation(null, token, invitation.publicId, "No capacity before March.")).toMatchObject({
    ok: true,
  });
  const row = await Invitation.findByPk(invitation.id, { actor: engineer });
  expect(row).toMatchObject({ state: "declined", reason: "No capacity before March." });
  expect(await readOffer(token)).toBeNull();
  expect(await acceptAsNew(token, invitation.publicId, input, {})).toBeNull();
});

test("somebody else's account in the browser does not sign the refusal", async () => {
  const { engineer, rfq } = await openRfq();
  const outsider = await buildPerson(await buildOrganisation("supplier"));
  const { invitation, token } = await invite(engineer, rfq);
  await declineInvitation(outsider, token, invitation.publicId, "No capacity before March.");
  const event = await AuditEvent.findOne({ where: { action: "declined" }, actor: SYSTEM });
  expect(event).toMatchObject({ actorUserId: null, supplierOrganisationId: null });
});

test("an answer meant for another invitation opened meanwhile is refused", async () => {
  const { engineer, rfq } = await openRfq();
  const first = await invite(engineer, rfq);
  const { rfq: next } = await buildRfq(engineer);
  const second = await invite(engineer, next, "other@example.test", "Halden Resonator Works");
  const answer = await acceptAsNew(second.token, first.invitation.publicId, input, {});
  expect(answer).toMatchObject({ ok: false, errors: { form: [expect.stringContaining("meanwhile")] } });
  expect(await readOffer(second.token)).not.toBeNull();
});

test("accepting and revoking at once: one of the two holds, and the record agrees", async () => {
  for (let k = 0; k < 5; k += 1) {
    const { engineer, rfq } = await openRfq();
    const { invitation, token } = await invite(engineer, rfq, `race-${k}@example.test`);
    const [accepted, revoked] = await Promise.all([
      acceptAsNew(token, invitation.publicId, input, {}),
      revokeInvitation(engineer, rfq.publicId, invitation.publicId),
    ]);
    expect(revoked?.ok).toBe(true);
    const row = await Invitation.findByPk(invitation.id, { actor: SYSTEM });
    expect(row?.state).toBe("revoked");
    const events = await AuditEvent.findAll({ where: { rfqId: rfq.id }, order: [["id", "ASC"]], actor: SYSTEM });
    const actions = events.map(({ action }) => action);
    expect(actions).toEqual(["sent", ...(accepted?.ok ? ["accepted"] : []), "revoked"]);
  }
});
