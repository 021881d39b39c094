// A supplier's quote before it is submitted: begun once, kept as typed, and shown to nobody else.
import { expect, test } from "vitest";
import { AuditEvent, Invitation, Quote } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { saveSheet } from "~/services/quote-sheets.server";
import { submitQuote } from "~/services/quote-submission.server";
import { checkSheet, readQuoteTerms } from "~/services/quote-terms.server";
import { readQuoteHead, SAVED_ELSEWHERE, saveDraft, startQuote } from "~/services/quotes.server";
import { runNextScoring } from "~/services/jobs.server";
import { scoreVersion } from "~/services/scoring.server";
import { readSupplierInvitation } from "~/services/supplier-invitation.server";
import { readSupplierOpenPoints } from "~/services/supplier-open-points.server";
import { readSupplierResults, type SupplierResults } from "~/services/supplier-results.server";
import { buildInvitation, buildOrganisation, buildPerson, buildQuote, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";
import { buildJourneyQuote, journeyFiles, uploadFiles } from "../support/supplier-journey";

useDatabase();

async function invited(overrides: Parameters<typeof buildRfq>[1] = {}) {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, overrides);
  const organisation = await buildOrganisation("supplier");
  const person = await buildPerson(organisation);
  const { invitation } = await buildInvitation(rfq, organisation);
  return { buyer, engineer, rfq, organisation, person, invitation };
}

const strangers = () =>
  Promise.all((["buyer", "supplier"] as const).map(async (kind) => buildPerson(await buildOrganisation(kind))));

test("pressing start ten times at once begins one quote", async () => {
  const { person, invitation } = await invited();
  const outcomes = await Promise.all(Array.from({ length: 10 }, () => startQuote(person, invitation.publicId)));
  const quotes = await Quote.findAll({ actor: person });
  expect(quotes).toHaveLength(1);
  for (const outcome of outcomes) expect(outcome).toEqual({ ok: true, value: { quote: quotes[0]?.publicId } });
  expect(await AuditEvent.count({ where: { action: "started" }, actor: SYSTEM })).toBe(1);
});

test("no quote is begun by a stranger, on a revoked invitation, or on a closed RFQ", async () => {
  const { person, invitation, engineer, rfq } = await invited();
  for (const stranger of [engineer, ...(await strangers())])
    expect(await startQuote(stranger, invitation.publicId)).toBeNull();
  await rfq.update({ dueAt: await databaseNow() });
  expect(await startQuote(person, invitation.publicId)).toMatchObject({
    ok: false,
    errors: { form: [expect.any(String)] },
  });
  await Invitation.update({ state: "revoked" }, { where: { id: invitation.id }, actor: SYSTEM });
  expect(await startQuote(person, invitation.publicId)).toBeNull();
  expect(await Quote.count({ actor: SYSTEM })).toBe(0);
});

test("a draft is kept as it was typed, wrong or not, and fields of another sheet stay", async () => {
  const { person, invitation, organisation } = await invited();
  const quote = await buildQuote(invitation, organisation.id);
  const terms = {
    "prices.100": " 12,50 ",
    nre: "much",
    "setup.transmission": "0.05 dB",
    lockVersion: "0",
    intruder: "x",
  };
  expect(await saveDraft(person, quote.publicId, terms, 0)).toEqual({ ok: true, value: { lockVersion: 1 } });
  await saveDraft(person, quote.publicId, { "declarations.linepower.answer": "comply" }, 1);
  expect((await readQuoteTerms(person, quote.publicId))?.values).toEqual({
    "prices.100": " 12,50 ",
    nre: "much",
    "setup.transmission": "0.05 dB",
    "declarations.linepower.answer": "comply",
  });
});

test("a sheet that is saved says what was typed wrong, and leaves what is blank to the review", async () => {
  const { person, invitation, organisation } = await invited();
  const quote = await buildQuote(invitation, organisation.id);
  const form = (values: Record<string, string>) => {
    const data = new FormData();
    for (const [name, value] of Object.entries(values)) data.set(name, value);
    return data;
  };
  const wrong = await saveSheet(
    person,
    quote.publicId,
    "terms",
    form({ "prices.100": "12,50", nre: "", lockVersion: "0" }),
  );
  expect(wrong).toMatchObject({ saved: true, lockVersion: 1, errors: { "prices.100": [expect.any(String)] } });
  expect(Object.keys((wrong as { errors: object }).errors)).toEqual(["prices.100"]);
  expect(await saveSheet(person, quote.publicId, "terms", form({ "prices.100": "12.50", lockVersion: "1" }))).toBe(
    "in-order",
  );
  const stale = await saveSheet(person, quote.publicId, "terms", form({ "prices.100": "99", lockVersion: "1" }));
  expect(stale).toMatchObject({
    saved: false,
    lockVersion: 2,
    errors: { form: [SAVED_ELSEWHERE] },
    values: { "prices.100": "99" },
  });
  expect((await readQuoteTerms(person, quote.publicId))?.values["prices.100"]).toBe("12.50");
  expect(Object.keys((await checkSheet(person, quote.publicId, "terms")) ?? {})).toContain("nre");
  expect(await checkSheet(person, quote.publicId, "declarations")).toMatchObject({
    "declarations.linepower.answer": [expect.any(String)],
  });
});

test("nothing is saved once the RFQ is closed", async () => {
  const { person, invitation, organisation, rfq } = await invited();
  const quote = await buildQuote(invitation, organisation.id);
  await rfq.update({ dueAt: await databaseNow() });
  expect(await saveDraft(person, quote.publicId, { nre: "1" }, 0)).toMatchObject({ ok: false });
  expect((await readQuoteHead(person, quote.publicId))?.refusal).toMatch(/closed/);
  expect((await readQuoteTerms(person, quote.publicId))?.values).toEqual({});
});

test("every page of a quote is not there for anybody else", async () => {
  const { person, invitation, organisation, engineer } = await invited();
  const quote = await buildQuote(invitation, organisation.id);
  expect(await readQuoteHead(person, quote.publicId)).toMatchObject({ version: 0, state: "draft", refusal: null });
  expect(await readSupplierResults(person, quote.publicId)).toBe("none");
  for (const stranger of [engineer, ...(await strangers())]) {
    for (const read of [readQuoteHead, readQuoteTerms, readSupplierResults])
      expect(await read(stranger, quote.publicId)).toBeNull();
    expect(await saveDraft(stranger, quote.publicId, { nre: "1" }, 0)).toBeNull();
    expect(await saveSheet(stranger, quote.publicId, "terms", new FormData())).toBeNull();
  }
});

test("an invitation shows what is asked and the specification as drawn, to its own supplier alone", async () => {
  const { person, invitation, engineer, buyer } = await invited({ text: "Two lots." });
  const shown = await readSupplierInvitation(person, invitation.publicId);
  expect(shown).toMatchObject({
    buyerName: buyer.name,
    breaks: [100, 500, 1000],
    text: "Two lots.",
    state: "open",
    unitsAsked: 3,
    quote: null,
    refusal: null,
    specification: { ownerName: null, impedances: [50, 50], temperatureRange: [-30, 70] },
  });
  expect(shown?.specification.lines).toHaveLength(5);
  const [buyerStranger, supplierStranger] = await strangers();
  expect(await readSupplierInvitation(supplierStranger as typeof person, invitation.publicId)).toBeNull();
  expect(await readSupplierInvitation(buyerStranger as typeof person, invitation.publicId)).toBeNull();
  expect(JSON.stringify(shown)).not.toContain(engineer.email);
  await Invitation.update({ state: "revoked" }, { where: { id: invitation.id }, actor: SYSTEM });
  expect(await readSupplierInvitation(person, invitation.publicId)).toBeNull();
});

test("open points hold the invitations of all buyers, the soonest due first, each where it stands", async () => {
  const { person, organisation, rfq, invitation } = await invited({ dueAt: new Date(Date.now() + 9 * 86_400_000) });
  const sooner = await buildRfq(await buildPerson(await buildOrganisation("buyer")), {
    dueAt: new Date(Date.now() + 86_400_000),
  });
  await buildInvitation(sooner.rfq, organisation);
  const closed = await buildRfq(await buildPerson(await buildOrganisation("buyer")), {
    dueAt: new Date(Date.now() - 1000),
  });
  await buildInvitation(closed.rfq, organisation);
  const { points } = await readSupplierOpenPoints(person);
  expect(points.map(({ group, title, quote }) => [group, title, quote])).toEqual([
    ["to-answer", sooner.rfq.title, null],
    ["to-answer", rfq.title, null],
    ["missed", closed.rfq.title, null],
  ]);
  expect(points[0]?.dueAt).toBe(sooner.rfq.dueAt.toISOString());
  await startQuote(person, invitation.publicId);
  expect((await readSupplierOpenPoints(person)).points.map(({ group }) => group)).toEqual([
    "to-answer",
    "draft",
    "missed",
  ]);
  const [stranger] = await strangers();
  expect((await readSupplierOpenPoints(stranger as typeof person)).points).toEqual([]);
});

test("a submitted quote shows its results and then its outcome", async () => {
  const { person, quote, engineer } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, journeyFiles("orme-microwave"));
  await submitQuote(person, quote.publicId, newIdempotencyKey());
  expect(await readSupplierResults(person, quote.publicId)).toMatchObject({ version: 1, summary: null, lines: [] });
  // The buyer sees the quote from now on, and still does not work on it.
  expect(await saveDraft(engineer, quote.publicId, { nre: "1" }, 1)).toBeNull();
  expect(await readSupplierResults(engineer, quote.publicId)).toBeNull();
  await runNextScoring(scoreVersion);
  const results = await readSupplierResults(person, quote.publicId);
  expect(results).toMatchObject({ version: 1, summary: { verdict: "not-covered", conforming: false, units: 1 } });
  const { lines = [] } = results as Partial<SupplierResults>;
  expect(lines).toHaveLength(12);
  expect(lines[0]).toMatchObject({
    verdict: "not-covered",
    unit: "OM-0031",
    temperature: "25.0",
    assumed: true,
    reason: "0 of 1 units over temperature, 1 needed.",
  });
  await Quote.update({ outcome: "regretted" }, { where: { id: quote.id }, actor: SYSTEM });
  expect(await readQuoteHead(person, quote.publicId)).toMatchObject({
    outcome: "regretted",
    version: 1,
    changedSince: false,
  });
  expect((await readSupplierOpenPoints(person)).points).toMatchObject([{ group: "decided", verdict: "not-covered" }]);
});
