// Assessments of a spread: ripple, and the variation of the group delay.
import { adviseMargin } from "./advice.ts";
import { unreached, type Assessment, type Frame } from "./assessment.ts";
import { LEVEL_TOLERANCE, differenceReadings, withAdvice } from "./assess-levels.ts";
import type { Band, Requirement } from "./contract.ts";
import { coverageOf, segmentsWithin, type Segment } from "./coverage.ts";
import type { Readings } from "./curves.ts";
import { formatFigure } from "./describe.ts";
import { extentOf, forEachWindow, spreadOf } from "./spread.ts";
import { notMeasuredReason, type Sweeping } from "./sweeping.ts";
import { isAtFloor, peakNoiseFloor, transmissionEnds, transmissionTerms, type Ends } from "./uncertainty.ts";
import { WorstPoint } from "./worst-point.ts";

/** A requirement on a spread, with what its ends are made from. */
export interface SpreadLine {
  readonly kind: Requirement["kind"];
  readonly band: Band;
  readonly max: number;
  readonly window: number | undefined;
  readonly maxStep: number | undefined;
  readonly tolerance: number;
  /** Ends of the spread between a largest and a least value; they move with the two values alone. */
  readonly endsOf: (largest: number, least: number) => Ends;
}

/** Ripple: maximum minus minimum of |S21| in dB over the band, or the largest over windows inside it. */
export function assessRipple(
  line: Extract<Requirement, { readonly kind: "ripple" }>,
  band: Band,
  sweeping: Sweeping,
): Assessment {
  const frame: Frame = { band, standing: true, tolerance: LEVEL_TOLERANCE, covered: [], missing: [band] };
  if (!sweeping.curves.isMeasured("s21")) return unreached(line.max, frame, notMeasuredReason("S21"));
  const endsOf = rippleEnds(sweeping);
  const { kind, max, window, maxStep } = line;
  const spread: SpreadLine = { kind, band, max, window, maxStep, tolerance: LEVEL_TOLERANCE, endsOf };
  const { assessment, largest } = assessSpread(differenceReadings(sweeping), spread);
  const isBound = isAtFloor(largest, peakNoiseFloor(sweeping.setup, sweeping.curves.points));
  return isBound ? { ...assessment, bound: "at-least" } : assessment;
}

/** ± the relative uncertainty where stated; else [max(0, max l - min u), max u - min l] from the points' own ends. */
function rippleEnds(sweeping: Sweeping): SpreadLine["endsOf"] {
  const relative = sweeping.setup.transmissionRelative;
  if (relative !== undefined) return (largest, least) => statedEnds(spreadOf({ largest, least }), relative);
  const terms = transmissionTerms(sweeping.setup, sweeping.curves.points);
  if (terms.factor === 1 && terms.floor === 0) return (largest, least) => statedEnds(spreadOf({ largest, least }), 0);
  return (largest, least) => {
    const above = transmissionEnds(largest, terms);
    const below = transmissionEnds(least, terms);
    if (least === Infinity) return [0, Infinity];
    return [Math.max(0, above[0] - below[1]), above[1] - below[0]];
  };
}

/** A spread ± a stated uncertainty; a spread is never negative. */
export function statedEnds(spread: number, uncertainty: number): Ends {
  return [Math.max(0, spread - uncertainty), spread + uncertainty];
}

/** The worst spread of readings over a band or its windows, and the largest value that has part in it. */
export function assessSpread(readings: Readings, line: SpreadLine): { assessment: Assessment; largest: number } {
  const { band, max, tolerance } = line;
  const segments = segmentsWithin(readings.frequency, readings.value, band, line.maxStep);
  const frame: Frame = { band, standing: true, tolerance, ...coverageOf(segments, band) };
  const whole = extentOf(readings, segments, tolerance);
  if (whole === undefined) return { assessment: unreached(max, frame), largest: NaN };

  const worst = new WorstPoint(true, tolerance);
  const window = line.window;
  if (window === undefined || window >= band[1] - band[0]) {
    const [low, high] = line.endsOf(whole.largest, whole.least);
    worst.add(window === undefined ? whole.frequency : band[0], spreadOf(whole), max, low, high);
  } else addWindows(worst, readings, segments, { ...line, window }, whole);
  const advise = () => adviseMargin(formatFigure(-worst.lowerEnd, line.kind));
  return { assessment: withAdvice({ ...frame, ...worst.figures() }, advise), largest: whole.largest };
}

/**
 * Adds the windows that can matter. The ends of a spread lie above and below it by amounts that grow with both of its
 * values, so the amounts at the band's extremes bound those of every window, and most windows need no ends.
 */
function addWindows(
  worst: WorstPoint,
  readings: Readings,
  segments: readonly Segment[],
  line: SpreadLine & { readonly window: number },
  whole: { readonly largest: number; readonly least: number },
): void {
  const { band, max, window, tolerance, endsOf } = line;
  const widening = endsOf(whole.largest, whole.least)[1] - spreadOf(whole);
  const isBounded = Number.isFinite(widening);
  const slack = (isBounded ? 2 * widening : Infinity) + 2 * tolerance;
  let widest = -Infinity;
  forEachWindow(readings, segments, band, window, (extent) => {
    const spread = spreadOf(extent);
    if (spread < widest - slack) return;
    widest = Math.max(widest, spread);
    const [low, high] = endsOf(extent.largest, extent.least);
    worst.add(extent.frequency, spread, max, low, high);
  });
}
