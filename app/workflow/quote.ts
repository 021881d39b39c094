// States of a quote and what each allows, together with the RFQ's state.
import { canRfq, rfqRefusal, type RfqState, type RfqVerb } from "./rfq.ts";

export const QUOTE_STATES = ["draft", "submitted", "withdrawn"] as const;

export type QuoteState = (typeof QUOTE_STATES)[number];

/** A submitted quote is edited and submitted again until the due date; each submission is kept. Withdrawing is final. */
const ALLOWED = {
  edit: ["draft", "submitted"],
  submit: ["draft", "submitted"],
  withdraw: ["submitted"],
  recommend: ["submitted"],
  award: ["submitted"],
} as const satisfies Record<string, readonly QuoteState[]>;

export type QuoteVerb = keyof typeof ALLOWED;

/** What the RFQ must allow for the same step. */
const RFQ_STEP: Record<QuoteVerb, RfqVerb> = {
  edit: "edit-quote",
  submit: "submit-quote",
  withdraw: "withdraw-quote",
  recommend: "recommend",
  award: "approve",
};

const REFUSALS: Record<QuoteState, string> = {
  draft: "This quote has not been submitted.",
  submitted: "This quote has been submitted.",
  withdrawn: "This quote has been withdrawn.",
};

/** @param rfq state of `rfqState`, never the stored status */
export function canQuote(verb: QuoteVerb, quote: QuoteState, rfq: RfqState): boolean {
  return quoteRefusal(verb, quote, rfq) === null;
}

/** The sentence a disabled button or a refusal shows; null where the verb is possible. The quote's own state is named first. */
export function quoteRefusal(verb: QuoteVerb, quote: QuoteState, rfq: RfqState): string | null {
  const states: readonly QuoteState[] = ALLOWED[verb];
  if (!states.includes(quote)) return REFUSALS[quote];
  return canRfq(RFQ_STEP[verb], rfq) ? null : rfqRefusal(RFQ_STEP[verb], rfq);
}

export const QUOTE_TRANSITIONS = {
  submit: { from: ["draft", "submitted"], to: "submitted" },
  withdraw: { from: ["submitted"], to: "withdrawn" },
} as const satisfies Partial<Record<QuoteVerb, { readonly from: readonly QuoteState[]; readonly to: QuoteState }>>;
