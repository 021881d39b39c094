// Scores a network against requirements: one result each, with uncertainty, coverage and the reason in words.
import { assess, nothingAssessed } from "./assess.ts";
import { conclude, verdictOf, type Assessment } from "./assessment.ts";
import type { Band, Drift, EvaluateOptions, Prepared, Requirement, Result, Setup, TwoPort } from "./contract.ts";
import { curvesOf } from "./curves.ts";
import { moved, movesOf } from "./drift.ts";
import { bandOf } from "./frequency.ts";
import { isUnknown, preparedAt } from "./prepare.ts";
import { checkRequirement } from "./requirement-check.ts";
import { Sweeping } from "./sweeping.ts";
import { checkSetup } from "./uncertainty.ts";
import { verdictRank } from "./verdict.ts";

/**
 * One result per requirement, in their order. Ignores `temperature`.
 *
 * With `drift` the trace is moved to every temperature asked for and the worst is kept; such a result is a prediction
 * and never more than a conditional pass.
 *
 * @throws RangeError for a malformed requirement, setup or impedance; never for a band that is not reached
 */
export function evaluate(
  network: TwoPort | Prepared,
  requirements: readonly Requirement[],
  options: EvaluateOptions = {},
): Result[] {
  const { setup = {}, drift, lowestTestFrequency } = options;
  requirements.forEach((requirement) => {
    checkRequirement(requirement, lowestTestFrequency);
  });
  checkSetup(setup);
  const prepared = preparedAt(network, options.impedance);
  if (drift !== undefined) return predict(prepared, requirements, { setup, drift, lowestTestFrequency });
  const assessOne = assessorOf(prepared, setup, lowestTestFrequency);
  return requirements.map((requirement) => conclude(requirement, assessOne(requirement)));
}

/** What assesses requirements on one prepared sweep. The requirements are taken as checked. */
export function assessorOf(
  prepared: Prepared,
  setup: Setup,
  lowestTestFrequency?: number,
  lossFactor?: number,
): (requirement: Requirement) => Assessment {
  if (isUnknown(prepared)) return (requirement) => notRenormalised(requirement, prepared);
  const sweeping = new Sweeping(curvesOf(prepared), setup, lowestTestFrequency, lossFactor);
  return (requirement) => assess(requirement, sweeping);
}

function notRenormalised(requirement: Requirement, prepared: Prepared): Assessment {
  const band: Band = "band" in requirement ? requirement.band : bandOf(prepared.network.frequency);
  const impedances = prepared.impedance.join(" and ");
  const reason = `An S-parameter was not measured, so the file cannot be renormalised to ${impedances} Ω.`;
  return nothingAssessed(requirement, band, reason);
}

function predict(
  prepared: Prepared,
  requirements: readonly Requirement[],
  options: { readonly setup: Setup; readonly drift: Drift; readonly lowestTestFrequency?: number | undefined },
): Result[] {
  const assessors = movesOf(options.drift).map(({ factor, lossFactor }) =>
    assessorOf(moved(prepared, factor), options.setup, options.lowestTestFrequency, lossFactor),
  );
  return requirements.map((requirement) => {
    const worst = worstOf(assessors.map((assessOne) => assessOne(requirement)));
    const result = conclude(requirement, worst);
    return result.verdict === "pass" ? { ...result, verdict: "conditional-pass" } : result;
  });
}

/** The assessment with the worst verdict, of equals the one with the least margin. */
function worstOf(assessments: readonly Assessment[]): Assessment {
  return assessments.reduce((worst, assessment) => {
    const difference = verdictRank(verdictOf(assessment)) - verdictRank(verdictOf(worst));
    return difference < 0 || (difference === 0 && assessment.margin < worst.margin) ? assessment : worst;
  });
}
