// Limits, constant or sloped: their value at a frequency and their pieces over a band.
import type { Band, Limit } from "./contract.ts";
import { isBelow, sameFrequency } from "./frequency.ts";

/** One straight stretch of a limit: `level` at `from`, changing by `slope` dB per Hz, or per unit of ln f. */
export interface LimitPiece {
  readonly from: number;
  readonly to: number;
  /** dB at `origin`. */
  readonly level: number;
  /** Hz. */
  readonly origin: number;
  readonly slope: number;
  readonly scale: "linear" | "log";
}

type SlopedLimit = Exclude<Limit, number>;

/**
 * Value of a limit at a frequency, dB.
 *
 * @param hz frequency, Hz
 * @param side at a step both values hold: `above` gives the one that goes on upwards, `below` the one that came from below
 * @returns NaN outside the points of a sloped limit
 */
export function limitAt(limit: Limit, hz: number, side: "below" | "above" = "above"): number {
  if (typeof limit === "number") return limit;
  const pieces = slopedPieces(limit, [hz, hz]);
  const piece = side === "above" ? pieces.at(-1) : pieces[0];
  return piece === undefined ? NaN : pieceLevel(piece, Math.min(Math.max(hz, piece.from), piece.to));
}

/** Level of one piece at a frequency within it, dB. */
export function pieceLevel(piece: LimitPiece, hz: number): number {
  if (piece.slope === 0) return piece.level;
  return piece.level + piece.slope * (piece.scale === "log" ? Math.log(hz / piece.origin) : hz - piece.origin);
}

/** The pieces of a limit that touch a band, in ascending order, cut to it. Pieces share their end points: at a step both hold. */
export function limitPieces(limit: Limit, band: Band): readonly LimitPiece[] {
  if (typeof limit !== "number") return slopedPieces(limit, band);
  return [{ from: band[0], to: band[1], level: limit, origin: band[0], slope: 0, scale: "linear" }];
}

function slopedPieces(limit: SlopedLimit, band: Band): LimitPiece[] {
  const pieces: LimitPiece[] = [];
  const { points, scale } = limit;
  points.forEach(([from, level], index) => {
    const [to, nextLevel] = points[index + 1] ?? [from, level];
    const isLastPoint = index === points.length - 1;
    if (isLastPoint && index > 0 && points[index - 1]?.[0] !== from) return;
    if (isBelow(to, band[0]) || isBelow(band[1], from)) return;
    const width = scale === "log" ? Math.log(to / from) : to - from;
    const slope = width > 0 ? (nextLevel - level) / width : 0;
    const cut = { from: Math.max(from, Math.min(band[0], to)), to: Math.min(to, Math.max(band[1], from)) };
    pieces.push({ ...cut, level, origin: from, slope, scale });
  });
  return pieces;
}

/** @throws RangeError if the limit is not finite, its points descend, or the band reaches beyond them */
export function checkLimit(limit: Limit, band: Band, name: string): void {
  if (typeof limit === "number") {
    if (!Number.isFinite(limit)) throw new RangeError(`${name}: the limit must be a finite number, got ${limit}`);
    return;
  }
  checkPoints(limit, name);
  const [first = NaN] = limit.points[0] ?? [];
  const [last = NaN] = limit.points.at(-1) ?? [];
  if (isBelow(band[0], first) || isBelow(last, band[1])) {
    throw new RangeError(`${name}: the band ${band[0]} to ${band[1]} Hz reaches beyond the limit's points`);
  }
}

function checkPoints(limit: SlopedLimit, name: string): void {
  const { points, scale } = limit;
  if (!["linear", "log"].includes(scale)) throw new RangeError(`${name}: unknown scale ${scale}`);
  if (points.length === 0) throw new RangeError(`${name}: a sloped limit needs points`);
  points.forEach(([hz, level], index) => {
    if (!Number.isFinite(hz) || !Number.isFinite(level) || hz < 0 || (scale === "log" && hz === 0)) {
      throw new RangeError(`${name}: point ${index + 1} of the limit, ${hz} Hz ${level} dB, is not usable`);
    }
    if (hz < (points[index - 1]?.[0] ?? 0)) throw new RangeError(`${name}: the limit's points must ascend`);
    if (hz === points[index - 2]?.[0]) throw new RangeError(`${name}: three limit points at ${hz} Hz`);
  });
}

/** True where the two frequencies of a band are one: a spot requirement. */
export function isSpot(band: Band): boolean {
  return sameFrequency(band[0], band[1]);
}
