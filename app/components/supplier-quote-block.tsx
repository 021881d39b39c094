// The title block and sheets of a quote as its supplier sees them.
import type { ReactNode } from "react";
import { href, Link } from "react-router";
import type { QuoteState } from "~/workflow/quote";
import type { RfqState } from "~/workflow/rfq";
import { DueDate, Instant } from "./figure";
import { formatNumber } from "./format";
import { DECISION_RULES } from "./rfq-block";
import { Sheets } from "./sheets";
import { TitleBlock } from "./title-block";
import { Verdict, type ShownVerdict } from "./verdict-mark";

/** What `readQuoteHead` answers, as the pages' data carry it. */
export interface SupplierQuoteBlockHead {
  readonly publicId: string;
  readonly invitation: string;
  readonly rfqNumber: string;
  readonly title: string;
  readonly buyerName: string;
  readonly specification: { readonly number: string; readonly letter: string };
  readonly state: QuoteState;
  readonly rfqState: RfqState;
  readonly version: number;
  readonly submittedAt: string | null;
  readonly savedAt: string;
  readonly changedSince: boolean;
  readonly decisionRule: "simple" | "guarded";
  readonly dueAt: string;
  readonly dueZone: string;
  readonly quantity: number;
  readonly outcome: "awarded" | "regretted" | null;
  readonly refusal: string | null;
  readonly now: string;
}

const ADDRESSES = {
  Data: "/supplier/quotes/:quoteId",
  Terms: "/supplier/quotes/:quoteId/terms",
  Declarations: "/supplier/quotes/:quoteId/declarations",
  Review: "/supplier/quotes/:quoteId/review",
  Results: "/supplier/quotes/:quoteId/results",
} as const;

export type SupplierQuoteSheet = keyof typeof ADDRESSES;

export const quoteSheetAddress = (sheet: SupplierQuoteSheet, quoteId: string): string =>
  href(ADDRESSES[sheet], { quoteId });

interface SupplierQuoteBlockProps {
  head: SupplierQuoteBlockHead;
  sheet: SupplierQuoteSheet;
  /** Of the submitted version, beside the results. */
  verdict?: ShownVerdict | undefined;
  /** One filled button at most. */
  actions?: ReactNode;
}

/** Stands directly in `Page`. */
export function SupplierQuoteBlock({ head, sheet, verdict, actions }: SupplierQuoteBlockProps) {
  const all = Object.keys(ADDRESSES) as SupplierQuoteSheet[];
  const sheets = all.filter((name) => name !== "Results" || head.version > 0);
  const invitation = href("/supplier/invitations/:invitationId", { invitationId: head.invitation });
  return (
    <>
      <TitleBlock
        heading={{ number: head.rfqNumber, title: head.title }}
        numberLabel="Quote to"
        cells={[
          { label: "Sheet", value: `${sheets.indexOf(sheet) + 1} of ${sheets.length}` },
          { label: "Quote", value: head.outcome ?? head.state, width: "status" },
          ...(verdict === undefined
            ? []
            : [{ label: "Verdict", value: <Verdict verdict={verdict} />, width: "verdict" as const }]),
        ]}
        facts={[
          { label: "Buyer", value: head.buyerName },
          {
            label: "Specification",
            value: (
              <Link to={invitation}>
                {head.specification.number} {head.specification.letter}
              </Link>
            ),
          },
          { label: "Decision rule", value: DECISION_RULES[head.decisionRule] },
          { label: "Quantity", value: formatNumber(head.quantity, 0) },
          {
            label: "Due",
            value: <DueDate at={head.dueAt} zone={head.dueZone} now={head.now} state={head.rfqState} />,
          },
          submission(head),
        ]}
        actions={actions}
      />
      <Sheets
        label="Sheets of the quote"
        items={sheets.map((label) => ({ label, to: quoteSheetAddress(label, head.publicId) }))}
      />
    </>
  );
}

function submission({ version, submittedAt, savedAt, dueZone }: SupplierQuoteBlockHead) {
  if (submittedAt === null) return { label: "Saved", value: <Instant at={savedAt} zone={dueZone} /> };
  return { label: `Submitted, version ${version}`, value: <Instant at={submittedAt} zone={dueZone} /> };
}
