// States of an RFQ, the one function that says which holds now, and what each allows.
export const RFQ_STATES = ["draft", "open", "closed", "decided", "cancelled"] as const;

export type RfqState = (typeof RFQ_STATES)[number];

/** What is stored; `dueAt` in UTC, to the millisecond. */
export interface StoredRfq {
  readonly status: RfqState;
  readonly dueAt: Date;
}

/**
 * The state at an instant: an open RFQ is closed from its due millisecond, whether or not any job has run. Pass the database's clock
 * wherever the answer decides something.
 */
export function rfqState(rfq: StoredRfq, now: Date): RfqState {
  return rfq.status === "open" && now.getTime() >= rfq.dueAt.getTime() ? "closed" : rfq.status;
}

const ALLOWED = {
  edit: ["draft"],
  open: ["draft"],
  discard: ["draft"],
  invite: ["draft", "open"],
  "revoke-invitation": ["draft", "open"],
  "accept-invitation": ["open"],
  amend: ["open"],
  extend: ["open"],
  close: ["open"],
  cancel: ["open", "closed"],
  "ask-clarification": ["open"],
  "answer-clarification": ["open"],
  "edit-quote": ["open"],
  "submit-quote": ["open"],
  "withdraw-quote": ["open"],
  recommend: ["closed"],
  approve: ["closed"],
  return: ["closed"],
} as const satisfies Record<string, readonly RfqState[]>;

export type RfqVerb = keyof typeof ALLOWED;

export const RFQ_VERBS = Object.keys(ALLOWED) as readonly RfqVerb[];

const REFUSALS: Record<RfqState, string> = {
  draft: "This RFQ is not open yet.",
  open: "This RFQ is open until its due date.",
  closed: "This RFQ is closed: its due date has passed or it was closed early.",
  decided: "This RFQ is decided.",
  cancelled: "This RFQ is cancelled.",
};

/** @param state of `rfqState`, never the stored status */
export function canRfq(verb: RfqVerb, state: RfqState): boolean {
  const states: readonly RfqState[] = ALLOWED[verb];
  return states.includes(state);
}

/** The sentence a disabled button or a refusal shows; null where the verb is possible. */
export const rfqRefusal = (verb: RfqVerb, state: RfqState): string | null =>
  canRfq(verb, state) ? null : REFUSALS[state];

/** From and to of each change of status; the guard of the verb and this table are tested against each other. */
export const RFQ_TRANSITIONS = {
  open: { from: ["draft"], to: "open" },
  close: { from: ["open"], to: "closed" },
  cancel: { from: ["open", "closed"], to: "cancelled" },
  approve: { from: ["closed"], to: "decided" },
} as const satisfies Partial<Record<RfqVerb, { readonly from: readonly RfqState[]; readonly to: RfqState }>>;
