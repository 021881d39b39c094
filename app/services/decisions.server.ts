// The decision on an RFQ: recommended with a reason, approved by a second person or returned, told to every supplier that quoted.
import { Op, type Transaction } from "sequelize";
import { Award, Decision, Organisation, Quote, QuoteVersion, type Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import type { RecommendationInput } from "~/forms/decision";
import { invalid, ok, type Result } from "~/forms/form";
import { approvalRefusal, decisionRefusal } from "~/workflow/decision";
import { quoteRefusal } from "~/workflow/quote";
import { rfqRefusal, rfqState } from "~/workflow/rfq";
import { recordEvent } from "./audit.server";
import { readComparedQuotes, type ComparedQuote } from "./comparison.server";
import { amountWords, mailApprovers, mailReturned, mailSuppliers, type SuppliedVersion } from "./decision-mails.server";
import { snapshotHash, takeSnapshot, type DecisionSnapshot } from "./decision-snapshot.server";
import { once } from "./idempotency.server";
import { newPublicId } from "./identifiers.server";
import type { Person } from "./person.server";
import { recommendationRefusal, validityRefusal } from "./recommendation.server";
import { findRfq, lockRfq } from "./rfq-head.server";

type Outcome = Result<{ readonly decision: string }>;

const isFinal = (outcome: Outcome): boolean => outcome.ok;
const refused = (sentence: string): Outcome => invalid({ form: [sentence] });

const GONE = "This recommendation is not there any more. Load the page again.";
const NO_QUOTE = "Choose one of the quotes submitted for this RFQ.";
const CHANGED = "This quote is not the one that was recommended any more.";

/** Runs on the locked RFQ. Null where the person, who must be of a buyer, does not see it. */
async function decide(
  person: Person,
  idempotencyKey: string,
  rfqPublicId: string,
  request: object,
  work: (rfq: Rfq, now: Date, transaction: Transaction) => Promise<Outcome>,
): Promise<Outcome | null> {
  if (person.organisationKind !== "buyer" || !(await findRfq(person, rfqPublicId))) return null;
  return once<Outcome>(person, idempotencyKey, { rfq: rfqPublicId, ...request }, isFinal, async (transaction) => {
    const rfq = await lockRfq(person, rfqPublicId, transaction);
    if (!rfq) throw new Error("an RFQ is never deleted");
    return work(rfq, await databaseNow(transaction), transaction);
  });
}

/** Recommends a conforming quote of a closed RFQ, with all that was compared. Null where the person does not see the RFQ. */
export function recommendAward(
  person: Person,
  idempotencyKey: string,
  rfqPublicId: string,
  input: RecommendationInput,
): Promise<Outcome | null> {
  const request = { recommend: input.quoteId, reason: input.reason };
  return decide(person, idempotencyKey, rfqPublicId, request, async (rfq, now, transaction) => {
    const state = rfqState(rfq, now);
    const live = await findLiveDecision(person, rfq, transaction);
    const refusal = decisionRefusal("recommend", live?.state ?? "none") ?? rfqRefusal("recommend", state);
    if (refusal) return refused(refusal);
    const compared = await readComparedQuotes(person, rfq, rfq.quantity, transaction);
    const chosen = compared.quotes.find(({ publicId }) => publicId === input.quoteId);
    if (!chosen?.cost)
      return invalid({ quoteId: [chosen ? `This quote has no price for ${rfq.quantity} pieces.` : NO_QUOTE] });
    const unfit = recommendationRefusal(chosen, rfq.quantity, now, rfq.dueZone);
    if (unfit) return invalid({ quoteId: [unfit] });
    await markClosed(rfq, now, transaction);
    const snapshot = await takeSnapshot(person, rfq, compared, chosen.publicId, now, transaction);
    return ok({ decision: await storeRecommendation(person, rfq, chosen, snapshot, input.reason, now, transaction) });
  });
}

/** The decision that is not returned, locked. */
const findLiveDecision = (person: Person, rfq: Rfq, transaction: Transaction) =>
  Decision.findOne({
    where: { rfqId: rfq.id, state: { [Op.ne]: "returned" } },
    actor: person,
    transaction,
    lock: transaction.LOCK.UPDATE,
  });

/** An RFQ past its due date that the worker has not marked yet is marked here, as the worker would. */
async function markClosed(rfq: Rfq, now: Date, transaction: Transaction): Promise<void> {
  if (rfq.status !== "open") return;
  const detail = { dueAt: rfq.dueAt.toISOString() };
  await rfq.update({ status: "closed", closedAt: rfq.dueAt, lockVersion: rfq.lockVersion + 1 }, { transaction });
  await recordEvent(null, now, { subject: "rfq", action: "closed", ...about(rfq), detail }, transaction);
}

const about = (rfq: Rfq) => ({ buyerOrganisationId: rfq.buyerOrganisationId, rfqId: rfq.id });

async function storeRecommendation(
  person: Person,
  rfq: Rfq,
  chosen: ComparedQuote,
  snapshot: DecisionSnapshot,
  reason: string,
  now: Date,
  transaction: Transaction,
): Promise<string> {
  const scope = { actor: person, transaction, rejectOnEmpty: true } as const;
  const organisation = await Organisation.findByPk(person.organisationId, scope);
  const quote = await Quote.findOne({ where: { publicId: chosen.publicId }, ...scope });
  const decision = await Decision.create(
    {
      publicId: newPublicId(),
      buyerOrganisationId: rfq.buyerOrganisationId,
      rfqId: rfq.id,
      state: "recommended",
      recommendedBy: person.userId,
      recommendedAt: now,
      reason,
      secondPerson: organisation.secondPerson,
      snapshot,
      snapshotHash: snapshotHash(snapshot),
      createdAt: now,
    },
    { transaction },
  );
  const { boughtQuantity: quantity = 0, total = "0" } = chosen.cost ?? {};
  await Award.create(
    {
      buyerOrganisationId: rfq.buyerOrganisationId,
      decisionId: decision.id,
      versionId: quote.currentVersionId ?? 0,
      supplierOrganisationId: quote.supplierOrganisationId,
      share: "100",
      quantity,
      total,
    },
    { transaction },
  );
  const detail = {
    decision: decision.publicId,
    supplier: chosen.supplierName,
    version: chosen.version,
    quantity,
    total,
  };
  const event = { subject: "decision", action: "recommended", ...about(rfq), quoteId: quote.id, detail };
  await recordEvent(person, now, event, transaction);
  const { supplierName, version } = chosen;
  const words = { supplierName, version, amount: amountWords(total, chosen.currency, quantity) };
  await mailApprovers(person, rfq, decision, words, now, transaction);
  return decision.publicId;
}

/**
 * Approves: the RFQ is decided, each quote has its outcome, and every supplier that quoted is told its own. Null where the
 * person does not see the RFQ.
 */
export function approveAward(
  person: Person,
  idempotencyKey: string,
  rfqPublicId: string,
  decisionPublicId: string,
  remark: string,
): Promise<Outcome | null> {
  const request = { approve: decisionPublicId, remark };
  return decide(person, idempotencyKey, rfqPublicId, request, async (rfq, now, transaction) => {
    const state = rfqState(rfq, now);
    const decision = await lockDecision(person, rfq, decisionPublicId, transaction);
    if (!decision) return refused(GONE);
    const refusal = (await refusalFor(person, decision, transaction)) ?? rfqRefusal("approve", state);
    if (refusal) return refused(refusal);
    const award = await Award.findOne({
      where: { decisionId: decision.id },
      actor: person,
      transaction,
      rejectOnEmpty: true,
    });
    const supplied = await readSubmitted(person, rfq, transaction);
    const awarded = supplied.find(({ version }) => version.id === award.versionId);
    if (!awarded) return refused(CHANGED);
    const unfit =
      quoteRefusal("award", awarded.quote.state, state) ??
      validityRefusal(awarded.version.validUntil, now, rfq.dueZone);
    if (unfit) return refused(unfit);
    await markClosed(rfq, now, transaction);
    await settle(person, rfq, decision, awarded, remark, now, transaction);
    const regretted = supplied.filter((other) => other !== awarded);
    const amount = amountWords(award.total, awarded.version.currency, award.quantity);
    await mailSuppliers(person, rfq, decision, { ...awarded, amount }, regretted, now, transaction);
    return ok({ decision: decision.publicId });
  });
}

const lockDecision = (person: Person, rfq: Rfq, publicId: string, transaction: Transaction) =>
  Decision.findOne({
    where: { publicId, rfqId: rfq.id },
    actor: person,
    transaction,
    lock: transaction.LOCK.UPDATE,
  });

/** A second person is required if the organisation asked for one when it was recommended, or does now. */
async function refusalFor(person: Person, decision: Decision, transaction: Transaction): Promise<string | null> {
  const scope = { actor: person, transaction, rejectOnEmpty: true } as const;
  const { secondPerson } = await Organisation.findByPk(person.organisationId, scope);
  return approvalRefusal(person, decision, decision.secondPerson || secondPerson);
}

/** Every submitted quote with its current version, locked. */
async function readSubmitted(person: Person, rfq: Rfq, transaction: Transaction): Promise<SuppliedVersion[]> {
  const quotes = await Quote.findAll({
    where: { rfqId: rfq.id, state: "submitted" },
    order: [["id", "ASC"]],
    actor: person,
    transaction,
    lock: transaction.LOCK.UPDATE,
  });
  const ids = quotes.flatMap(({ currentVersionId }) => currentVersionId ?? []);
  const versions = await QuoteVersion.findAll({ where: { id: { [Op.in]: ids } }, actor: person, transaction });
  return quotes.flatMap((quote) => {
    const version = versions.find(({ id }) => id === quote.currentVersionId);
    return version ? [{ quote, version }] : [];
  });
}

async function settle(
  person: Person,
  rfq: Rfq,
  decision: Decision,
  { quote: awarded }: SuppliedVersion,
  remark: string,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const decided = { decidedBy: person.userId, decidedAt: now, remark: remark === "" ? null : remark };
  await decision.update({ state: "approved", ...decided }, { transaction });
  await rfq.update({ status: "decided", lockVersion: rfq.lockVersion + 1 }, { transaction });
  const others = { rfqId: rfq.id, state: "submitted" as const, id: { [Op.ne]: awarded.id } };
  await awarded.update({ outcome: "awarded" }, { transaction });
  await Quote.update({ outcome: "regretted" }, { where: others, actor: person, transaction });
  const detail = { decision: decision.publicId };
  const event = { subject: "decision", action: "approved", ...about(rfq), quoteId: awarded.id, detail };
  await recordEvent(person, now, event, transaction);
}

/** Returns a recommendation with a remark: the RFQ stays closed, another can follow. Null where the person does not see the RFQ. */
export function returnRecommendation(
  person: Person,
  idempotencyKey: string,
  rfqPublicId: string,
  decisionPublicId: string,
  remark: string,
): Promise<Outcome | null> {
  const request = { return: decisionPublicId, remark };
  return decide(person, idempotencyKey, rfqPublicId, request, async (rfq, now, transaction) => {
    const decision = await lockDecision(person, rfq, decisionPublicId, transaction);
    if (!decision) return refused(GONE);
    const refusal = (await refusalFor(person, decision, transaction)) ?? rfqRefusal("return", rfqState(rfq, now));
    if (refusal) return refused(refusal);
    await decision.update({ state: "returned", decidedBy: person.userId, decidedAt: now, remark }, { transaction });
    const detail = { decision: decision.publicId, remark };
    const event = { subject: "decision", action: "returned", ...about(rfq), detail };
    await recordEvent(person, now, event, transaction);
    await mailReturned(person, rfq, decision, recommendedSupplier(decision), now, transaction);
    return ok({ decision: decision.publicId });
  });
}

function recommendedSupplier({ snapshot }: Decision): string {
  const { quotes, recommended } = snapshot as DecisionSnapshot;
  return quotes.find(({ quote }) => quote === recommended)?.supplier ?? "";
}
