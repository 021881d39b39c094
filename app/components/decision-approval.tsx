// The second person's step: approve the recommendation, or return it with a remark.
import type { FormState } from "~/forms/form";
import { Button } from "./button";
import { PostForm, TextAreaField } from "./form";
import { Notice } from "./notice";
import { Section } from "./page";

interface DecisionApprovalProps {
  decisionId: string;
  /** Why this person can do neither; null where it can. */
  refusal: string | null;
  /** Who can. */
  approvers: readonly string[];
  /** How many suppliers a mail goes to. */
  suppliers: number;
  idempotencyKey: string;
  state: FormState | undefined;
}

export function DecisionApproval(props: DecisionApprovalProps) {
  const { decisionId, refusal, approvers, suppliers, idempotencyKey, state } = props;
  if (refusal !== null)
    return (
      <Section title="Approval">
        <Notice>
          {refusal} {waitsFor(approvers)}
        </Notice>
      </Section>
    );
  return (
    <Section title="Approval">
      <PostForm state={state} idempotencyKey={idempotencyKey} className="flex flex-col gap-4">
        <input type="hidden" name="decisionId" value={decisionId} />
        <p className="max-w-180">
          Approving decides the RFQ and mails {suppliers === 1 ? "the supplier" : `all ${suppliers} suppliers`} that
          quoted: the award as a notice of intent{suppliers === 1 ? "" : ", and a regret to each other one"}. It cannot
          be taken back here.
        </p>
        <TextAreaField
          name="remark"
          label="Remark"
          rows={3}
          className="max-w-180"
          hint="To return it, say what should change; to approve, it may stay empty."
        />
        <div className="flex flex-wrap gap-3">
          <Button kind="filled" name="intent" value="approve">
            Approve award
          </Button>
          <Button name="intent" value="return">
            Return with the remark
          </Button>
        </div>
      </PostForm>
    </Section>
  );
}

const waitsFor = (approvers: readonly string[]): string =>
  approvers.length === 0
    ? "Nobody else here may approve: an administrator can add somebody."
    : `It waits for ${approvers.length === 1 ? "" : "one of "}${approvers.join(", ")}.`;
