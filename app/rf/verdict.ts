// Verdicts: their order, the acceptance rules, and the decision from a margin and its ends.
import type { Verdict } from "./contract.ts";

/** Worst first. */
const ORDER: readonly Verdict[] = ["fail", "not-covered", "conditional-fail", "conditional-pass", "pass"];

/** Place of a verdict in the order fail, not covered, conditional fail, conditional pass, pass: 0 is the worst. */
export function verdictRank(verdict: Verdict): number {
  return ORDER.indexOf(verdict);
}

/** The worst of several verdicts; `not-covered` for an empty list, since nothing was shown. */
export function worstVerdict(verdicts: readonly Verdict[]): Verdict {
  return ORDER.find((verdict) => verdicts.includes(verdict)) ?? "not-covered";
}

/** Whether a verdict is accepted: simple acceptance takes conditional passes too, guarded acceptance passes alone. */
export function complies(verdict: Verdict, rule: "simple" | "guarded"): boolean {
  return verdict === "pass" || (rule === "simple" && verdict === "conditional-pass");
}

/**
 * The decision from the least margin and the least of its lower and upper ends, each minimum on its own.
 *
 * @param margin least margin, in the requirement's unit, positive complies
 * @param ends [least lower end, least upper end]
 * @param tolerance a figure this close to zero is zero, and zero complies
 * @see JCGM 106:2012; ILAC-G8:09/2019, four outcomes, guard band w = U
 */
export function decide(margin: number, ends: readonly [number, number], tolerance: number): Verdict {
  if (ends[0] >= -tolerance) return "pass";
  if (margin >= -tolerance) return "conditional-pass";
  return ends[1] >= -tolerance ? "conditional-fail" : "fail";
}
