// One quote's results: compliance matrix, details of a cell, overlay plot, what would settle it, evidence, what the data does not show.
import { useSearchParams, type ShouldRevalidateFunctionArgs } from "react-router";
import { ComplianceCell } from "~/components/compliance-cell";
import { ComplianceLegend, ComplianceMatrix } from "~/components/compliance-matrix";
import { ComplianceNotes } from "~/components/compliance-notes";
import { ComplianceSettling } from "~/components/compliance-settling";
import { EvidenceGrid } from "~/components/evidence-grid";
import { ComplianceProgress } from "~/components/compliance-progress";
import { ComplianceTraces } from "~/components/compliance-traces";
import { cellAt } from "~/components/compliance-words";
import { Notice } from "~/components/notice";
import { Page, Section, Split } from "~/components/page";
import { QuoteBlock } from "~/components/quote-block";
import { impedanceOffsetWords } from "~/components/requirement-words";
import { orNotFound, requireRight } from "~/services/request.server";
import { readQuoteResults } from "~/services/quote-results.server";
import type { Route } from "./+types/quote-results";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `${head.supplierName}, ${head.rfq.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  return orNotFound(await readQuoteResults(person, params.quoteId));
}

/** The selected cell is in the data already: choosing another asks for nothing. */
export function shouldRevalidate({ currentUrl, nextUrl, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) {
  return currentUrl.pathname === nextUrl.pathname && currentUrl.search !== nextUrl.search
    ? false
    : defaultShouldRevalidate;
}

type Loaded = Route.ComponentProps["loaderData"];

export default function QuoteResults({ loaderData }: Route.ComponentProps) {
  const { head, lines, units, lowestTestFrequency } = loaderData;
  const selected = useSelectedCell(loaderData);
  if (head.verdict === null)
    return (
      <Page>
        <QuoteBlock head={head} />
        <ComplianceProgress quoteId={head.publicId} />
      </Page>
    );
  const place = selected && { unit: selected.cell.unit, celsius: selected.cell.temperature };
  return (
    <Page>
      <QuoteBlock head={head} />
      <Section title={matrixTitle(loaderData)} tools={<ComplianceLegend units={units} />}>
        <ComplianceMatrix
          lines={lines}
          units={units}
          rule={head.decisionRule}
          lowestTestFrequency={lowestTestFrequency}
          selected={selected && place && { lineKey: selected.line.lineKey, ...place }}
        />
        <Conformity loaded={loaderData} />
        <ImpedanceOffset impedances={loaderData.impedances} />
      </Section>
      <Split>
        <Section title="Measured traces">
          <ComplianceTraces
            quoteId={head.publicId}
            supplierName={head.supplierName}
            lines={lines}
            place={place}
            selectedKey={selected?.line.lineKey}
          />
        </Section>
        <div className="min-w-0 max-desktop:order-first">
          {selected ? (
            <ComplianceCell line={selected.line} cell={selected.cell} lowestTestFrequency={lowestTestFrequency} />
          ) : null}
        </div>
      </Split>
      <ComplianceSettling lines={lines} rule={head.decisionRule} lowestTestFrequency={lowestTestFrequency} />
      {loaderData.evidence ? (
        <Section title="Evidence asked and delivered">
          <EvidenceGrid evidence={loaderData.evidence.grid} />
        </Section>
      ) : null}
      <ComplianceNotes
        lines={lines}
        notes={loaderData.notes}
        assumed={loaderData.evidence?.assumed ?? []}
        basis={head.basis}
      />
    </Page>
  );
}

/** The cell the address names, else the reported cell of the line that decides. */
function useSelectedCell({ lines, worstLineKey }: Loaded) {
  const [search] = useSearchParams();
  const named = lines.find(({ lineNumber }) => lineNumber === search.get("line"));
  const cell = named && cellAt(named, search.get("unit") ?? "", Number(search.get("temperature")));
  if (named && cell) return { line: named, cell };
  const line = lines.find(({ lineKey }) => lineKey === worstLineKey);
  const worst = line?.unit != null && line.temperature !== null ? cellAt(line, line.unit, line.temperature) : undefined;
  return line && worst ? { line, cell: worst } : null;
}

function matrixTitle({ evidence }: Loaded): string {
  if (!evidence) return "Compliance";
  const { units, temperatures } = evidence;
  return `Compliance of ${units} ${units === 1 ? "unit" : "units"} at ${temperatures} ${temperatures === 1 ? "temperature" : "temperatures"}`;
}

/** Said where the specification's impedances differ: the trade knows two losses then. */
function ImpedanceOffset({ impedances }: Pick<Loaded, "impedances">) {
  const words = impedances && impedanceOffsetWords(impedances);
  return words ? <p className="mt-3 text-12 text-quiet">{words}</p> : null;
}

/** Said where the verdict of the measured lines alone would mislead. */
function Conformity({ loaded: { head, lines } }: { loaded: Loaded }) {
  const open = lines.filter(({ verdict }) => verdict === "exception").map(({ lineNumber }) => lineNumber);
  if (head.conforming === true || open.length === 0) return null;
  return (
    <Notice tone="near" className="mt-4">
      This quote takes an exception to {open.length === 1 ? "line" : "lines"} {open.join(", ")}: it does not conform
      while that is not accepted.
    </Notice>
  );
}
