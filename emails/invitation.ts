// Invitation to quote, to one contact of a supplier.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { formatInstant } from "./format";
import { Instant, Link, rfqBlock, rfqFields, TimeZone } from "./props";

export const InvitationProps = z.strictObject({
  ...rfqFields,
  /** Organisation that invites. */
  buyerName: z.string(),
  dueAt: Instant,
  dueZone: TimeZone,
  /** The buyer's words to all invited; may have several lines. */
  message: z.string().optional(),
  link: Link,
  linkValidUntil: Instant,
});
export type InvitationProps = z.infer<typeof InvitationProps>;

export function invitation(props: InvitationProps): Promise<RenderedMail> {
  const message = props.message?.trim() ?? "";
  return renderContent("invitation", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: invitation to quote, ${props.rfqTitle}`,
    lead: `${props.buyerName} invites you to quote a filter.`,
    facts: [
      { label: "Buyer", value: props.buyerName },
      { label: "Quote due", value: formatInstant(props.dueAt, props.dueZone) },
      { label: "Link valid until", value: formatInstant(props.linkValidUntil, props.dueZone) },
    ],
    quotation: message === "" ? null : { caption: `Message from ${props.buyerName}`, text: message },
    action: { label: "Open the invitation", link: props.link },
    notes: ["Single-use link: it is spent once the invitation is accepted. Afterwards sign in to see the RFQ."],
  });
}
