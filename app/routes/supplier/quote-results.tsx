// A supplier's own results: how the submitted version scored, line by line, and how the RFQ was decided.
import { redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { Instant } from "~/components/figure";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { QuoteFacts, type QuoteFact } from "~/components/quote-facts";
import { allAssumed, QuoteResultTable } from "~/components/quote-result-table";
import { RescoringNotice, ScoringProgress } from "~/components/quote-scoring-progress";
import { BASIS_WORDS } from "~/components/quote-terms-view";
import { DECISION_RULES } from "~/components/rfq-block";
import { quoteSheetAddress, SupplierQuoteBlock } from "~/components/supplier-quote-block";
import type { ShownVerdict } from "~/components/verdict-mark";
import { readQuoteHead } from "~/services/quotes.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { readSupplierResults } from "~/services/supplier-results.server";
import type { Route } from "./+types/quote-results";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Results, quote to ${loaderData.head.rfqNumber} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  const head = orNotFound(await readQuoteHead(person, params.quoteId));
  const results = orNotFound(await readSupplierResults(person, params.quoteId));
  if (results === "none") throw redirect(quoteSheetAddress("Review", params.quoteId));
  return { head, results };
}

export default function QuoteResults({ loaderData }: Route.ComponentProps) {
  const { head, results } = loaderData;
  return (
    <Page>
      <SupplierQuoteBlock
        head={head}
        sheet="Results"
        verdict={results.summary ? (results.summary.verdict as ShownVerdict) : undefined}
        actions={
          head.refusal === null ? (
            <LinkButton to={quoteSheetAddress("Data", head.publicId)}>Change and submit again</LinkButton>
          ) : undefined
        }
      />
      <Outcome outcome={head.outcome} buyerName={head.buyerName} />
      {results.summary === null ? <ScoringProgress key={results.version} quoteId={head.publicId} /> : null}
      {results.rescoring ? (
        <RescoringNotice key={results.version} quoteId={head.publicId} rescoring={results.rescoring} />
      ) : null}
      {results.summary === null ? null : (
        <Section title="Results by line" note={resultsNote(results)}>
          <QuoteResultTable lines={results.lines} decisionRule={head.decisionRule} />
        </Section>
      )}
      <Section title={`Version ${results.version}`}>
        <QuoteFacts label={`Version ${results.version}`} rows={facts(loaderData)} />
      </Section>
    </Page>
  );
}

function Outcome({ outcome, buyerName }: { outcome: "awarded" | "regretted" | null; buyerName: string }) {
  if (outcome === null) return null;
  if (outcome === "regretted")
    return <Notice className="mt-6">{buyerName} has decided this RFQ for another quote. Yours was not chosen.</Notice>;
  return (
    <Notice tone="signal" className="mt-6">
      {buyerName} intends to award this RFQ to you. This is a notice of intent: the purchase order governs.
    </Notice>
  );
}

function resultsNote({ lines }: Route.ComponentProps["loaderData"]["results"]): string {
  const assumed = allAssumed(lines) ? " Every line rests on the setup the RFQ assumes." : "";
  return `The worst over all units and temperatures. Tinted: does not comply.${assumed}`;
}

function facts({ head, results }: Route.ComponentProps["loaderData"]): QuoteFact[] {
  const { summary } = results;
  return [
    ...(summary === null ? [] : scored(summary, head.decisionRule, results.lines)),
    ["Basis", BASIS_WORDS[results.basis]],
    ["Submitted", <Instant key="at" at={results.submittedAt} zone={head.dueZone} />],
    ["By", results.submitterName],
    ["Receipt", results.receipt],
  ];
}

type Results = Route.ComponentProps["loaderData"]["results"];

function scored(
  summary: NonNullable<Results["summary"]>,
  rule: keyof typeof DECISION_RULES,
  lines: Results["lines"],
): QuoteFact[] {
  const worst = lines.find(({ line }) => line.lineKey === summary.worstLineKey);
  const { units, unitsOverRange, temperatures } = summary;
  return [
    ["Decision", `${summary.conforming ? "complies" : "does not comply"} under ${DECISION_RULES[rule]}`],
    ["Worst line", worst?.line.lineNumber ?? "none"],
    [
      "Units",
      `${units}, of these ${unitsOverRange} over temperature, at ${temperatures} ${temperatures === 1 ? "temperature" : "temperatures"}`,
    ],
    ["Scored by core", summary.coreVersion],
  ];
}
