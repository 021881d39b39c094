// The rows of numbers as read, one set a frequency, with the checks every version shares: room and rising frequency.

import type { LineCursor } from "./touchstone-lines.ts";

/** Numbers kept a set: frequency in Hz and at most four pairs. */
export const SET_STRIDE = 9;

/** Bytes; shorter sets only mean that room is made again. */
const TYPICAL_SET_BYTES = 80;

/** Lines in a row that were not plain, after which the file is taken to be of another shape. */
const PATIENCE = 8;

export class SetStore {
  /** SET_STRIDE numbers a set; the first `count` sets are valid. */
  rows: Float64Array;
  /** Line where each set begins. */
  lines: Uint32Array;
  /** Sets kept: repeated ones are dropped. */
  count = 0;
  /** Sets in the file, repeated ones too. */
  written = 0;
  private readonly cursor: LineCursor;
  private misses = 0;
  private readonly size: number;
  private readonly maxPoints: number;

  /** @param size numbers in a set of this file, 7 or 9 */
  constructor(cursor: LineCursor, size: number, maxPoints: number) {
    this.cursor = cursor;
    this.size = size;
    this.maxPoints = maxPoints;
    const capacity = Math.max(1, Math.min(maxPoints, Math.ceil(cursor.remaining / TYPICAL_SET_BYTES)));
    this.rows = new Float64Array(SET_STRIDE * capacity);
    this.lines = new Uint32Array(capacity);
  }

  /** Where the next set's numbers go; one place beyond the set may be written to. */
  reserve(): number {
    if (this.count >= this.lines.length) this.grow();
    return this.count * SET_STRIDE;
  }

  /**
   * Takes all sets that stand on one plain line each, from the cursor on.
   *
   * @param shift power of ten from the file's frequency unit to Hz
   * @returns whether there was one
   */
  takePlain(shift: number): boolean {
    if (this.misses >= PATIENCE) return false;
    const { cursor, rows, count, size } = this;
    const room = Math.min(this.lines.length, this.maxPoints) - count;
    if (room <= 0) return false;
    const { line } = cursor;
    const base = count * SET_STRIDE;
    const taken = cursor.readPlainRows(size, shift, this.lastFrequency(), rows, base, SET_STRIDE, room);
    this.misses = taken > 0 ? 0 : this.misses + 1;
    for (let k = 0; k < taken; k += 1) this.lines[count + k] = line + k;
    this.count += taken;
    this.written += taken;
    return taken > 0;
  }

  lastFrequency(): number {
    return this.count > 0 ? (this.rows[(this.count - 1) * SET_STRIDE] as number) : -Infinity;
  }

  /**
   * Takes the set just written at `reserve()`.
   *
   * @throws TouchstoneError frequency-negative, frequency-order, frequency-repeated, too-many-points
   */
  finish(line: number): void {
    const base = this.count * SET_STRIDE;
    const frequency = this.rows[base] as number;
    const last = this.lastFrequency();
    this.written += 1;
    if (!(frequency > last && frequency >= 0)) {
      this.checkFrequency(base, frequency, last, line);
      return;
    }
    if (this.count >= this.maxPoints) {
      const limit = this.maxPoints.toLocaleString("en-GB");
      throw this.cursor.fail("too-many-points", `More than ${limit} points. Export fewer.`, line);
    }
    this.lines[this.count] = line;
    this.count += 1;
  }

  /** Returns only if the set repeats the one before. */
  private checkFrequency(base: number, frequency: number, last: number, line: number): void {
    if (frequency < 0) {
      throw this.cursor.fail("frequency-negative", `The frequency is ${frequency} Hz. It must not be negative.`, line);
    }
    if (frequency < last) {
      const message = `The frequency falls from ${last} Hz to ${frequency} Hz. Export the points in rising order.`;
      throw this.cursor.fail("frequency-order", message, line);
    }
    for (let k = 1; k < this.size; k += 1) {
      if (this.rows[base + k] !== this.rows[base - SET_STRIDE + k]) {
        const message = `${frequency} Hz stands twice with different numbers. Keep the right one.`;
        throw this.cursor.fail("frequency-repeated", message, line);
      }
    }
    this.cursor.notes.add("repeated-frequency", line, frequency);
  }

  private grow(): void {
    const rows = new Float64Array(this.rows.length * 2);
    rows.set(this.rows);
    this.rows = rows;
    const lines = new Uint32Array(this.lines.length * 2);
    lines.set(this.lines);
    this.lines = lines;
  }
}
