// Point-wise requirements: every sample of a band, its interpolated edges and the breakpoints of its limit.
import { unreached, type Assessment } from "./assessment.ts";
import type { Band, Limit, Series } from "./contract.ts";
import { coverageOf, valueBetween, type Segment } from "./coverage.ts";
import type { Block, Readings } from "./readings.ts";
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

/**
 * A figure this many tolerances above the least one can neither be the least nor decide which of nearly equal ones is
 * reported: that would take a chain of points, each within two tolerances of the one before, from there to the least, and
 * there are 1,000,000 points at most, 2,000,000 windows.
 */
export const FAR = 5e6;
/** dB: how finely the value is looked for beyond which no end matters. */
const SEARCH_STEP = 0.25;
const SEARCH_RANGE = 100;

const NO_REFERENCE: Reference = { value: 0, low: 0, high: 0 };

/** The least margin of readings against a limit over the part of the band that is covered. */
export function assessPoints(readings: Readings, line: PointwiseLine, reference = NO_REFERENCE): Assessment {
  const { band, maxStep, tolerance, standing } = line;
  const segments = readings.segments(band, maxStep);
  const frame = { band, standing, tolerance, ...coverageOf(segments, band) };
  const pieces = limitPieces(line.limit, band);
  const worst = new WorstPoint(line.isUpperLimit, tolerance);
  for (const piece of pieces) {
    const parts = pieces.length === 1 ? segments : readings.segments([piece.from, piece.to], maxStep);
    for (const part of parts) addSegment(worst, readings, part, piece, reference);
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
): void {
  const { first, last } = part;
  if (startsBetween(readings, part)) addBetween(worst, readings, part.from, first - 1, piece, reference);
  if (first <= last) addSamples(worst, readings, part, piece, reference);
  if (stopsBetween(readings, part)) addBetween(worst, readings, part.to, last, piece, reference);
}

/** Adds the samples that can matter, with their ends; blocks that hold none are not even read. */
function addSamples(
  worst: WorstPoint,
  readings: Readings,
  part: Segment,
  piece: LimitPiece,
  reference: Reference,
): void {
  const { frequency } = readings;
  const { first, last } = part;
  const sign = worst.isUpperLimit ? -1 : 1;
  const blocks = worst.isUpperLimit ? [{ first, last, least: -Infinity }] : readings.blocks(first, last);
  const bounds = Float64Array.from(blocks, (block) => block.least - topOf(piece, frequency, block));
  const nearest = blocks[placeOfLeast(bounds)] as Block;
  // Behind an infinite end of the reference all lower ends are one, and the first sample has it.
  const farthest = Number.isFinite(reference.high) ? farthestMargin(worst, readings, nearest, piece, part) : Infinity;
  blocks.forEach((block, place) => {
    if ((bounds[place] as number) > farthest) return;
    const margins = marginsOf(readings, block, piece, sign);
    const values = readings.valuesWithin(block.first, block.last);
    for (let index = block.first; index <= block.last; index += 1) {
      if ((margins[index - block.first] as number) > farthest) continue;
      const hz = frequency[index] as number;
      const value = values[index] as number;
      const [low, high] = readings.endsAt(value, index);
      worst.add(hz, value - reference.value, pieceLevel(piece, hz), low - reference.high, high - reference.low);
    }
  });
}

/** The highest level of a piece over a block: it is straight, so at one of its ends. */
function topOf(piece: LimitPiece, frequency: Series, { first, last }: Block): number {
  return Math.max(pieceLevel(piece, frequency[first] as number), pieceLevel(piece, frequency[last] as number));
}

/** Margins of the samples of a block before a reference is subtracted, positive where they comply. */
function marginsOf(readings: Readings, { first, last }: Block, piece: LimitPiece, sign: 1 | -1): Series {
  const { frequency } = readings;
  const margins = readings.valuesWithin(first, last).slice(first, last + 1);
  const { level, slope } = piece;
  for (let place = 0; place < margins.length; place += 1) {
    const limit = slope === 0 ? level : pieceLevel(piece, frequency[first + place] as number);
    margins[place] = sign * ((margins[place] as number) - limit);
  }
  return margins;
}

/**
 * The margin, before a reference is subtracted, above which a sample matters neither by itself nor by its ends.
 *
 * The ends of any one sample bound the least ends from above: here of the least margin in a block that is likely to hold the
 * least of all. The upper end of a margin does not lie below the margin. The lower end reaches no further below it than an
 * end of some value lies from that value, if no larger value matters: ends move away from the values as these rise.
 *
 * @returns Infinity where every sample matters
 */
function farthestMargin(
  { isUpperLimit, tolerance }: WorstPoint,
  readings: Readings,
  block: Block,
  piece: LimitPiece,
  part: Segment,
): number {
  const { ends } = readings;
  const { first, last } = block;
  const margins = marginsOf(readings, block, piece, isUpperLimit ? -1 : 1);
  const values = readings.valuesWithin(first, last);
  const least = placeOfLeast(margins);
  const margin = margins[least] as number;
  const far = FAR * tolerance;
  if (ends === undefined) return margin + far;
  const value = values[first + least] as number;
  const [low, high] = ends.at(value, first + least);
  if (isUpperLimit) {
    const most = values.subarray(first, last + 1).reduce((a, b) => Math.max(a, b));
    const distance = ends.lowest === undefined ? ends.at(most, first)[1] - most : Infinity;
    return margin + far + Math.max(value - low, distance - (high - value));
  }
  const isFlat = piece.slope === 0;
  if (ends.lowest !== undefined && !isFlat) return Infinity;
  const lowest = ends.lowest?.(part.first, part.last) ?? ((reading: number) => ends.at(reading, first)[0]);
  const top = Math.max(pieceLevel(piece, part.from), pieceLevel(piece, part.to));
  const harmless = harmlessValue(lowest, value, margin - (value - low) + far + top);
  const reach = isFlat ? harmless - top - margin : harmless - lowest(harmless) - (value - low) + far;
  return margin + Math.max(high - value + far, reach);
}

/** A value from which on no lower end lies at or below `end`, dB; Infinity if none is found. */
function harmlessValue(lowest: (value: number) => number, value: number, end: number): number {
  for (let harmless = value; harmless < value + SEARCH_RANGE; harmless += SEARCH_STEP) {
    if (lowest(harmless) > end) return harmless;
  }
  return Infinity;
}

function placeOfLeast(values: Series): number {
  let least = 0;
  for (let place = 1; place < values.length; place += 1) {
    if ((values[place] as number) < (values[least] as number)) least = place;
  }
  return least;
}

function addBetween(
  worst: WorstPoint,
  readings: Readings,
  hz: number,
  below: number,
  piece: LimitPiece,
  reference: Reference,
): void {
  const value = valueBetween(readings.frequency, readings.valuesWithin(below, below + 1), below, hz);
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
  const segments = readings.segments(band, maxStep);
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
  const { frequency } = readings;
  const value = readings.valuesWithin(part.first - 1, part.last + 1);
  const { low, high } = readings.ends === undefined ? { low: value, high: value } : readings;
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
