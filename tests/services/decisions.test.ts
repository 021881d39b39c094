// Decisions: who may recommend and approve what and when, that one approval wins, and that each supplier hears its own outcome alone.
import { expect, test } from "vitest";
import {
  AuditEvent,
  Award,
  Decision,
  Job,
  OutboxEmail,
  Quote,
  QuoteLineResult,
  QuoteSummary,
  Rfq,
  type QuoteVersion,
} from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { CORE_VERSION } from "~/rf/index";
import { snapshotHash, type DecisionSnapshot } from "~/services/decision-snapshot.server";
import { readDecisionView } from "~/services/decision-view.server";
import { approveAward, recommendAward, returnRecommendation } from "~/services/decisions.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { rescoreKey } from "~/services/jobs.server";
import type { Person } from "~/services/person.server";
import { queueStaleScoring } from "~/services/rescoring.server";
import { buildOrganisation, buildPerson, buildRfq, SHORT_LINES } from "../support/factories";
import { moveToRevision, OLD_CORE } from "../support/rescoring";
import { buildSubmittedQuote, storeScore } from "../support/scored-quote";
import { useDatabase } from "../support/database";

useDatabase();

const reason = "Least cost among the conforming quotes, with margin on every line.";
const passes = { margin: 0.3, credited: 1.5, verdict: "pass" } as const;
const fails = { margin: -0.12, credited: -0.6, verdict: "fail" } as const;

async function closedRfq(overrides: Parameters<typeof buildRfq>[1] = {}, secondPerson = true) {
  const buyer = await buildOrganisation("buyer", { secondPerson });
  const engineer = await buildPerson(buyer, "engineer");
  const purchasing = await buildPerson(buyer, "purchasing");
  const admin = await buildPerson(buyer, "admin");
  const { rfq } = await buildRfq(engineer, { status: "closed", closedAt: new Date(), ...overrides });
  const winner = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Halden", prices: { 500: "121" } });
  await storeScore(winner.version, SHORT_LINES, { lineloss: passes }, true);
  const loser = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Kestrel", prices: { 500: "94.37" } });
  await storeScore(loser.version, SHORT_LINES, { lineloss: fails }, false);
  return { buyer, engineer, purchasing, admin, rfq, winner, loser };
}

const recommend = (person: Person, rfq: Rfq, quote: Quote) =>
  recommendAward(person, newIdempotencyKey(), rfq.publicId, { quoteId: quote.publicId, reason });

async function recommended(person: Person, rfq: Rfq, quote: Quote): Promise<string> {
  const outcome = await recommend(person, rfq, quote);
  if (!outcome?.ok) throw new Error(JSON.stringify(outcome));
  return outcome.value.decision;
}

const approve = (person: Person, rfq: Rfq, decision: string) =>
  approveAward(person, newIdempotencyKey(), rfq.publicId, decision, "");

const sentences = (outcome: Awaited<ReturnType<typeof approve>>) =>
  outcome?.ok === false ? Object.values(outcome.errors).flat().join(" ") : outcome;

const mails = async (template: string) => OutboxEmail.findAll({ where: { template }, order: [["recipient", "ASC"]] });

test("a recommendation keeps what was compared, with a hash that can be computed again, and mails those who may approve", async () => {
  const { engineer, purchasing, admin, rfq, winner, loser } = await closedRfq();
  await recommended(engineer, rfq, winner.quote);
  const decision = await Decision.findOne({ where: { rfqId: rfq.id }, actor: SYSTEM, rejectOnEmpty: true });
  const snapshot = decision.snapshot as DecisionSnapshot;
  expect(snapshot.quotes.map(({ quote }) => quote).sort()).toEqual(
    [winner.quote.publicId, loser.quote.publicId].sort(),
  );
  // By hand: 500 × 121 + 4,000 = 64,500.
  expect(snapshot.quotes.find(({ quote }) => quote === winner.quote.publicId)).toMatchObject({
    conforming: true,
    cost: { boughtQuantity: 500, unitPrice: "121", goods: "60500", nre: "4000", total: "64500" },
    worst: { line: "2.1", margin: 0.3 },
  });
  expect(snapshotHash(decision.snapshot)).toEqual(decision.snapshotHash);
  expect(snapshotHash({ ...snapshot, recommended: "another" })).not.toEqual(decision.snapshotHash);
  const award = await Award.findOne({ where: { decisionId: decision.id }, actor: SYSTEM, rejectOnEmpty: true });
  expect([award.total, award.quantity, award.share]).toEqual(["64500.0000", 500, "100.00"]);
  const queued = await mails("award-recommended");
  expect(queued.map(({ recipient }) => recipient)).toEqual([admin.email, purchasing.email].sort());
  expect(queued[0]?.props).toMatchObject({ amount: "64,500.00 EUR for 500 pieces", supplierName: "Halden", reason });
  expect(await OutboxEmail.count()).toBe(2);
});

test("a recommender in purchasing is not asked to approve, and cannot", async () => {
  const { purchasing, admin, rfq, winner } = await closedRfq();
  const decision = await recommended(purchasing, rfq, winner.quote);
  expect((await mails("award-recommended")).map(({ recipient }) => recipient)).toEqual([admin.email]);
  expect(sentences(await approve(purchasing, rfq, decision))).toMatch(/second person/);
  expect(
    sentences(await returnRecommendation(purchasing, newIdempotencyKey(), rfq.publicId, decision, "No, wait")),
  ).toMatch(/second person/);
  expect(await Decision.count({ where: { state: "recommended" }, actor: SYSTEM })).toBe(1);
});

test("where the organisation asks for no second person the recommender may approve", async () => {
  const { purchasing, rfq, winner } = await closedRfq({}, false);
  const decision = await recommended(purchasing, rfq, winner.quote);
  expect(await approve(purchasing, rfq, decision)).toMatchObject({ ok: true });
});

test("switching the second person off after a recommendation does not free that one", async () => {
  const { buyer, purchasing, rfq, winner } = await closedRfq();
  const decision = await recommended(purchasing, rfq, winner.quote);
  await buyer.update({ secondPerson: false });
  expect(sentences(await approve(purchasing, rfq, decision))).toMatch(/second person/);
});

test("an engineer cannot approve", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const decision = await recommended(purchasing, rfq, winner.quote);
  expect(sentences(await approve(engineer, rfq, decision))).toMatch(/Purchasing or an administrator/);
  expect(await Rfq.count({ where: { status: "decided" }, actor: SYSTEM })).toBe(0);
});

test("nothing is recommended while the RFQ is open, and after its due millisecond it is, whether or not a job has run", async () => {
  const { engineer, rfq, winner } = await closedRfq({ status: "open", closedAt: null });
  expect(sentences(await recommend(engineer, rfq, winner.quote))).toMatch(/open until its due date/);
  await rfq.update({ dueAt: new Date(Date.now() - 1000) });
  expect(await recommend(engineer, rfq, winner.quote)).toMatchObject({ ok: true });
  await rfq.reload({ actor: SYSTEM });
  expect([rfq.status, rfq.closedAt]).toEqual(["closed", rfq.dueAt]);
  expect(await AuditEvent.count({ where: { subject: "rfq", action: "closed" }, actor: SYSTEM })).toBe(1);
});

test("a nonconforming, an unscored, an unpriced, an expired, a withdrawn and a foreign quote are refused with the reason", async () => {
  const { engineer, rfq, loser, winner } = await closedRfq();
  const unscored = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Unscored" });
  const unpriced = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Unpriced", prices: { 1000: "90" } });
  await storeScore(unpriced.version, SHORT_LINES, { lineloss: passes }, true);
  const expired = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Expired", validUntil: "2020-01-31" });
  await storeScore(expired.version, SHORT_LINES, { lineloss: passes }, true);
  const foreign = await closedRfq();
  const refusal = async (quote: Quote) => sentences(await recommend(engineer, rfq, quote));
  expect(await refusal(loser.quote)).toMatch(/does not conform/);
  expect(await refusal(unscored.quote)).toMatch(/still being scored/);
  expect(await refusal(unpriced.quote)).toMatch(/no price for 500 pieces/);
  expect(await refusal(expired.quote)).toMatch(/valid until 2020-01-31/);
  expect(await refusal(foreign.winner.quote)).toMatch(/Choose one of the quotes/);
  await winner.quote.update({ state: "withdrawn" });
  expect(await refusal(winner.quote)).toMatch(/Choose one of the quotes/);
  expect(await Decision.count({ actor: SYSTEM })).toBe(0);
  expect(await OutboxEmail.count()).toBe(0);
});

test("figures of another revision than the RFQ asks recommend no quote, even where it could not be scored again; those of an older core do", async () => {
  const { engineer, rfq, winner } = await closedRfq();
  const { version } = winner;
  const refusal = async () => sentences(await recommend(engineer, rfq, winner.quote));
  const asked = await moveToRevision(rfq, "B", SHORT_LINES);
  await queueStaleScoring();
  expect(await refusal()).toMatch(/being scored again/);
  await Job.update({ state: "failed" }, { where: { key: rescoreKey({ ...againOf(version), revisionId: asked }) } });
  expect(await refusal()).toMatch(/figures are of revision A/);
  await rfq.update({ revisionId: version.revisionId });
  const old = { where: { versionId: version.id }, actor: SYSTEM } as const;
  await QuoteLineResult.update({ coreVersion: OLD_CORE }, old);
  await QuoteSummary.update({ coreVersion: OLD_CORE }, old);
  await queueStaleScoring();
  await Job.update({ state: "failed" }, { where: { key: rescoreKey(againOf(version)) } });
  expect(await recommend(engineer, rfq, winner.quote)).toMatchObject({ ok: true });
});

test("after an amendment the award mail tells the limits of the revision that was scored", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const lines = SHORT_LINES.map((line) =>
    line.definition.kind === "insertion-loss" ? { ...line, definition: { ...line.definition, max: 7.77 } } : line,
  );
  const revisionId = await moveToRevision(rfq, "B", lines);
  const stored = { where: { versionId: winner.version.id }, actor: SYSTEM } as const;
  await QuoteLineResult.update({ revisionId }, stored);
  await QuoteSummary.update({ revisionId }, stored);
  await approve(purchasing, rfq, await recommended(engineer, rfq, winner.quote));
  const [award] = await mails("award");
  expect(JSON.stringify(award?.props)).toContain("max 7.77 dB");
});

const againOf = ({ id: versionId, revisionId }: QuoteVersion) => ({
  versionId,
  revisionId,
  coreVersion: CORE_VERSION,
});

test("a quote whose scoring was given up is refused for that, not told to wait", async () => {
  const { engineer, rfq } = await closedRfq();
  const { version, quote } = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Given up" });
  const at = new Date();
  const job = { kind: "score", key: String(version.id), payload: { versionId: version.id }, runAt: at, createdAt: at };
  await Job.create({ ...job, state: "failed" });
  expect(sentences(await recommend(engineer, rfq, quote))).toMatch(/did not succeed/);
});

test("approval decides the RFQ and mails the award to the winner's submitter and a regret to each other one that quoted", async () => {
  const { engineer, purchasing, rfq, winner, loser } = await closedRfq();
  const third = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Orme", prices: { 500: "200.51" } });
  await storeScore(third.version, SHORT_LINES, { lineloss: passes }, true);
  const gone = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Withdrawn" });
  await gone.quote.update({ state: "withdrawn" });
  const decision = await recommended(engineer, rfq, winner.quote);
  expect(await approve(purchasing, rfq, decision)).toMatchObject({ ok: true });

  await rfq.reload({ actor: SYSTEM });
  expect(rfq.status).toBe("decided");
  const outcomes = await Quote.findAll({ where: { rfqId: rfq.id }, order: [["id", "ASC"]], actor: SYSTEM });
  expect(outcomes.map(({ outcome }) => outcome)).toEqual(["awarded", "regretted", "regretted", null]);
  const awards = await mails("award");
  expect(awards.map(({ recipient }) => recipient)).toEqual([winner.person.email]);
  expect(awards[0]?.props).toMatchObject({ amount: "64,500.00 EUR for 500 pieces", version: 1 });
  const regrets = await mails("regret");
  expect(regrets.map(({ recipient }) => recipient)).toEqual([loser.person.email, third.person.email].sort());
  const approved = { subject: "decision", action: "approved", actorUserId: purchasing.userId };
  expect(await AuditEvent.count({ where: approved, actor: SYSTEM })).toBe(1);
  // Two to approvers, one award, two regrets; nobody else.
  expect(await OutboxEmail.count()).toBe(5);
});

test("a regret names no other supplier, price or figure, and no reason", async () => {
  const { engineer, purchasing, rfq, winner, loser } = await closedRfq();
  const decision = await recommended(engineer, rfq, winner.quote);
  await approve(purchasing, rfq, decision);
  const [regret] = await mails("regret");
  const { link, ...told } = regret?.props as Record<string, unknown>;
  expect(link).toContain(`/supplier/quotes/${loser.quote.publicId}/results`);
  expect(told).toMatchObject({ version: 1, results: [{ line: "2.1", verdict: "fail" }, { line: "6.1" }] });
  const text = JSON.stringify(regret?.props);
  const foreign = ["Halden", winner.quote.publicId, winner.person.email, "121", "64,500", "64500", "+0.30", reason];
  for (const other of [...foreign, engineer.name, purchasing.name]) expect(text).not.toContain(other);
  const [award] = await mails("award");
  expect(JSON.stringify(award?.props)).not.toMatch(/Kestrel|94\.37|0\.12/);
});

test("of two approvals at once exactly one wins, and every mail is queued once", async () => {
  const { engineer, purchasing, admin, rfq, winner } = await closedRfq();
  const decision = await recommended(engineer, rfq, winner.quote);
  const outcomes = await Promise.all([approve(purchasing, rfq, decision), approve(admin, rfq, decision)]);
  expect(outcomes.filter((outcome) => outcome?.ok)).toHaveLength(1);
  expect(sentences(outcomes.find((outcome) => !outcome?.ok) ?? null)).toMatch(/has been approved/);
  expect(await AuditEvent.count({ where: { subject: "decision", action: "approved" }, actor: SYSTEM })).toBe(1);
  expect((await mails("award")).length + (await mails("regret")).length).toBe(2);
});

test("approval and return at once: one of them holds, and suppliers hear only of an approval", async () => {
  const { engineer, purchasing, admin, rfq, winner } = await closedRfq();
  const decision = await recommended(engineer, rfq, winner.quote);
  const remark = "Ask for a shorter lead time first.";
  const [approved, returned] = await Promise.all([
    approve(purchasing, rfq, decision),
    returnRecommendation(admin, newIdempotencyKey(), rfq.publicId, decision, remark),
  ]);
  expect([approved?.ok, returned?.ok].filter(Boolean)).toHaveLength(1);
  await rfq.reload({ actor: SYSTEM });
  expect(rfq.status).toBe(approved?.ok ? "decided" : "closed");
  expect((await mails("award")).length).toBe(approved?.ok ? 1 : 0);
});

test("of two recommendations at once one is kept: an RFQ has one live decision", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const outcomes = await Promise.all([
    recommend(engineer, rfq, winner.quote),
    recommend(purchasing, rfq, winner.quote),
  ]);
  expect(outcomes.filter((outcome) => outcome?.ok)).toHaveLength(1);
  expect(sentences(outcomes.find((outcome) => !outcome?.ok) ?? null)).toMatch(/waiting for approval/);
  expect(await Decision.count({ actor: SYSTEM })).toBe(1);
});

test("a form sent twice counts once, and its second answer is the first", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const key = newIdempotencyKey();
  const input = { quoteId: winner.quote.publicId, reason };
  const first = await recommendAward(engineer, key, rfq.publicId, input);
  expect(await recommendAward(engineer, key, rfq.publicId, input)).toEqual(first);
  const decision = first?.ok ? first.value.decision : "";
  const approval = newIdempotencyKey();
  const once = await approveAward(purchasing, approval, rfq.publicId, decision, "");
  expect(await approveAward(purchasing, approval, rfq.publicId, decision, "")).toEqual(once);
  expect(await mails("award")).toHaveLength(1);
});

test("a returned recommendation goes back to its recommender by mail, and another can follow and be approved", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const first = await recommended(engineer, rfq, winner.quote);
  const remark = "The lead time is not weighed.";
  const returned = await returnRecommendation(purchasing, newIdempotencyKey(), rfq.publicId, first, remark);
  expect(returned).toMatchObject({ ok: true });
  const [mail] = await mails("award-returned");
  expect([mail?.recipient, (mail?.props as { remark: string }).remark]).toEqual([engineer.email, remark]);
  await rfq.reload({ actor: SYSTEM });
  expect(rfq.status).toBe("closed");
  expect(sentences(await approve(purchasing, rfq, first))).toMatch(/returned/);
  const second = await recommended(engineer, rfq, winner.quote);
  expect(await approve(purchasing, rfq, second)).toMatchObject({ ok: true });
  const view = await readDecisionView(engineer, rfq.publicId);
  expect([view?.live?.publicId, view?.live?.state, view?.live?.intact]).toEqual([second, "approved", true]);
  expect(view?.returned.map((record) => [record.publicId, record.remark])).toEqual([[first, remark]]);
  expect(sentences(await recommend(engineer, rfq, winner.quote))).toMatch(/has been approved/);
});

test("a quote whose validity ended since the recommendation must not be awarded", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const decision = await recommended(engineer, rfq, winner.quote);
  await winner.version.update({ validUntil: "2020-01-31" });
  expect(sentences(await approve(purchasing, rfq, decision))).toMatch(/valid until 2020-01-31/);
  expect(await mails("award")).toHaveLength(0);
});

test("another buyer, a supplier, and a decision of another RFQ get nothing", async () => {
  const { engineer, purchasing, rfq, winner } = await closedRfq();
  const decision = await recommended(engineer, rfq, winner.quote);
  const foreign = await closedRfq();
  expect(await approve(foreign.purchasing, rfq, decision)).toBeNull();
  expect(await approve(winner.person, rfq, decision)).toBeNull();
  expect(await readDecisionView(winner.person, rfq.publicId)).toBeNull();
  expect(await readDecisionView(foreign.engineer, rfq.publicId)).toBeNull();
  expect(sentences(await approve(foreign.purchasing, foreign.rfq, decision))).toMatch(/not there any more/);
  expect(sentences(await approve(purchasing, rfq, "0000000000000000"))).toMatch(/not there any more/);
});

test("the sheet offers conforming quotes first, says why another cannot be chosen, and who may approve", async () => {
  const { engineer, purchasing, admin, rfq, winner } = await closedRfq();
  const open = await readDecisionView(engineer, rfq.publicId);
  expect(open?.candidates.map(({ supplierName, refusal }) => [supplierName, refusal === null])).toEqual([
    ["Halden", true],
    ["Kestrel", false],
  ]);
  expect([open?.recommendRefusal, open?.live]).toEqual([null, null]);
  await recommended(purchasing, rfq, winner.quote);
  const asRecommender = await readDecisionView(purchasing, rfq.publicId);
  expect(asRecommender?.approvalRefusal).toMatch(/second person/);
  expect(asRecommender?.approvers).toEqual([admin.name]);
  expect((await readDecisionView(admin, rfq.publicId))?.approvalRefusal).toBeNull();
});
