// Combines what several sweeps of one measurement show for one requirement into one assessment.
import { isComplete, isReached, verdictOf, type Assessment } from "./assessment.ts";
import { coverageOfBands } from "./coverage.ts";

/** An assessment with the sweep it comes from. */
export interface SweepAssessment {
  readonly sweepId: string;
  readonly assessment: Assessment;
  /** A setup field that the requirement uses was taken from the assumed setup. */
  readonly assumed: boolean;
}

/**
 * The measurement's assessment: the worst of its sweeps, covered where they together reach the band. A figure that
 * needs one sweep comes only from the sweeps that reach all it needs; where none does, a fail on a part stands.
 *
 * @param sweeps one or more
 */
export function combineSweeps(sweeps: readonly SweepAssessment[], needsOneSweep: boolean): SweepAssessment {
  const [only] = sweeps;
  if (sweeps.length === 1 && only !== undefined) return only;
  return needsOneSweep ? fromWholeSweeps(sweeps) : merged(sweeps);
}

function fromWholeSweeps(sweeps: readonly SweepAssessment[]): SweepAssessment {
  const whole = sweeps.filter(({ assessment }) => isComplete(assessment));
  if (whole.length > 0) return merged(whole);
  const failing = sweeps.filter(({ assessment }) => verdictOf(assessment) === "fail");
  const reached = sweeps.filter(({ assessment }) => isReached(assessment));
  const candidates = [failing, reached].find((list) => list.length > 0) ?? sweeps;
  const worst = leastBy(candidates, ({ assessment }) => (isReached(assessment) ? assessment.margin : Infinity));
  const { covered, missing } = coverageOfBands(
    sweeps.flatMap(({ assessment }) => assessment.covered),
    worst.assessment.band,
  );
  const isSplit = covered.length > 0 && missing.length === 0 && worst.assessment.obstacle === undefined;
  if (!isSplit) return worst;
  return { ...worst, assessment: { ...worst.assessment, obstacle: "No single sweep reaches the whole band." } };
}

function merged(sweeps: readonly SweepAssessment[]): SweepAssessment {
  const reached = sweeps.filter(({ assessment }) => isReached(assessment));
  if (reached.length === 0) return sweeps[0] as SweepAssessment;
  const reported = leastBy(reached, ({ assessment }) => assessment.margin);
  const lower = leastBy(reached, ({ assessment }) => assessment.marginInterval[0]).assessment;
  const upper = leastBy(reached, ({ assessment }) => assessment.marginInterval[1]).assessment;
  const { obstacle: _obstacle, advice: _advice, ...figures } = reported.assessment;
  const coverage = coverageOfBands(
    reached.flatMap(({ assessment }) => assessment.covered),
    figures.band,
  );
  return {
    sweepId: reported.sweepId,
    assumed: reached.some(({ assumed }) => assumed),
    assessment: {
      ...figures,
      ...coverage,
      marginInterval: [lower.marginInterval[0], upper.marginInterval[1]],
      marginFrequencies: [lower.marginFrequencies[0], upper.marginFrequencies[1]],
      ...(lower.advice === undefined ? {} : { advice: lower.advice }),
    },
  };
}

/** The entry with the least figure; of equals (within the assessments' tolerance) the one at the lowest frequency. */
function leastBy(entries: readonly SweepAssessment[], figureOf: (entry: SweepAssessment) => number): SweepAssessment {
  return entries.reduce((best, entry) => {
    const tolerance = entry.assessment.tolerance;
    const difference = figureOf(entry) - figureOf(best);
    if (difference < -tolerance) return entry;
    const isEqual = Math.abs(difference) <= tolerance || figureOf(entry) === figureOf(best);
    return isEqual && entry.assessment.frequency < best.assessment.frequency ? entry : best;
  });
}
