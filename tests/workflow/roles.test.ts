// The permission table against the one the product states, cell by cell.
import { expect, test } from "vitest";
import { historyScope, isBuyerRole, may, ROLES, VERBS, type Verb } from "../../app/workflow/roles.ts";

/** Roles in the order engineer, purchasing, admin, supplier: y = may. */
const TABLE: Record<Verb, string> = {
  "read-specification": "yyy-",
  "write-specification": "y-y-",
  "release-specification": "y-y-",
  "read-rfq": "yyy-",
  "manage-rfq": "yyy-",
  "invite-supplier": "yyy-",
  "answer-clarification": "yyy-",
  "ask-clarification": "---y",
  "read-results": "yyy-",
  "read-sealed-prices": "----",
  "decide-exception": "yyy-",
  "recommend-award": "yyy-",
  "approve-award": "-yy-",
  "read-suppliers": "yyy-",
  "write-suppliers": "-yy-",
  "read-rates": "yyy-",
  "write-rates": "-yy-",
  "read-organisation": "yyy-",
  "write-organisation": "--y-",
  "manage-users": "--y-",
  "manage-team": "---y",
  "answer-invitation": "---y",
  "write-quote": "---y",
  "submit-quote": "---y",
  "read-own-quote": "---y",
};

test("each role may what the product's table says, and nothing else", () => {
  const built = VERBS.map((verb) => [verb, ROLES.map((role) => (may(role, verb) ? "y" : "-")).join("")]);
  expect(Object.fromEntries(built)).toEqual(TABLE);
});

test("the history: an engineer reads her own RFQs, purchasing and administrators all, a supplier its quotes", () => {
  expect(ROLES.map(historyScope)).toEqual(["own-rfqs", "all", "all", "own-quotes"]);
  expect(ROLES.filter(isBuyerRole)).toEqual(["engineer", "purchasing", "admin"]);
});
