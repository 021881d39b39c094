// What a supplier's files are checked against in its browser: plain data, sent with the page and posted to the worker.
import type { Setup } from "./contract.ts";
import type { SpecificationLine } from "./line-definition.ts";
import type { EvaluationFrame } from "./score-sweep.ts";
import type { StatedDrift } from "./stated-measurement.ts";

/** What files are checked against, as `readCheckFrame` answers it. */
export interface CheckFrame extends EvaluationFrame {
  /** The measured lines in their order, `lineKey` being the requirement's id. */
  readonly lines: readonly SpecificationLine[];
  readonly assumedSetup: Setup;
  /** As the quote's draft states it now; {} where it states nothing. */
  readonly statedSetup: Setup;
  readonly statedDrift: StatedDrift | null;
  readonly basis: "measured" | "similar" | "simulated";
  readonly decisionRule: "simple" | "guarded";
  readonly unitsAsked: number;
  readonly unitsOverRange: number;
  /** Points of all files of a quote together. */
  readonly mostPoints: number;
}
