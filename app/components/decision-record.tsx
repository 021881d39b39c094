// The record of a decision: who recommended what and why, who approved, the arithmetic, and the hash of what it rests on.
import type { ReactNode } from "react";
import { href, Link } from "react-router";
import type { ComparedCost } from "~/commerce/index";
import { costWords, dateWords, weeks } from "./comparison-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { Instant } from "./figure";
import { formatMoney, formatNumber } from "./format";
import { Notice } from "./notice";
import { Section } from "./page";
import { Verdict, type ShownVerdict } from "./verdict-mark";

export interface SnapshotQuoteView {
  readonly quote: string;
  readonly supplier: string;
  readonly version: number;
  readonly verdict: string | null;
  readonly conforming: boolean;
  readonly cost: ComparedCost | null;
  readonly leadVolumeDays: number;
  readonly exceptions: number;
  readonly validUntil: string;
  readonly files: readonly unknown[];
}

export interface DecisionRecordView {
  readonly publicId: string;
  readonly state: "recommended" | "approved" | "returned";
  readonly reason: string;
  readonly recommendedBy: string;
  readonly recommendedAt: string;
  readonly decidedBy: string | null;
  readonly decidedAt: string | null;
  readonly remark: string | null;
  readonly snapshot: {
    readonly recommended: string;
    readonly rfq: { readonly quantity: number; readonly currency: string };
    readonly coreVersions: readonly string[];
    readonly quotes: readonly SnapshotQuoteView[];
  };
  readonly snapshotHash: string;
  readonly intact: boolean;
}

const TITLES = { recommended: "Recommendation", approved: "Award", returned: "Returned recommendation" } as const;

/** Who decided, by the state it led to. */
const DECIDED = { recommended: "", approved: "Approved by", returned: "Returned by" } as const;

export function DecisionRecord({ record, zone }: { record: DecisionRecordView; zone: string }) {
  const chosen = record.snapshot.quotes.find(({ quote }) => quote === record.snapshot.recommended);
  return (
    <Section title={TITLES[record.state]}>
      <dl className="grid max-w-220 grid-cols-[auto_minmax(0,1fr)] gap-x-8 text-13">
        {facts(record, chosen, zone).map(([label, value]) => (
          <div key={label} className="col-span-2 grid grid-cols-subgrid border-b border-rule py-2">
            <dt className="text-quiet">{label}</dt>
            <dd className="min-w-0 wrap-anywhere whitespace-pre-line">{value}</dd>
          </div>
        ))}
      </dl>
    </Section>
  );
}

function facts(record: DecisionRecordView, chosen: SnapshotQuoteView | undefined, zone: string): [string, ReactNode][] {
  const { currency } = record.snapshot.rfq;
  const rows: [string, ReactNode][] = [];
  if (chosen) {
    rows.push([
      "Supplier",
      <>
        <Link to={href("/quotes/:quoteId", { quoteId: chosen.quote })}>{chosen.supplier}</Link>, version{" "}
        {chosen.version}
      </>,
    ]);
    if (chosen.cost) rows.push(["Amount", <Arithmetic cost={chosen.cost} currency={currency} />]);
  }
  rows.push(
    ["Reason", record.reason],
    ["Recommended by", <Signed by={record.recommendedBy} at={record.recommendedAt} zone={zone} />],
  );
  if (record.decidedBy !== null && record.decidedAt !== null)
    rows.push([DECIDED[record.state], <Signed by={record.decidedBy} at={record.decidedAt} zone={zone} />]);
  if (record.remark !== null) rows.push(["Remark", record.remark]);
  return rows;
}

const Signed = ({ by, at, zone }: { by: string; at: string; zone: string }) => (
  <>
    {by}, <Instant at={at} zone={zone} />
  </>
);

/** "500 × 121.00 + NRE 4,000.00 = EUR 64,500.00" */
function Arithmetic({ cost, currency }: { cost: ComparedCost; currency: string }) {
  return (
    <span className="tabular-nums">
      {formatNumber(cost.boughtQuantity, 0)} × {formatMoney(cost.unitPrice)} + NRE {formatMoney(cost.nre)} ={" "}
      <b>{formatMoney(cost.total, currency)}</b>
    </span>
  );
}

/** What was compared when it was recommended, as it was stored then. */
export function DecisionSnapshotTable({ record }: { record: DecisionRecordView }) {
  const { snapshot } = record;
  const { quantity, currency } = snapshot.rfq;
  return (
    <Section
      title="What was compared"
      note={`At ${formatNumber(quantity, 0)} pieces, core ${snapshot.coreVersions.join(", ")}. Kept as it stood.`}
    >
      <Table label="What was compared" rows="comparison">
        <thead>
          <tr>
            <HeadCell>Supplier</HeadCell>
            <HeadCell>Verdict</HeadCell>
            <HeadCell>Conforms</HeadCell>
            <HeadCell figure>Cost, {currency}</HeadCell>
            <HeadCell figure>Lead time, wk</HeadCell>
            <HeadCell figure>Exceptions</HeadCell>
            <HeadCell figure>Files</HeadCell>
            <HeadCell className="pl-6">Valid until</HeadCell>
          </tr>
        </thead>
        <tbody>
          {snapshot.quotes.map((quote) => (
            <Row key={quote.quote} selected={quote.quote === snapshot.recommended}>
              <RowHead>
                <TwoLines upper={quote.supplier} lower={`version ${quote.version}`} />
              </RowHead>
              <Cell>{quote.verdict === null ? "not scored" : <Verdict verdict={quote.verdict as ShownVerdict} />}</Cell>
              <Cell>{quote.conforming ? "yes" : "no"}</Cell>
              <Cell figure>
                {quote.cost ? (
                  <TwoLines upper={formatMoney(quote.cost.total)} lower={costWords(quote.cost, quantity)} />
                ) : (
                  "no price"
                )}
              </Cell>
              <Cell figure>{weeks(quote.leadVolumeDays)}</Cell>
              <Cell figure>{quote.exceptions === 0 ? "none" : quote.exceptions}</Cell>
              <Cell figure>{quote.files.length}</Cell>
              <Cell className="pl-6 whitespace-nowrap">{dateWords(quote.validUntil)}</Cell>
            </Row>
          ))}
        </tbody>
      </Table>
      <p className="mt-3 text-12 wrap-anywhere text-quiet">SHA-256 of this record {record.snapshotHash}</p>
      {record.intact ? null : (
        <Notice tone="fail" role="alert" className="mt-3">
          The stored record does not give this hash any more: it was changed outside the product.
        </Notice>
      )}
    </Section>
  );
}
