// The margin of a point-wise requirement at every point of its evaluation set, with the ends of that margin.
import { forEachReading, leastReading, type Reference } from "./assess-points.ts";
import { differenceReadings } from "./assess-levels.ts";
import type { Band, Limit, Prepared, Requirement, Series, Setup } from "./contract.ts";
import { coverageOf, segmentsWithin } from "./coverage.ts";
import { curvesOf, readingsOf, type Readings } from "./curves.ts";
import { delayCurve } from "./delay-curve.ts";
import { limitPieces, pieceLevel } from "./limits.ts";
import { isUnknown } from "./prepare.ts";
import { Sweeping } from "./sweeping.ts";

const POINTWISE = ["insertion-loss", "rejection", "return-loss", "reverse-isolation", "group-delay"] as const;

/** A requirement that each frequency of its band has a margin for. */
export type PointwiseRequirement = Extract<Requirement, { readonly kind: (typeof POINTWISE)[number] }>;

export function isPointwise(requirement: Requirement): requirement is PointwiseRequirement {
  return POINTWISE.some((kind) => kind === requirement.kind);
}

/** A stretch without holes, ascending, n points; where the limit steps a new stretch begins at the same frequency. */
export interface MarginStretch {
  /** Hz. */
  readonly frequency: Series;
  /** In the requirement's unit (dB, s); positive complies. */
  readonly margin: Series;
  /** Ends of the margin, lower <= margin <= upper; upper is Infinity where the reading may be a null. */
  readonly lower: Series;
  readonly upper: Series;
}

export interface MarginCurve {
  readonly stretches: readonly MarginStretch[];
  /** The band as tested, Hz: one that starts at exactly 0 Hz starts at the lowest test frequency. */
  readonly band: Band;
  /** Parts of the band that the sweep covers, and those it does not, Hz. */
  readonly covered: readonly Band[];
  readonly missing: readonly Band[];
}

export interface MarginCurveOptions {
  readonly setup?: Setup;
  /** Hz: where a band that starts at exactly 0 Hz is taken to start. */
  readonly lowestTestFrequency?: number | undefined;
}

/**
 * Margin against frequency over the evaluation set: every sample of the band, its edges and the breakpoints of a sloped
 * limit. The least margin and the least of each of its ends are those `evaluate` reports for the same sweep and setup.
 *
 * @returns no stretch where nothing of the band was measured, or where the passband that a rejection is relative to is
 *   not covered by this sweep
 */
export function marginCurve(
  prepared: Prepared,
  requirement: PointwiseRequirement,
  { setup = {}, lowestTestFrequency }: MarginCurveOptions = {},
): MarginCurve {
  const sweeping = new Sweeping(curvesOf(prepared), setup, lowestTestFrequency);
  const band = sweeping.testBand(requirement.band);
  const tested = band ?? requirement.band;
  const nothing: MarginCurve = { stretches: [], band: tested, covered: [], missing: [tested] };
  if (band === undefined || isUnknown(prepared)) return nothing;
  const readings = readingsFor(requirement, band, sweeping);
  const reference = referenceFor(requirement, sweeping);
  if (readings === undefined || reference === undefined) return nothing;
  const { limit, isUpperLimit } = limitOf(requirement);
  const { maxStep } = requirement;
  const pieces = limitPieces(limit, band);
  const stretches = pieces.flatMap((piece) => {
    const within: Band = pieces.length === 1 ? band : [piece.from, piece.to];
    return segmentsWithin(readings.frequency, readings.value, within, maxStep).map((part) => {
      readings.fillEnds(part.first, part.last);
      const points: MarginPoint[] = [];
      forEachReading(readings, part, (value, low, high, hz) => {
        const point = { hz, value: value - reference.value, low: low - reference.high, high: high - reference.low };
        points.push(marginOf(point, pieceLevel(piece, hz), isUpperLimit));
      });
      return stretchOf(points);
    });
  });
  return { stretches, band, ...coverageOf(segmentsWithin(readings.frequency, readings.value, band, maxStep), band) };
}

interface Reading {
  readonly hz: number;
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

interface MarginPoint {
  readonly hz: number;
  readonly margin: number;
  readonly lower: number;
  readonly upper: number;
}

function marginOf({ hz, value, low, high }: Reading, limit: number, isUpperLimit: boolean): MarginPoint {
  return isUpperLimit
    ? { hz, margin: limit - value, lower: limit - high, upper: limit - low }
    : { hz, margin: value - limit, lower: low - limit, upper: high - limit };
}

function stretchOf(points: readonly MarginPoint[]): MarginStretch {
  return {
    frequency: Float64Array.from(points, ({ hz }) => hz),
    margin: Float64Array.from(points, ({ margin }) => margin),
    lower: Float64Array.from(points, ({ lower }) => lower),
    upper: Float64Array.from(points, ({ upper }) => upper),
  };
}

function limitOf(requirement: PointwiseRequirement): { readonly limit: Limit; readonly isUpperLimit: boolean } {
  return "max" in requirement
    ? { limit: requirement.max, isUpperLimit: true }
    : { limit: requirement.min, isUpperLimit: false };
}

/** What the line is read from; undefined where that was not measured. */
function readingsFor(line: PointwiseRequirement, band: Band, sweeping: Sweeping): Readings | undefined {
  const { curves, setup } = sweeping;
  switch (line.kind) {
    case "insertion-loss":
      return curves.isMeasured("s21") ? sweeping.lossReadings() : undefined;
    case "rejection":
      if (!curves.isMeasured("s21")) return undefined;
      return line.relativeTo === undefined ? curves.transmission("s21", setup) : differenceReadings(sweeping);
    case "reverse-isolation":
      return curves.isMeasured("s12") ? curves.transmission("s12", setup) : undefined;
    case "return-loss":
      return curves.isMeasured(line.port === 1 ? "s11" : "s22") ? curves.reflection(line.port, setup) : undefined;
    case "group-delay":
      return curves.isMeasured("s21") ? delayReadings(line, band, sweeping) : undefined;
  }
}

function delayReadings(
  { aperture, maxStep }: Extract<PointwiseRequirement, { kind: "group-delay" }>,
  band: Band,
  { curves, setup }: Sweeping,
): Readings {
  const { frequency, delay } = delayCurve(curves, { aperture, maxStep, band });
  const uncertainty = setup.groupDelay ?? 0;
  return readingsOf(frequency, delay, (value) => [value - uncertainty, value + uncertainty], uncertainty === 0);
}

const NO_REFERENCE: Reference = { value: 0, low: 0, high: 0 };

/** What is subtracted from every reading; undefined where this sweep does not cover the passband it comes from. */
function referenceFor(line: PointwiseRequirement, sweeping: Sweeping): Reference | undefined {
  if (line.kind !== "rejection" || line.relativeTo === undefined) return NO_REFERENCE;
  const passband = sweeping.testBand(line.relativeTo);
  const least = passband && leastReading(differenceReadings(sweeping), passband, line.maxStep);
  if (least === undefined || !Number.isFinite(least.value)) return undefined;
  // A stated relative uncertainty is that of the difference: it is not to be counted at both of its ends.
  const isStated = sweeping.setup.transmissionRelative !== undefined;
  return isStated ? { value: least.value, low: least.value, high: least.value } : least;
}
