// Answering an invitation by its link: the token is the right to it, so rows are read for the system, never for a person.
import { UniqueConstraintError, type Transaction } from "sequelize";
import { Invitation, Organisation, Rfq, Supplier, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import type { AcceptInvitationInput } from "~/forms/account";
import { invalid, ok, type Result } from "~/forms/form";
import { rfqNumber } from "~/workflow/numbers";
import { canRfq, rfqState } from "~/workflow/rfq";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import { hashPassword } from "./passwords.server";
import type { Person } from "./person.server";
import { keepContact } from "./suppliers.server";
import { findToken, useToken } from "./tokens.server";
import { inTransaction } from "./transaction.server";

/** What the page says of an invitation before it is accepted; the specification is not among it. */
export interface InvitationOffer {
  /** Public id; the form carries it, so that an answer is never given to another invitation opened meanwhile. */
  readonly invitation: string;
  readonly buyerName: string;
  readonly rfqNumber: string;
  readonly rfqTitle: string;
  /** ISO 8601, UTC. */
  readonly dueAt: string;
  readonly dueZone: string;
  /** As the buyer wrote it. */
  readonly company: string;
  readonly email: string;
}

/** An answer: null where the link is used, ended, revoked or never was. */
export type Answer<T> = Result<T> | null;

const OTHER_OPENED =
  "Another invitation was opened in this browser meanwhile. This page now shows that one: read it first.";
const ACCOUNT_EXISTS = "An account exists for this address. Sign in with it, then accept.";
const OTHER_ADDRESS =
  "The invitation went to another address than yours. Confirm that you accept it for your organisation.";
const BUYER = "You are signed in as a member of a buying organisation. A buyer's address cannot accept an invitation.";
const ANSWERED_BY_OTHER = "Your organisation has another invitation to this RFQ. Answer that one.";

/** What a link offers, or null where it can no longer be answered. Uses nothing up. */
export async function readOffer(token: string): Promise<InvitationOffer | null> {
  const named = await findNamed(token);
  const offer = named && (await findOffer(token, named));
  if (!offer) return null;
  const { invitation, rfq, supplier } = offer;
  const buyer = await Organisation.findByPk(rfq.buyerOrganisationId, { actor: SYSTEM, rejectOnEmpty: true });
  return {
    invitation: invitation.publicId,
    buyerName: buyer.name,
    rfqNumber: rfqNumber(rfq.year, rfq.number),
    rfqTitle: rfq.title,
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    company: supplier.name,
    email: invitation.email,
  };
}

/** The invitation a link that is still good names, or null: asked before any lock, to know what to lock. */
async function findNamed(token: string): Promise<Invitation | null> {
  const row = await findToken("invitation", token, await databaseNow());
  return row && Invitation.findByPk(row.invitationId ?? 0, { actor: SYSTEM });
}

/**
 * Token, invitation, RFQ and directory entry, if the link can be answered. With a transaction all four are locked, the RFQ
 * first, as everywhere.
 */
async function findOffer(token: string, named: Invitation, transaction?: Transaction) {
  const locking = transaction ? { transaction, lock: transaction.LOCK.UPDATE } : {};
  const found = { rejectOnEmpty: true, ...locking } as const;
  const rfq = await Rfq.findByPk(named.rfqId, { actor: SYSTEM, ...found });
  const invitation = await Invitation.findByPk(named.id, { actor: SYSTEM, ...found });
  const supplier = await Supplier.findByPk(invitation.supplierId, { actor: SYSTEM, ...found });
  const now = await databaseNow(transaction);
  const row = await findToken("invitation", token, now, transaction);
  if (!row || invitation.state !== "sent" || !canRfq("accept-invitation", rfqState(rfq, now))) return null;
  return { row, invitation, rfq, supplier, now };
}

type Offer = NonNullable<Awaited<ReturnType<typeof findOffer>>>;

/** Runs `work` on the locked offer; null where it can no longer be answered. */
async function withOffer<T>(
  token: string,
  invitationPublicId: string,
  work: (offer: Offer, transaction: Transaction) => Promise<Result<T>>,
): Promise<Answer<T>> {
  const named = await findNamed(token);
  if (!named) return null;
  return inTransaction(async (transaction) => {
    const offer = await findOffer(token, named, transaction);
    if (!offer) return null;
    if (offer.invitation.publicId !== invitationPublicId) return invalid({ form: [OTHER_OPENED] });
    return work(offer, transaction);
  });
}

/** Accepts for the organisation of a signed-in supplier; `confirmed` where the address differs from the invited one. */
export function acceptAsMember(
  person: Person,
  token: string,
  invitationPublicId: string,
  confirmed: boolean,
): Promise<Answer<{ invitation: string }>> {
  return withOffer(token, invitationPublicId, async (offer, transaction) => {
    if (person.organisationKind !== "supplier") return invalid({ form: [BUYER] });
    if (person.email !== offer.invitation.email && !confirmed) return invalid({ confirmed: [OTHER_ADDRESS] });
    const refusal = await linkDirectory(offer, person.organisationId, transaction);
    if (refusal) return invalid({ form: [refusal] });
    await accept(person, offer, transaction);
    return ok({ invitation: offer.invitation.publicId });
  });
}

/** Where a new account's first request came from. */
export interface Origin {
  readonly requestId?: string;
  readonly ip?: string;
}

/** Makes the supplier's organisation and its first user with the invited address, and accepts as that user. */
export async function acceptAsNew(
  token: string,
  invitationPublicId: string,
  input: AcceptInvitationInput,
  origin: Origin,
): Promise<Answer<{ invitation: string; userId: number }>> {
  if (!(await readOffer(token))) return null;
  const passwordHash = await hashPassword(input.password); // before the transaction: no lock is held while hashing
  try {
    return await withOffer(token, invitationPublicId, async (offer, transaction) => {
      const { invitation, supplier } = offer;
      const where = { email: invitation.email };
      if ((await User.count({ where, actor: SYSTEM, transaction })) > 0) return invalid({ form: [ACCOUNT_EXISTS] });
      if (supplier.supplierOrganisationId !== null) return invalid({ form: [colleagueAccepts(supplier.name)] });
      const person = await register(offer, input, passwordHash, origin, transaction);
      await supplier.update({ supplierOrganisationId: person.organisationId }, { transaction });
      await accept(person, offer, transaction);
      return ok({ invitation: invitation.publicId, userId: person.userId });
    });
  } catch (error) {
    // Two invitations of the same new address accepted at once: the later one meets the account the earlier one made.
    if (error instanceof UniqueConstraintError) return invalid({ form: [ACCOUNT_EXISTS] });
    throw error;
  }
}

const colleagueAccepts = (company: string) =>
  `${company} has an organisation here already. A colleague who is a member of it signs in and accepts by this link.`;

async function register(
  { invitation, rfq, now }: Offer,
  input: AcceptInvitationInput,
  passwordHash: string,
  origin: Origin,
  transaction: Transaction,
): Promise<Person> {
  const timeZone = rfq.dueZone;
  const made = { publicId: newPublicId(), timeZone, createdAt: now };
  const organisation = await Organisation.create(
    { ...made, kind: "supplier", name: input.organisationName, currency: rfq.currency },
    { transaction },
  );
  const membership = { organisationId: organisation.id, organisationKind: "supplier", role: "supplier" } as const;
  const { name } = input;
  const { email } = invitation;
  const user = await User.create(
    { ...made, publicId: newPublicId(), ...membership, name, email, passwordHash },
    { transaction },
  );
  const { id: userId, publicId } = user;
  return { userId, publicId, ...membership, organisationName: organisation.name, name, email, timeZone, ...origin };
}

/** Joins the buyer's directory entry to the organisation. Returns why it cannot be joined, having written nothing. */
async function linkDirectory(offer: Offer, organisationId: number, transaction: Transaction): Promise<string | null> {
  const { supplier, invitation, rfq, now } = offer;
  if (supplier.supplierOrganisationId === organisationId) return null;
  if (supplier.supplierOrganisationId !== null) return colleagueAccepts(supplier.name);
  const where = { buyerOrganisationId: rfq.buyerOrganisationId, supplierOrganisationId: organisationId };
  const linked = await Supplier.findOne({ where, actor: SYSTEM, transaction, lock: transaction.LOCK.UPDATE });
  if (!linked) {
    await supplier.update({ supplierOrganisationId: organisationId }, { transaction });
    return null;
  }
  // The buyer keeps the company under two names: the invitation moves to the entry that is joined already.
  const same = { rfqId: rfq.id, supplierId: linked.id };
  if ((await Invitation.count({ where: same, actor: SYSTEM, transaction })) > 0) return ANSWERED_BY_OTHER;
  await keepContact(linked, invitation.email, now, transaction);
  await invitation.update({ supplierId: linked.id }, { transaction });
  return null;
}

async function accept(person: Person, offer: Offer, transaction: Transaction): Promise<void> {
  const { row, invitation, rfq, supplier, now } = offer;
  if (!(await useToken(row, now, transaction))) throw new Error("a locked token was used by somebody else");
  const supplierOrganisationId = person.organisationId;
  await invitation.update({ state: "accepted", acceptedAt: now, supplierOrganisationId }, { transaction });
  const detail = {
    company: supplier.name,
    email: invitation.email,
    organisation: person.organisationName,
    ...(person.email === invitation.email ? {} : { acceptedBy: person.email }),
  };
  const about = { buyerOrganisationId: rfq.buyerOrganisationId, supplierOrganisationId, rfqId: rfq.id };
  await recordEvent(person, now, { subject: "invitation", action: "accepted", ...about, detail }, transaction);
}

/** Declines with a reason the buyer reads; no account is needed. The link is used up. */
export function declineInvitation(
  person: Person | null,
  token: string,
  invitationPublicId: string,
  reason: string,
): Promise<Answer<null>> {
  return withOffer(token, invitationPublicId, async ({ row, invitation, rfq, supplier, now }, transaction) => {
    if (!(await useToken(row, now, transaction))) throw new Error("a locked token was used by somebody else");
    await invitation.update({ state: "declined", declinedAt: now, reason }, { transaction });
    // Whoever holds the link answers for the invited address; another account in this browser has no part in it.
    const by = person?.email === invitation.email ? person : null;
    const about = { buyerOrganisationId: rfq.buyerOrganisationId, rfqId: rfq.id };
    const detail = { company: supplier.name, email: invitation.email, reason };
    await recordEvent(by, now, { subject: "invitation", action: "declined", ...about, detail }, transaction);
    return ok(null);
  });
}
