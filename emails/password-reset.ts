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
});
export type PasswordResetProps = z.infer<typeof PasswordResetProps>;

export function passwordReset(props: PasswordResetProps): Promise<RenderedMail> {
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
