// Title block and sheets of an RFQ, the same on each of its pages.
import type { ReactNode } from "react";
import { href, Link } from "react-router";
import type { RfqState } from "~/workflow/rfq";
import { Instant } from "./figure";
import { formatNumber } from "./format";
import { Sheets } from "./sheets";
import { TitleBlock } from "./title-block";

/** What `readRfqHead` answers, as the pages' data carry it. */
export interface RfqBlockHead {
  readonly publicId: string;
  readonly number: string;
  readonly title: string;
  readonly state: RfqState;
  readonly specification: { readonly publicId: string; readonly number: string; readonly letter: string };
  readonly ownerName: string;
  readonly decisionRule: "simple" | "guarded";
  readonly dueAt: string;
  readonly dueZone: string;
  readonly quantity: number;
  readonly currency: string;
  readonly quotes: { readonly submitted: number; readonly invited: number };
}

const SHEETS = ["Overview", "Invitations", "Comparison", "Decision", "History"] as const;

export type RfqSheet = (typeof SHEETS)[number];

const ADDRESSES = {
  Overview: "/rfqs/:rfqId",
  Invitations: "/rfqs/:rfqId/invitations",
  Comparison: "/rfqs/:rfqId/comparison",
  Decision: "/rfqs/:rfqId/decision",
  History: "/rfqs/:rfqId/history",
} as const satisfies Record<RfqSheet, string>;

interface RfqBlockProps {
  head: RfqBlockHead;
  sheet: RfqSheet;
  /** One filled button at most. */
  actions?: ReactNode;
}

/** Stands directly in `Page`. */
export function RfqBlock({ head, sheet, actions }: RfqBlockProps) {
  const { specification, quotes } = head;
  return (
    <>
      <TitleBlock
        heading={{ number: head.number, title: head.title }}
        numberLabel="RFQ"
        cells={[
          { label: "Sheet", value: `${SHEETS.indexOf(sheet) + 1} of ${SHEETS.length}` },
          { label: "Status", value: head.state },
        ]}
        facts={[
          {
            label: "Specification",
            value: (
              <Link
                to={href("/specifications/:specificationId/revisions/:letter", {
                  specificationId: specification.publicId,
                  letter: specification.letter,
                })}
              >
                {specification.number} {specification.letter}
              </Link>
            ),
          },
          { label: "Owner", value: head.ownerName },
          { label: "Decision rule", value: DECISION_RULES[head.decisionRule] },
          { label: "Due", value: <Instant at={head.dueAt} zone={head.dueZone} /> },
          { label: "Quantity", value: formatNumber(head.quantity, 0) },
          { label: "Quotes", value: `${quotes.submitted} of ${quotes.invited} invited` },
        ]}
        actions={actions}
      />
      <Sheets
        label="Sheets of the RFQ"
        items={SHEETS.map((label) => ({ label, to: href(ADDRESSES[label], { rfqId: head.publicId }) }))}
      />
    </>
  );
}

export const DECISION_RULES = { simple: "simple acceptance", guarded: "guarded acceptance" } as const;
