// The form that recommends an award: one of the compared quotes and the reason that is kept with it.
import { href, Link } from "react-router";
import type { FormState } from "~/forms/form";
import { Button } from "./button";
import {
  costWords,
  dateWords,
  weeks,
  worstMarginWords,
  worstPlaceWords,
  type ComparedQuoteView,
} from "./comparison-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { FieldError } from "./field-error";
import { PostForm, TextAreaField, useField } from "./form";
import { formatMoney } from "./format";
import { Verdict, verdictWord } from "./verdict-mark";

export interface CandidateView extends ComparedQuoteView {
  /** Why it cannot be recommended; null where it can. */
  readonly refusal: string | null;
}

interface DecisionChoiceProps {
  candidates: readonly CandidateView[];
  quantity: number;
  currency: string;
  idempotencyKey: string;
  state: FormState | undefined;
}

export function DecisionChoice({ candidates, idempotencyKey, state, ...shown }: DecisionChoiceProps) {
  const isPossible = candidates.some(({ refusal }) => refusal === null);
  return (
    <PostForm state={state} idempotencyKey={idempotencyKey} guardsUnsaved className="flex flex-col gap-5">
      <Choices candidates={candidates} {...shown} />
      <TextAreaField
        name="reason"
        label="Reason"
        rows={5}
        required
        hint="20 characters or more. Kept with the decision; suppliers do not see it."
        className="max-w-180"
      />
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <Button kind="filled" name="intent" value="recommend" disabled={!isPossible}>
          Recommend award
        </Button>
        <span className="text-13 text-quiet">
          {isPossible ? "Nothing is mailed to a supplier before it is approved." : "No quote can be recommended."}
        </span>
      </div>
    </PostForm>
  );
}

function Choices({
  candidates,
  quantity,
  currency,
}: Pick<DecisionChoiceProps, "candidates" | "quantity" | "currency">) {
  const field = useField("quoteId");
  return (
    <fieldset className="min-w-0">
      <legend className="sr-only">Quote to award</legend>
      <Table label="Quotes to choose from" rows="comparison">
        <thead>
          <tr>
            <HeadCell>Quote</HeadCell>
            <HeadCell className="max-tablet:hidden">Verdict</HeadCell>
            <HeadCell figure className="max-tablet:hidden">
              Worst margin
            </HeadCell>
            <HeadCell figure className="max-tablet:hidden">
              Cost, {currency}
            </HeadCell>
            <HeadCell figure className="max-tablet:hidden">
              Lead time, wk
            </HeadCell>
            <HeadCell className="pl-6 max-tablet:hidden">Valid until</HeadCell>
          </tr>
        </thead>
        <tbody>
          {candidates.map((quote, place) => (
            <Row key={quote.publicId}>
              <RowHead>
                <Choice quote={quote} id={place === 0 ? field.id : `${field.id}-${place}`} chosen={field.value} />
              </RowHead>
              <Cell className="max-tablet:hidden">
                {quote.verdict ? <Verdict verdict={quote.verdict} /> : "being scored"}
              </Cell>
              <Cell figure className="max-tablet:hidden">
                {quote.worst ? (
                  <TwoLines upper={worstMarginWords(quote.worst)} lower={worstPlaceWords(quote.worst)} />
                ) : (
                  "–"
                )}
              </Cell>
              <Cell figure className="max-tablet:hidden">
                {quote.cost ? (
                  <TwoLines upper={formatMoney(quote.cost.total)} lower={costWords(quote.cost, quantity)} />
                ) : (
                  "no price"
                )}
              </Cell>
              <Cell figure className="max-tablet:hidden">
                {weeks(quote.leadVolumeDays)}
              </Cell>
              <Cell className="pl-6 whitespace-nowrap max-tablet:hidden">{dateWords(quote.validUntil)}</Cell>
            </Row>
          ))}
        </tbody>
      </Table>
      <FieldError id={field.errorId}>{field.error}</FieldError>
    </fieldset>
  );
}

function Choice({ quote, id, chosen }: { quote: CandidateView; id: string; chosen: string | undefined }) {
  const reasonId = `${id}-why`;
  return (
    <span className="flex items-start gap-2.5 py-2">
      <input
        type="radio"
        id={id}
        name="quoteId"
        value={quote.publicId}
        defaultChecked={chosen === quote.publicId}
        disabled={quote.refusal !== null}
        aria-describedby={quote.refusal === null ? undefined : reasonId}
        className="mt-0.5 size-4.5 flex-none accent-signal"
      />
      <span className="min-w-0">
        <label htmlFor={id}>{quote.supplierName}</label>
        <span className="block text-12 font-normal text-quiet">
          version {quote.version},{" "}
          <Link to={href("/quotes/:quoteId", { quoteId: quote.publicId })}>
            results<span className="sr-only"> of {quote.supplierName}</span>
          </Link>
        </span>
        <span className="block text-12 font-normal whitespace-normal tablet:hidden">{phoneWords(quote)}</span>
        {quote.refusal === null ? null : (
          <span id={reasonId} className="block max-w-90 text-12 font-normal whitespace-normal">
            {quote.refusal}
          </span>
        )}
      </span>
    </span>
  );
}

/** What the columns say, where a phone leaves them out. */
const phoneWords = ({ verdict, worst, cost, currency, leadVolumeDays }: CandidateView): string =>
  [
    verdict ? verdictWord(verdict) : "being scored",
    ...(worst ? [`${worstMarginWords(worst)} on ${worstPlaceWords(worst)}`] : []),
    cost ? formatMoney(cost.total, currency) : "no price",
    `${weeks(leadVolumeDays)} wk`,
  ].join(", ");
