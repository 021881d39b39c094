// All quotes of an RFQ compared at one quantity.
import { href, Link } from "react-router";
import { LinkButton } from "~/components/button";
import { ComparisonStack, ComparisonTable, SilentSuppliers } from "~/components/comparison-table";
import { Empty } from "~/components/empty";
import { formatMoney, formatNumber } from "~/components/format";
import { Instant } from "~/components/figure";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { allScoredByWords } from "~/components/quote-scoring-words";
import { RfqBlock } from "~/components/rfq-block";
import { useReloadWhile } from "~/components/use-scoring-progress";
import { comparisonSearch, readComparisonQuery, type ComparisonSort } from "~/forms/comparison";
import { readComparison } from "~/services/comparison.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { readRfqHead } from "~/services/rfq-head.server";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/rfq-comparison";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Comparison, ${head.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  const query = readComparisonQuery(new URL(request.url).searchParams);
  const head = orNotFound(await readRfqHead(person, params.rfqId));
  const comparison = orNotFound(await readComparison(person, params.rfqId, query));
  return { head, query, comparison, mayRecommend: may(person.role, "recommend-award") };
}

type Loaded = Route.ComponentProps["loaderData"];

export default function RfqComparison({ loaderData }: Route.ComponentProps) {
  const { head, comparison, query } = loaderData;
  const { quantity, conforming, nonconforming, unscored, silent } = comparison;
  const quoted = [...conforming, ...nonconforming, ...unscored];
  useReloadWhile(quoted.some(({ scoring, rescoring }) => scoring === "pending" || rescoring?.state === "pending"));
  const address = (next: typeof query) =>
    href("/rfqs/:rfqId/comparison", { rfqId: head.publicId }) + comparisonSearch(next);
  const sortBy = (sort: ComparisonSort) => {
    const isCurrent = query.sort === sort;
    const turned = isCurrent && query.direction === "ascending" ? "descending" : "ascending";
    return {
      to: address({ ...query, sort, direction: turned }),
      ...(isCurrent ? { direction: query.direction } : {}),
    };
  };
  return (
    <Page>
      <RfqBlock head={head} sheet="Comparison" actions={decisionLink(loaderData)} />
      <Section
        title={`Comparison at ${formatNumber(quantity, 0)} ${quantity === 1 ? "piece" : "pieces"}`}
        note={<Standing loaded={loaderData} />}
        tools={
          <Quantities
            quantities={comparison.quantities}
            current={quantity}
            asked={head.quantity}
            to={(asked) => address({ ...query, quantity: asked === head.quantity ? null : asked })}
          />
        }
      >
        {quoted.length === 0 ? (
          <>
            <Empty sentence="No quote has been submitted yet." />
            <SilentSuppliers suppliers={silent} />
          </>
        ) : (
          <>
            <StaleFigures loaded={loaderData} />
            <ComparisonTable groups={comparison} quantity={quantity} currency={head.currency} sortBy={sortBy} />
            <ComparisonStack groups={comparison} quantity={quantity} currency={head.currency} />
          </>
        )}
        <CheaperBreaks loaded={loaderData} />
      </Section>
    </Page>
  );
}

/** Undefined where there is nothing to go to, so that the title block keeps no empty cell. */
function decisionLink({ head, mayRecommend, comparison }: Loaded) {
  const to = href("/rfqs/:rfqId/decision", { rfqId: head.publicId });
  if (head.state === "closed" && mayRecommend && comparison.decision === "none")
    return (
      <LinkButton kind="filled" to={to}>
        Recommend award
      </LinkButton>
    );
  return comparison.decision === "none" ? undefined : <LinkButton to={to}>Decision</LinkButton>;
}

function Standing({ loaded: { head, comparison } }: { loaded: Loaded }) {
  const core = comparison.coreVersions.length === 0 ? "" : `, core ${comparison.coreVersions.join(" and ")}`;
  return (
    <>
      {head.state === "open" ? (
        <>
          Quotes can change until <Instant at={head.dueAt} zone={head.dueZone} />.{" "}
        </>
      ) : null}
      Scored against {head.specification.number} {head.specification.letter}
      {core}. Full credit is a loss margin of 0.2 dB, ripple 0.1 dB, rejection 3 dB, return loss 2 dB.
    </>
  );
}

/** Figures of another core or another revision stand beside the others until they are scored again: that is said. */
function StaleFigures({ loaded: { comparison } }: { loaded: Loaded }) {
  const scored = [...comparison.conforming, ...comparison.nonconforming];
  const stale = scored.flatMap(({ rescoring }) => rescoring ?? []);
  if (stale.length === 0) return null;
  return (
    <Notice tone="near" role="status" className="mb-4">
      {stale.length === 1 ? "One quote is" : `${stale.length} quotes are`} to be scored again. Until then{" "}
      {stale.length === 1 ? "its" : "their"} figures are of {allScoredByWords(stale)}.
    </Notice>
  );
}

interface QuantitiesProps {
  quantities: readonly number[];
  current: number;
  asked: number;
  to: (quantity: number) => string;
}

function Quantities({ quantities, current, asked, to }: QuantitiesProps) {
  if (quantities.length < 2) return null;
  return (
    <nav aria-label="Quantity" className="flex flex-wrap items-baseline gap-x-5">
      <span>Quantity</span>
      {quantities.map((quantity) => (
        <Link
          key={quantity}
          to={to(quantity)}
          preventScrollReset
          aria-current={quantity === current ? "true" : undefined}
          className="border-b-2 border-transparent py-1 text-quiet no-underline hover:text-ink aria-[current]:border-signal aria-[current]:font-semibold aria-[current]:text-ink"
        >
          {formatNumber(quantity, 0)}
          {quantity === asked ? " asked" : ""}
        </Link>
      ))}
    </nav>
  );
}

/** Where a higher break costs less in all, that is said. */
function CheaperBreaks({ loaded: { comparison } }: { loaded: Loaded }) {
  const { conforming, nonconforming, unscored } = comparison;
  return [...conforming, ...nonconforming, ...unscored].map(({ publicId, supplierName, cost, currency }) =>
    cost?.cheaperBreak ? (
      <Notice key={publicId} tone="signal" className="mt-4">
        {supplierName}: {formatNumber(cost.cheaperBreak.boughtQuantity, 0)} pieces cost{" "}
        {formatMoney(cost.cheaperBreak.saving, currency)} less in all than {formatNumber(cost.boughtQuantity, 0)}.
      </Notice>
    ) : null,
  );
}
