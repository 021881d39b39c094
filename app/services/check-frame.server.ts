// What a supplier's browser checks files against before it sends any: the lines and settings its quote would be scored with.
import { statedSetup } from "~/forms/quote-setup";
import { readDrift } from "~/forms/stated-drift";
import type { CheckFrame } from "~/rf/check-frame";
import { isMeasured } from "~/rf/index";
import { MOST_POINTS } from "./measurements.server";
import type { Person } from "./person.server";
import { findQuote } from "./quotes.server";
import { readScoringFrame } from "./scoring-sweeps.server";

/** Null where the quote is not the person's own. */
export async function readCheckFrame(person: Person, quotePublicId: string): Promise<CheckFrame | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const { quote, rfq } = found;
  const { revisionId: _, lines, ...frame } = await readScoringFrame(person, rfq);
  const values = { ...quote.draft.values };
  return {
    ...frame,
    lines: lines.filter(({ definition }) => isMeasured(definition)),
    assumedSetup: rfq.assumedSetup,
    statedSetup: statedSetup(values),
    statedDrift: readDrift(values, {}),
    basis: quote.basis,
    decisionRule: rfq.decisionRule,
    unitsAsked: rfq.unitsAsked,
    unitsOverRange: rfq.unitsOverRange,
    mostPoints: MOST_POINTS,
  };
}
