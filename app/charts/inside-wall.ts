// Where a curve runs inside a wall: stretches cut at computed crossings, and the slivers between curve and edge.
import { interpolateLevel, type Point } from "./limit-outline";
import type { Wall } from "./types";

/** A curve's part inside a wall. */
export interface Stretch {
  /** Along the curve, ascending in frequency; ends lie on the edge or on the wall's side. */
  readonly points: readonly Point[];
  /** Along the wall's edge under the same frequencies. */
  readonly edge: readonly Point[];
}

/** dB: what lies closer to the edge lies on it. */
const ON_EDGE = 1e-9;

/**
 * Stretches of a curve inside a wall. Curve and edge are straight in dB against frequency between their points, so each
 * crossing is computed; a point on the edge is outside.
 *
 * @param trace ascending in frequency
 * @param outline the wall's edge, ascending; a step repeats its frequency
 * @param side "floor": inside is more loss than the limit; "ceiling": less
 */
export function stretchesInside(trace: readonly Point[], outline: readonly Point[], side: Wall["side"]): Stretch[] {
  const pieces: Stretch[] = [];
  for (let index = 1; index < outline.length; index += 1) {
    const from = outline[index - 1];
    const to = outline[index];
    if (!from || !to || to[0] <= from[0]) continue;
    pieces.push(...insidePiece(trace, from, to, side));
  }
  return joinTouching(pieces);
}

/** Closed outline of the sliver between a stretch and the edge, in Hz and dB. */
export function sliver(stretch: Stretch): Point[] {
  return [...stretch.points, ...[...stretch.edge].reverse()];
}

function insidePiece(trace: readonly Point[], from: Point, to: Point, side: Wall["side"]): Stretch[] {
  const found: Stretch[] = [];
  for (let index = firstSegment(trace, from[0]); index < trace.length; index += 1) {
    const left = trace[index - 1];
    const right = trace[index];
    if (!left || !right || left[0] >= to[0]) break;
    const start = Math.max(left[0], from[0]);
    const end = Math.min(right[0], to[0]);
    if (end <= start) continue;
    const part = insideSegment(
      [start, interpolateLevel(left, right, start)],
      [end, interpolateLevel(left, right, end)],
      (frequency) => interpolateLevel(from, to, frequency),
      side,
    );
    if (part) found.push(part);
  }
  return found;
}

function insideSegment(
  left: Point,
  right: Point,
  limitAt: (frequency: number) => number,
  side: Wall["side"],
): Stretch | undefined {
  const sign = side === "floor" ? 1 : -1;
  const leftDepth = sign * (left[1] - limitAt(left[0]));
  const rightDepth = sign * (right[1] - limitAt(right[0]));
  const leftInside = leftDepth > ON_EDGE;
  const rightInside = rightDepth > ON_EDGE;
  if (!leftInside && !rightInside) return undefined;
  const crossing = (): Point => {
    const frequency = left[0] + (right[0] - left[0]) * crossingPart(leftDepth, rightDepth);
    return [frequency, limitAt(frequency)];
  };
  const first = leftInside ? left : crossing();
  const last = rightInside ? right : crossing();
  return {
    points: [first, last],
    edge: [
      [first[0], limitAt(first[0])],
      [last[0], limitAt(last[0])],
    ],
  };
}

/**
 * Where between two depths of different sign the depth is 0, from 0 to 1. A null has no slope: the curve is infinite
 * right beside its finite neighbour, and crosses there.
 */
function crossingPart(leftDepth: number, rightDepth: number): number {
  if (!Number.isFinite(leftDepth)) return 1;
  if (!Number.isFinite(rightDepth)) return 0;
  return Math.min(1, Math.max(0, leftDepth / (leftDepth - rightDepth)));
}

function joinTouching(pieces: readonly Stretch[]): Stretch[] {
  const joined: { points: Point[]; edge: Point[] }[] = [];
  for (const piece of pieces) {
    const last = joined[joined.length - 1];
    const end = last?.points[last.points.length - 1];
    const start = piece.points[0];
    if (last && end && start && end[0] === start[0] && end[1] === start[1]) {
      last.points.push(...piece.points.slice(1));
      // The edge may step where the pieces meet: both of its levels are kept.
      last.edge.push(...piece.edge);
    } else {
      joined.push({ points: [...piece.points], edge: [...piece.edge] });
    }
  }
  return joined;
}

/** Index of the right end of the first trace segment that reaches beyond a frequency. */
function firstSegment(trace: readonly Point[], frequency: number): number {
  let low = 1;
  let high = trace.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((trace[middle]?.[0] ?? Infinity) > frequency) high = middle;
    else low = middle + 1;
  }
  return low;
}
