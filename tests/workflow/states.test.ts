// States and steps of specification, RFQ, quote and decision.
import { expect, test } from "vitest";
import {
  approvalRefusal,
  canDecision,
  DECISION_STATES,
  DECISION_TRANSITIONS,
  decisionRefusal,
} from "../../app/workflow/decision.ts";
import { canQuote, QUOTE_STATES, QUOTE_TRANSITIONS, quoteRefusal } from "../../app/workflow/quote.ts";
import { canRfq, RFQ_STATES, RFQ_TRANSITIONS, RFQ_VERBS, rfqRefusal, rfqState } from "../../app/workflow/rfq.ts";
import { canSpecification, REVISION_STATES, specificationRefusal } from "../../app/workflow/specification.ts";

const due = new Date("2027-03-31T15:00:00.000Z");
const at = (milliseconds: number) => new Date(due.getTime() + milliseconds);

test("an open RFQ is closed from its due millisecond, and not one before", () => {
  expect(rfqState({ status: "open", dueAt: due }, at(-1))).toBe("open");
  expect(rfqState({ status: "open", dueAt: due }, at(0))).toBe("closed");
  expect(rfqState({ status: "open", dueAt: due }, at(1))).toBe("closed");
});

test("the clock changes no other state: a draft stays a draft, a decision stands", () => {
  for (const status of ["draft", "closed", "decided", "cancelled"] as const) {
    expect(rfqState({ status, dueAt: due }, at(-1))).toBe(status);
    expect(rfqState({ status, dueAt: due }, at(1e9))).toBe(status);
  }
});

test("each step of an RFQ is possible in exactly its states", () => {
  const possible = Object.fromEntries(
    RFQ_VERBS.map((verb) => [verb, RFQ_STATES.filter((state) => canRfq(verb, state)).join(" ")]),
  );
  expect(possible).toEqual({
    edit: "draft",
    open: "draft",
    discard: "draft",
    invite: "draft open",
    "revoke-invitation": "draft open",
    "accept-invitation": "open",
    amend: "open",
    extend: "open",
    close: "open",
    cancel: "open closed",
    "ask-clarification": "open",
    "answer-clarification": "open",
    "edit-quote": "open",
    "submit-quote": "open",
    "withdraw-quote": "open",
    recommend: "closed",
    approve: "closed",
    return: "closed",
  });
});

test("a refusal is a sentence exactly where the step is impossible", () => {
  for (const verb of RFQ_VERBS) {
    for (const state of RFQ_STATES) expect(rfqRefusal(verb, state) === null).toBe(canRfq(verb, state));
  }
  expect(rfqRefusal("submit-quote", "closed")).toMatch(/closed/);
});

test("the transitions of an RFQ start where their step is possible", () => {
  for (const verb of ["open", "close", "cancel", "approve"] as const) {
    const from: readonly string[] = RFQ_TRANSITIONS[verb].from;
    expect(RFQ_STATES.filter((state) => canRfq(verb, state))).toEqual(from);
  }
});

test("a released revision never changes; only drafts are edited and released", () => {
  const states = (verb: "edit" | "release" | "discard-draft" | "revise" | "open-rfq") =>
    REVISION_STATES.filter((state) => canSpecification(verb, state));
  expect(states("edit")).toEqual(["draft"]);
  expect(states("release")).toEqual(["draft"]);
  expect(states("discard-draft")).toEqual(["draft"]);
  expect(states("revise")).toEqual(["released"]);
  expect(states("open-rfq")).toEqual(["released"]);
  expect(specificationRefusal("edit", "released")).toMatch(/does not change/);
  expect(specificationRefusal("edit", "draft")).toBeNull();
});

test("a quote is submitted, and submitted again, only while the RFQ is open; withdrawing is final", () => {
  const allowed = (verb: "submit" | "withdraw" | "edit" | "award") =>
    QUOTE_STATES.flatMap((quote) =>
      RFQ_STATES.filter((rfq) => canQuote(verb, quote, rfq)).map((rfq) => `${quote}/${rfq}`),
    );
  expect(allowed("edit")).toEqual(["draft/open", "submitted/open"]);
  expect(allowed("submit")).toEqual(["draft/open", "submitted/open"]);
  expect(allowed("withdraw")).toEqual(["submitted/open"]);
  expect(allowed("award")).toEqual(["submitted/closed"]);
  expect(quoteRefusal("submit", "withdrawn", "open")).toMatch(/withdrawn/);
  expect(quoteRefusal("submit", "draft", "closed")).toMatch(/closed/);
  expect(QUOTE_TRANSITIONS.withdraw.to).toBe("withdrawn");
});

test("a decision is approved or returned once; a returned one makes room for another", () => {
  const states = (verb: "recommend" | "approve" | "return") =>
    (["none", ...DECISION_STATES] as const).filter((state) => canDecision(verb, state));
  expect(states("recommend")).toEqual(["none", "returned"]);
  expect(states("approve")).toEqual(["recommended"]);
  expect(states("return")).toEqual(["recommended"]);
  expect(DECISION_TRANSITIONS.approve.to).toBe("approved");
  expect(decisionRefusal("approve", "approved")).toMatch(/has been approved/);
});

test("an award is approved by a second person with the right role", () => {
  const waiting = { state: "recommended", recommendedBy: 7 } as const;
  expect(approvalRefusal({ userId: 8, role: "purchasing" }, waiting, true)).toBeNull();
  expect(approvalRefusal({ userId: 8, role: "admin" }, waiting, true)).toBeNull();
  expect(approvalRefusal({ userId: 7, role: "purchasing" }, waiting, true)).toMatch(/second person/);
  expect(approvalRefusal({ userId: 7, role: "purchasing" }, waiting, false)).toBeNull();
  expect(approvalRefusal({ userId: 8, role: "engineer" }, waiting, false)).toMatch(/Purchasing or an administrator/);
  expect(approvalRefusal({ userId: 8, role: "supplier" }, waiting, false)).not.toBeNull();
  expect(approvalRefusal({ userId: 8, role: "admin" }, { ...waiting, state: "approved" }, true)).toMatch(/approved/);
});
