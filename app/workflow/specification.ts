// States of a specification revision and what each allows.
export const REVISION_STATES = ["draft", "released", "superseded"] as const;

export type RevisionState = (typeof REVISION_STATES)[number];

const ALLOWED = {
  edit: ["draft"],
  release: ["draft"],
  "discard-draft": ["draft"],
  revise: ["released"],
  /** A superseded revision is history: a new RFQ is opened on the released one. */
  "open-rfq": ["released"],
} as const satisfies Record<string, readonly RevisionState[]>;

export type SpecificationVerb = keyof typeof ALLOWED;

const REFUSALS: Record<RevisionState, string> = {
  draft: "This revision is a draft. Release it first.",
  released: "This revision is released and does not change. Start a new revision.",
  superseded: "A later revision has replaced this one.",
};

export function canSpecification(verb: SpecificationVerb, state: RevisionState): boolean {
  const states: readonly RevisionState[] = ALLOWED[verb];
  return states.includes(state);
}

/** The sentence a disabled button or a refusal shows; null where the verb is possible. */
export const specificationRefusal = (verb: SpecificationVerb, state: RevisionState): string | null =>
  canSpecification(verb, state) ? null : REFUSALS[state];

/** The state a verb leads to; releasing a revision supersedes the one before it. */
export const REVISION_TRANSITIONS: Record<"release" | "supersede", readonly [RevisionState, RevisionState]> = {
  release: ["draft", "released"],
  supersede: ["released", "superseded"],
};
