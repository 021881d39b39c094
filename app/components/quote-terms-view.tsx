// A quote's terms, setup and declarations as they would be submitted.
import type { ReactNode } from "react";
import type { QuoteTerms } from "~/forms/quote-terms";
import type { Setup } from "~/rf/contract";
import { formatMoney, formatNumber } from "./format";
import type { DeclaredLineFacts } from "./quote-declaration-fields";
import { QuoteFacts, type QuoteFact } from "./quote-facts";
import { setupInUseFacts, statedFacts } from "./setup-words";
import { Verdict } from "./verdict-mark";

export const BASIS_WORDS = {
  measured: "measured on the quoted part",
  similar: "measured on a similar part",
  simulated: "simulated",
} as const;

const days = (count: number | null): string => (count === null ? "not stated" : `${formatNumber(count, 0)} days`);
const pieces = (count: number | null): string => (count === null ? "none" : `${formatNumber(count, 0)} pieces`);

export function TermsView({ terms }: { terms: QuoteTerms }) {
  const { currency, incoterms, place } = terms;
  const rows: QuoteFact[] = [
    ...terms.prices.map(({ quantity, unitPrice }): QuoteFact => [
      `Unit price at ${formatNumber(quantity, 0)}`,
      formatMoney(unitPrice, currency),
    ]),
    ["NRE, once", formatMoney(terms.nre, currency)],
    ["Lead time, volume", days(terms.leadVolumeDays)],
    ["Lead time, first units", days(terms.leadFirstDays)],
    ["Minimum quantity", pieces(terms.minimumQuantity)],
    ["Order multiple", pieces(terms.orderMultiple)],
    ["Valid to", terms.validUntil],
    ["Incoterms 2020", incoterms === null ? "none stated" : `${incoterms} ${place ?? ""}`],
    ["Payment terms", terms.paymentTerms ?? "none stated"],
    [
      "Remarks",
      <span key="remarks" className="whitespace-pre-line">
        {terms.remarks ?? "none"}
      </span>,
    ],
  ];
  return <QuoteFacts label="Terms" rows={rows} />;
}

interface SetupViewProps {
  stated: Pick<QuoteTerms, "basis" | "setup" | "instrument" | "drift">;
  /** What the RFQ assumes of what is not stated. */
  assumed: Setup;
}

export function SetupView({ stated: { basis, setup, instrument, drift }, assumed }: SetupViewProps) {
  const rows: QuoteFact[] = [
    ["Basis", BASIS_WORDS[basis]],
    ...statedFacts(instrument, drift),
    ...setupInUseFacts(setup, assumed),
  ];
  return <QuoteFacts label="Measurement setup" rows={rows} longNames />;
}

export function DeclarationsView({ terms, declared }: { terms: QuoteTerms; declared: readonly DeclaredLineFacts[] }) {
  const answers = new Map(terms.declarations.map((declaration) => [declaration.lineKey, declaration]));
  const rows = declared.map(({ lineKey, lineNumber, name, limit }): QuoteFact => {
    const answer = answers.get(lineKey);
    return [`${lineNumber} ${name}, ${limit}`, answer ? declarationWords(answer) : "not answered"];
  });
  return <QuoteFacts label="Declarations" rows={rows} longNames />;
}

function declarationWords({ answer, text }: QuoteTerms["declarations"][number]): ReactNode {
  return (
    <span className="flex flex-wrap items-center gap-x-3">
      <Verdict verdict={answer === "exception" ? "exception" : "declared"} />
      {text}
    </span>
  );
}
