// The edge of a wall as a polyline in Hz and dB: what drawing and cutting both start from.
import type { Band, Limit } from "~/rf/index";

/** [Hz, dB] */
export type Point = readonly [frequency: number, level: number];

/** Pieces a limit straight against log f is cut into between two of its points: under 0.1 px of bow on a full drawing. */
const LOG_PIECES = 24;

/**
 * Points of a limit over its band, ascending in frequency; a step repeats its frequency. A limit straight in log f is
 * given as short straight pieces.
 *
 * @param limit dB; a sloped limit's points reach at least over the band
 * @returns two points or more, the first at band[0], the last at band[1]
 */
export function limitOutline(limit: Limit, band: Band): Point[] {
  if (typeof limit === "number") {
    return [
      [band[0], limit],
      [band[1], limit],
    ];
  }
  const dense = limit.scale === "log" ? densify(limit.points) : limit.points;
  return clipOutline(dense, band);
}

/** The part of a polyline inside a band, its ends interpolated; empty where it lies wholly outside. */
export function clipOutline(points: readonly Point[], band: Band): Point[] {
  const [from, to] = band;
  const first = points[0];
  const last = points[points.length - 1];
  if (!first || !last || last[0] < from || first[0] > to) return [];
  const kept: Point[] = first[0] < from ? [[from, levelOn(points, from, "right")]] : [];
  for (const point of points) if (point[0] >= from && point[0] <= to) kept.push(point);
  const end = kept[kept.length - 1];
  if (last[0] > to && end?.[0] !== to) kept.push([to, levelOn(points, to, "left")]);
  if (kept.length === 1 && kept[0]) kept.push(kept[0]);
  return kept;
}

/**
 * Level of a polyline at a frequency, linear in dB against f, held at its ends.
 *
 * @param side which level counts at a step: that of the piece to the left or to the right
 */
export function levelOn(points: readonly Point[], frequency: number, side: "left" | "right" = "right"): number {
  const at = upperIndex(points, frequency, side);
  const left = points[at - 1];
  const right = points[at];
  if (!left) return right?.[1] ?? Number.NaN;
  if (!right) return left[1];
  if (frequency === left[0]) return left[1];
  if (frequency === right[0]) return right[1];
  return interpolateLevel(left, right, frequency);
}

/** dB linear in f between two points; anything between a finite sample and a null is infinite. */
export function interpolateLevel(left: Point, right: Point, frequency: number): number {
  const span = right[0] - left[0];
  if (span === 0) return left[1];
  if (frequency === left[0]) return left[1];
  if (frequency === right[0]) return right[1];
  if (left[1] === Infinity || right[1] === Infinity) return Infinity;
  return left[1] + ((right[1] - left[1]) * (frequency - left[0])) / span;
}

/** Greatest and least level of a limit over its band. */
export function limitExtent(limit: Limit, band: Band): readonly [least: number, greatest: number] {
  const levels = limitOutline(limit, band).map((point) => point[1]);
  return [Math.min(...levels), Math.max(...levels)];
}

/** Index of the first point beyond the frequency ("right") or at or beyond it ("left"). */
function upperIndex(points: readonly Point[], frequency: number, side: "left" | "right"): number {
  let low = 0;
  let high = points.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    const at = points[middle]?.[0] ?? Infinity;
    const beyond = side === "right" ? at > frequency : at >= frequency;
    if (beyond) high = middle;
    else low = middle + 1;
  }
  return low;
}

function densify(points: readonly Point[]): Point[] {
  const dense: Point[] = [];
  for (const [index, point] of points.entries()) {
    const next = points[index + 1];
    dense.push(point);
    if (!next || next[0] === point[0] || point[0] <= 0) continue;
    const ratio = next[0] / point[0];
    for (let piece = 1; piece < LOG_PIECES; piece += 1) {
      const part = piece / LOG_PIECES;
      dense.push([point[0] * ratio ** part, point[1] + (next[1] - point[1]) * part]);
    }
  }
  return dense;
}
