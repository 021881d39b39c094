// Submitting a quote: the due millisecond, what may be missing, once for a form pressed twice, and races with who closes the RFQ.
import { setTimeout as sleep } from "node:timers/promises";
import { expect, test } from "vitest";
import {
  AuditEvent,
  Invitation,
  Job,
  MeasurementRow,
  Quote,
  QuoteDeclaration,
  QuotePrice,
  QuoteVersion,
  Rfq,
  StoredFile,
  VersionMeasurement,
} from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { closeDueRfqs, closeRfq } from "~/services/closing.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { reviewQuote, submissionRefusal, submitQuote } from "~/services/quote-submission.server";
import { saveDraft } from "~/services/quotes.server";
import { inTransaction } from "~/services/transaction.server";
import { buildOrganisation, buildPerson } from "../support/factories";
import { useDatabase } from "../support/database";
import {
  addSupplier,
  buildJourneyQuote,
  journeyFiles,
  uploadFiles,
  type NamedBytes,
} from "../support/supplier-journey";

useDatabase();

const [orme] = journeyFiles("orme-microwave") as [NamedBytes];

async function readyQuote(overrides: Parameters<typeof buildJourneyQuote>[1] = {}) {
  const found = await buildJourneyQuote("Orme Microwave", overrides);
  await uploadFiles(found.person, found.quote, [orme]);
  return found;
}

const submit = (found: Pick<Awaited<ReturnType<typeof readyQuote>>, "person" | "quote">, key = newIdempotencyKey()) =>
  submitQuote(found.person, found.quote.publicId, key);

test("a submission freezes terms, prices, answers and files, and shows them to the buyer", async () => {
  const found = await readyQuote();
  expect(await Quote.count({ actor: found.engineer })).toBe(0);
  const outcome = await submit(found);
  expect(outcome).toMatchObject({ ok: true, value: { version: 1 } });
  expect(outcome?.ok ? outcome.value.receipt : "").toMatch(/^([0-9A-F]{4}-){3}[0-9A-F]{4}$/);
  const as = { actor: found.engineer };
  const version = await QuoteVersion.findOne({ ...as, rejectOnEmpty: true });
  expect(version).toMatchObject({
    number: 1,
    revisionId: found.revision.id,
    submitterName: found.person.name,
    currency: "EUR",
    nre: "4200.0000",
    leadVolumeDays: 56,
    validUntil: "2031-03-31",
    incoterms: "DAP",
    place: "Augsburg",
    basis: "measured",
  });
  expect(version.contentHash).toHaveLength(32);
  const prices = await QuotePrice.findAll({ ...as, order: [["quantity", "ASC"]] });
  expect(prices.map(({ quantity, unitPrice }) => [quantity, unitPrice])).toEqual([
    [100, "145.0000"],
    [500, "129.5000"],
    [1000, "118.0000"],
  ]);
  expect(await QuoteDeclaration.count({ where: { answer: "comply" }, ...as })).toBe(2);
  expect(await VersionMeasurement.count(as)).toBe(1);
  expect(await MeasurementRow.count(as)).toBe(1);
  expect(await StoredFile.count(as)).toBe(1);
  expect(await Quote.findOne(as)).toMatchObject({ state: "submitted", currentVersionId: version.id });
  expect(await Job.findOne()).toMatchObject({ kind: "score", key: String(version.id), state: "pending" });
  expect(await AuditEvent.findOne({ where: { action: "submitted" }, ...as })).toMatchObject({
    quoteId: found.quote.id,
  });
});

test("at the due millisecond it is refused with the time, and nothing is written; a millisecond before it is taken", async () => {
  const found = await readyQuote();
  expect(await submit(found)).toMatchObject({ ok: true });
  // The instant the database gave while it held the RFQ, against a due date set to it and to the millisecond after.
  const { submittedAt: now } = await QuoteVersion.findOne({ actor: SYSTEM, rejectOnEmpty: true });
  const at = (dueAt: Date) => {
    const { rfq, quote } = found;
    return submissionRefusal({ rfq: rfq.set({ dueAt }), quote, now });
  };
  expect(at(now)).toMatch(/^The RFQ closed at .* This submission was not taken\.$/);
  expect(at(new Date(now.getTime() + 1))).toBeNull();
  await Rfq.update({ dueAt: await databaseNow() }, { where: { id: found.rfq.id }, actor: SYSTEM });
  expect(await submit(found)).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("The RFQ closed at")] },
  });
  expect(await QuoteVersion.count({ actor: SYSTEM })).toBe(1);
  expect(await Job.count()).toBe(1);
});

test("lateness is read after the wait for the RFQ's row, not before it", async () => {
  const found = await readyQuote();
  let release: () => void = () => undefined;
  const held = new Promise<void>((resolve) => (release = resolve));
  const closing = inTransaction(async (transaction) => {
    const rfq = await Rfq.findByPk(found.rfq.id, { actor: SYSTEM, transaction, lock: transaction.LOCK.UPDATE });
    release();
    await sleep(300); // the submission begins while the date is still ahead, and waits here
    await rfq?.update({ dueAt: await databaseNow(transaction) }, { transaction });
  });
  await held;
  const outcome = await submit(found);
  await closing;
  expect(outcome).toMatchObject({ ok: false });
  expect(await QuoteVersion.count({ actor: SYSTEM })).toBe(0);
});

test("of eight suppliers that submit while the due date passes, every one taken is before it, and all are seen once it is closed", async () => {
  const first = await readyQuote();
  const others = await Promise.all(Array.from({ length: 7 }, (_, k) => addSupplier(first.rfq, `Supplier ${k}`)));
  for (const { person, quote } of others) await uploadFiles(person, quote, [orme]);
  const dueAt = new Date((await databaseNow()).getTime() + 250);
  await Rfq.update({ dueAt }, { where: { id: first.rfq.id }, actor: SYSTEM });
  const outcomes = await Promise.all(
    [first, ...others].map(async (supplier, k) => {
      await sleep(k * 60);
      return submit(supplier);
    }),
  );
  while ((await databaseNow()) < dueAt) await sleep(20);
  await closeDueRfqs();
  const versions = await QuoteVersion.findAll({ actor: first.engineer });
  expect(versions).toHaveLength(outcomes.filter((outcome) => outcome?.ok).length);
  for (const { submittedAt } of versions) expect(submittedAt.getTime()).toBeLessThan(dueAt.getTime());
  for (const outcome of outcomes.filter((each) => !each?.ok))
    expect(outcome).toMatchObject({ errors: { form: [expect.any(String)] } });
});

test("a submission and an early closing at once leave either a quote before the closing or none", async () => {
  const found = await readyQuote();
  const [outcome] = await Promise.all([submit(found), closeRfq(found.engineer, found.rfq.publicId)]);
  const rfq = await Rfq.findByPk(found.rfq.id, { actor: SYSTEM, rejectOnEmpty: true });
  const version = await QuoteVersion.findOne({ actor: SYSTEM });
  expect(rfq.status).toBe("closed");
  expect(version !== null).toBe(outcome?.ok);
  if (version && rfq.closedAt) expect(version.submittedAt.getTime()).toBeLessThanOrEqual(rfq.closedAt.getTime());
  expect(await submit(found)).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("The RFQ closed at")] },
  });
});

test("a form pressed twice submits once; a new one before the due date makes version 2 and keeps the first", async () => {
  const found = await readyQuote();
  const key = newIdempotencyKey();
  const outcomes = await Promise.all([submit(found, key), submit(found, key), submit(found, key)]);
  for (const outcome of outcomes) expect(outcome).toMatchObject({ ok: true, value: { version: 1 } });
  expect(await submit(found)).toMatchObject({ ok: true, value: { version: 2 } });
  const versions = await QuoteVersion.findAll({ actor: found.person, order: [["number", "ASC"]] });
  expect(versions.map(({ number }) => number)).toEqual([1, 2]);
  expect(versions[0]?.contentHash.equals(versions[1]?.contentHash ?? Buffer.alloc(0))).toBe(false);
  expect(await Quote.findOne({ actor: found.person })).toMatchObject({ currentVersionId: versions[1]?.id });
  expect(await Job.count()).toBe(2);
});

test("what is missing is told by place, and the key may be used again once it is there", async () => {
  const found = await buildJourneyQuote("Orme Microwave");
  const { "declarations.line61.answer": _, ...values } = found.quote.draft.values;
  await found.quote.update({ draft: { values: { ...values, nre: "" } } });
  const key = newIdempotencyKey();
  expect(await submit(found, key)).toMatchObject({
    ok: false,
    errors: {
      data: ["Upload at least one measured file."],
      nre: [expect.any(String)],
      "declarations.line61.answer": [expect.any(String)],
    },
  });
  expect(await reviewQuote(found.person, found.quote.publicId)).toMatchObject({
    terms: null,
    errors: { data: [expect.any(String)] },
  });
  await found.quote.update({ draft: { values: { ...values, nre: "0", "declarations.line61.answer": "comply" } } });
  await uploadFiles(found.person, found.quote, [orme]);
  await MeasurementRow.update({ temperature: null, serial: null }, { where: {}, actor: SYSTEM });
  expect(await submit(found, key)).toMatchObject({
    ok: false,
    errors: { data: ["Enter the unit of OM-0031_25C.s2p.", "Enter the temperature of OM-0031_25C.s2p."] },
  });
  await MeasurementRow.update({ temperature: "25.0", serial: "OM-0031" }, { where: {}, actor: SYSTEM });
  expect(await submit(found, key)).toMatchObject({ ok: true });
});

test("a quote is nobody's to submit but its supplier's, and not after the invitation was revoked", async () => {
  const found = await readyQuote();
  const key = newIdempotencyKey();
  const strangers = await Promise.all(
    (["buyer", "supplier"] as const).map(async (kind) => buildPerson(await buildOrganisation(kind))),
  );
  for (const person of [found.engineer, ...strangers]) {
    expect(await submitQuote(person, found.quote.publicId, key)).toBeNull();
    expect(await reviewQuote(person, found.quote.publicId)).toBeNull();
  }
  await Invitation.update({ state: "revoked" }, { where: { id: found.invitation.id }, actor: SYSTEM });
  expect(await submit(found)).toBeNull();
  expect(await QuoteVersion.count({ actor: SYSTEM })).toBe(0);
});

test("what a colleague changed since the review is not submitted unread", async () => {
  const found = await readyQuote();
  await found.quote.reload({ actor: found.person });
  const seen = found.quote.savedAt.toISOString();
  const colleague = await buildPerson(found.organisation);
  const key = newIdempotencyKey();
  await sleep(2); // the colleague's save falls in another millisecond
  await saveDraft(colleague, found.quote.publicId, { "prices.500": "1.00" }, found.quote.lockVersion);
  const refused = await submitQuote(found.person, found.quote.publicId, key, seen);
  expect(refused).toMatchObject({ ok: false, errors: { form: [expect.stringMatching(/changed since/)] } });
  expect(await QuoteVersion.count({ actor: found.person })).toBe(0);
  await found.quote.reload({ actor: found.person });
  const taken = await submitQuote(found.person, found.quote.publicId, key, found.quote.savedAt.toISOString());
  expect(taken).toMatchObject({ ok: true, value: { version: 1 } });
});
