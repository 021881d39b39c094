// What a supplier's browser checks files against before it sends any: the lines and settings its quote would be scored with.
import { statedSetup } from "~/forms/quote-setup";
import { readDrift } from "~/forms/stated-drift";
import { isMeasured, type Setup, type SpecificationLine } from "~/rf/index";
import type { EvaluationFrame } from "~/rf/score-sweep";
import type { StatedDrift } from "~/rf/stated-measurement";
import { MOST_POINTS } from "./measurements.server";
import type { Person } from "./person.server";
import { findQuote } from "./quotes.server";
import { readScoringFrame } from "./scoring-sweeps.server";

/** Plain data of the specification and the person's own draft: it is sent to the page. */
export interface CheckFrame extends EvaluationFrame {
  /** The measured lines in their order. */
  readonly lines: readonly SpecificationLine[];
  readonly assumedSetup: Setup;
  /** As the draft states it now; {} where it states nothing. */
  readonly statedSetup: Setup;
  readonly statedDrift: StatedDrift | null;
  readonly basis: "measured" | "similar" | "simulated";
  readonly decisionRule: "simple" | "guarded";
  readonly unitsAsked: number;
  readonly unitsOverRange: number;
  readonly mostPoints: number;
}

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
