// One quote's curves: a measurement at two scales, its margin against frequency, Smith charts, group delay, impedance.
import { useSearchParams, type ShouldRevalidateFunctionArgs } from "react-router";
import { ComplianceProgress } from "~/components/compliance-progress";
import { CurvesChoice } from "~/components/curves-choice";
import { chosenCurves, type ChosenCurves } from "~/components/curves-chosen";
import { CurvesLines } from "~/components/curves-lines";
import { CurvesSheet } from "~/components/curves-sheet";
import { Empty } from "~/components/empty";
import { celsiusWords } from "~/components/compliance-words";
import { Notice } from "~/components/notice";
import { Page, Section, Split } from "~/components/page";
import { QuoteBlock } from "~/components/quote-block";
import { curvesSearch, readCurvesQuery, type CurvesQuery } from "~/forms/curves";
import { readQuoteCurves } from "~/services/quote-curves.server";
import { readQuoteResults } from "~/services/quote-results.server";
import { readQuoteTraces } from "~/services/quote-traces.server";
import { orNotFound, requireRight } from "~/services/request.server";
import type { Route } from "./+types/quote-curves";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Curves, ${head.supplierName}, ${head.rfq.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  const results = orNotFound(await readQuoteResults(person, params.quoteId));
  const query = readCurvesQuery(new URL(request.url).searchParams);
  const chosen = query.values ? chosenCurves(results, query) : null;
  if (!chosen) return { ...results, curves: undefined };
  const { view, port } = query;
  const { unit, celsius: temperature } = chosen.place;
  const line = chosen.selected?.line.lineNumber;
  if (view === "scales") {
    const traces = orNotFound(await readQuoteTraces(person, params.quoteId, { unit, temperature }));
    return { ...results, curves: { view, traces } };
  }
  const asked = { view, unit, temperature, port, ...(line === undefined ? {} : { line }) };
  return { ...results, curves: orNotFound(await readQuoteCurves(person, params.quoteId, asked)) };
}

/** What is chosen is in the data already, but for curves that come with the page. */
export function shouldRevalidate({ currentUrl, nextUrl, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) {
  const isOtherChoice = currentUrl.pathname === nextUrl.pathname && currentUrl.search !== nextUrl.search;
  return isOtherChoice ? nextUrl.searchParams.get("values") === "1" : defaultShouldRevalidate;
}

export default function QuoteCurves({ loaderData }: Route.ComponentProps) {
  const { head } = loaderData;
  const [search] = useSearchParams();
  const query = readCurvesQuery(search);
  const chosen = chosenCurves(loaderData, query);
  return (
    <Page>
      <QuoteBlock head={head} />
      {head.verdict === null ? (
        <ComplianceProgress quoteId={head.publicId} />
      ) : chosen === null ? (
        <Empty className="mt-9" title="No curves" sentence="Nothing was measured for this quote." />
      ) : (
        <Curves loaded={loaderData} query={query} chosen={chosen} />
      )}
    </Page>
  );
}

interface CurvesProps {
  readonly loaded: Route.ComponentProps["loaderData"];
  readonly query: CurvesQuery;
  readonly chosen: ChosenCurves;
}

function Curves({ loaded, query, chosen }: CurvesProps) {
  const { head, units, curves } = loaded;
  const { place, lines, selected, isNearest } = chosen;
  const shown = { ...query, unit: place.unit, temperature: place.celsius };
  const sheet = (
    <CurvesSheet
      quoteId={head.publicId}
      supplierName={head.supplierName}
      query={shown}
      chosen={chosen}
      values={curves}
    />
  );
  const list = (
    <CurvesLines lines={lines} selectedKey={selected?.line.lineKey} query={shown} rule={head.decisionRule} />
  );
  const listTitle = `Lines, unit ${place.unit}, ${celsiusWords(place.celsius)}`;
  return (
    <>
      <CurvesChoice query={shown} units={units} place={place} />
      {isNearest ? (
        <Notice tone="near" className="mt-4">
          Unit {place.unit} was not measured at {celsiusWords(query.temperature ?? NaN)}: the nearest temperature,{" "}
          {celsiusWords(place.celsius)}, is shown.
        </Notice>
      ) : null}
      {query.values ? null : <WithoutScript query={shown} />}
      {query.view === "smith" || query.view === "impedance" ? (
        <div className="mt-4">{sheet}</div>
      ) : (
        <Split className="mt-4">
          <div className="min-w-0">{sheet}</div>
          <Section title={listTitle} className="mt-0 max-desktop:mt-9">
            {list}
          </Section>
        </Split>
      )}
    </>
  );
}

function WithoutScript({ query }: { query: CurvesQuery }) {
  return (
    <noscript>
      <Notice tone="signal" className="mt-4">
        Curves are fetched by script.{" "}
        <a href={curvesSearch({ ...query, values: true })}>Show them with a table of their values</a> without it.
      </Notice>
    </noscript>
  );
}
