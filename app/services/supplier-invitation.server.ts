// An invitation as its supplier reads it: what is asked, by when, and the specification as drawn.
import { Invitation, Organisation, Quote, Rfq, RfqQuantity } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import type { Setup } from "~/rf/index";
import type { MeasurementPlan } from "~/rf/measurement-plan";
import { rfqNumber } from "~/workflow/numbers";
import { quoteRefusal, type QuoteState } from "~/workflow/quote";
import { rfqState, type RfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";
import { readSpecificationView, type SpecificationView } from "./specification-view.server";

export interface SupplierInvitation {
  readonly publicId: string;
  readonly rfqNumber: string;
  readonly title: string;
  readonly buyerName: string;
  readonly state: RfqState;
  readonly dueAt: string;
  readonly dueZone: string;
  readonly now: string;
  readonly decisionRule: "simple" | "guarded";
  readonly quantity: number;
  readonly breaks: readonly number[];
  readonly currency: string;
  readonly text: string | null;
  readonly unitsAsked: number;
  readonly unitsOverRange: number;
  readonly measurementPlan: MeasurementPlan;
  readonly assumedSetup: Setup;
  readonly specification: SpecificationView;
  readonly quote: { readonly publicId: string; readonly state: QuoteState } | null;
  /** Why no quote can be written now; null where one can. */
  readonly refusal: string | null;
}

/** Null where the person does not see it, or where the invitation was taken back. */
export async function readSupplierInvitation(person: Person, publicId: string): Promise<SupplierInvitation | null> {
  const where = { publicId, supplierOrganisationId: person.organisationId };
  const invitation = await Invitation.findOne({ where, actor: person });
  const rfq = invitation && (await Rfq.findByPk(invitation.rfqId, { actor: person }));
  const specification = rfq && (await readSpecificationView(person, rfq.revisionId));
  if (!specification) return null;
  const [buyer, quantities, quote, now] = await Promise.all([
    Organisation.findByPk(rfq.buyerOrganisationId, { actor: person, rejectOnEmpty: true }),
    RfqQuantity.findAll({ where: { rfqId: rfq.id }, order: [["quantity", "ASC"]], actor: person }),
    Quote.findOne({ where: { invitationId: invitation.id }, actor: person }),
    databaseNow(),
  ]);
  const state = rfqState(rfq, now);
  return {
    publicId: invitation.publicId,
    rfqNumber: rfqNumber(rfq.year, rfq.number),
    title: rfq.title,
    buyerName: buyer.name,
    state,
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    now: now.toISOString(),
    decisionRule: rfq.decisionRule,
    quantity: rfq.quantity,
    breaks: quantities.map(({ quantity }) => quantity),
    currency: rfq.currency,
    text: rfq.text,
    unitsAsked: rfq.unitsAsked,
    unitsOverRange: rfq.unitsOverRange,
    measurementPlan: rfq.measurementPlan,
    assumedSetup: rfq.assumedSetup,
    specification,
    quote: quote && { publicId: quote.publicId, state: quote.state },
    refusal: quoteRefusal("edit", quote?.state ?? "draft", state),
  };
}
