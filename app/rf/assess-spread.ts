// Assessments of a spread: ripple, and the variation of the group delay.
import { adviseMargin } from "./advice.ts";
import { FAR } from "./assess-points.ts";
import { unreached, type Assessment, type Frame } from "./assessment.ts";
import { LEVEL_TOLERANCE, differenceReadings, withAdvice } from "./assess-levels.ts";
import type { Band, Requirement } from "./contract.ts";
import { coverageOf, type Segment } from "./coverage.ts";
import { formatFigure } from "./describe.ts";
import type { Readings } from "./readings.ts";
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
  const segments = readings.segments(band, line.maxStep);
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
 * Adds the windows that can matter, by themselves or by their ends.
 *
 * An end lies the further from a value the larger the value is. So the higher end of a window's spread lies above it by no
 * more than the distances of both ends at the band's largest value, and the lower one below it by no less than those at the
 * band's least: what the ends of a spread from a value to itself are.
 */
function addWindows(
  worst: WorstPoint,
  readings: Readings,
  segments: readonly Segment[],
  line: SpreadLine & { readonly window: number },
  whole: { readonly largest: number; readonly least: number },
): void {
  const { band, max, window, tolerance, endsOf } = line;
  const mostAbove = endsOf(whole.largest, whole.largest)[1];
  const leastBelow = endsOf(whole.least, whole.least)[1];
  const far = FAR * tolerance;
  let widest = -Infinity;
  let lowest = -Infinity;
  let highest = -Infinity;
  forEachWindow(readings, segments, band, window, (extent) => {
    const spread = spreadOf(extent);
    const isNarrow = spread < widest - far && spread + mostAbove < highest - far;
    if (isNarrow && Math.max(0, spread - leastBelow) < lowest - far) return;
    const [low, high] = endsOf(extent.largest, extent.least);
    widest = Math.max(widest, spread);
    lowest = Math.max(lowest, low);
    highest = Math.max(highest, high);
    worst.add(extent.frequency, spread, max, low, high);
  });
}
