// Open points tell the states things are in, to those whom they concern.
import { expect, test } from "vitest";
import { Decision, QuoteVersion, type Rfq } from "~/db/models";
import { cancelRfq } from "~/services/closing.server";
import { newPublicId } from "~/services/identifiers.server";
import { MOST_SHOWN, readOpenPoints } from "~/services/open-points.server";
import type { Person } from "~/services/person.server";
import { useDatabase } from "../support/database";
import {
  buildInvitation,
  buildOrganisation,
  buildPerson,
  buildQuote,
  buildRfq,
  buildSpecification,
} from "../support/factories";

useDatabase();

const HOUR_MS = 60 * 60 * 1000;
const hence = (hours: number) => new Date(Date.now() + hours * HOUR_MS);

async function buildTeam() {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer, "engineer");
  const purchasing = await buildPerson(buyer, "purchasing");
  const admin = await buildPerson(buyer, "admin");
  return { engineer, purchasing, admin };
}

const recommend = (rfq: Rfq, by: Person, overrides: Partial<Decision["_creationAttributes"]> = {}) =>
  Decision.create({
    publicId: newPublicId(),
    buyerOrganisationId: rfq.buyerOrganisationId,
    rfqId: rfq.id,
    state: "recommended",
    recommendedBy: by.userId,
    recommendedAt: hence(-2),
    reason: "Best margin at the band edge.",
    snapshot: {},
    snapshotHash: Buffer.alloc(32),
    createdAt: hence(-2),
    ...overrides,
  });

async function submitQuote(rfq: Rfq, submittedAt: Date) {
  const organisation = await buildOrganisation("supplier");
  const supplier = await buildPerson(organisation);
  const { invitation } = await buildInvitation(rfq, organisation);
  const quote = await buildQuote(invitation, organisation.id);
  const version = await QuoteVersion.create({
    buyerOrganisationId: rfq.buyerOrganisationId,
    supplierOrganisationId: organisation.id,
    quoteId: quote.id,
    rfqId: rfq.id,
    revisionId: rfq.revisionId,
    number: 1,
    submittedAt,
    submittedBy: supplier.userId,
    submitterName: supplier.name,
    basis: "measured",
    currency: "EUR",
    nre: "0",
    leadVolumeDays: 60,
    validUntil: "2027-03-01",
    setup: {},
    contentHash: Buffer.alloc(32),
    createdAt: submittedAt,
  });
  await quote.update({ state: "submitted", sharedAt: submittedAt, currentVersionId: version.id });
  return { quote, organisation };
}

const titles = (points: { items: readonly { title: string }[] }) => points.items.map(({ title }) => title);

test("RFQs stand under what they wait for, the soonest due first, and an open one past its date under closed", async () => {
  const { engineer } = await buildTeam();
  await buildRfq(engineer, { title: "later", dueAt: hence(72) });
  await buildRfq(engineer, { title: "sooner", dueAt: hence(5) });
  await buildRfq(engineer, { title: "draft", status: "draft", openedAt: null });
  await buildRfq(engineer, { title: "past due", dueAt: hence(-1) });
  await buildRfq(engineer, { title: "closed early", status: "closed", dueAt: hence(9), closedAt: hence(-3) });
  await buildRfq(engineer, { title: "cancelled", status: "cancelled" });
  const points = await readOpenPoints(engineer);
  expect(titles(points.open)).toEqual(["sooner", "later"]);
  expect(titles(points.toRecommend)).toEqual(["past due", "closed early"]);
  expect(titles(points.rfqDrafts)).toEqual(["draft"]);
  expect(points.open).toMatchObject({ count: 2, items: [{ ownerName: engineer.name, dueZone: "Europe/Berlin" }, {}] });
});

test("an engineer sees her own RFQs and drafts, purchasing and administrators everybody's RFQs", async () => {
  const { engineer, purchasing, admin } = await buildTeam();
  await buildRfq(engineer, { title: "hers" });
  await buildRfq(admin, { title: "the administrator's", dueAt: hence(1) });
  await buildSpecification(engineer, { title: "her draft", status: "draft" });
  expect(titles((await readOpenPoints(engineer)).open)).toEqual(["hers"]);
  for (const person of [purchasing, admin])
    expect(titles((await readOpenPoints(person)).open)).toEqual(["the administrator's", "hers"]);
  expect((await readOpenPoints(engineer)).specificationDrafts).toMatchObject({
    count: 1,
    items: [{ title: "her draft", letter: "A" }],
  });
  expect((await readOpenPoints(admin)).specificationDrafts.count).toBe(0);
  expect((await readOpenPoints(purchasing)).specificationDrafts.count).toBe(0);
});

test("quotes to undecided RFQs are listed latest first under the buyer's own name of the supplier", async () => {
  const { engineer } = await buildTeam();
  const { rfq } = await buildRfq(engineer, { title: "running" });
  const { rfq: decided } = await buildRfq(engineer, { status: "decided", dueAt: hence(-9), closedAt: hence(-9) });
  const earlier = await submitQuote(rfq, hence(-5));
  const later = await submitQuote(rfq, hence(-1));
  await submitQuote(decided, hence(-10));
  const { quotes, open } = await readOpenPoints(engineer);
  expect(quotes.count).toBe(2);
  expect(quotes.items.map(({ publicId, supplierName }) => [publicId, supplierName])).toEqual([
    [later.quote.publicId, later.organisation.name],
    [earlier.quote.publicId, earlier.organisation.name],
  ]);
  expect(open.items[0]?.quotes).toEqual({ submitted: 2, invited: 2 });
});

test("a recommendation waits for those who may approve it, never for the one who made it", async () => {
  const { engineer, purchasing, admin } = await buildTeam();
  const { rfq } = await buildRfq(engineer, { title: "recommended", status: "closed", closedAt: hence(-3) });
  await recommend(rfq, purchasing);
  const waiting = { count: 1, items: [{ rfq: { title: "recommended" }, byName: purchasing.name }] };
  expect((await readOpenPoints(admin)).toApprove).toMatchObject(waiting);
  expect((await readOpenPoints(purchasing)).toApprove.count).toBe(0);
  expect((await readOpenPoints(engineer)).toApprove.count).toBe(0);
  expect((await readOpenPoints(engineer)).toRecommend.count).toBe(0);
  await Decision.update({ secondPerson: false }, { where: { rfqId: rfq.id }, actor: purchasing });
  expect((await readOpenPoints(purchasing)).toApprove).toMatchObject(waiting);
});

test("a recommendation whose RFQ was cancelled waits for nobody", async () => {
  const { engineer, admin } = await buildTeam();
  const { rfq } = await buildRfq(engineer, { status: "closed", closedAt: hence(-3) });
  await recommend(rfq, engineer);
  expect((await readOpenPoints(admin)).toApprove.count).toBe(1);
  expect(await cancelRfq(engineer, rfq.publicId, "The project was stopped.")).toMatchObject({ ok: true });
  expect((await readOpenPoints(admin)).toApprove.count).toBe(0);
});

test("a returned recommendation comes back to its author, until another one follows", async () => {
  const { engineer, purchasing } = await buildTeam();
  const { rfq } = await buildRfq(engineer, { status: "closed", closedAt: hence(-3) });
  const remark = "The lead time is too long.";
  const back = { state: "returned", decidedBy: purchasing.userId, decidedAt: hence(-1), remark } as const;
  await recommend(rfq, engineer, back);
  const points = await readOpenPoints(engineer);
  expect(points.returned).toMatchObject({ count: 1, items: [{ byName: purchasing.name, text: remark }] });
  expect(points.toRecommend.count).toBe(0);
  expect((await readOpenPoints(purchasing)).returned.count).toBe(0);
  await recommend(rfq, engineer);
  expect((await readOpenPoints(engineer)).returned.count).toBe(0);
});

test("counts are of all, also where not all are shown, and another buyer's are not among them", async () => {
  const { engineer } = await buildTeam();
  for (let made = 0; made <= MOST_SHOWN; made += 1) await buildRfq(engineer);
  const { engineer: stranger } = await buildTeam();
  const { open } = await readOpenPoints(engineer);
  expect(open.count).toBe(MOST_SHOWN + 1);
  expect(open.items).toHaveLength(MOST_SHOWN);
  const { now: _now, ...nothing } = await readOpenPoints(stranger);
  expect(Object.values(nothing).map(({ count }) => count)).toEqual([0, 0, 0, 0, 0, 0, 0]);
});
