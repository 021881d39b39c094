// The quick way through plain rows: whole sets on one line of plain decimals, which nearly all files consist of.

import type { NumberScanner } from "./touchstone-number.ts";
import { POWERS_OF_TEN } from "./touchstone-quotient.ts";

const TAB = 9;
const NEWLINE = 10;
const RETURN = 13;
const SPACE = 32;
const PLUS = 43;
const MINUS = 45;
const POINT = 46;
const ZERO = 48;
const LOWER_CASE = 32;
const LETTER_E = 101;
/** Digits that always fit in the 53 bits of a double, so that one operation with a power of ten rounds once. */
const EXACT_DIGITS = 15;
const LARGEST_EXACT_POWER = 22;
/** Bytes that one quick number looks at, at most: below this many before the end the careful scanner reads. */
const LOOK_AHEAD = 64;
/** Four bytes at once: what is left of "0000", and what shows a byte above 9. */
const FOUR_ZEROS = 0x30303030;
const FOUR_SIXES = 0x06060606;
const HIGH_NIBBLES = 0xf0f0f0f0 | 0;

/** By first byte: whether it is a sign, and what it multiplies the number with. */
const SIGN_LENGTH = new Uint8Array(256);
SIGN_LENGTH[PLUS] = 1;
SIGN_LENGTH[MINUS] = 1;
const SIGN_FACTOR = new Float64Array(256).fill(1);
SIGN_FACTOR[MINUS] = -1;

/** The value of four digits less "0000", the first one in the lowest byte. */
function valueOf(word: number): number {
  const pairs = word * 10 + (word >>> 8);
  return (pairs & 255) * 100 + ((pairs >>> 16) & 255);
}

/** Which of four bytes less "0000" are above 9: right up to the first of them, 0 if all are digits. */
function othersIn(word: number): number {
  return (word | (word + FOUR_SIXES)) & HIGH_NIBBLES;
}

/** How many digits stand before the first other byte. */
function digitsBefore(others: number): number {
  return (31 - Math.clz32(others & -others)) >> 3;
}

export class RowScanner {
  /** Position after the last row taken. */
  at = 0;
  private readonly bytes: Uint8Array;
  private readonly words: DataView;
  private readonly numbers: NumberScanner;

  /** @param bytes must end with a line end */
  constructor(bytes: Uint8Array, numbers: NumberScanner) {
    this.bytes = bytes;
    this.words = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
    this.numbers = numbers;
  }

  /**
   * Takes rows of `size` numbers, blanks between them, with rising frequency. Stops before the first row that has
   * anything else: a comment, a separator, another count, a wrong number; the caller reads that one with care.
   *
   * Four digits are read at once (D. Lemire, "Number parsing at a gigabyte per second", 2021, section 4, with words of
   * 32 bits); up to 15 digits over or times an exact power of ten give the nearest double, all else goes through `scan`.
   *
   * @param start of the first row
   * @param shift power of ten that multiplies the frequency
   * @param last frequency before the first row, Hz
   * @param rows `stride` places a row, the first row at `base`
   * @param room how many rows at most
   * @returns how many rows were taken
   */
  take(
    start: number,
    size: number,
    shift: number,
    last: number,
    rows: Float64Array,
    base: number,
    stride: number,
    room: number,
  ): number {
    const { bytes, words, numbers } = this;
    const quickEnd = bytes.length - LOOK_AHEAD;
    let at = start;
    let rowStart = start;
    let previous = last;
    let taken = 0;
    rows: while (taken < room && at < bytes.length) {
      const rowBase = base + taken * stride;
      for (let column = 0; column < size; column += 1) {
        let byte = bytes[at] as number;
        while (byte === SPACE || byte === TAB) byte = bytes[++at] as number;
        const power = column === 0 ? shift : 0;
        const numberStart = at;
        if (at < quickEnd) {
          const factor = SIGN_FACTOR[byte] as number;
          at += SIGN_LENGTH[byte] as number;
          const wholeStart = at;
          // Digits before the point, then behind it; a full word goes on, the last one is shifted so that zeros lead.
          let word = words.getInt32(at, true) ^ FOUR_ZEROS;
          let others = othersIn(word);
          let mantissa = 0;
          while (others === 0 && at - wholeStart < EXACT_DIGITS) {
            mantissa = mantissa * 10000 + valueOf(word);
            at += 4;
            word = words.getInt32(at, true) ^ FOUR_ZEROS;
            others = othersIn(word);
          }
          let rest = digitsBefore(others);
          word = (word << 8) << (24 - 8 * rest);
          mantissa = mantissa * (POWERS_OF_TEN[rest & 3] as number) + valueOf(word);
          at += rest;
          let digits = at - wholeStart;
          let scale = power;
          byte = bytes[at] as number;
          if (byte === POINT) {
            const fractionStart = ++at;
            word = words.getInt32(at, true) ^ FOUR_ZEROS;
            others = othersIn(word);
            while (others === 0 && at - fractionStart < EXACT_DIGITS) {
              mantissa = mantissa * 10000 + valueOf(word);
              at += 4;
              word = words.getInt32(at, true) ^ FOUR_ZEROS;
              others = othersIn(word);
            }
            rest = digitsBefore(others);
            word = (word << 8) << (24 - 8 * rest);
            mantissa = mantissa * (POWERS_OF_TEN[rest & 3] as number) + valueOf(word);
            at += rest;
            scale -= at - fractionStart;
            digits += at - fractionStart;
            byte = bytes[at] as number;
          }
          if ((byte | LOWER_CASE) === LETTER_E) {
            const exponentSign = bytes[++at] as number;
            at += SIGN_LENGTH[exponentSign] as number;
            const exponentStart = at;
            let exponent = 0;
            let digit = (bytes[at] as number) - ZERO;
            while (digit >= 0 && digit <= 9 && at - exponentStart < 4) {
              exponent = exponent * 10 + digit;
              digit = (bytes[++at] as number) - ZERO;
            }
            if (at === exponentStart) break rows;
            scale += exponentSign === MINUS ? -exponent : exponent;
            byte = bytes[at] as number;
          }
          if (
            (byte === SPACE || byte === NEWLINE || byte === RETURN || byte === TAB) &&
            digits > 0 &&
            digits <= EXACT_DIGITS &&
            scale >= -LARGEST_EXACT_POWER &&
            scale <= LARGEST_EXACT_POWER
          ) {
            rows[rowBase + column] =
              factor *
              (scale < 0 ? mantissa / (POWERS_OF_TEN[-scale] as number) : mantissa * (POWERS_OF_TEN[scale] as number));
            continue;
          }
        }
        at = numbers.scan(numberStart, power, rows, rowBase + column);
        if (at < 0) break rows;
      }
      while (bytes[at] === SPACE || bytes[at] === TAB) at += 1;
      if (bytes[at] === RETURN) at += 1;
      const frequency = rows[rowBase] as number;
      if (bytes[at] !== NEWLINE || numbers.fortranExponents > 0 || !(frequency > previous && frequency >= 0)) break;
      previous = frequency;
      at += 1;
      rowStart = at;
      taken += 1;
    }
    numbers.fortranExponents = 0;
    this.at = rowStart;
    return taken;
  }
}
