// A link that sets a new password, to the user who asked for one.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { formatInstant } from "./format";
import { Instant, Link, TimeZone } from "./props";

export const PasswordResetProps = z.strictObject({
  requestedAt: Instant,
  /** The reader's zone. */
  timeZone: TimeZone,
  link: Link,
  /** Set for somebody who was added: the organisation's name. The link then works for 7 days. */
  addedTo: z.string().optional(),
});
export type PasswordResetProps = z.infer<typeof PasswordResetProps>;

export function passwordReset(props: PasswordResetProps): Promise<RenderedMail> {
  if (props.addedTo !== undefined) return welcome(props, props.addedTo);
  return renderContent("password-reset", {
    number: { label: "Account", value: "Password" },
    title: { label: "Subject", value: "Set a new password" },
    subject: "Set a new password",
    lead: "A new password was asked for with this e-mail address. The link works once, for 60 minutes.",
    facts: [{ label: "Asked for", value: formatInstant(props.requestedAt, props.timeZone) }],
    action: { label: "Set a new password", link: props.link },
    notes: ["If it was not you, do nothing: the password stays as it is."],
  });
}

/** The same link, to a colleague who was added and has no password yet. */
function welcome(props: PasswordResetProps, organisation: string): Promise<RenderedMail> {
  return renderContent("password-reset", {
    number: { label: "Account", value: "Password" },
    title: { label: "Subject", value: `You were added to ${organisation}` },
    subject: `You were added to ${organisation}: set a password`,
    lead: `${organisation} has added you to its specifications and RFQs. The link sets your password. It works once, for 7 days.`,
    facts: [{ label: "Added", value: formatInstant(props.requestedAt, props.timeZone) }],
    action: { label: "Set a password", link: props.link },
    notes: ["If you do not know the organisation, do nothing: without a password there is no account."],
  });
}
