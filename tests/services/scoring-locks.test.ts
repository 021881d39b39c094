// What takes long in scoring is done before anything is locked: a supplier that submits to the same RFQ does not wait for it.
import { expect, test, vi } from "vitest";
import type * as Lot from "~/rf/lot";
import type * as Notes from "~/rf/lot-notes";
import type * as SameData from "~/rf/same-data";
import type * as Transactions from "~/services/transaction.server";
import { rescoreVersion } from "~/services/scoring.server";
import { useDatabase } from "../support/database";
import { buildOldScore, ormeFiles } from "../support/rescoring";

/** Transactions under way, and how many were when each step began. */
const seen = vi.hoisted(() => ({ open: 0, steps: new Map<string, number[]>() }));

function watch<Arguments extends unknown[], Answer>(step: string, work: (...all: Arguments) => Answer) {
  return (...all: Arguments): Answer => {
    seen.steps.set(step, [...(seen.steps.get(step) ?? []), seen.open]);
    return work(...all);
  };
}

vi.mock("~/services/transaction.server", async (original) => {
  const actual = await original<typeof Transactions>();
  const inTransaction: typeof actual.inTransaction = (work) =>
    actual.inTransaction(async (transaction) => {
      seen.open += 1;
      try {
        return await work(transaction);
      } finally {
        seen.open -= 1;
      }
    });
  return { ...actual, inTransaction };
});
vi.mock("~/rf/lot", async (original) => {
  const actual = await original<typeof Lot>();
  return { ...actual, evaluateLot: watch("evaluation", actual.evaluateLot) };
});
vi.mock("~/rf/lot-notes", async (original) => {
  const actual = await original<typeof Notes>();
  return { ...actual, checkLot: watch("notes", actual.checkLot) };
});
vi.mock("~/rf/same-data", async (original) => {
  const actual = await original<typeof SameData>();
  return { ...actual, identicalUnits: watch("identical units", actual.identicalUnits) };
});

useDatabase();

test(
  "no transaction is open while a lot is evaluated, its notes are looked for and its units compared",
  { timeout: 60_000 },
  async () => {
    const { version, rfq } = await buildOldScore("Orme Microwave", ormeFiles());
    seen.steps.clear();
    await rescoreVersion({ versionId: version.id, revisionId: rfq.revisionId });
    expect([...seen.steps.keys()].sort()).toEqual(["evaluation", "identical units", "notes"]);
    for (const [step, open] of seen.steps) expect(Math.max(...open), step).toBe(0);
  },
);
