// Point-wise requirements: every sample of a band, its interpolated edges and the breakpoints of its limit.
import { unreached, type Assessment } from "./assessment.ts";
import type { Band, Limit } from "./contract.ts";
import { coverageOf, segmentsWithin, valueBetween, type Segment } from "./coverage.ts";
import type { Readings } from "./curves.ts";
import { limitPieces, pieceLevel, type LimitPiece } from "./limits.ts";
import { WorstPoint } from "./worst-point.ts";

export interface PointwiseLine {
  readonly band: Band;
  readonly limit: Limit;
  readonly isUpperLimit: boolean;
  readonly maxStep?: number | undefined;
  readonly tolerance: number;
  readonly standing: boolean;
}

/** What is subtracted from every reading, with its ends: the passband's least loss for relative rejection. */
export interface Reference {
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

/** In the readings' unit (dB), far above every tolerance: beyond this a reading's ends lie above those of the least. */
const NEAR_LEAST = 0.05;

const NO_REFERENCE: Reference = { value: 0, low: 0, high: 0 };

/** The least margin of readings against a limit over the part of the band that is covered. */
export function assessPoints(readings: Readings, line: PointwiseLine, reference = NO_REFERENCE): Assessment {
  const { band, maxStep, tolerance, standing } = line;
  const segments = segmentsWithin(readings.frequency, readings.value, band, maxStep);
  const frame = { band, standing, tolerance, ...coverageOf(segments, band) };
  const pieces = limitPieces(line.limit, band);
  const worst = new WorstPoint(line.isUpperLimit, tolerance);
  const isLeastLoss = !line.isUpperLimit && readings.endsRise;
  for (const piece of pieces) {
    const isWhole = pieces.length === 1;
    const parts = isWhole
      ? segments
      : segmentsWithin(readings.frequency, readings.value, [piece.from, piece.to], maxStep);
    for (const part of parts) addSegment(worst, readings, part, piece, reference, isLeastLoss);
  }
  if (worst.isEmpty) return unreached(typeof line.limit === "number" ? line.limit : NaN, frame);
  return { ...frame, ...worst.figures() };
}

function addSegment(
  worst: WorstPoint,
  readings: Readings,
  part: Segment,
  piece: LimitPiece,
  reference: Reference,
  isLeastLoss: boolean,
): void {
  const { first, last } = part;
  const least = piece.slope === 0 && isLeastLoss;
  if (startsBetween(readings, part)) addBetween(worst, readings, part.from, first - 1, piece, reference);
  if (least) addLeast(worst, readings, part, piece.level, reference);
  else addSamples(worst, readings, part, piece, reference);
  if (stopsBetween(readings, part)) addBetween(worst, readings, part.to, last, piece, reference);
}

function addSamples(
  worst: WorstPoint,
  readings: Readings,
  { first, last }: Segment,
  piece: LimitPiece,
  reference: Reference,
): void {
  const { frequency, value, low, high } = readings;
  const { value: subtracted, low: leastSubtracted, high: mostSubtracted } = reference;
  readings.fillEnds(first, last);
  // Written out, without a call per sample: this loop is most of what scoring costs.
  for (let index = first; index <= last; index += 1) {
    const hz = frequency[index] as number;
    const limit = piece.slope === 0 ? piece.level : pieceLevel(piece, hz);
    worst.add(
      hz,
      (value[index] as number) - subtracted,
      limit,
      (low[index] as number) - mostSubtracted,
      (high[index] as number) - leastSubtracted,
    );
  }
}

/**
 * Samples against a constant lower limit, where the ends rise with the value: only those near the least value can have the
 * least ends, so the others need none.
 */
function addLeast(
  worst: WorstPoint,
  readings: Readings,
  { first, last }: Segment,
  limit: number,
  reference: Reference,
): void {
  const { frequency, value } = readings;
  let least = Infinity;
  for (let index = first; index <= last; index += 1) least = Math.min(least, value[index] as number);
  for (let index = first; index <= last; index += 1) {
    const hz = frequency[index] as number;
    const reading = value[index] as number;
    if (reading > least + NEAR_LEAST) {
      worst.add(hz, reading - reference.value, limit, Infinity, Infinity);
      continue;
    }
    const [low, high] = readings.endsBetween(reading, index, hz);
    worst.add(hz, reading - reference.value, limit, low - reference.high, high - reference.low);
  }
}

function addBetween(
  worst: WorstPoint,
  readings: Readings,
  hz: number,
  below: number,
  piece: LimitPiece,
  reference: Reference,
): void {
  const value = valueBetween(readings.frequency, readings.value, below, hz);
  const [low, high] = readings.endsBetween(value, below, hz);
  worst.add(hz, value - reference.value, pieceLevel(piece, hz), low - reference.high, high - reference.low);
}

function startsBetween({ frequency }: Readings, { first, last, from }: Segment): boolean {
  return first > last || (frequency[first] as number) !== from;
}

function stopsBetween({ frequency }: Readings, { first, last, to }: Segment): boolean {
  return first > last || (frequency[last] as number) !== to;
}

/** Least value over a band on readings that cover it, with the ends of that reading. */
export function leastReading(readings: Readings, band: Band, maxStep?: number): Reference | undefined {
  const segments = segmentsWithin(readings.frequency, readings.value, band, maxStep);
  if (coverageOf(segments, band).missing.length > 0) return undefined;
  const least = { value: Infinity, low: Infinity, high: Infinity };
  const take = (value: number, low: number, high: number) => {
    least.value = Math.min(least.value, value);
    least.low = Math.min(least.low, low);
    least.high = Math.min(least.high, high);
  };
  for (const part of segments) {
    readings.fillEnds(part.first, part.last);
    forEachReading(readings, part, take);
  }
  return least;
}

/** Every reading of a segment in ascending order, interpolated ends included; its ends must be filled to be used. */
export function forEachReading(
  readings: Readings,
  part: Segment,
  visit: (value: number, low: number, high: number, hz: number) => void,
): void {
  const { frequency, value, low, high } = readings;
  const visitBetween = (hz: number, below: number) => {
    const reading = valueBetween(frequency, value, below, hz);
    const [lower, upper] = readings.endsBetween(reading, below, hz);
    visit(reading, lower, upper, hz);
  };
  const { first, last } = part;
  if (startsBetween(readings, part)) visitBetween(part.from, first - 1);
  for (let index = first; index <= last; index += 1)
    visit(value[index] as number, low[index] as number, high[index] as number, frequency[index] as number);
  if (stopsBetween(readings, part)) visitBetween(part.to, last);
}
