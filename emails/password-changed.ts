// The password was changed, to the user whose it is.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { formatInstant } from "./format";
import { Instant, Link, TimeZone } from "./props";

export const PasswordChangedProps = z.strictObject({
  changedAt: Instant,
  /** The reader's zone. */
  timeZone: TimeZone,
  /** Where a new password can be asked for. */
  link: Link,
});
export type PasswordChangedProps = z.infer<typeof PasswordChangedProps>;

export function passwordChanged(props: PasswordChangedProps): Promise<RenderedMail> {
  return renderContent("password-changed", {
    number: { label: "Account", value: "Password" },
    title: { label: "Subject", value: "Your password was changed" },
    subject: "Your password was changed",
    lead: "The password of your account was changed. All sessions have ended.",
    facts: [{ label: "Changed", value: formatInstant(props.changedAt, props.timeZone) }],
    action: { label: "Ask for a new password", link: props.link },
    notes: ["If it was not you, ask for a new password at once and tell your administrator."],
  });
}
