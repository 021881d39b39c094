// A supplier's quote: started from an invitation, read with what its title block says, locked for a change, its draft kept.
import { UniqueConstraintError, type Transaction } from "sequelize";
import { Invitation, Organisation, Quote, QuoteVersion, Rfq, Specification, SpecificationRevision } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import type { FormValues } from "~/forms/fields";
import { invalid, ok, type Result } from "~/forms/form";
import { statedSetup } from "~/forms/quote-setup";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import { quoteRefusal, type QuoteState } from "~/workflow/quote";
import { EMPTY_QUOTE_DRAFT } from "~/workflow/quote-draft";
import { rfqState, type RfqState } from "~/workflow/rfq";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import { queueDraftScoring } from "./jobs.server";
import type { Person } from "./person.server";
import { setupHash } from "./scoring-sweeps.server";
import { inTransaction } from "./transaction.server";

/** What the title block of a quote's sheets says to its supplier. */
export interface SupplierQuoteHead {
  readonly publicId: string;
  readonly invitation: string;
  readonly rfqNumber: string;
  readonly title: string;
  readonly buyerName: string;
  readonly specification: { readonly number: string; readonly letter: string };
  readonly state: QuoteState;
  readonly rfqState: RfqState;
  /** Of the last submission; 0 before the first. */
  readonly version: number;
  readonly submittedAt: string | null;
  readonly savedAt: string;
  /** Whether something was saved since the last submission. */
  readonly changedSince: boolean;
  readonly decisionRule: "simple" | "guarded";
  readonly dueAt: string;
  readonly dueZone: string;
  readonly quantity: number;
  readonly currency: string;
  readonly outcome: "awarded" | "regretted" | null;
  /** Why it cannot be edited; null where it can. */
  readonly refusal: string | null;
  /** The database's clock. */
  readonly now: string;
}

export interface FoundQuote {
  readonly quote: Quote;
  readonly rfq: Rfq;
}

/** The person's own quote and its RFQ, or null: a buyer who sees it once submitted does not work on it. */
export async function findQuote(person: Person, publicId: string): Promise<FoundQuote | null> {
  const where = { publicId, supplierOrganisationId: person.organisationId };
  const quote = await Quote.findOne({ where, actor: person });
  const rfq = quote && (await Rfq.findByPk(quote.rfqId, { actor: person }));
  return rfq ? { quote, rfq } : null;
}

/** The head of a quote, or null where the person does not see it. */
export async function readQuoteHead(person: Person, publicId: string): Promise<SupplierQuoteHead | null> {
  const found = await findQuote(person, publicId);
  if (!found) return null;
  const { quote, rfq } = found;
  const [invitation, buyer, specification, revision, version, now] = await Promise.all([
    Invitation.findByPk(quote.invitationId, { actor: person, rejectOnEmpty: true }),
    Organisation.findByPk(quote.buyerOrganisationId, { actor: person, rejectOnEmpty: true }),
    Specification.findByPk(rfq.specificationId, { actor: person, rejectOnEmpty: true }),
    SpecificationRevision.findByPk(rfq.revisionId, { actor: person, rejectOnEmpty: true }),
    quote.currentVersionId === null ? null : QuoteVersion.findByPk(quote.currentVersionId, { actor: person }),
    databaseNow(),
  ]);
  const state = rfqState(rfq, now);
  return {
    publicId: quote.publicId,
    invitation: invitation.publicId,
    rfqNumber: rfqNumber(rfq.year, rfq.number),
    title: rfq.title,
    buyerName: buyer.name,
    specification: { number: specificationNumber(specification.number), letter: revision.letter },
    state: quote.state,
    rfqState: state,
    version: version?.number ?? 0,
    submittedAt: version?.submittedAt.toISOString() ?? null,
    savedAt: quote.savedAt.toISOString(),
    changedSince: version !== null && quote.savedAt > version.submittedAt,
    decisionRule: rfq.decisionRule,
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    quantity: rfq.quantity,
    currency: rfq.currency,
    outcome: quote.outcome,
    refusal: quoteRefusal("edit", quote.state, state),
    now: now.toISOString(),
  };
}

/** Starts the quote of an accepted invitation, or finds the one started before. Null where the person does not see it. */
export async function startQuote(
  person: Person,
  invitationPublicId: string,
): Promise<Result<{ quote: string }> | null> {
  const where = { publicId: invitationPublicId, supplierOrganisationId: person.organisationId };
  const invitation = await Invitation.findOne({ where, actor: person });
  if (invitation?.state !== "accepted") return null;
  const started = () => Quote.findOne({ where: { invitationId: invitation.id }, actor: person });
  const earlier = await started();
  if (earlier) return ok({ quote: earlier.publicId });
  try {
    return await inTransaction((transaction) => createQuote(person, invitation, transaction));
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error;
    const other = await started(); // a colleague was first by a moment
    return other ? ok({ quote: other.publicId }) : null;
  }
}

async function createQuote(
  person: Person,
  { id, rfqId, buyerOrganisationId }: Invitation,
  transaction: Transaction,
): Promise<Result<{ quote: string }> | null> {
  const rfq = await Rfq.findByPk(rfqId, { actor: SYSTEM, transaction, lock: transaction.LOCK.SHARE });
  const invitation = await Invitation.findByPk(id, { actor: SYSTEM, transaction });
  if (!rfq || invitation?.state !== "accepted") return null;
  const now = await databaseNow(transaction);
  const refusal = quoteRefusal("edit", "draft", rfqState(rfq, now));
  if (refusal) return invalid({ form: [refusal] });
  const quote = await Quote.create(
    {
      publicId: newPublicId(),
      buyerOrganisationId,
      supplierOrganisationId: person.organisationId,
      invitationId: id,
      rfqId,
      draft: EMPTY_QUOTE_DRAFT,
      savedAt: now,
      createdAt: now,
    },
    { transaction },
  );
  await recordQuoteEvent(person, now, quote, "started", {}, transaction);
  return ok({ quote: quote.publicId });
}

/** An entry only the supplier reads: before it submits, nothing tells the buyer that it works on a quote. */
export function recordQuoteEvent(
  person: Person,
  now: Date,
  { id: quoteId, rfqId, supplierOrganisationId }: Quote,
  action: string,
  detail: Record<string, unknown>,
  transaction: Transaction,
): Promise<void> {
  const event = { subject: "quote", action, supplierOrganisationId, rfqId, quoteId, detail };
  return recordEvent(person, now, event, transaction);
}

export interface LockedQuote extends FoundQuote {
  /** The database's clock, read after the locks were had. */
  readonly now: Date;
}

/**
 * Locks the RFQ, then the quote, as everywhere; null where the invitation was revoked meanwhile. Read for the system: a
 * condition on other tables would take the snapshot before the lock is had, and later reads would miss what was committed meanwhile.
 *
 * @param rfqLock null for what decides nothing but the draft: an upload that takes long must not hold up another supplier's
 *   submission, and a draft that changes in the due millisecond is worth nothing without one
 */
export async function lockQuote(
  { quote, rfq }: FoundQuote,
  rfqLock: "UPDATE" | null,
  transaction: Transaction,
): Promise<LockedQuote | null> {
  const system = { actor: SYSTEM, transaction, rejectOnEmpty: true } as const;
  const lockedRfq = await Rfq.findByPk(rfq.id, { ...system, ...(rfqLock && { lock: transaction.LOCK[rfqLock] }) });
  const lockedQuote = await Quote.findByPk(quote.id, { ...system, lock: transaction.LOCK.UPDATE });
  const invitation = await Invitation.findByPk(quote.invitationId, system);
  if (invitation.state !== "accepted") return null;
  return { rfq: lockedRfq, quote: lockedQuote, now: await databaseNow(transaction) };
}

/** Runs `work` on the locked quote if it can be edited now. Null where the person does not see it. */
export async function changeQuote<T>(
  person: Person,
  quotePublicId: string,
  work: (locked: LockedQuote, transaction: Transaction) => Promise<Result<T>>,
): Promise<Result<T> | null> {
  const found = await findQuote(person, quotePublicId);
  return found && changeFoundQuote(found, work);
}

/** The same for a quote the person was seen to have. */
export function changeFoundQuote<T>(
  found: FoundQuote,
  work: (locked: LockedQuote, transaction: Transaction) => Promise<Result<T>>,
): Promise<Result<T> | null> {
  return inTransaction(async (transaction) => {
    const locked = await lockQuote(found, null, transaction);
    if (!locked) return null;
    const refusal = quoteRefusal("edit", locked.quote.state, rfqState(locked.rfq, locked.now));
    return refusal ? invalid({ form: [refusal] }) : work(locked, transaction);
  });
}

const DRAFT_FIELDS =
  /^(?:nre|leadFirstDays|leadVolumeDays|validUntil|minimumQuantity|orderMultiple|incoterms|place|paymentTerms|remarks|basis|prices\.\d{1,9}|setup\.[A-Za-z]{1,30}|instrument\.[A-Za-z]{1,30}|drift\.[A-Za-z]{1,30}|declarations\.[0-9a-z-]{1,16}\.(?:answer|text))$/;
/** Longer than any field may be at submission, so that what is typed too long is kept and can be shortened. */
const LONGEST_KEPT = 10_000;

export const SAVED_ELSEWHERE =
  "This quote was saved by somebody else since you opened this page. Your entries are kept below; save again to let them count.";

/**
 * Keeps the posted fields as they were typed, whether they are in order or not; fields of other sheets stay as they are. Where the
 * measurement setup says something else from now on, the draft's sweeps are scored with it.
 *
 * @param lockVersion of the quote when the form was shown: an older one is refused
 */
export function saveDraft(
  person: Person,
  quotePublicId: string,
  values: FormValues,
  lockVersion: number,
): Promise<Result<{ lockVersion: number }> | null> {
  const kept = Object.entries(values).filter(([name]) => DRAFT_FIELDS.test(name));
  return changeQuote(person, quotePublicId, async ({ quote, now }, transaction) => {
    if (quote.lockVersion !== lockVersion) return invalid({ form: [SAVED_ELSEWHERE] });
    const posted = Object.fromEntries(kept.map(([name, value]) => [name, value.slice(0, LONGEST_KEPT)]));
    const draft = { values: { ...quote.draft.values, ...posted } };
    const isSetupChanged = setupHash(statedSetup(draft.values)) !== setupHash(statedSetup({ ...quote.draft.values }));
    const next = lockVersion + 1;
    await quote.update({ draft, ...basisOf(posted), lockVersion: next, savedAt: now }, { transaction });
    if (isSetupChanged) await queueDraftScoring(quote.id, now, transaction);
    await recordQuoteEvent(person, now, quote, "draft saved", { fields: Object.keys(posted).length }, transaction);
    return ok({ lockVersion: next });
  });
}

function basisOf({ basis }: FormValues): Partial<Pick<Quote, "basis">> {
  return basis === "measured" || basis === "similar" || basis === "simulated" ? { basis } : {};
}
