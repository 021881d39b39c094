// What needs a supplier today: the invitations of all buyers on one page, each with where its quote stands.
import { Op } from "sequelize";
import { Invitation, Organisation, Quote, QuoteSummary, Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { rfqNumber } from "~/workflow/numbers";
import { rfqState, type RfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";

/**
 * - `to-answer`: open, no quote begun
 * - `draft`: open, a quote begun and not submitted
 * - `submitted`: waits for the due date or the decision; open ones may be submitted again
 * - `decided`: awarded or regretted
 * - `missed`: closed or cancelled without a quote of ours
 */
export type OpenPointGroup = "to-answer" | "draft" | "submitted" | "decided" | "missed";

export interface OpenPoint {
  readonly group: OpenPointGroup;
  readonly invitation: string;
  /** Null before a quote is begun. */
  readonly quote: string | null;
  readonly rfqNumber: string;
  readonly title: string;
  readonly buyerName: string;
  readonly state: RfqState;
  readonly dueAt: string;
  readonly dueZone: string;
  readonly outcome: "awarded" | "regretted" | null;
  /** Verdict of the submitted version, once it is scored. */
  readonly verdict: string | null;
}

export interface SupplierOpenPoints {
  readonly points: readonly OpenPoint[];
  readonly now: string;
}

/** Open ones by due date, soonest first; the others latest first. */
export async function readSupplierOpenPoints(person: Person): Promise<SupplierOpenPoints> {
  const invitations = await Invitation.findAll({ where: { state: "accepted" }, actor: person });
  const rfqIds = invitations.map(({ rfqId }) => rfqId);
  const [rfqs, quotes, now] = await Promise.all([
    Rfq.findAll({ where: { id: { [Op.in]: rfqIds } }, actor: person }),
    Quote.findAll({ where: { rfqId: { [Op.in]: rfqIds } }, actor: person }),
    databaseNow(),
  ]);
  const [buyers, summaries] = await Promise.all([
    Organisation.findAll({ where: { id: { [Op.in]: rfqs.map((rfq) => rfq.buyerOrganisationId) } }, actor: person }),
    QuoteSummary.findAll({
      where: { versionId: { [Op.in]: quotes.flatMap(({ currentVersionId }) => currentVersionId ?? []) } },
      order: [["createdAt", "ASC"]],
      actor: person,
    }),
  ]);
  const names = new Map(buyers.map(({ id, name }) => [id, name]));
  const verdicts = new Map(summaries.map(({ versionId, verdict }) => [versionId, verdict]));
  const rfqById = new Map(rfqs.map((rfq) => [rfq.id, rfq]));
  const quoteByInvitation = new Map(quotes.map((quote) => [quote.invitationId, quote]));
  const points = invitations.flatMap((invitation) => {
    const rfq = rfqById.get(invitation.rfqId);
    if (!rfq) return [];
    const quote = quoteByInvitation.get(invitation.id);
    const verdict = verdicts.get(quote?.currentVersionId ?? 0) ?? null;
    return [pointOf(invitation, rfq, quote, names.get(rfq.buyerOrganisationId) ?? "", verdict, now)];
  });
  return { points: points.sort(byUrgency), now: now.toISOString() };
}

function pointOf(
  invitation: Invitation,
  rfq: Rfq,
  quote: Quote | undefined,
  buyerName: string,
  verdict: string | null,
  now: Date,
): OpenPoint {
  const state = rfqState(rfq, now);
  return {
    group: groupOf(quote, state),
    invitation: invitation.publicId,
    quote: quote?.publicId ?? null,
    rfqNumber: rfqNumber(rfq.year, rfq.number),
    title: rfq.title,
    buyerName,
    state,
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    outcome: quote?.outcome ?? null,
    verdict,
  };
}

function groupOf(quote: Quote | undefined, state: RfqState): OpenPointGroup {
  if (quote?.outcome) return "decided";
  if (quote?.state === "submitted") return "submitted";
  if (state !== "open" || quote?.state === "withdrawn") return "missed";
  return quote ? "draft" : "to-answer";
}

function byUrgency(a: OpenPoint, b: OpenPoint): number {
  const ascending = a.dueAt < b.dueAt ? -1 : 1;
  return a.state === "open" && b.state === "open" ? ascending : -ascending;
}
