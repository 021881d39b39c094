// The history of an RFQ in words: when, who, what.
import { Cell, HeadCell, Row, Table } from "./data-table";
import { Instant } from "./figure";
import { formatDateTime } from "./format";

export interface HistoryEventView {
  readonly id: number;
  readonly at: string;
  readonly actorName: string | null;
  readonly company: string | null;
  readonly subject: string;
  readonly action: string;
  readonly detail: Readonly<Record<string, unknown>>;
}

export function HistoryTable({ events, zone }: { events: readonly HistoryEventView[]; zone: string }) {
  return (
    <Table label="History" stacks className="tablet:min-w-180">
      <thead>
        <tr>
          <HeadCell className="w-56">When</HeadCell>
          <HeadCell className="w-60">Who</HeadCell>
          <HeadCell>What</HeadCell>
        </tr>
      </thead>
      <tbody>
        {events.map((event) => (
          <Row key={event.id}>
            <Cell className="whitespace-nowrap tabular-nums max-tablet:col-span-2 max-tablet:text-quiet">
              <Instant at={event.at} zone={zone} />
            </Cell>
            <Cell className="max-tablet:col-span-2">{whoDid(event)}</Cell>
            <Cell className="whitespace-pre-line max-tablet:col-span-2">{whatHappened(event, zone)}</Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}

/** A refusal by link has no account behind it: the invited address answered. */
function whoDid({ actorName, company, subject, action, detail }: HistoryEventView): string {
  if (actorName !== null) return company === null ? actorName : `${actorName}, ${company}`;
  if (subject === "invitation" && action === "declined") return `${text(detail, "email")}, ${text(detail, "company")}`;
  return "system";
}

const text = (detail: Readonly<Record<string, unknown>>, key: string): string => {
  const value = detail[key];
  return typeof value === "string" || typeof value === "number" ? String(value) : "";
};

const counted = (count: string, one: string) => `${count} ${one}${count === "1" ? "" : "s"}`;

/** By "subject action"; each gets the entry's detail and the RFQ's zone. */
const SENTENCES: Readonly<Record<string, (detail: HistoryEventView["detail"], zone: string) => string>> = {
  "rfq created": (detail) => `wrote the draft ${text(detail, "number")}`,
  "rfq edited": () => "edited the draft",
  "rfq opened": (detail, zone) =>
    `opened the RFQ to ${counted(text(detail, "invitations"), "supplier")}, due ${instant(detail, zone)}`,
  "rfq closed": (detail, zone) =>
    detail.early === true
      ? `closed the RFQ early; it was due ${instant(detail, zone)}`
      : "closed the RFQ at its due date",
  "rfq cancelled": (detail) => `cancelled the RFQ: ${text(detail, "reason")}`,
  "invitation added": (detail) => `put ${addressee(detail)} on the list`,
  "invitation sent": (detail) => `invited ${addressee(detail)}`,
  "invitation revoked": (detail) => `revoked the invitation of ${addressee(detail)}`,
  "invitation removed": (detail) => `took ${addressee(detail)} off the list`,
  "invitation accepted": (detail) => {
    const other = text(detail, "acceptedBy");
    return `accepted the invitation of ${addressee(detail)}${other === "" ? "" : ` as ${other}`}`;
  },
  "invitation declined": (detail) => `declined: ${text(detail, "reason")}`,
  "quote submitted": (detail) => `submitted a quote${versionOf(detail)}`,
  "quote withdrawn": () => "withdrew the quote",
  "quote rescored": (detail) => `scored the quote${versionOf(detail)} again`,
  "quote scored": (detail) => `scored the quote${versionOf(detail)}`,
  "decision recommended": () => "recommended an award",
  "decision approved": () => "approved the award",
  "decision returned": (detail) => {
    const remark = text(detail, "remark");
    return `returned the recommendation${remark === "" ? "" : `: ${remark}`}`;
  },
};

const addressee = (detail: HistoryEventView["detail"]) => `${text(detail, "company")} (${text(detail, "email")})`;

function versionOf(detail: HistoryEventView["detail"]): string {
  const version = text(detail, "version");
  return version === "" ? "" : `, version ${version}`;
}

function instant(detail: HistoryEventView["detail"], zone: string): string {
  const at = text(detail, "dueAt");
  return at === "" ? "" : formatDateTime(at, zone);
}

/** What an entry says; one without a sentence of its own is told by its two words. */
export function whatHappened({ subject, action, detail }: HistoryEventView, zone: string): string {
  return SENTENCES[`${subject} ${action}`]?.(detail, zone) ?? `${action}: ${subject.replaceAll("-", " ")}`;
}
