// One quote's terms: prices and what they come to, lead times, validity, delivery, declarations, and the measurement setup.
import type { ReactNode } from "react";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { formatMoney, formatNumber } from "~/components/format";
import { dateWords, leadWords } from "~/components/comparison-words";
import { Page, Section, Split } from "~/components/page";
import { QuoteBlock } from "~/components/quote-block";
import { QuoteFacts } from "~/components/quote-facts";
import { SetupView } from "~/components/quote-terms-view";
import { setupWords } from "~/components/setup-words";
import { Verdict } from "~/components/verdict-mark";
import { orNotFound, requireRight } from "~/services/request.server";
import { readQuoteTerms } from "~/services/quote-terms-view.server";
import { readSubmittedHead } from "~/services/submitted-quotes.server";
import type { Route } from "./+types/quote-terms";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Terms, ${head.supplierName}, ${head.rfq.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  const head = orNotFound(await readSubmittedHead(person, params.quoteId));
  return { head, terms: orNotFound(await readQuoteTerms(person, params.quoteId)) };
}

type Terms = Route.ComponentProps["loaderData"]["terms"];

export default function QuoteTerms({ loaderData }: Route.ComponentProps) {
  const { head, terms } = loaderData;
  return (
    <Page>
      <QuoteBlock head={head} />
      <Split>
        <div className="min-w-0">
          <Section title="Prices" note={`In ${terms.currency}, per piece, at each asked break.`}>
            <Prices terms={terms} />
            <CostSentence terms={terms} />
          </Section>
          <Section title="Declarations">
            <Declarations terms={terms} />
          </Section>
          <Section
            title="Measurement setup"
            note="As the supplier states it of all sweeps; results that rest on an assumed figure are marked."
          >
            <SetupView stated={terms} assumed={terms.assumedSetup} />
            <SweepSetups terms={terms} />
          </Section>
        </div>
        <Section title="Terms">
          <dl className="grid grid-cols-[auto_minmax(0,1fr)] gap-x-6 text-13">
            {facts(terms, head.submitterName).map(([label, value]) => (
              <div key={label} className="col-span-2 grid grid-cols-subgrid border-b border-rule py-2">
                <dt className="text-quiet">{label}</dt>
                <dd className="min-w-0 wrap-anywhere whitespace-pre-line">{value}</dd>
              </div>
            ))}
          </dl>
        </Section>
      </Split>
    </Page>
  );
}

function Prices({ terms }: { terms: Terms }) {
  return (
    <Table label="Prices">
      <thead>
        <tr>
          <HeadCell>Quantity, from</HeadCell>
          <HeadCell figure>Unit price, {terms.currency}</HeadCell>
        </tr>
      </thead>
      <tbody>
        {terms.prices.map(({ quantity, unitPrice }) => (
          <Row key={quantity} selected={quantity === terms.askedQuantity}>
            <RowHead>
              {formatNumber(quantity, 0)}
              {quantity === terms.askedQuantity ? <span className="font-normal text-quiet"> asked</span> : null}
            </RowHead>
            <Cell figure>{formatMoney(unitPrice)}</Cell>
          </Row>
        ))}
        <Row>
          <RowHead>NRE</RowHead>
          <Cell figure>{formatMoney(terms.nre)}</Cell>
        </Row>
      </tbody>
    </Table>
  );
}

function CostSentence({ terms: { cost, askedQuantity, currency } }: { terms: Terms }) {
  const asked = formatNumber(askedQuantity, 0);
  if (!cost) return <p className="mt-3 text-13">There is no price for {asked} pieces.</p>;
  return (
    <p className="mt-3 text-13 tabular-nums">
      {asked} pieces: {formatNumber(cost.boughtQuantity, 0)} × {formatMoney(cost.unitPrice)} + NRE{" "}
      {formatMoney(cost.nre)} = <b>{formatMoney(cost.total, currency)}</b>
    </p>
  );
}

/** Files whose sweeps were measured otherwise than the rest. */
function SweepSetups({ terms: { sweepSetups } }: { terms: Terms }) {
  if (sweepSetups.length === 0) return null;
  return (
    <div className="mt-6">
      <h3 className="pb-2">Sweeps with a setup of their own</h3>
      <QuoteFacts
        label="Sweeps with a setup of their own"
        rows={sweepSetups.map(({ fileName, setup }) => [fileName, setupWords(setup)])}
        longNames
      />
    </div>
  );
}

function facts(terms: Terms, submitterName: string): [string, ReactNode][] {
  const delivery = terms.incoterms === null ? "not stated" : `${terms.incoterms} ${terms.place ?? ""}, Incoterms 2020`;
  return [
    ["Lead time, volume", leadWords(terms.leadVolumeDays)],
    ["Lead time, first units", terms.leadFirstDays === null ? "not stated" : leadWords(terms.leadFirstDays)],
    ["Valid until", dateWords(terms.validUntil)],
    ["Minimum quantity", terms.minimumQuantity === null ? "none" : formatNumber(terms.minimumQuantity, 0)],
    ["Order multiple", terms.orderMultiple === null ? "none" : formatNumber(terms.orderMultiple, 0)],
    ["Delivery", delivery],
    ["Payment", terms.paymentTerms ?? "not stated"],
    ["Remarks", terms.remarks ?? "none"],
    ["Submitted by", submitterName],
    ["SHA-256 of the submission", <span className="font-normal text-12">{terms.contentHash}</span>],
  ];
}

function Declarations({ terms }: { terms: Terms }) {
  if (terms.declarations.length === 0)
    return <p className="text-13 text-quiet">The specification has no declared lines.</p>;
  return (
    <Table label="Declarations" rows="two-line">
      <thead>
        <tr>
          <HeadCell className="w-11">Line</HeadCell>
          <HeadCell>Requirement</HeadCell>
          <HeadCell>Limit</HeadCell>
          <HeadCell>Answer</HeadCell>
        </tr>
      </thead>
      <tbody>
        {terms.declarations.map((line) => (
          <Row key={line.lineNumber}>
            <RowHead>{line.lineNumber}</RowHead>
            <Cell>{line.requirement}</Cell>
            <Cell>{line.limit}</Cell>
            <Cell className="py-1.5">
              <Verdict
                verdict={line.answer === null ? "not-covered" : line.answer === "comply" ? "declared" : "exception"}
              />
              {line.text === null ? null : <span className="block whitespace-pre-line">{line.text}</span>}
            </Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}
