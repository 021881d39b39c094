// The sets of numbers as read, one a frequency, with the checks every version shares: room and rising frequency.

import type { Series, Trace } from "./contract.ts";
import { newTrace, toParts } from "./touchstone-convert.ts";
import type { LineCursor } from "./touchstone-lines.ts";
import type { NumberFormat, Options } from "./touchstone-option-line.ts";
import type { RowBlock } from "./touchstone-rows.ts";

/** Sets read before they are converted: few enough to stay in the processor's nearest memory. */
const BLOCK_SETS = 512;

/** Room is made for one part in a hundred more sets than those read so far let expect. */
const SPARE = 1.01;
/** A series may stay in memory that is larger by this. */
const LARGEST_SPARE = 1.02;

/** Lines in a row that were not plain, after which the file is taken to be of another shape. */
const PATIENCE = 8;

export class SetStore {
  /** The numbers of the set that is being read with care; one place beyond it may be written to. */
  readonly set: Float64Array;
  /** Sets kept: repeated ones are dropped. */
  count = 0;
  /** Sets in the file, repeated ones too. */
  written = 0;
  private readonly cursor: LineCursor;
  private readonly shift: number;
  private readonly format: NumberFormat;
  private readonly maxPoints: number;
  /** The last sets as written, `filled` of them; behind them stand those of the block before. */
  private readonly block: RowBlock;
  private filled = 0;
  /** All sets before the block, converted, with room for more. */
  private frequency: Series = new Float64Array(0);
  private pairs: readonly Trace[];
  private last = -Infinity;
  private misses = 0;
  /** Where the sets begin in the file. */
  private start = 0;
  /** Places and lines of sets that do not stand on the line behind the one before. */
  private readonly lineBreaks: { readonly index: number; readonly line: number }[] = [];

  /** @param size numbers in a set of this file, 7 or 9 */
  constructor(cursor: LineCursor, size: number, options: Options, maxPoints: number) {
    this.cursor = cursor;
    this.shift = options.frequencyExponent;
    this.format = options.format;
    this.maxPoints = maxPoints;
    this.set = new Float64Array(size + 1);
    this.block = { size, capacity: BLOCK_SETS, numbers: new Float64Array(size * BLOCK_SETS) };
    this.pairs = Array.from({ length: (size - 1) / 2 }, () => newTrace(0));
  }

  /**
   * Takes sets that stand on one plain line each, from the cursor on, as many as the block has room for.
   *
   * @returns whether there was one
   */
  takePlain(): boolean {
    if (this.misses >= PATIENCE) return false;
    const { cursor, block } = this;
    if (this.count === 0) this.start = cursor.at;
    if (this.filled === BLOCK_SETS) this.convertBlock();
    const { line } = cursor;
    const end = Math.min(BLOCK_SETS, this.filled + this.maxPoints - this.count);
    const taken = cursor.readPlainRows(block, this.filled, end, this.shift, this.last);
    this.misses = taken > 0 ? 0 : this.misses + 1;
    if (taken === 0) return false;
    this.keep(taken, line);
    return true;
  }

  lastFrequency(): number {
    return this.last;
  }

  /** Line where a set begins. */
  lineOf(index: number): number {
    const before = this.lineBreaks.findLast((lineBreak) => lineBreak.index <= index);
    return before === undefined ? 0 : before.line + index - before.index;
  }

  /**
   * Takes the set just written to `set`.
   *
   * @throws TouchstoneError frequency-negative, frequency-order, frequency-repeated, too-many-points
   */
  finish(line: number): void {
    const frequency = this.set[0] as number;
    if (!(frequency > this.last && frequency >= 0)) {
      this.checkFrequency(frequency, line);
      this.written += 1;
      return;
    }
    if (this.count >= this.maxPoints) {
      const limit = this.maxPoints.toLocaleString("en-GB");
      throw this.cursor.fail("too-many-points", `More than ${limit} points. Export fewer.`, line);
    }
    if (this.filled === BLOCK_SETS) this.convertBlock();
    const { numbers, size, capacity } = this.block;
    for (let column = 0; column < size; column += 1) {
      numbers[column * capacity + this.filled] = this.set[column] as number;
    }
    this.keep(1, line);
  }

  /** Frequencies in Hz and the pairs as real and imaginary parts, in the file's order, one value a set. */
  series(): { readonly frequency: Series; readonly pairs: readonly Trace[] } {
    this.convertBlock();
    const { count } = this;
    return {
      frequency: cut(this.frequency, count),
      pairs: this.pairs.map(({ re, im }) => ({ re: cut(re, count), im: cut(im, count) })),
    };
  }

  /** Counts sets that were added to the block, the first one from `line`, the others from the lines behind it. */
  private keep(sets: number, line: number): void {
    if (line !== this.lineOf(this.count)) this.lineBreaks.push({ index: this.count, line });
    this.filled += sets;
    this.count += sets;
    this.written += sets;
    this.last = this.block.numbers[this.filled - 1] as number;
  }

  /** Returns only if the set repeats the one before. */
  private checkFrequency(frequency: number, line: number): void {
    if (frequency < 0) {
      throw this.cursor.fail("frequency-negative", `The frequency is ${frequency} Hz. It must not be negative.`, line);
    }
    if (frequency < this.last) {
      const message = `The frequency falls from ${this.last} Hz to ${frequency} Hz. Export the points in rising order.`;
      throw this.cursor.fail("frequency-order", message, line);
    }
    const { numbers, size, capacity } = this.block;
    const previous = (this.filled === 0 ? capacity : this.filled) - 1;
    for (let column = 1; column < size; column += 1) {
      if (this.set[column] !== numbers[column * capacity + previous]) {
        const message = `${frequency} Hz stands twice with different numbers. Keep the right one.`;
        throw this.cursor.fail("frequency-repeated", message, line);
      }
    }
    this.cursor.notes.add("repeated-frequency", line, frequency);
  }

  /** Converts the sets of the block and empties it; its numbers stay until others take their places. */
  private convertBlock(): void {
    const { block, filled, frequency, count } = this;
    const { numbers, capacity } = block;
    const from = count - filled;
    if (frequency.length < count) this.makeRoom();
    // "-0" is legal to write; adding zero makes it plain.
    for (let k = 0; k < filled; k += 1) this.frequency[from + k] = (numbers[k] as number) + 0;
    this.pairs.forEach(({ re, im }, pair) => {
      const column = (1 + 2 * pair) * capacity;
      re.set(numbers.subarray(column, column + filled), from);
      im.set(numbers.subarray(column + capacity, column + capacity + filled), from);
      toParts(re, im, from, count, this.format);
    });
    this.filled = 0;
  }

  /** Room for the sets read so far, and for those to come if they are as long. */
  private makeRoom(): void {
    const { cursor, count } = this;
    const bytesPerSet = (cursor.at - this.start) / count;
    const expected = Math.ceil((cursor.remaining / bytesPerSet) * SPARE);
    const room = Math.min(this.maxPoints, count + expected);
    this.frequency = withRoom(this.frequency, room);
    this.pairs = this.pairs.map(({ re, im }) => ({ re: withRoom(re, room), im: withRoom(im, room) }));
  }
}

/** The first values of a series; copied only if more than a little room would stay with them. */
function cut(series: Series, length: number): Series {
  if (series.length === length) return series;
  return series.length > length * LARGEST_SPARE ? series.slice(0, length) : series.subarray(0, length);
}

function withRoom(series: Series, length: number): Series {
  const longer = new Float64Array(length);
  longer.set(series);
  return longer;
}
