// Invitations of an RFQ: those made, with their states and what can be done, and rows for new ones.
import type { FormState } from "~/forms/form";
import { Button } from "./button";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { Instant } from "./figure";
import { Field, PostForm } from "./form";

export interface InvitationView {
  readonly publicId: string;
  readonly company: string;
  readonly email: string;
  readonly state: "draft" | "sent" | "accepted" | "declined" | "revoked" | "expired";
  readonly since: string | null;
  readonly linkEnds: string | null;
  readonly reason: string | null;
  readonly hasQuote: boolean;
  readonly canResend: boolean;
  readonly canRevoke: boolean;
}

interface InvitationTableProps {
  entries: readonly InvitationView[];
  /** The RFQ's zone. */
  zone: string;
  now: string;
}

const WORDS = {
  draft: "not sent yet",
  sent: "sent",
  accepted: "accepted",
  declined: "declined",
  revoked: "revoked",
  expired: "expired",
};

export function InvitationTable({ entries, zone, now }: InvitationTableProps) {
  return (
    <Table label="Invitations" rows="two-line" stacks className="tablet:min-w-200">
      <thead>
        <tr>
          <HeadCell>Supplier</HeadCell>
          <HeadCell>State</HeadCell>
          <HeadCell>Quote</HeadCell>
          <HeadCell aria-label="Steps" />
        </tr>
      </thead>
      <tbody>
        {entries.map((entry) => (
          <Row key={entry.publicId}>
            <RowHead>
              <TwoLines upper={entry.company} lower={entry.email} />
            </RowHead>
            <Cell className="max-tablet:order-1 max-tablet:col-span-2">
              <TwoLines upper={WORDS[entry.state]} lower={<Since entry={entry} zone={zone} now={now} />} />
              {entry.reason === null ? null : (
                <span className="block max-w-120 pb-1.5 text-12 whitespace-pre-line">“{entry.reason}”</span>
              )}
            </Cell>
            <Cell data-label="Quote">{entry.hasQuote ? "submitted" : "–"}</Cell>
            <Cell className="max-tablet:order-2 max-tablet:col-span-2">
              <Steps entry={entry} />
            </Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}

function Since({ entry, zone, now }: { entry: InvitationView; zone: string; now: string }) {
  if (entry.state === "draft") return <>mailed when the RFQ is opened</>;
  if (entry.since === null) return null;
  return (
    <>
      <Instant at={entry.since} zone={zone} />
      {entry.linkEnds === null ? null : (
        <>
          , link ends <Instant at={entry.linkEnds} zone={zone} now={now} />
        </>
      )}
    </>
  );
}

function Steps({ entry }: { entry: InvitationView }) {
  if (!entry.canResend && !entry.canRevoke) return null;
  const isBack = entry.state === "declined" || entry.state === "revoked";
  return (
    <PostForm aria-label={`Invitation of ${entry.company}`} className="flex justify-end gap-1">
      <input type="hidden" name="invitation" value={entry.publicId} />
      {entry.canResend ? (
        <Button
          kind="plain"
          name="intent"
          value="resend"
          aria-label={`${isBack ? "Invite again" : "Send again"}: ${entry.company}`}
        >
          {isBack ? "Invite again" : "Send again"}
        </Button>
      ) : null}
      {entry.canRevoke ? (
        <Button
          kind="plain"
          name="intent"
          value="revoke"
          aria-label={`${entry.state === "draft" ? "Remove" : "Revoke"}: ${entry.company}`}
        >
          {entry.state === "draft" ? "Remove" : "Revoke"}
        </Button>
      ) : null}
    </PostForm>
  );
}

interface InvitationRowsProps {
  state: FormState | undefined;
  idempotencyKey: string;
  suggestions: readonly { readonly company: string; readonly email: string }[];
  /** The RFQ is open: mails go out as soon as the rows are added. */
  mailsAtOnce: boolean;
  /** Any draft rows to be seen first. */
  count?: number;
}

/** Blank rows for companies and addresses; filled ones are added together. */
export function InvitationRows({ state, idempotencyKey, suggestions, mailsAtOnce, count = 3 }: InvitationRowsProps) {
  return (
    <PostForm
      key={idempotencyKey}
      state={state}
      idempotencyKey={idempotencyKey}
      guardsUnsaved
      aria-label="Invite suppliers"
      className="grid max-w-250 gap-x-4 gap-y-3"
    >
      <datalist id="directory-companies">
        {suggestions.map(({ company }) => (
          <option key={company} value={company} />
        ))}
      </datalist>
      <datalist id="directory-addresses">
        {suggestions
          .filter(({ email }) => email !== "")
          .map(({ company, email }) => (
            <option key={company} value={email} label={company} />
          ))}
      </datalist>
      {Array.from({ length: count }, (_, k) => (
        <div key={k} className="grid gap-x-4 gap-y-3 tablet:grid-cols-2">
          <Field
            name={`invitations.${k}.company`}
            label={`Company ${k + 1}`}
            list="directory-companies"
            autoComplete="off"
            maxLength={120}
          />
          <Field
            name={`invitations.${k}.email`}
            label="E-mail of a contact"
            type="email"
            list="directory-addresses"
            autoComplete="off"
          />
        </div>
      ))}
      <div>
        <Button kind={mailsAtOnce ? "filled" : "outlined"} name="intent" value="add">
          {mailsAtOnce ? "Invite and mail now" : "Add to the list"}
        </Button>
      </div>
    </PostForm>
  );
}
