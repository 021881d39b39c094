// States of a decision, and who may approve it: never the person who recommended, unless the organisation allows that.
import { may, type Role } from "./roles.ts";

export const DECISION_STATES = ["recommended", "approved", "returned"] as const;

export type DecisionState = (typeof DECISION_STATES)[number];

/** `none` stands for an RFQ without a live recommendation; a returned one makes room for the next. */
const ALLOWED = {
  recommend: ["none", "returned"],
  approve: ["recommended"],
  return: ["recommended"],
} as const satisfies Record<string, readonly (DecisionState | "none")[]>;

export type DecisionVerb = keyof typeof ALLOWED;

const REFUSALS: Record<DecisionState | "none", string> = {
  none: "No award has been recommended.",
  recommended: "A recommendation is waiting for approval.",
  approved: "The award has been approved.",
  returned: "The recommendation was returned.",
};

export function canDecision(verb: DecisionVerb, state: DecisionState | "none"): boolean {
  const states: readonly (DecisionState | "none")[] = ALLOWED[verb];
  return states.includes(state);
}

/** The sentence a disabled button or a refusal shows; null where the verb is possible. */
export const decisionRefusal = (verb: DecisionVerb, state: DecisionState | "none"): string | null =>
  canDecision(verb, state) ? null : REFUSALS[state];

export interface Approver {
  readonly userId: number;
  readonly role: Role;
}

/**
 * Why this person may not approve or return this recommendation; null where they may.
 * @param secondPersonRequired false where the organisation switched the rule off or the amount lies below its threshold
 */
export function approvalRefusal(
  approver: Approver,
  decision: { readonly state: DecisionState; readonly recommendedBy: number },
  secondPersonRequired: boolean,
): string | null {
  if (!may(approver.role, "approve-award")) return "Purchasing or an administrator approves awards.";
  const state = decisionRefusal("approve", decision.state);
  if (state) return state;
  if (secondPersonRequired && approver.userId === decision.recommendedBy) {
    return "You recommended this award: a second person approves it.";
  }
  return null;
}

export const DECISION_TRANSITIONS = {
  approve: { from: ["recommended"], to: "approved" },
  return: { from: ["recommended"], to: "returned" },
} as const satisfies Partial<
  Record<DecisionVerb, { readonly from: readonly DecisionState[]; readonly to: DecisionState }>
>;
