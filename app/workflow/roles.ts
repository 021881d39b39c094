// Who may do what: the one table of permissions, read by buttons, guards and tests.
export const ROLES = ["engineer", "purchasing", "admin", "supplier"] as const;

export type Role = (typeof ROLES)[number];

/** What a role allows at all. Whether it is possible now is the state's question, whether it is their row the actor's. */
const ALLOWED = {
  "read-specification": ["engineer", "purchasing", "admin"],
  "write-specification": ["engineer", "admin"],
  "release-specification": ["engineer", "admin"],
  "read-rfq": ["engineer", "purchasing", "admin"],
  "manage-rfq": ["engineer", "purchasing", "admin"],
  "invite-supplier": ["engineer", "purchasing", "admin"],
  "answer-clarification": ["engineer", "purchasing", "admin"],
  "ask-clarification": ["supplier"],
  "read-results": ["engineer", "purchasing", "admin"],
  "read-sealed-prices": [],
  "decide-exception": ["engineer", "purchasing", "admin"],
  "recommend-award": ["engineer", "purchasing", "admin"],
  "approve-award": ["purchasing", "admin"],
  "read-suppliers": ["engineer", "purchasing", "admin"],
  "write-suppliers": ["purchasing", "admin"],
  "read-rates": ["engineer", "purchasing", "admin"],
  "write-rates": ["purchasing", "admin"],
  "read-organisation": ["engineer", "purchasing", "admin"],
  "write-organisation": ["admin"],
  "manage-users": ["admin"],
  "manage-team": ["supplier"],
  "answer-invitation": ["supplier"],
  "write-quote": ["supplier"],
  "submit-quote": ["supplier"],
  "read-own-quote": ["supplier"],
} as const satisfies Record<string, readonly Role[]>;

export type Verb = keyof typeof ALLOWED;

export const VERBS = Object.keys(ALLOWED) as readonly Verb[];

export function may(role: Role, verb: Verb): boolean {
  const roles: readonly Role[] = ALLOWED[verb];
  return roles.includes(role);
}

export type HistoryScope = "own-rfqs" | "all" | "own-quotes";

/** How much of the history a role reads. */
export function historyScope(role: Role): HistoryScope {
  if (role === "supplier") return "own-quotes";
  return role === "engineer" ? "own-rfqs" : "all";
}

export const isBuyerRole = (role: Role): boolean => role !== "supplier";
