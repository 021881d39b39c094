// Assessments of the levels: insertion loss, rejection, reverse isolation, return loss.
import { adviseLargestLoss, adviseLeastLoss, adviseMargin, adviseReturnLoss, type Advice } from "./advice.ts";
import { assessPoints, leastReading, type PointwiseLine } from "./assess-points.ts";
import { isReached, unreached, type Assessment, type Frame } from "./assessment.ts";
import type { Band, Limit, Requirement } from "./contract.ts";
import { formatLevel } from "./describe.ts";
import { limitAt } from "./limits.ts";
import { readingsOf, type Readings } from "./readings.ts";
import { notMeasuredReason, type Sweeping } from "./sweeping.ts";
import {
  isAtFloor,
  magnitudeOf,
  peakNoiseFloor,
  reflectionSpread,
  reflectionTerms,
  transmissionTerms,
} from "./uncertainty.ts";
import { decide } from "./verdict.ts";

export const LEVEL_TOLERANCE = 1e-9;

type Line<K extends Requirement["kind"]> = Extract<Requirement, { readonly kind: K }>;

export function assessInsertionLoss(line: Line<"insertion-loss">, band: Band, sweeping: Sweeping): Assessment {
  const points = pointwise(line.maxStep, band, line.max, true);
  if (!sweeping.curves.isMeasured("s21")) return notMeasured("S21", points);
  const readings = sweeping.lossReadings();
  const found = withFloorBound(assessPoints(readings, points), sweeping);
  const terms = transmissionTerms(sweeping.setup, sweeping.curves.points);
  return withAdvice(found, (limit) => adviseLargestLoss(limit, terms));
}

export function assessRejection(line: Line<"rejection">, band: Band, sweeping: Sweeping): Assessment {
  const points = pointwise(line.maxStep, band, line.min, false);
  if (!sweeping.curves.isMeasured("s21")) return notMeasured("S21", points);
  if (line.relativeTo !== undefined)
    return assessRelative(line, line.relativeTo, { ...points, standing: false }, sweeping);
  return assessLeastLoss("s21", points, sweeping);
}

export function assessReverseIsolation(line: Line<"reverse-isolation">, band: Band, sweeping: Sweeping): Assessment {
  const points = pointwise(line.maxStep, band, line.min, false);
  return sweeping.curves.isMeasured("s12") ? assessLeastLoss("s12", points, sweeping) : notMeasured("S12", points);
}

function assessLeastLoss(parameter: "s21" | "s12", points: PointwiseLine, sweeping: Sweeping): Assessment {
  const readings = sweeping.curves.transmission(parameter, sweeping.setup);
  const found = withFloorBound(assessPoints(readings, points), sweeping);
  const terms = transmissionTerms(sweeping.setup, sweeping.curves.points);
  return withAdvice(found, (limit, reading) => adviseLeastLoss(limit, reading, terms));
}

/** Rejection against the least insertion loss within a passband, which the same sweep must cover. */
function assessRelative(
  line: Line<"rejection">,
  relativeTo: Band,
  points: PointwiseLine,
  sweeping: Sweeping,
): Assessment {
  const readings = differenceReadings(sweeping);
  const passband = sweeping.testBand(relativeTo);
  const least = passband && leastReading(readings, passband, line.maxStep);
  const usable = least !== undefined && Number.isFinite(least.value) ? least : undefined;
  if (usable === undefined) {
    const limit = typeof line.min === "number" ? line.min : NaN;
    const reason = "The passband that the rejection is relative to is not covered by the same sweep.";
    return unreached(limit, nothingOf(points), reason);
  }
  // A stated relative uncertainty is that of the difference: it is not to be counted at both of its ends.
  const isStated = sweeping.setup.transmissionRelative !== undefined;
  const reference = isStated ? { value: usable.value, low: usable.value, high: usable.value } : usable;
  const found = assessPoints(readings, points, reference);
  const { value } = found;
  const isBound = isReached(found) && isAtFloor(value + usable.value, peakFloorOf(sweeping));
  return withAdvice(isBound ? { ...found, bound: "at-least" } : found);
}

/** Readings of S21 for differences within the sweep: a stated relative uncertainty, else each point's own ends. */
export function differenceReadings(sweeping: Sweeping): Readings {
  const { curves, setup } = sweeping;
  const relative = setup.transmissionRelative;
  if (relative === undefined) return curves.transmission("s21", setup);
  return readingsOf(curves.frequency, curves.loss("s21"), (value) => [value - relative, value + relative]);
}

export function assessReturnLoss(line: Line<"return-loss">, band: Band, sweeping: Sweeping): Assessment {
  const parameter = line.port === 1 ? "s11" : "s22";
  const points = pointwise(line.maxStep, band, line.min, false);
  if (!sweeping.curves.isMeasured(parameter)) return notMeasured(line.port === 1 ? "S11" : "S22", points);
  const readings = sweeping.curves.reflection(line.port, sweeping.setup);
  const terms = reflectionTerms(sweeping.setup);
  return withAdvice(assessPoints(readings, points), (limit, returnLoss, low) => {
    const magnitude = magnitudeOf(returnLoss);
    const rest = magnitudeOf(low) - magnitude - reflectionSpread(magnitude, 0, terms);
    const through = terms.loadMatch > 0 ? Math.max(0, rest / terms.loadMatch) : 0;
    return adviseReturnLoss(limit, returnLoss, through, terms);
  });
}

function pointwise(maxStep: number | undefined, band: Band, limit: Limit, isUpperLimit: boolean): PointwiseLine {
  return { band, limit, isUpperLimit, maxStep, tolerance: LEVEL_TOLERANCE, standing: true };
}

function notMeasured(parameter: string, points: PointwiseLine): Assessment {
  const limit = limitAt(points.limit, points.band[0]);
  return unreached(limit, nothingOf(points), notMeasuredReason(parameter));
}

function nothingOf({ band, standing, tolerance }: PointwiseLine): Frame {
  return { band, standing, tolerance, covered: [], missing: [band] };
}

function peakFloorOf(sweeping: Sweeping): number {
  return peakNoiseFloor(sweeping.setup, sweeping.curves.points);
}

function withFloorBound(found: Assessment, sweeping: Sweeping): Assessment {
  return isReached(found) && isAtFloor(found.value, peakFloorOf(sweeping)) ? { ...found, bound: "at-least" } : found;
}

/** Adds what would settle the verdict, where an uncertainty keeps it from a pass. */
export function withAdvice(
  found: Assessment,
  advise: (limit: number, value: number, low: number) => Advice = () =>
    adviseMargin(formatLevel(-found.marginInterval[0])),
): Assessment {
  if (!isReached(found)) return found;
  const verdict = decide(found.margin, found.marginInterval, found.tolerance);
  const [low, high] = found.marginInterval;
  if (verdict === "pass" || low === high || !Number.isFinite(low)) return found;
  const { text, isBlocked } = advise(found.limit, found.value, found.interval[0]);
  return verdict !== "fail" || isBlocked ? { ...found, advice: text } : found;
}
