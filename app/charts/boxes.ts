// Small geometry of placing: boxes, how wide a text is, and how far curves reach in each column.
import type { Box } from "./layout";

/** px per column of an envelope. */
export const ENVELOPE_COLUMN = 4;

/** Advance of the text face at 1 px size by kind of character, rounded up a little from its glyphs. */
const ADVANCES: readonly (readonly [pattern: RegExp, width: number])[] = [
  [/[ \u00a0]/, 0.2],
  [/[.,:;ijlI']/, 0.28],
  [/[frt()°]/, 0.4],
  [/[mwMW]/, 0.88],
  [/[0-9]/, 0.62],
  [/[A-Z]/, 0.68],
];
const OTHER_ADVANCE = 0.57;

/** Width of a text in px: the server has no font to ask. */
export function estimateTextWidth(text: string, size: number, weight = 400): number {
  let units = 0;
  for (const character of text) {
    units += ADVANCES.find(([pattern]) => pattern.test(character))?.[1] ?? OTHER_ADVANCE;
  }
  return units * size * (1 + (weight - 400) / 8000);
}

/** Whether two boxes come closer than `clearance` px. */
export function overlaps(one: Box, other: Box, clearance = 0): boolean {
  return (
    one.left < other.right + clearance &&
    other.left < one.right + clearance &&
    one.top < other.bottom + clearance &&
    other.top < one.bottom + clearance
  );
}

export function contains(outer: Box, inner: Box): boolean {
  return (
    inner.left >= outer.left && inner.right <= outer.right && inner.top >= outer.top && inner.bottom <= outer.bottom
  );
}

/** How far a curve or an area reaches up and down in each 4 px column; an empty column reaches nowhere. */
export interface Envelope {
  readonly top: readonly number[];
  readonly bottom: readonly number[];
}

/** Envelope of a polyline in px, segments included. */
export function envelopeOf(points: readonly { readonly x: number; readonly y: number }[], width: number): Envelope {
  const columns = Math.ceil(width / ENVELOPE_COLUMN) + 1;
  const top = new Array<number>(columns).fill(Infinity);
  const bottom = new Array<number>(columns).fill(-Infinity);
  const reach = (column: number, y: number) => {
    if (column < 0 || column >= columns) return;
    top[column] = Math.min(top[column] ?? Infinity, y);
    bottom[column] = Math.max(bottom[column] ?? -Infinity, y);
  };
  for (const [index, point] of points.entries()) {
    if (!Number.isFinite(point.y)) continue;
    reach(Math.floor(point.x / ENVELOPE_COLUMN), point.y);
    const before = points[index - 1];
    if (!before || !Number.isFinite(before.y)) continue;
    const from = Math.floor(Math.min(before.x, point.x) / ENVELOPE_COLUMN);
    const to = Math.floor(Math.max(before.x, point.x) / ENVELOPE_COLUMN);
    for (let column = Math.max(from, 0); column < Math.min(to, columns); column += 1) {
      const part = ((column + 1) * ENVELOPE_COLUMN - before.x) / (point.x - before.x);
      const y = before.y + (point.y - before.y) * part;
      reach(column, y);
      reach(column + 1, y);
    }
  }
  return { top, bottom };
}

/** Whether a box comes closer than `clearance` px, up or down, to what an envelope covers. */
export function meetsEnvelope(box: Box, envelope: Envelope, clearance: number): boolean {
  const from = Math.max(0, Math.floor((box.left - clearance) / ENVELOPE_COLUMN));
  const to = Math.min(envelope.top.length - 1, Math.floor((box.right + clearance) / ENVELOPE_COLUMN));
  for (let column = from; column <= to; column += 1) {
    const top = envelope.top[column] ?? Infinity;
    const bottom = envelope.bottom[column] ?? -Infinity;
    if (top < box.bottom + clearance && bottom > box.top - clearance) return true;
  }
  return false;
}
