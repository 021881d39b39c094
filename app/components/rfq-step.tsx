// A step that cannot be taken back, asked for once more before it is taken: opening, closing early, cancelling an RFQ.
import { href } from "react-router";
import type { FormState } from "~/forms/form";
import { Button, LinkButton } from "./button";
import { Instant } from "./figure";
import { PostForm, TextAreaField } from "./form";
import { Notice } from "./notice";
import { Section } from "./page";
import type { RfqBlockHead } from "./rfq-block";

export const RFQ_STEPS = ["open", "close", "cancel"] as const;
export type RfqStep = (typeof RFQ_STEPS)[number];

interface RfqStepProps {
  step: RfqStep;
  head: RfqBlockHead;
  /** Whom the opening mails. */
  toMail: readonly { readonly company: string; readonly email: string }[];
  missing: readonly ("invitation" | "due-date")[];
  /** Why the step is not possible now. */
  refusal: string | null;
  now: string;
  idempotencyKey: string;
  state: FormState | undefined;
}

export function RfqStepPanel(props: RfqStepProps) {
  const { step, head, refusal } = props;
  const back = href("/rfqs/:rfqId", { rfqId: head.publicId });
  return (
    <Section title={TITLES[step]} id="step" className="border-l-3 border-signal pl-5">
      {refusal === null ? (
        <PostForm state={props.state} idempotencyKey={props.idempotencyKey} className="flex flex-col gap-4">
          {step === "open" ? <Opening {...props} /> : step === "close" ? <Closing {...props} /> : <Cancelling />}
          <div className="flex flex-wrap gap-3">
            <Button kind="filled" name="intent" value={step} disabled={step === "open" && props.missing.length > 0}>
              {step === "open" ? openLabel(props.toMail.length) : step === "close" ? "Close now" : "Cancel the RFQ"}
            </Button>
            <LinkButton to={back}>{step === "open" ? "Not yet" : "Leave it as it is"}</LinkButton>
          </div>
        </PostForm>
      ) : (
        <Notice>{refusal}</Notice>
      )}
    </Section>
  );
}

const TITLES = { open: "Open this RFQ?", close: "Close this RFQ early?", cancel: "Cancel this RFQ?" };

const openLabel = (count: number) => `Open and mail ${count} ${count === 1 ? "invitation" : "invitations"}`;

function Opening({ head, toMail, missing, now }: RfqStepProps) {
  return (
    <>
      {missing.includes("invitation") ? <Notice tone="near">Invite at least one supplier first.</Notice> : null}
      {missing.includes("due-date") ? (
        <Notice tone="near">The due date has passed. Edit the draft and set a later one.</Notice>
      ) : null}
      <p className="max-w-170">
        The RFQ is fixed from then on. Quotes are due <Instant at={head.dueAt} zone={head.dueZone} now={now} />, zone{" "}
        {head.dueZone}.{toMail.length > 0 ? " Each supplier gets a mail with a link of its own:" : null}
      </p>
      {toMail.length > 0 ? (
        <ul className="text-13">
          {toMail.map(({ company, email }) => (
            <li key={email}>
              {company} <span className="text-quiet">{email}</span>
            </li>
          ))}
        </ul>
      ) : null}
    </>
  );
}

function Closing({ head, now }: RfqStepProps) {
  const { submitted, invited } = head.quotes;
  return (
    <p className="max-w-170">
      {submitted} of {invited} invited {invited === 1 ? "supplier has" : "suppliers have"} submitted a quote. Quotes are
      due <Instant at={head.dueAt} zone={head.dueZone} now={now} />; none can be submitted, changed or withdrawn once it
      is closed. It cannot be opened again.
    </p>
  );
}

function Cancelling() {
  return (
    <>
      <p className="max-w-170">No quote is awarded. What was submitted stays on record. It cannot be opened again.</p>
      <TextAreaField name="reason" label="Reason" rows={3} className="max-w-170" required />
    </>
  );
}
