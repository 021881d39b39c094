// Assessment of phase linearity: the largest distance from the least-squares line through phase against frequency.
import { adviseMargin } from "./advice.ts";
import { LEVEL_TOLERANCE, withAdvice } from "./assess-levels.ts";
import { unreached, type Assessment, type Frame } from "./assessment.ts";
import type { Band, Requirement, Series } from "./contract.ts";
import { coverageOf, samplesAround, segmentsWithin } from "./coverage.ts";
import { formatFigure } from "./describe.ts";
import { notMeasuredReason, type Sweeping } from "./sweeping.ts";
import { WorstPoint } from "./worst-point.ts";

const LEAST_SAMPLES = 3;

export function assessPhaseLinearity(
  line: Extract<Requirement, { readonly kind: "phase-linearity" }>,
  band: Band,
  { curves, setup }: Sweeping,
): Assessment {
  const common = { band, standing: false, tolerance: LEVEL_TOLERANCE };
  const nothing: Frame = { ...common, covered: [], missing: [band] };
  if (!curves.isMeasured("s21")) return unreached(line.max, nothing, notMeasuredReason("S21"));
  const phase = curves.phaseWithin(...samplesAround(curves.frequency, band));
  const segments = segmentsWithin(curves.frequency, phase, band, line.maxStep);
  const frame: Frame = { ...common, ...coverageOf(segments, band) };
  const part = segments[0];
  if (part === undefined || segments.length > 1 || frame.missing.length > 0) return unreached(line.max, frame);
  if (part.last - part.first + 1 < LEAST_SAMPLES) {
    return unreached(line.max, frame, "A straight line through the phase needs three samples in the band.");
  }
  const worst = new WorstPoint(true, LEVEL_TOLERANCE);
  const uncertainty = setup.phase ?? 0;
  forEachDistance(curves.frequency, phase, part.first, part.last, (hz, distance) => {
    worst.add(hz, distance, line.max, Math.max(0, distance - uncertainty), distance + uncertainty);
  });
  return withAdvice({ ...frame, ...worst.figures() }, () => adviseMargin(formatFigure(-worst.lowerEnd, line.kind)));
}

/** Distance of each sample from the least-squares line, about the means so that large frequencies lose no digits. */
function forEachDistance(
  frequency: Series,
  phase: Series,
  first: number,
  last: number,
  visit: (hz: number, distance: number) => void,
): void {
  const meanFrequency = meanOf(frequency, first, last);
  const meanPhase = meanOf(phase, first, last);
  let cross = 0;
  let square = 0;
  for (let index = first; index <= last; index += 1) {
    const offset = (frequency[index] as number) - meanFrequency;
    cross += offset * ((phase[index] as number) - meanPhase);
    square += offset * offset;
  }
  const slope = cross / square;
  for (let index = first; index <= last; index += 1) {
    const hz = frequency[index] as number;
    visit(hz, Math.abs((phase[index] as number) - meanPhase - slope * (hz - meanFrequency)));
  }
}

function meanOf(values: Series, first: number, last: number): number {
  let sum = 0;
  for (let index = first; index <= last; index += 1) sum += (values[index] as number) - (values[first] as number);
  return (values[first] as number) + sum / (last - first + 1);
}
