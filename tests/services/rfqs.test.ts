// An RFQ's life up to its opening: numbers, refusals, foreign tenants, and what the opening mails.
import { expect, test } from "vitest";
import { AuditEvent, Invitation, OneTimeToken, OutboxEmail, Rfq, SpecificationRevision } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { parseRfqForm } from "~/forms/rfq";
import { readRfqHead } from "~/services/rfq-head.server";
import { readRfqOverview } from "~/services/rfq-overview.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { addInvitations } from "~/services/invitations.server";
import type { Person } from "~/services/person.server";
import {
  createRfq,
  editRfq,
  listReleasedSpecifications,
  openRfq,
  proposeRfq,
  readRfqDraft,
  type RfqFields,
} from "~/services/rfqs.server";
import { readSupplierInvitation } from "~/services/supplier-invitation.server";
import {
  ASSUMED_SETUP,
  buildInvitation,
  buildOrganisation,
  buildPerson,
  buildRfq,
  buildSpecification,
} from "../support/factories";
import { useDatabase } from "../support/database";

useDatabase();

const DAY_MS = 86_400_000;

const fields = (overrides: Partial<RfqFields> = {}): RfqFields => ({
  title: "Transmit band-pass, 500 pieces",
  breaks: [100, 500],
  askedQuantity: 500,
  dueAt: new Date(Date.now() + 14 * DAY_MS),
  dueZone: "Europe/Berlin",
  decisionRule: "guarded",
  currency: "EUR",
  text: "Measured data of three units, please.",
  unitsAsked: 3,
  unitsOverRange: 1,
  measurementPlan: {},
  assumedSetup: ASSUMED_SETUP,
  ...overrides,
});

const buyerAndEngineer = async () => {
  const buyer = await buildOrganisation("buyer", { currency: "GBP", decisionRule: "guarded" });
  return { buyer, engineer: await buildPerson(buyer) };
};

async function create(person: Person, specification: string, overrides: Partial<RfqFields> = {}): Promise<string> {
  const made = await createRfq(person, newIdempotencyKey(), specification, fields(overrides));
  if (!made?.ok) throw new Error(JSON.stringify(made));
  return made.value.publicId;
}

const invite = (person: Person, rfqId: string, ...emails: string[]) =>
  addInvitations(
    person,
    newIdempotencyKey(),
    rfqId,
    emails.map((email, index) => ({ company: `Supplier of ${email}`, email, index })),
  );

test("numbers of a buyer run on within the year without a gap, twelve made at once included, and each buyer has its own", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  await Promise.all(Array.from({ length: 12 }, () => create(engineer, specification.publicId)));
  const rfqs = await Rfq.findAll({ order: [["number", "ASC"]], actor: engineer });
  expect(rfqs.map(({ number }) => number)).toEqual(Array.from({ length: 12 }, (_, k) => k + 1));
  const year = (await databaseNow()).getUTCFullYear();
  expect((await readRfqHead(engineer, rfqs[0]?.publicId ?? ""))?.number).toBe(`RFQ-${year}-0001`);

  const { engineer: stranger } = await buyerAndEngineer();
  const { specification: theirs } = await buildSpecification(stranger);
  const first = await create(stranger, theirs.publicId);
  expect((await readRfqHead(stranger, first))?.number).toBe(`RFQ-${year}-0001`);
});

test("the proposal is a form that is read back but for the quantities, with the organisation's rule, zone and currency", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer, { title: "Receive band-pass" });
  const proposal = await proposeRfq(engineer, specification.publicId);
  expect(proposal).toMatchObject({ refusal: null, specification: { letter: "A", title: "Receive band-pass" } });
  const values = { ...proposal?.values, "breaks.0": "100", askedQuantity: "100" };
  expect(parseRfqForm(values, { now: new Date() })).toMatchObject({
    ok: true,
    value: { title: "Receive band-pass", decisionRule: "guarded", currency: "GBP", dueZone: "Europe/Berlin" },
  });
});

test("the proposal's sweeps are those of the released lines, and a draft's plan comes back as it was typed", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const proposal = await proposeRfq(engineer, specification.publicId);
  // A hundredth of 60 MHz in the passband, a tenth of 100 MHz over all edges.
  expect(proposal?.values).toMatchObject({
    "sweeps.0.from": "1.9200 GHz",
    "sweeps.0.to": "1.9800 GHz",
    "sweeps.0.maxStep": "600 kHz",
    "sweeps.1.from": "1.9200 GHz",
    "sweeps.1.to": "2.1400 GHz",
    "sweeps.1.maxStep": "10.00 MHz",
  });
  const values = { ...proposal?.values, "breaks.0": "100", askedQuantity: "100", "plan.temperatures": "-10; 50" };
  const read = parseRfqForm({ ...values, "sweeps.1.to": "4.4G", "plan.power": "-5" }, { now: new Date() });
  if (!read.ok) throw new Error(JSON.stringify(read.errors));
  const plan = {
    sweeps: [
      { band: [1.92e9, 1.98e9], maxStep: 600e3 },
      { band: [1.92e9, 4.4e9], maxStep: 10e6 },
    ],
    temperatures: [-10, 50],
    power: -5,
  };
  expect(read.value.measurementPlan).toEqual(plan);
  const rfqId = await create(engineer, specification.publicId, { measurementPlan: read.value.measurementPlan });
  expect((await readRfqOverview(engineer, rfqId))?.measurementPlan).toEqual(plan);

  const draft = await readRfqDraft(engineer, rfqId);
  const again = parseRfqForm(draft?.values ?? {}, { now: new Date() });
  expect(again).toMatchObject({ ok: true, value: { measurementPlan: plan } });
  expect(await editRfq(engineer, rfqId, 0, fields({ measurementPlan: {} }))).toMatchObject({ ok: true });
  expect((await readRfqOverview(engineer, rfqId))?.measurementPlan).toEqual({});
});

test("an invited supplier reads the plan", async () => {
  const { engineer } = await buyerAndEngineer();
  const measurementPlan = { sweeps: [{ band: [1e9, 2e9] as const, maxStep: 1e6 }], referencePlane: "board" as const };
  const { rfq } = await buildRfq(engineer, { measurementPlan });
  const organisation = await buildOrganisation("supplier");
  const supplier = await buildPerson(organisation);
  const { invitation } = await buildInvitation(rfq, organisation);
  const read = await readSupplierInvitation(supplier, invitation.publicId);
  expect(read?.measurementPlan).toEqual(measurementPlan);
});

test("the currency is the organisation's, whatever the form says", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const rfqId = await create(engineer, specification.publicId, { currency: "JPY" });
  expect((await readRfqHead(engineer, rfqId))?.currency).toBe("GBP");
});

test("a draft revision is refused with its reason, and is not offered among the released ones", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer, { status: "draft" });
  expect(await listReleasedSpecifications(engineer)).toEqual([]);
  expect((await proposeRfq(engineer, specification.publicId))?.refusal).toContain("draft");
  const made = await createRfq(engineer, newIdempotencyKey(), specification.publicId, fields());
  expect(made).toMatchObject({ ok: false, errors: { form: [expect.stringContaining("Release it first")] } });
  expect(await Rfq.count({ actor: SYSTEM })).toBe(0);
});

test("a due date in the past is refused at its field, by the database's clock, when written and when edited", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const past = new Date(Date.now() - 1_000);
  const made = await createRfq(engineer, newIdempotencyKey(), specification.publicId, fields({ dueAt: past }));
  expect(made).toMatchObject({ ok: false, errors: { dueDate: [expect.stringContaining("past")] } });
  const rfqId = await create(engineer, specification.publicId);
  expect(await editRfq(engineer, rfqId, 0, fields({ dueAt: past }))).toMatchObject({
    ok: false,
    errors: { dueDate: [expect.stringContaining("past")] },
  });
});

test("the same form sent twice makes one RFQ", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const key = newIdempotencyKey();
  const input = fields();
  const answers = await Promise.all([1, 2, 3].map(() => createRfq(engineer, key, specification.publicId, input)));
  expect(new Set(answers.map((answer) => JSON.stringify(answer))).size).toBe(1);
  expect(await Rfq.count({ actor: engineer })).toBe(1);
});

test("a draft is edited, its form reads back what was stored, and an older page does not overwrite a newer one", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const rfqId = await create(engineer, specification.publicId);
  const draft = await readRfqDraft(engineer, rfqId);
  const changed = fields({ title: "Second lot", breaks: [50, 200, 800], askedQuantity: 200, text: "" });
  expect(await editRfq(engineer, rfqId, draft?.lockVersion ?? -1, changed)).toMatchObject({ ok: true });
  const after = await readRfqDraft(engineer, rfqId);
  const read = parseRfqForm(after?.values ?? {}, { now: new Date() });
  const { dueAt: _, ...rest } = changed;
  expect(read).toMatchObject({ ok: true, value: { ...rest, currency: "GBP" } });
  expect(await editRfq(engineer, rfqId, draft?.lockVersion ?? -1, fields())).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("meanwhile")] },
  });
});

test("opening wants an invitation and a due date ahead", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const rfqId = await create(engineer, specification.publicId);
  expect((await readRfqOverview(engineer, rfqId))?.missing).toEqual(["invitation"]);
  expect(await openRfq(engineer, newIdempotencyKey(), rfqId)).toMatchObject({ ok: false });
  await invite(engineer, rfqId, "a@example.test");
  await Rfq.update({ dueAt: new Date() }, { where: { publicId: rfqId }, actor: SYSTEM });
  expect(await openRfq(engineer, newIdempotencyKey(), rfqId)).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("due date has passed")] },
  });
  expect((await readRfqHead(engineer, rfqId))?.state).toBe("draft");
  expect(await OutboxEmail.count()).toBe(0);
  expect(await OneTimeToken.count()).toBe(0);
});

test("opening mails each supplier alone, with a link of its own that ends with the due date", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const dueAt = new Date(Date.now() + 14 * DAY_MS);
  const rfqId = await create(engineer, specification.publicId, { dueAt });
  await invite(engineer, rfqId, "a@example.test", "b@example.test");
  expect(await openRfq(engineer, newIdempotencyKey(), rfqId)).toMatchObject({ ok: true, value: { mailed: 2 } });

  const mails = await OutboxEmail.findAll({ order: [["id", "ASC"]] });
  expect(mails.map(({ recipient, template }) => [recipient, template])).toEqual([
    ["a@example.test", "invitation"],
    ["b@example.test", "invitation"],
  ]);
  const links = mails.map(({ props }) => (props as { link: string }).link);
  expect(new Set(links).size).toBe(2);
  for (const link of links) expect(link).toMatch(/^http:\/\/127\.0\.0\.1:5180\/invitation\/[\w-]{43}$/);
  for (const { props } of mails) {
    expect(props).toMatchObject({ message: "Measured data of three units, please.", dueZone: "Europe/Berlin" });
    expect(JSON.stringify(props)).not.toMatch(/[ab]@example\.test/);
  }
  const tokens = await OneTimeToken.findAll();
  expect(tokens.map(({ expiresAt }) => expiresAt.getTime())).toEqual([dueAt.getTime(), dueAt.getTime()]);
  const states = await Invitation.findAll({ actor: engineer });
  expect(states.map(({ state }) => state)).toEqual(["sent", "sent"]);
  const opened = await AuditEvent.findOne({ where: { action: "opened" }, actor: engineer });
  expect(opened).toMatchObject({ actorUserId: engineer.userId, detail: { invitations: 2 } });
});

test("a due date months ahead leaves the link sixty days", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const rfqId = await create(engineer, specification.publicId, { dueAt: new Date(Date.now() + 200 * DAY_MS) });
  await invite(engineer, rfqId, "a@example.test");
  await openRfq(engineer, newIdempotencyKey(), rfqId);
  const [token] = await OneTimeToken.findAll();
  expect((token?.expiresAt.getTime() ?? 0) - (token?.createdAt.getTime() ?? 0)).toBe(60 * DAY_MS);
});

test("of ten openings at once one opens, and each supplier gets one mail", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification } = await buildSpecification(engineer);
  const rfqId = await create(engineer, specification.publicId);
  await invite(engineer, rfqId, "a@example.test", "b@example.test");
  const answers = await Promise.all(Array.from({ length: 10 }, () => openRfq(engineer, newIdempotencyKey(), rfqId)));
  expect(answers.filter((answer) => answer?.ok)).toHaveLength(1);
  expect(await OutboxEmail.count()).toBe(2);
});

test("an open RFQ is no longer edited", async () => {
  const { engineer } = await buyerAndEngineer();
  const { rfq } = await buildRfq(engineer);
  expect((await readRfqDraft(engineer, rfq.publicId))?.refusal).toContain("open");
  expect(await editRfq(engineer, rfq.publicId, rfq.lockVersion, fields())).toMatchObject({ ok: false });
});

test("an RFQ past its due millisecond reads as closed before any job has run", async () => {
  const { engineer } = await buyerAndEngineer();
  const { rfq } = await buildRfq(engineer, { dueAt: new Date(Date.now() - 5) });
  expect(rfq.status).toBe("open");
  expect((await readRfqHead(engineer, rfq.publicId))?.state).toBe("closed");
});

test("another buyer finds nothing: no head, no draft, no proposal, no step", async () => {
  const { engineer } = await buyerAndEngineer();
  const { engineer: stranger } = await buyerAndEngineer();
  const { rfq, specification } = await buildRfq(engineer, { status: "draft", openedAt: null });
  expect(await readRfqHead(stranger, rfq.publicId)).toBeNull();
  expect(await readRfqDraft(stranger, rfq.publicId)).toBeNull();
  expect(await readRfqOverview(stranger, rfq.publicId)).toBeNull();
  expect(await proposeRfq(stranger, specification.publicId)).toBeNull();
  expect(await createRfq(stranger, newIdempotencyKey(), specification.publicId, fields())).toBeNull();
  expect(await editRfq(stranger, rfq.publicId, 0, fields())).toBeNull();
  expect(await openRfq(stranger, newIdempotencyKey(), rfq.publicId)).toBeNull();
  expect(await invite(stranger, rfq.publicId, "a@example.test")).toBeNull();
});

test("a revision superseded after the form was shown is refused when it is sent", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification, revision } = await buildSpecification(engineer);
  await SpecificationRevision.update({ status: "superseded" }, { where: { id: revision.id }, actor: SYSTEM });
  expect(await createRfq(engineer, newIdempotencyKey(), specification.publicId, fields())).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("replaced")] },
  });
});

test("a draft on a revision that was replaced meanwhile is not opened, and mails nobody", async () => {
  const { engineer } = await buyerAndEngineer();
  const { specification, revision } = await buildSpecification(engineer);
  const rfqId = await create(engineer, specification.publicId);
  await invite(engineer, rfqId, "one@example.test");
  await revision.update({ status: "superseded" });
  const opened = await openRfq(engineer, newIdempotencyKey(), rfqId);
  expect(opened).toEqual({ ok: false, errors: { form: [expect.stringContaining("Revision A has been replaced")] } });
  expect([await OutboxEmail.count(), await Rfq.count({ where: { status: "open" }, actor: engineer })]).toEqual([0, 0]);
});

test("eight RFQs of different buyers opened at once all open", async () => {
  const ready = await Promise.all(
    Array.from({ length: 8 }, async (_, k) => {
      const { engineer } = await buyerAndEngineer();
      const { specification } = await buildSpecification(engineer);
      const rfqId = await create(engineer, specification.publicId);
      await invite(engineer, rfqId, `one-${k}@example.test`, `two-${k}@example.test`);
      return { engineer, rfqId };
    }),
  );
  const opened = await Promise.all(ready.map(({ engineer, rfqId }) => openRfq(engineer, newIdempotencyKey(), rfqId)));
  expect(opened.every((outcome) => outcome?.ok)).toBe(true);
  expect(await OutboxEmail.count()).toBe(16);
});
