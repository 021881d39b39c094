// All quotes of an RFQ in one table: conforming ones first, the others apart and never hidden.
import { href, Link } from "react-router";
import { MarginStrip, MarginStripScale } from "~/charts/margin-strip";
import type { ComparisonSort } from "~/forms/comparison";
import {
  costWords,
  dataWords,
  SILENT_WORDS,
  weeks,
  worstMarginWords,
  worstPlaceWords,
  type ComparedQuoteView,
  type SilentSupplierView,
} from "./comparison-words";
import { Cell, GroupRow, HeadCell, Row, RowHead, Table, TwoLines, type SortDirection } from "./data-table";
import { formatMoney } from "./format";
import { rescoringWords } from "./quote-scoring-words";
import { Verdict, verdictColour } from "./verdict-mark";

export interface ComparisonGroups {
  readonly conforming: readonly ComparedQuoteView[];
  readonly nonconforming: readonly ComparedQuoteView[];
  readonly unscored: readonly ComparedQuoteView[];
  readonly silent: readonly SilentSupplierView[];
}

interface ComparisonTableProps {
  groups: ComparisonGroups;
  quantity: number;
  currency: string;
  sortBy: (column: ComparisonSort) => { to: string; direction?: SortDirection | undefined };
}

/** Percent of full credit, at which the strips end; what lies beyond is a chevron. */
const STRIP_SCALE = [-120, 320] as const;
const STRIP_WIDTH = 260;
const COLUMNS = 7;

export function ComparisonTable({ groups, quantity, currency, sortBy }: ComparisonTableProps) {
  const rows = (quotes: readonly ComparedQuoteView[]) =>
    quotes.map((quote) => <QuoteRow key={quote.publicId} quote={quote} quantity={quantity} currency={currency} />);
  return (
    <Table label="Comparison" rows="comparison" className="max-tablet:hidden">
      <thead>
        <tr>
          <HeadCell sort={sortBy("supplier")}>Supplier</HeadCell>
          <HeadCell>Verdict</HeadCell>
          <HeadCell figure sort={sortBy("margin")}>
            Worst margin
          </HeadCell>
          <HeadCell className="pl-6">
            All lines, margin in % of full credit
            <MarginStripScale scale={STRIP_SCALE} width={STRIP_WIDTH} />
          </HeadCell>
          <HeadCell figure sort={sortBy("cost")}>
            Cost, {currency}
          </HeadCell>
          <HeadCell figure sort={sortBy("lead")}>
            Lead time, wk
          </HeadCell>
          <HeadCell figure>Exceptions</HeadCell>
        </tr>
      </thead>
      <tbody>
        {rows(groups.conforming)}
        {groups.conforming.length === 0 && groups.unscored.length === 0 ? (
          <tr>
            <td colSpan={COLUMNS} className="text-quiet">
              No quote conforms.
            </td>
          </tr>
        ) : null}
        <Group title="Nonconforming" note="cannot be recommended" count={groups.nonconforming.length} />
        {rows(groups.nonconforming)}
        <Group title="Being scored" note="figures appear when it is done" count={groups.unscored.length} />
        {rows(groups.unscored)}
        <Group title="No quote" count={groups.silent.length} />
        {groups.silent.map(({ company, state }) => (
          <Row key={company}>
            <RowHead>{company}</RowHead>
            <Cell colSpan={COLUMNS - 1} className="text-quiet">
              {SILENT_WORDS[state]}
            </Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}

function Group({ title, note, count }: { title: string; note?: string; count: number }) {
  if (count === 0) return null;
  return (
    <GroupRow columns={COLUMNS}>
      {title}
      {note === undefined ? null : <span className="pl-3 font-normal text-quiet">{note}</span>}
    </GroupRow>
  );
}

interface QuoteRowProps {
  quote: ComparedQuoteView;
  quantity: number;
  currency: string;
}

function QuoteRow({ quote, quantity, currency }: QuoteRowProps) {
  return (
    <Row>
      <RowHead>
        <TwoLines upper={<SupplierLink quote={quote} />} lower={underSupplier(quote)} />
      </RowHead>
      <Cell>
        <Outcome quote={quote} />
      </Cell>
      <Cell figure>{quote.worst ? <WorstMargin worst={quote.worst} /> : "–"}</Cell>
      <Cell className="pl-6">{quote.verdict ? <Strip quote={quote} /> : null}</Cell>
      <Cell figure>
        <Cost quote={quote} quantity={quantity} currency={currency} />
      </Cell>
      <Cell figure>{weeks(quote.leadVolumeDays)}</Cell>
      <Cell figure>{exceptionWords(quote)}</Cell>
    </Row>
  );
}

/** A verdict that waits to be scored again says so beneath. */
function Outcome({ quote: { verdict, rescoring, scoring } }: { quote: ComparedQuoteView }) {
  if (verdict === null)
    return <span className="text-quiet">{scoring === "failed" ? "could not be scored" : "being scored"}</span>;
  if (rescoring === null) return <Verdict verdict={verdict} />;
  return <TwoLines upper={<Verdict verdict={verdict} />} lower={rescoringWords(rescoring)} />;
}

const exceptionWords = ({ exceptions }: ComparedQuoteView) =>
  exceptions === 0 ? <span className="text-quiet">none</span> : String(exceptions);

const underSupplier = (quote: ComparedQuoteView): string =>
  [
    `version ${quote.version}`,
    ...(quote.verdict ? [dataWords(quote)] : []),
    ...(quote.outcome === "awarded" ? ["awarded"] : []),
  ].join(" · ");

export function SupplierLink({ quote }: { quote: Pick<ComparedQuoteView, "publicId" | "supplierName"> }) {
  return <Link to={href("/quotes/:quoteId", { quoteId: quote.publicId })}>{quote.supplierName}</Link>;
}

function WorstMargin({ worst }: { worst: NonNullable<ComparedQuoteView["worst"]> }) {
  const colour = worst.verdict === "pass" ? "" : verdictColour(worst.verdict);
  return (
    <TwoLines
      upper={<span className={`font-semibold tabular-nums ${colour}`}>{worstMarginWords(worst)}</span>}
      lower={worstPlaceWords(worst)}
    />
  );
}

function Strip({ quote }: { quote: ComparedQuoteView }) {
  const margins = quote.margins.map(({ lineNumber, credited, verdict }) => ({
    lineNumber,
    margin: credited * 100,
    verdict,
  }));
  return (
    <MarginStrip
      margins={margins}
      scale={STRIP_SCALE}
      unit="% of full credit"
      width={STRIP_WIDTH}
      label={quote.supplierName}
    />
  );
}

function Cost({ quote: { cost, currency: quoted }, quantity, currency }: QuoteRowProps) {
  if (!cost) return <span className="text-quiet">no price</span>;
  return (
    <TwoLines
      upper={<b className="tabular-nums">{formatMoney(cost.total, quoted === currency ? undefined : quoted)}</b>}
      lower={costWords(cost, quantity)}
    />
  );
}

/** On phones each quote is a stack of lines. */
export function ComparisonStack({ groups, quantity, currency }: Omit<ComparisonTableProps, "sortBy">) {
  const list = (title: string, quotes: readonly ComparedQuoteView[]) =>
    quotes.length === 0 ? null : (
      <section className="mt-4">
        <h3 className="border-b border-ink pb-1 text-13">{title}</h3>
        <ul>
          {quotes.map((quote) => (
            <li key={quote.publicId} className="border-b border-rule py-3">
              <StackedQuote quote={quote} quantity={quantity} currency={currency} />
            </li>
          ))}
        </ul>
      </section>
    );
  return (
    <div className="tablet:hidden print:hidden">
      {list("Conforming", groups.conforming)}
      {list("Nonconforming", groups.nonconforming)}
      {list("Being scored", groups.unscored)}
      <SilentSuppliers suppliers={groups.silent} />
    </div>
  );
}

/** Who was invited and has not quoted. */
export function SilentSuppliers({ suppliers }: { suppliers: readonly SilentSupplierView[] }) {
  if (suppliers.length === 0) return null;
  return (
    <section className="mt-6">
      <h3 className="border-b border-ink pb-1 text-13">No quote</h3>
      <ul className="text-13">
        {suppliers.map(({ company, state }) => (
          <li key={company} className="border-b border-rule py-2">
            {company} <span className="text-quiet">{SILENT_WORDS[state]}</span>
          </li>
        ))}
      </ul>
    </section>
  );
}

function StackedQuote({ quote, quantity, currency }: QuoteRowProps) {
  return (
    <div className="grid grid-cols-2 gap-x-4 gap-y-2 text-13">
      <div className="min-w-0 font-semibold">
        <TwoLines upper={<SupplierLink quote={quote} />} lower={underSupplier(quote)} />
      </div>
      <div className="justify-self-end text-right">
        <Outcome quote={quote} />
      </div>
      {quote.worst ? (
        <div>
          <WorstMargin worst={quote.worst} />
        </div>
      ) : (
        <span />
      )}
      <div className="text-right">
        <Cost quote={quote} quantity={quantity} currency={currency} />
      </div>
      {quote.verdict ? (
        <div className="col-span-2">
          <Strip quote={quote} />
        </div>
      ) : null}
      <p className="col-span-2 text-12 text-quiet">
        Lead time {weeks(quote.leadVolumeDays)} wk, exceptions {quote.exceptions === 0 ? "none" : quote.exceptions}
      </p>
    </div>
  );
}
