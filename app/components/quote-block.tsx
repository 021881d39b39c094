// Title block and sheets of a submitted quote, as its buyer sees it.
import type { ReactNode } from "react";
import { href, Link } from "react-router";
import { LinkButton } from "./button";
import { Instant } from "./figure";
import { formatNumber } from "./format";
import { Notice } from "./notice";
import { RescoringNotice } from "./quote-scoring-progress";
import type { RescoringView } from "./quote-scoring-words";
import { DECISION_RULES } from "./rfq-block";
import { Sheets } from "./sheets";
import { TitleBlock } from "./title-block";
import { Verdict, type ShownVerdict } from "./verdict-mark";

/** What `readSubmittedHead` answers, as the pages' data carry it. */
export interface QuoteBlockHead {
  readonly publicId: string;
  readonly supplierName: string;
  readonly state: "draft" | "submitted" | "withdrawn";
  readonly outcome: "awarded" | "regretted" | null;
  readonly rfq: { readonly publicId: string; readonly number: string; readonly title: string };
  readonly specification: { readonly publicId: string; readonly number: string; readonly letter: string };
  readonly version: number;
  readonly submittedAt: string;
  readonly dueZone: string;
  readonly basis: "measured" | "similar" | "simulated";
  readonly decisionRule: "simple" | "guarded";
  readonly transmission: { readonly uncertainty: number; readonly assumed: boolean } | null;
  readonly verdict: ShownVerdict | null;
  readonly coreVersion: string | null;
  readonly rescoring: RescoringView | null;
}

export const BASES = {
  measured: "measured, quoted part",
  similar: "measured, similar part",
  simulated: "simulated",
} as const;

/** Stands directly in `Page`. */
export function QuoteBlock({ head }: { head: QuoteBlockHead }) {
  const quoteId = head.publicId;
  return (
    <>
      <TitleBlock
        heading={{ number: head.rfq.number, title: head.supplierName, caption: "Supplier" }}
        numberLabel="Quote for"
        cells={[
          { label: "Version", value: head.version },
          {
            label: "Verdict",
            value: head.verdict ? <Verdict verdict={head.verdict} /> : "being scored",
            width: "verdict",
          },
        ]}
        facts={facts(head)}
        actions={<LinkButton to={href("/rfqs/:rfqId/comparison", { rfqId: head.rfq.publicId })}>Compare</LinkButton>}
      />
      <Sheets
        label="Sheets of the quote"
        items={[
          { label: "Results", to: href("/quotes/:quoteId", { quoteId }) },
          { label: "Curves", to: href("/quotes/:quoteId/curves", { quoteId }) },
          { label: "Outlook", to: href("/quotes/:quoteId/outlook", { quoteId }) },
          { label: "Terms", to: href("/quotes/:quoteId/terms", { quoteId }) },
          { label: "Files", to: href("/quotes/:quoteId/files", { quoteId }) },
        ]}
      />
      <StateNotice head={head} />
      {head.rescoring ? (
        <RescoringNotice key={head.rescoring.coreVersion} quoteId={quoteId} rescoring={head.rescoring} />
      ) : null}
    </>
  );
}

function facts(head: QuoteBlockHead): { label: string; value: ReactNode }[] {
  const { specification, rfq, transmission, coreVersion } = head;
  const revision = { specificationId: specification.publicId, letter: specification.letter };
  return [
    { label: "RFQ", value: <Link to={href("/rfqs/:rfqId", { rfqId: rfq.publicId })}>{rfq.number}</Link> },
    {
      label: coreVersion === null ? "Specification" : "Scored against",
      value: (
        <>
          <Link to={href("/specifications/:specificationId/revisions/:letter", revision)}>
            {specification.number} {specification.letter}
          </Link>
          {coreVersion === null ? null : `, core ${coreVersion}`}
        </>
      ),
    },
    { label: "Submitted", value: <Instant at={head.submittedAt} zone={head.dueZone} /> },
    { label: "Basis", value: BASES[head.basis] },
    { label: "Decision rule", value: DECISION_RULES[head.decisionRule] },
    {
      label: "Transmission, k = 2",
      value: transmission
        ? `± ${formatNumber(transmission.uncertainty, 2)} dB${transmission.assumed ? ", assumed" : ""}`
        : "not stated",
    },
  ];
}

const OUTCOMES = { awarded: "This quote was awarded.", regretted: "Another quote was awarded." } as const;

function StateNotice({ head }: { head: QuoteBlockHead }) {
  if (head.state === "withdrawn")
    return (
      <Notice tone="near" className="mt-6">
        The supplier has withdrawn this quote: it is not compared and cannot be awarded.
      </Notice>
    );
  return head.outcome === null ? null : <Notice className="mt-6">{OUTCOMES[head.outcome]}</Notice>;
}
