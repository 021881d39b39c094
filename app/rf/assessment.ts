// An assessment: what one requirement found on the part of its band that was reached, before the verdict.
import type { Band, Requirement, Result, Verdict } from "./contract.ts";
import { describeMissing, describePartial } from "./describe.ts";
import type { Ends } from "./uncertainty.ts";
import { decide } from "./verdict.ts";

export interface Assessment {
  /** Worst value in the requirement's unit, NaN where nothing was reached. */
  readonly value: number;
  readonly frequency: number;
  readonly limit: number;
  readonly margin: number;
  /** Of the value at the reported point. */
  readonly interval: Ends;
  /** Least lower and least upper end of the margin, each on its own. */
  readonly marginInterval: Ends;
  /** Hz, where each of the two lies. */
  readonly marginFrequencies: readonly [number, number];
  /** A margin this close to zero is zero, in the requirement's unit. */
  readonly tolerance: number;
  readonly band: Band;
  readonly covered: readonly Band[];
  readonly missing: readonly Band[];
  /** True where one counter-example settles the line: a fail on a part of the band stands. */
  readonly standing: boolean;
  /** Why the requirement could not be evaluated, where it is not just a missing stretch. */
  readonly obstacle?: string;
  readonly bound?: "at-least" | "at-most";
  /** What would settle a verdict that is not a pass. */
  readonly advice?: string;
}

/** What every assessment of a requirement states beside its figures. */
export type Frame = Pick<Assessment, "band" | "covered" | "missing" | "standing" | "tolerance">;

/** An assessment that reached nothing. */
export function unreached(limit: number, frame: Frame, obstacle?: string): Assessment {
  const none: Ends = [NaN, NaN];
  return {
    ...frame,
    value: NaN,
    frequency: NaN,
    limit,
    margin: NaN,
    interval: none,
    marginInterval: none,
    marginFrequencies: none,
    ...(obstacle === undefined ? {} : { obstacle }),
  };
}

export function isReached(assessment: Assessment): boolean {
  return !Number.isNaN(assessment.margin);
}

export function isComplete(assessment: Assessment): boolean {
  return isReached(assessment) && assessment.missing.length === 0 && assessment.obstacle === undefined;
}

/** The verdict: a fail on a part stands where one counter-example settles the line; otherwise a part is not covered. */
export function verdictOf(assessment: Assessment): Verdict {
  if (!isReached(assessment)) return "not-covered";
  const verdict = decide(assessment.margin, assessment.marginInterval, assessment.tolerance);
  if (isComplete(assessment)) return verdict;
  return verdict === "fail" && assessment.standing ? "fail" : "not-covered";
}

/** The result as the contract states it, with its reason in words. */
export function conclude(requirement: Requirement, assessment: Assessment, assumed = false): Result {
  const verdict = verdictOf(assessment);
  const reason = reasonOf(requirement, assessment, verdict);
  const { marginInterval, marginFrequencies, tolerance } = assessment;
  return {
    id: requirement.id,
    verdict,
    value: assessment.value,
    frequency: assessment.frequency,
    limit: assessment.limit,
    margin: zeroed(assessment.margin, tolerance),
    interval: assessment.interval,
    marginInterval: [zeroed(marginInterval[0], tolerance), zeroed(marginInterval[1], tolerance)],
    decidingFrequency: marginFrequencies[verdict === "fail" ? 1 : 0],
    ...(isComplete(assessment) ? {} : { covered: assessment.covered }),
    ...(reason === undefined ? {} : { reason }),
    ...(assumed && isReached(assessment) ? { assumed } : {}),
    ...(assessment.bound === undefined ? {} : { bound: assessment.bound }),
  };
}

function reasonOf(requirement: Requirement, assessment: Assessment, verdict: Verdict): string | undefined {
  const parts: string[] = [];
  if (assessment.obstacle !== undefined) parts.push(assessment.obstacle);
  else if (assessment.missing.length > 0) parts.push(describeMissing(assessment.missing));
  if (!isComplete(assessment) && isReached(assessment)) parts.push(describePartial(requirement, assessment));
  if (verdict !== "not-covered" && assessment.advice !== undefined) parts.push(assessment.advice);
  return parts.length === 0 ? undefined : parts.join(" ");
}

/** A margin within the tolerance of zero is zero. */
function zeroed(margin: number, tolerance: number): number {
  return Math.abs(margin) <= tolerance ? 0 : margin;
}
