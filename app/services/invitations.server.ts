// Invitations of an RFQ: added by company and address, mailed as single-use links, sent again, revoked.
import type { Transaction } from "sequelize";
import { config } from "~/config.server";
import { Invitation, Quote, User, type Rfq, type Supplier } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { invalid, ok, type FieldErrors, type Result } from "~/forms/form";
import { MOST_INVITATIONS, type InvitationInput } from "~/forms/rfq";
import { rfqNumber } from "~/workflow/numbers";
import { rfqRefusal, rfqState } from "~/workflow/rfq";
import { recordEvent } from "./audit.server";
import { once } from "./idempotency.server";
import { newPublicId } from "./identifiers.server";
import { queueMail } from "./outbox.server";
import type { Person } from "./person.server";
import { findRfq, lockRfq } from "./rfq-head.server";
import { blockedRefusal, keepContact, supplierByName, supplierNames } from "./suppliers.server";
import { issueToken, revokeTokens } from "./tokens.server";
import { inTransaction } from "./transaction.server";

const LONGEST_VALIDITY_MS = 60 * 24 * 60 * 60 * 1000;

/** When a link sent at an instant ends: with the due date, after 60 days at most. */
export const linkEnd = (sentAt: Date, dueAt: Date): Date =>
  new Date(Math.min(dueAt.getTime(), sentAt.getTime() + LONGEST_VALIDITY_MS));

export type ShownInvitationState = "draft" | "sent" | "accepted" | "declined" | "revoked" | "expired";

type StoredState = Exclude<ShownInvitationState, "expired">;

export interface InvitationEntry {
  readonly publicId: string;
  readonly company: string;
  readonly email: string;
  readonly state: ShownInvitationState;
  /** When it came into this state, ISO 8601, UTC; not known of a revoked one. */
  readonly since: string | null;
  /** End of the link that is out; null where none is. */
  readonly linkEnds: string | null;
  /** Of one who declined. */
  readonly reason: string | null;
  readonly hasQuote: boolean;
  readonly canResend: boolean;
  readonly canRevoke: boolean;
}

export interface InvitationSheet {
  readonly entries: readonly InvitationEntry[];
  /** Why nobody can be invited now; null where it is possible. */
  readonly refusal: string | null;
  readonly now: string;
}

/** All invitations of an RFQ in the order they were added, or null where the person does not see it. */
export async function listInvitations(person: Person, rfqPublicId: string): Promise<InvitationSheet | null> {
  const rfq = await findRfq(person, rfqPublicId);
  if (!rfq) return null;
  const [invitations, quotes, now] = await Promise.all([
    Invitation.findAll({ where: { rfqId: rfq.id }, order: [["id", "ASC"]], actor: person }),
    Quote.findAll({ where: { rfqId: rfq.id, state: "submitted" }, attributes: ["invitationId"], actor: person }),
    databaseNow(),
  ]);
  const names = await supplierNames(person, invitations);
  const quoted = new Set(quotes.map(({ invitationId }) => invitationId));
  const refusal = rfqRefusal("invite", rfqState(rfq, now));
  const entries = invitations.map((invitation): InvitationEntry => {
    const hasQuote = quoted.has(invitation.id);
    return {
      publicId: invitation.publicId,
      company: names.get(invitation.supplierId) ?? "",
      email: invitation.email,
      ...shownState(invitation, rfq, now),
      reason: invitation.state === "declined" ? invitation.reason : null,
      hasQuote,
      canResend: refusal === null && rfq.status === "open" && RESENT_FROM.includes(invitation.state),
      canRevoke: refusal === null && REVOKED_FROM.includes(invitation.state) && !hasQuote,
    };
  });
  return { entries, refusal, now: now.toISOString() };
}

/** One who declined or was revoked may be asked again; one who accepted signs in. */
const RESENT_FROM: readonly StoredState[] = ["sent", "declined", "revoked"];
const REVOKED_FROM: readonly StoredState[] = ["draft", "sent", "accepted"];

function shownState(invitation: Invitation, rfq: Rfq, now: Date) {
  const state: StoredState = invitation.state;
  const { sentAt } = invitation;
  const ends = sentAt && linkEnd(sentAt, rfq.dueAt);
  // A link answers only while the RFQ is open: closing or cancelling ends it before its date.
  if (state === "sent" && ends && (now >= ends || rfqState(rfq, now) !== "open")) {
    const since = new Date(Math.min(ends.getTime(), rfq.closedAt?.getTime() ?? Infinity, now.getTime()));
    return { state: "expired" as const, since: since.toISOString(), linkEnds: null };
  }
  const instants: Record<StoredState, Date | null> = {
    draft: invitation.createdAt,
    sent: sentAt,
    accepted: invitation.acceptedAt,
    declined: invitation.declinedAt,
    revoked: null,
  };
  const linkEnds = state === "sent" && ends ? ends.toISOString() : null;
  return { state, since: instants[state]?.toISOString() ?? null, linkEnds };
}

export type IndexedInvitation = InvitationInput & { readonly index: number };

/**
 * Adds invitations to a draft or an open RFQ; to an open one they are mailed at once. All rows are taken or none: errors are
 * keyed by the row's posted index. Null where the person does not see the RFQ.
 */
export async function addInvitations(
  person: Person,
  idempotencyKey: string,
  rfqPublicId: string,
  rows: readonly IndexedInvitation[],
): Promise<Result<{ added: number }> | null> {
  return once<Result<{ added: number }> | null>(
    person,
    idempotencyKey,
    { invite: rfqPublicId, rows },
    (outcome) => outcome?.ok === true,
    async (transaction) => {
      const rfq = await lockRfq(person, rfqPublicId, transaction);
      if (!rfq) return null;
      const now = await databaseNow(transaction);
      const refusal = rfqRefusal("invite", rfqState(rfq, now));
      if (refusal) return invalid({ form: [refusal] });
      // Entries are locked or made before anything is plainly read, which would fix what the transaction sees.
      const entries: { readonly row: IndexedInvitation; readonly supplier: Supplier }[] = [];
      for (const row of rows)
        entries.push({ row, supplier: await supplierByName(person, row.company, now, transaction) });
      const invited = await Invitation.findAll({ where: { rfqId: rfq.id }, actor: person, transaction });
      if (invited.length + rows.length > MOST_INVITATIONS)
        return invalid({ form: [`An RFQ has at most ${MOST_INVITATIONS} invitations.`] });
      // A refused row undoes the rows before it: the transaction is given up as a whole.
      const errors: FieldErrors = {};
      for (const { row, supplier } of entries) {
        const fault = await refuseRow(person, row, supplier, invited, transaction);
        if (fault) errors[`invitations.${row.index}.${fault.field}`] = [fault.sentence];
        else invited.push(await addOne(person, rfq, supplier, row.email, now, transaction));
      }
      return Object.keys(errors).length > 0 ? invalid(errors) : ok({ added: rows.length });
    },
  );
}

interface RowFault {
  readonly field: "company" | "email";
  readonly sentence: string;
}

async function refuseRow(
  person: Person,
  row: InvitationInput,
  supplier: Supplier,
  invited: readonly Invitation[],
  transaction: Transaction,
): Promise<RowFault | null> {
  if (supplier.status === "blocked")
    return { field: "company", sentence: `${supplier.name} is blocked in your supplier directory.` };
  if (invited.some(({ supplierId }) => supplierId === supplier.id))
    return { field: "company", sentence: `${supplier.name} is on the list already.` };
  if (invited.some(({ email }) => email === row.email))
    return { field: "email", sentence: "This address is on the list already." };
  // Only people of the own organisation are visible here: nothing tells whether another address has an account.
  const colleague = await User.count({ where: { email: row.email }, actor: person, transaction });
  return colleague > 0 ? { field: "email", sentence: "This address belongs to your own organisation." } : null;
}

async function addOne(
  person: Person,
  rfq: Rfq,
  supplier: Supplier,
  email: string,
  now: Date,
  transaction: Transaction,
): Promise<Invitation> {
  await keepContact(supplier, email, now, transaction);
  const invitation = await Invitation.create(
    {
      publicId: newPublicId(),
      buyerOrganisationId: rfq.buyerOrganisationId,
      rfqId: rfq.id,
      supplierId: supplier.id,
      email,
      createdAt: now,
    },
    { transaction },
  );
  if (rfq.status === "open") await sendInvitation(person, rfq, invitation, now, transaction);
  else await recordInvitation(person, "added", rfq, invitation, supplier.name, now, transaction);
  return invitation;
}

/** Never carries the supplier's organisation: a supplier does not read who was invited, or when. */
function recordInvitation(
  person: Person,
  action: "added" | "sent" | "revoked" | "removed",
  rfq: Rfq,
  invitation: Invitation,
  company: string,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const detail = { company, email: invitation.email };
  const about = { buyerOrganisationId: rfq.buyerOrganisationId, rfqId: rfq.id };
  return recordEvent(person, now, { subject: "invitation", action, ...about, detail }, transaction);
}

/** Makes an invitation's link, which ends the one before it, and queues the mail that carries it. For a locked, open RFQ. */
export async function sendInvitation(
  person: Person,
  rfq: Rfq,
  invitation: Invitation,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const ends = linkEnd(now, rfq.dueAt);
  const token = await issueToken({ purpose: "invitation", invitationId: invitation.id }, now, ends, transaction);
  const names = await supplierNames(person, [invitation], transaction);
  const company = names.get(invitation.supplierId) ?? "";
  await invitation.update({ state: "sent", sentAt: now, reason: null, declinedAt: null }, { transaction });
  await queueMail(
    {
      template: "invitation",
      props: {
        rfqNumber: rfqNumber(rfq.year, rfq.number),
        rfqTitle: rfq.title,
        buyerName: person.organisationName,
        dueAt: rfq.dueAt.toISOString(),
        dueZone: rfq.dueZone,
        ...(rfq.text === null ? {} : { message: rfq.text }),
        link: `${config().appUrl}/invitation/${token}`,
        linkValidUntil: ends.toISOString(),
      },
    },
    { email: invitation.email, name: company },
    `invitation:${invitation.publicId}:${now.getTime()}`,
    now,
    transaction,
  );
  await recordInvitation(person, "sent", rfq, invitation, company, now, transaction);
}

/** The locked RFQ and one of its invitations, also locked, if the verb is possible now. */
async function lockInvitation(person: Person, rfqPublicId: string, publicId: string, transaction: Transaction) {
  const rfq = await lockRfq(person, rfqPublicId, transaction);
  if (!rfq) return null;
  const where = { rfqId: rfq.id, publicId };
  const invitation = await Invitation.findOne({ where, actor: person, transaction, lock: transaction.LOCK.UPDATE });
  return invitation ? { rfq, invitation, now: await databaseNow(transaction) } : null;
}

/** Sends a new link, also to one who declined or was revoked; the old link ends. Null where the person does not see it. */
export async function resendInvitation(
  person: Person,
  rfqPublicId: string,
  publicId: string,
): Promise<Result<null> | null> {
  return inTransaction(async (transaction) => {
    const found = await lockInvitation(person, rfqPublicId, publicId, transaction);
    if (!found) return null;
    const { rfq, invitation, now } = found;
    if (rfqState(rfq, now) !== "open") return invalid({ form: ["Invitations are sent while the RFQ is open."] });
    if (!RESENT_FROM.includes(invitation.state))
      return invalid({ form: ["This invitation has been accepted: the supplier signs in."] });
    const blocked = await blockedRefusal(person, [invitation], transaction);
    if (blocked) return invalid({ form: [blocked] });
    await sendInvitation(person, rfq, invitation, now, transaction);
    return ok(null);
  });
}

/** Takes an invitation back: its link ends, an accepted one no longer opens the RFQ. One never sent is removed. */
export async function revokeInvitation(
  person: Person,
  rfqPublicId: string,
  publicId: string,
): Promise<Result<null> | null> {
  return inTransaction(async (transaction) => {
    const found = await lockInvitation(person, rfqPublicId, publicId, transaction);
    if (!found) return null;
    const { rfq, invitation, now } = found;
    const refusal = rfqRefusal("revoke-invitation", rfqState(rfq, now));
    if (refusal) return invalid({ form: [refusal] });
    if (!REVOKED_FROM.includes(invitation.state))
      return invalid({ form: ["This invitation was declined or revoked before."] });
    const quoted = { invitationId: invitation.id, state: "submitted" as const };
    if ((await Quote.count({ where: quoted, actor: person, transaction })) > 0)
      return invalid({ form: ["This supplier has submitted a quote: the invitation stays."] });
    const names = await supplierNames(person, [invitation], transaction);
    const company = names.get(invitation.supplierId) ?? "";
    if (invitation.state === "draft") await invitation.destroy({ transaction });
    else {
      await invitation.update({ state: "revoked" }, { transaction });
      await revokeTokens({ purpose: "invitation", invitationId: invitation.id }, now, transaction);
    }
    const action = invitation.state === "draft" ? "removed" : "revoked";
    await recordInvitation(person, action, rfq, invitation, company, now, transaction);
    return ok(null);
  });
}
