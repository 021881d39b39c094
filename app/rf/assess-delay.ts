// Assessments of group delay and its variation, from the unwrapped phase of S21.
import { adviseMargin } from "./advice.ts";
import { assessPoints } from "./assess-points.ts";
import { assessSpread, statedEnds } from "./assess-spread.ts";
import { withAdvice } from "./assess-levels.ts";
import { unreached, type Assessment, type Frame } from "./assessment.ts";
import type { Band, Requirement, Series } from "./contract.ts";
import type { Curves } from "./curves.ts";
import { isHole, samplesAround, segmentsWithin } from "./coverage.ts";
import { delayOverAperture } from "./delay-curve.ts";
import { formatFigure } from "./describe.ts";
import { bandOf } from "./frequency.ts";
import { readingsOf, type Readings } from "./readings.ts";
import { notMeasuredReason, type Sweeping } from "./sweeping.ts";

type Line<K extends Requirement["kind"]> = Extract<Requirement, { readonly kind: K }>;

/** A margin within this share of the limit is zero. */
const RELATIVE_TOLERANCE = 1e-9;
const DEGREES_PER_TURN = 360;

export function assessGroupDelay(line: Line<"group-delay">, band: Band, sweeping: Sweeping): Assessment {
  const readings = delayReadings(line, band, sweeping, sweeping.setup.groupDelay ?? 0);
  const tolerance = RELATIVE_TOLERANCE * line.max;
  if (readings === undefined) return unreached(line.max, nothingOf(band, tolerance), notMeasuredReason("S21"));
  const points = { band, limit: line.max, isUpperLimit: true, maxStep: line.maxStep, tolerance, standing: true };
  const found = assessPoints(readings, points);
  return withAdvice(found, () => adviseMargin(formatFigure(-found.marginInterval[0], line.kind)));
}

/** Variation: maximum minus minimum of the delay; its uncertainty is √2 times a point's, the errors being independent. */
export function assessDelayVariation(line: Line<"group-delay-variation">, band: Band, sweeping: Sweeping): Assessment {
  const readings = delayReadings(line, band, sweeping, 0);
  const tolerance = RELATIVE_TOLERANCE * line.max;
  if (readings === undefined) return unreached(line.max, nothingOf(band, tolerance), notMeasuredReason("S21"));
  const uncertainty = Math.SQRT2 * (sweeping.setup.groupDelay ?? 0);
  const { kind, max, window, maxStep } = line;
  const endsOf = (largest: number, least: number) => statedEnds(largest - least, uncertainty);
  return assessSpread(readings, { kind, band, max, window, maxStep, tolerance, endsOf }).assessment;
}

function nothingOf(band: Band, tolerance: number): Frame {
  return { band, standing: true, tolerance, covered: [], missing: [band] };
}

function delayReadings(
  line: { readonly aperture?: number; readonly maxStep?: number },
  band: Band,
  { curves }: Sweeping,
  uncertainty: number,
): Readings | undefined {
  if (!curves.isMeasured("s21")) return undefined;
  const { frequency } = curves;
  const delay =
    line.aperture === undefined
      ? { frequency, delay: delayOfNeighbours(curves, band, line.maxStep) }
      : apertureDelay({ frequency, phase: curves.phase() }, band, line.aperture, line.maxStep);
  return readingsOf(
    delay.frequency,
    delay.delay,
    (value) => [value - uncertainty, value + uncertainty],
    uncertainty === 0,
  );
}

function apertureDelay(
  { frequency, phase }: { frequency: Series; phase: Series },
  band: Band,
  aperture: number,
  maxStep: number | undefined,
) {
  return delayOverAperture(
    frequency,
    phase,
    segmentsWithin(frequency, phase, bandOf(frequency), maxStep),
    band,
    aperture,
  );
}

/**
 * Central differences over the neighbours, one-sided beside a hole and at the ends of the sweep; s, NaN at a lone sample.
 * Only the samples that the band is read from are computed, the others are NaN.
 */
function delayOfNeighbours(curves: Curves, band: Band, maxStep = Infinity): Series {
  const { frequency, points } = curves;
  const [first, last] = samplesAround(frequency, band);
  const phase = curves.phaseWithin(first - 1, last + 1);
  const delay = new Float64Array(points).fill(NaN);
  for (let index = first; index <= last; index += 1) {
    const below = index === 0 || isHole(frequency, phase, index - 1, maxStep) ? index : index - 1;
    const above = index === points - 1 || isHole(frequency, phase, index, maxStep) ? index : index + 1;
    if (below === above) continue;
    const turns = ((phase[above] as number) - (phase[below] as number)) / DEGREES_PER_TURN;
    delay[index] = -turns / ((frequency[above] as number) - (frequency[below] as number));
  }
  return delay;
}
