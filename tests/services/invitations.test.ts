// Invitations: the directory they draw on, their states, and what may still be done with each.
import { expect, test } from "vitest";
import { AuditEvent, Invitation, OneTimeToken, OutboxEmail, Rfq, Supplier, SupplierContact } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { newIdempotencyKey } from "~/services/identifiers.server";
import {
  addInvitations,
  linkEnd,
  listInvitations,
  resendInvitation,
  revokeInvitation,
} from "~/services/invitations.server";
import type { Person } from "~/services/person.server";
import { openRfq } from "~/services/rfqs.server";
import { listSuppliers, setSupplierStatus, suggestSuppliers } from "~/services/suppliers.server";
import { buildInvitation, buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";

useDatabase();

const KESTREL = { company: "Kestrel Cavity Filters", email: "ines@kestrel.example", index: 0 };

const add = (person: Person, rfqId: string, ...rows: (typeof KESTREL)[]) =>
  addInvitations(person, newIdempotencyKey(), rfqId, rows);

async function draft(overrides: Parameters<typeof buildRfq>[1] = { status: "draft", openedAt: null }) {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, overrides);
  return { buyer, engineer, rfq };
}

const only = async (person: Person, rfqId: string) => {
  const sheet = await listInvitations(person, rfqId);
  expect(sheet?.entries).toHaveLength(1);
  return sheet?.entries[0];
};

test("inviting to a draft makes the directory entry with its contact and mails nothing", async () => {
  const { engineer, rfq } = await draft();
  expect(await add(engineer, rfq.publicId, KESTREL)).toMatchObject({ ok: true, value: { added: 1 } });
  expect(await only(engineer, rfq.publicId)).toMatchObject({
    company: "Kestrel Cavity Filters",
    email: "ines@kestrel.example",
    state: "draft",
    linkEnds: null,
    canResend: false,
    canRevoke: true,
  });
  expect(await Supplier.findOne({ actor: engineer })).toMatchObject({
    status: "candidate",
    supplierOrganisationId: null,
  });
  expect(await OutboxEmail.count()).toBe(0);
});

test("a company already in the directory is found by its name in any case, its new address kept beside the old", async () => {
  const { engineer, rfq } = await draft();
  await add(engineer, rfq.publicId, KESTREL);
  const { rfq: next } = await buildRfq(engineer, { status: "draft", openedAt: null });
  await add(engineer, next.publicId, { company: "KESTREL cavity filters", email: "second@kestrel.example", index: 0 });
  expect(await Supplier.count({ actor: engineer })).toBe(1);
  const contacts = await SupplierContact.findAll({ order: [["id", "ASC"]], actor: engineer });
  expect(contacts.map(({ email }) => email)).toEqual(["ines@kestrel.example", "second@kestrel.example"]);
});

test("names that differ by an accent are two companies", async () => {
  const { engineer, rfq } = await draft();
  await add(engineer, rfq.publicId, { company: "Müller Filter", email: "one@example.test", index: 0 });
  await add(engineer, rfq.publicId, { company: "Muller Filter", email: "two@example.test", index: 0 });
  const names = (await Supplier.findAll({ order: [["id", "ASC"]], actor: engineer })).map(({ name }) => name);
  expect(names).toEqual(["Müller Filter", "Muller Filter"]);
});

test("a row that is refused names its place, and no row of the post is kept", async () => {
  const { engineer, rfq } = await draft();
  await add(engineer, rfq.publicId, KESTREL);
  const before = await Supplier.count({ actor: engineer });
  const answer = await add(
    engineer,
    rfq.publicId,
    { company: "Orme Microwave", email: "sales@orme.example", index: 0 },
    { company: "Kestrel Cavity Filters", email: "other@kestrel.example", index: 2 },
    { company: "Pellmark Resonator", email: "ines@kestrel.example", index: 5 },
  );
  expect(answer).toMatchObject({
    ok: false,
    errors: {
      "invitations.2.company": [expect.stringContaining("on the list already")],
      "invitations.5.email": [expect.stringContaining("on the list already")],
    },
  });
  expect(await Invitation.count({ actor: engineer })).toBe(1);
  expect(await Supplier.count({ actor: engineer })).toBe(before);
});

test("a supplier blocked since it was put on the list is mailed neither by opening the RFQ nor by sending again", async () => {
  const { buyer, engineer, rfq } = await draft();
  const purchasing = await buildPerson(buyer, "purchasing");
  await add(engineer, rfq.publicId, KESTREL);
  const invitation = (await only(engineer, rfq.publicId))?.publicId ?? "";
  const [entry] = (await listSuppliers(engineer, { status: null, page: 1 })).entries;
  const rate = (status: "blocked" | "approved") => setSupplierStatus(purchasing, entry?.publicId ?? "", status);
  const open = () => openRfq(engineer, newIdempotencyKey(), rfq.publicId);
  const blocked = { ok: false, errors: { form: [expect.stringContaining("is blocked")] } };
  await rate("blocked");
  expect(await open()).toMatchObject(blocked);
  expect(await OutboxEmail.count()).toBe(0);
  await rate("approved");
  expect(await open()).toMatchObject({ ok: true });
  await rate("blocked");
  expect(await resendInvitation(engineer, rfq.publicId, invitation)).toMatchObject(blocked);
  expect(await OutboxEmail.count()).toBe(1);
});

test("a blocked supplier and an address of one's own organisation are not invited", async () => {
  const { buyer, engineer, rfq } = await draft();
  const purchasing = await buildPerson(buyer, "purchasing");
  await add(engineer, rfq.publicId, KESTREL);
  const [entry] = (await listSuppliers(engineer, { status: null, page: 1 })).entries;
  expect(await setSupplierStatus(purchasing, entry?.publicId ?? "", "blocked")).toMatchObject({ ok: true });
  const { rfq: next } = await buildRfq(engineer);
  expect(await add(engineer, next.publicId, KESTREL)).toMatchObject({
    ok: false,
    errors: { "invitations.0.company": [expect.stringContaining("blocked")] },
  });
  expect(await add(engineer, next.publicId, { ...KESTREL, company: "Own", email: purchasing.email })).toMatchObject({
    ok: false,
    errors: { "invitations.0.email": [expect.stringContaining("own organisation")] },
  });
  expect(await suggestSuppliers(engineer)).toEqual([]);
  expect(await OutboxEmail.count()).toBe(0);
});

test("an address with an account elsewhere is invited as any other: the answer tells nothing of it", async () => {
  const { engineer, rfq } = await draft({});
  const known = await buildPerson(await buildOrganisation("supplier"));
  const stranger = await buildPerson(await buildOrganisation("buyer"));
  const answers = [
    await add(engineer, rfq.publicId, { company: "One", email: known.email, index: 0 }),
    await add(engineer, rfq.publicId, { company: "Two", email: stranger.email, index: 0 }),
    await add(engineer, rfq.publicId, { company: "Three", email: "nobody@example.test", index: 0 }),
  ];
  expect(answers).toEqual([answers[0], answers[0], answers[0]]);
  expect(answers[0]).toEqual({ ok: true, value: { added: 1 } });
});

test("inviting to an open RFQ mails at once, with the same form sent twice once", async () => {
  const { engineer, rfq } = await draft({});
  const key = newIdempotencyKey();
  await Promise.all([1, 2].map(() => addInvitations(engineer, key, rfq.publicId, [KESTREL])));
  expect(await OutboxEmail.count()).toBe(1);
  const entry = await only(engineer, rfq.publicId);
  expect(entry).toMatchObject({ state: "sent", linkEnds: rfq.dueAt.toISOString(), canResend: true, canRevoke: true });
});

test("the same company added by two people at once is on the list once", async () => {
  const { buyer, engineer, rfq } = await draft({});
  const purchasing = await buildPerson(buyer, "purchasing");
  const answers = await Promise.all([
    add(engineer, rfq.publicId, KESTREL),
    add(purchasing, rfq.publicId, { ...KESTREL, email: "other@kestrel.example" }),
  ]);
  expect(answers.filter((answer) => answer?.ok)).toHaveLength(1);
  expect(await Invitation.count({ actor: engineer })).toBe(1);
});

test("new companies added to two RFQs at once make one directory entry", async () => {
  const { engineer, rfq } = await draft({});
  const { rfq: other } = await buildRfq(engineer);
  const answers = await Promise.all([rfq, other].map(({ publicId }) => add(engineer, publicId, KESTREL)));
  expect(answers.every((answer) => answer?.ok)).toBe(true);
  expect(await Supplier.count({ actor: engineer })).toBe(1);
});

test("sending again makes a new link and ends the old one; a supplier that declined is asked again that way", async () => {
  const { engineer, rfq } = await draft({});
  await add(engineer, rfq.publicId, KESTREL);
  const entry = await only(engineer, rfq.publicId);
  const id = entry?.publicId ?? "";
  await Invitation.update(
    { state: "declined", reason: "No capacity", declinedAt: new Date() },
    { where: { publicId: id }, actor: SYSTEM },
  );
  expect(await only(engineer, rfq.publicId)).toMatchObject({ state: "declined", reason: "No capacity" });
  expect(await resendInvitation(engineer, rfq.publicId, id)).toMatchObject({ ok: true });
  expect(await only(engineer, rfq.publicId)).toMatchObject({ state: "sent", reason: null });
  const tokens = await OneTimeToken.findAll();
  expect(tokens).toHaveLength(2);
  expect(tokens.filter(({ revokedAt }) => revokedAt === null)).toHaveLength(1);
  expect(await OutboxEmail.count()).toBe(2);
});

test("one removed before it was sent leaves the list, one revoked stays visible and its link has ended", async () => {
  const { engineer, rfq } = await draft();
  await add(engineer, rfq.publicId, KESTREL);
  const drafted = await only(engineer, rfq.publicId);
  expect(await revokeInvitation(engineer, rfq.publicId, drafted?.publicId ?? "")).toMatchObject({ ok: true });
  expect((await listInvitations(engineer, rfq.publicId))?.entries).toEqual([]);

  await Rfq.update({ status: "open", openedAt: new Date() }, { where: { id: rfq.id }, actor: SYSTEM });
  await add(engineer, rfq.publicId, KESTREL);
  const sent = await only(engineer, rfq.publicId);
  expect(await revokeInvitation(engineer, rfq.publicId, sent?.publicId ?? "")).toMatchObject({ ok: true });
  expect(await only(engineer, rfq.publicId)).toMatchObject({ state: "revoked", canResend: true, canRevoke: false });
  expect((await OneTimeToken.findAll()).every(({ revokedAt }) => revokedAt !== null)).toBe(true);
  const events = await AuditEvent.findAll({ order: [["id", "ASC"]], actor: engineer });
  expect(events.map(({ action }) => action)).toEqual(["added", "removed", "sent", "revoked"]);
  expect(events.every(({ supplierOrganisationId }) => supplierOrganisationId === null)).toBe(true);
});

test("revoking an accepted invitation takes the RFQ out of the supplier's sight", async () => {
  const { engineer, rfq } = await draft({});
  const kestrel = await buildOrganisation("supplier");
  const member = await buildPerson(kestrel);
  const { invitation } = await buildInvitation(rfq, kestrel);
  expect(await Rfq.findByPk(rfq.id, { actor: member })).not.toBeNull();
  expect(await resendInvitation(engineer, rfq.publicId, invitation.publicId)).toMatchObject({ ok: false });
  expect(await revokeInvitation(engineer, rfq.publicId, invitation.publicId)).toMatchObject({ ok: true });
  expect(await Rfq.findByPk(rfq.id, { actor: member })).toBeNull();
});

test("an unanswered invitation of a closed RFQ reads as expired, and nothing can be sent or revoked", async () => {
  const { engineer, rfq } = await draft({});
  await add(engineer, rfq.publicId, KESTREL);
  const dueAt = new Date(Date.now() - 10);
  await Rfq.update({ dueAt }, { where: { id: rfq.id }, actor: SYSTEM });
  const entry = await only(engineer, rfq.publicId);
  expect(entry).toMatchObject({ state: "expired", since: dueAt.toISOString(), canResend: false, canRevoke: false });
  const id = entry?.publicId ?? "";
  expect(await resendInvitation(engineer, rfq.publicId, id)).toMatchObject({ ok: false });
  expect(await revokeInvitation(engineer, rfq.publicId, id)).toMatchObject({ ok: false });
  expect(await add(engineer, rfq.publicId, { ...KESTREL, company: "Orme", email: "sales@orme.example" })).toMatchObject(
    {
      ok: false,
    },
  );
});

test("at most thirty are invited to one RFQ", async () => {
  const { engineer, rfq } = await draft();
  const rows = Array.from({ length: 30 }, (_, index) => ({
    company: `Company ${index}`,
    email: `contact-${index}@example.test`,
    index,
  }));
  expect(await add(engineer, rfq.publicId, ...rows)).toMatchObject({ ok: true });
  expect(await add(engineer, rfq.publicId, KESTREL)).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("at most 30")] },
  });
});

test("another buyer finds no invitation to send again or revoke, nor the directory's entry", async () => {
  const { engineer, rfq } = await draft({});
  await add(engineer, rfq.publicId, KESTREL);
  const entry = await only(engineer, rfq.publicId);
  const stranger = await buildPerson(await buildOrganisation("buyer"), "admin");
  expect(await listInvitations(stranger, rfq.publicId)).toBeNull();
  expect(await resendInvitation(stranger, rfq.publicId, entry?.publicId ?? "")).toBeNull();
  expect(await revokeInvitation(stranger, rfq.publicId, entry?.publicId ?? "")).toBeNull();
  const [directory] = (await listSuppliers(engineer, { status: null, page: 1 })).entries;
  expect(await setSupplierStatus(stranger, directory?.publicId ?? "", "blocked")).toBeNull();
  expect((await listSuppliers(stranger, { status: null, page: 1 })).total).toBe(0);
});

test("an invitation of one RFQ is not found under another", async () => {
  const { engineer, rfq } = await draft({});
  const { rfq: other } = await buildRfq(engineer);
  await add(engineer, rfq.publicId, KESTREL);
  const entry = await only(engineer, rfq.publicId);
  expect(await revokeInvitation(engineer, other.publicId, entry?.publicId ?? "")).toBeNull();
});

test("the directory counts by status over all entries and tells how many RFQs each was invited to", async () => {
  const { buyer, engineer, rfq } = await draft({});
  const purchasing = await buildPerson(buyer, "purchasing");
  await add(engineer, rfq.publicId, KESTREL, { company: "Orme Microwave", email: "sales@orme.example", index: 1 });
  const { rfq: next } = await buildRfq(engineer);
  await add(engineer, next.publicId, KESTREL);
  const { rfq: unopened } = await buildRfq(engineer, { status: "draft", openedAt: null });
  await add(engineer, unopened.publicId, KESTREL);
  const all = await listSuppliers(engineer, { status: null, page: 1 });
  expect(all.entries.map(({ name, invitedTo }) => [name, invitedTo])).toEqual([
    ["Kestrel Cavity Filters", 2],
    ["Orme Microwave", 1],
  ]);
  await setSupplierStatus(purchasing, all.entries[0]?.publicId ?? "", "approved");
  const approved = await listSuppliers(engineer, { status: "approved", page: 1 });
  expect(approved).toMatchObject({ counts: { candidate: 1, approved: 1, blocked: 0 }, total: 1, pages: 1 });
  expect(approved.entries.map(({ name }) => name)).toEqual(["Kestrel Cavity Filters"]);
});

test("a link ends with the due date, after sixty days at most", () => {
  const sent = new Date("2027-01-01T00:00:00.000Z");
  expect(linkEnd(sent, new Date("2027-02-01T12:00:00.000Z")).toISOString()).toBe("2027-02-01T12:00:00.000Z");
  expect(linkEnd(sent, new Date("2027-12-01T12:00:00.000Z")).toISOString()).toBe("2027-03-02T00:00:00.000Z");
});
