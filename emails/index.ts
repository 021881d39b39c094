// Every mail the product sends: one event a template, and the renderer that picks it.
import { z } from "zod";
import { award, AwardProps } from "./award";
import { awardRecommended, AwardRecommendedProps } from "./award-recommended";
import { awardReturned, AwardReturnedProps } from "./award-returned";
import type { RenderedMail } from "./content";
import { invitation, InvitationProps } from "./invitation";
import { passwordChanged, PasswordChangedProps } from "./password-changed";
import { passwordReset, PasswordResetProps } from "./password-reset";
import { quoteReceivedBuyer, QuoteReceivedBuyerProps } from "./quote-received-buyer";
import { quoteReceivedSupplier, QuoteReceivedSupplierProps } from "./quote-received-supplier";
import { regret, RegretProps } from "./regret";

export type { RenderedMail } from "./content";
export type { LineVerdict, ResultLine } from "./results";
export type {
  AwardProps,
  AwardRecommendedProps,
  AwardReturnedProps,
  InvitationProps,
  PasswordChangedProps,
  PasswordResetProps,
  QuoteReceivedBuyerProps,
  QuoteReceivedSupplierProps,
  RegretProps,
};

/** One row of the outbox: which template, and its props. */
export const MailEvent = z.discriminatedUnion("template", [
  z.strictObject({ template: z.literal("invitation"), props: InvitationProps }),
  z.strictObject({ template: z.literal("quote-received-supplier"), props: QuoteReceivedSupplierProps }),
  z.strictObject({ template: z.literal("quote-received-buyer"), props: QuoteReceivedBuyerProps }),
  z.strictObject({ template: z.literal("award-recommended"), props: AwardRecommendedProps }),
  z.strictObject({ template: z.literal("award-returned"), props: AwardReturnedProps }),
  z.strictObject({ template: z.literal("award"), props: AwardProps }),
  z.strictObject({ template: z.literal("regret"), props: RegretProps }),
  z.strictObject({ template: z.literal("password-reset"), props: PasswordResetProps }),
  z.strictObject({ template: z.literal("password-changed"), props: PasswordChangedProps }),
]);
export type MailEvent = z.infer<typeof MailEvent>;

export function renderMail(event: MailEvent): Promise<RenderedMail> {
  switch (event.template) {
    case "invitation":
      return invitation(event.props);
    case "quote-received-supplier":
      return quoteReceivedSupplier(event.props);
    case "quote-received-buyer":
      return quoteReceivedBuyer(event.props);
    case "award-recommended":
      return awardRecommended(event.props);
    case "award-returned":
      return awardReturned(event.props);
    case "award":
      return award(event.props);
    case "regret":
      return regret(event.props);
    case "password-reset":
      return passwordReset(event.props);
    case "password-changed":
      return passwordChanged(event.props);
  }
}
