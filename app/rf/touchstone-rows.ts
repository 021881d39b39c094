// The quick way through plain rows: whole sets on one line of plain decimals, which nearly all files consist of.

import type { NumberScanner } from "./touchstone-number.ts";

const TAB = 9;
const NEWLINE = 10;
const RETURN = 13;
const SPACE = 32;
const PLUS = 43;
const COMMA = 44;
const POINT = 46;
const ZERO = 48;
const MINUS = 45;
const LOWER_CASE = 32;
const LETTER_E = 101;
const TWO_POW_53 = 9007199254740992;
const LARGEST_EXACT_POWER = 22;
/** Bytes that one quick number looks at, at most: below this many before the end the careful scanner reads. */
const LOOK_AHEAD = 64;
const MOST_EXPONENT_DIGITS = 4;
/** Four bytes at once: what is left of "0000", and what shows a byte above 9. */
const FOUR_ZEROS = 0x30303030;
const FOUR_SIXES = 0x06060606;
const HIGH_NIBBLES = 0xf0f0f0f0 | 0;

/** The exact powers of ten, and from place 32 on their negatives. Here and not imported: a constant of one's own is quicker. */
const NEGATIVE = 32;
const POWERS = new Float64Array(2 * NEGATIVE);
for (let power = 0; power <= LARGEST_EXACT_POWER; power += 1) {
  POWERS[power] = Number(`1e${power}`);
  POWERS[NEGATIVE + power] = -Number(`1e${power}`);
}

/** The value of four digits less "0000", the first one in the lowest byte. */
const valueOf = (word: number): number => {
  const pairs = word * 10 + (word >>> 8);
  return (pairs & 255) * 100 + ((pairs >>> 16) & 255);
};

const areDigits = (word: number): boolean => ((word | (word + FOUR_SIXES)) & HIGH_NIBBLES) === 0;

/** Rows as they are taken, column after column. */
export interface RowBlock {
  /** Numbers a row. */
  readonly size: number;
  /** Rows that have room. */
  readonly capacity: number;
  /** `capacity` numbers a column. */
  readonly numbers: Float64Array;
}

/** Where rows are read from. */
export interface RowSource {
  readonly bytes: DataView;
  /** Reads what the quick way does not. */
  readonly scanner: NumberScanner;
  at: number;
}

/**
 * Takes rows of numbers, blanks between them, with rising frequency, as far as the block has room. Stops before the first
 * row that has anything else: a comment, a separator, another count, a wrong number; the caller reads that one with care.
 *
 * Four digits are read at once (D. Lemire, "Number parsing at a gigabyte per second", 2021, section 4, with words of
 * 32 bits). A whole number below 2^53 over or times an exact power of ten gives the nearest double (W. D. Clinger, PLDI
 * 1990), and digits that add up to more never round to less than 2^53. All else goes through `scan`: more than three digits
 * before the point, more than fifteen behind it, D exponents, the last bytes of the file.
 *
 * What makes it quick: within a number hardly anything is repeated and nothing is called, for behind each loop the engine
 * looks again at what it reads from; the sign, which follows no pattern, is arithmetic and no branch; `| 0` tells that a
 * number has 32 bits, which would be checked otherwise; and this is a function of the module, for within a method the
 * module's constants are none to the engine.
 *
 * @param source its `at`, where the first row starts, is moved behind the last one taken
 * @param first place in the block of the first row
 * @param end place behind the last one that may be filled
 * @param shift power of ten that multiplies the frequency
 * @param last frequency before the first row, Hz
 * @returns how many rows were taken
 */
export function takeRows(
  source: RowSource,
  block: RowBlock,
  first: number,
  end: number,
  shift: number,
  last: number,
): number {
  const { bytes, scanner } = source;
  const { numbers, size } = block;
  const capacity = block.capacity | 0;
  const length = bytes.byteLength | 0;
  const quickEnd = length - LOOK_AHEAD;
  const width = (size * capacity) | 0;
  let at = source.at | 0;
  let rowStart = at;
  let previous = last;
  let row = first | 0;
  rows: while (row < end && at < length) {
    let power = shift | 0;
    for (let slot = row; slot < width; slot += capacity) {
      let byte = bytes.getUint8(at);
      if (byte === SPACE || byte === TAB) {
        at = (at + 1) | 0;
        byte = bytes.getUint8(at);
        while (byte === SPACE || byte === TAB) byte = bytes.getUint8(++at);
      }
      const numberStart = at;
      quick: if (at < quickEnd && byte >= PLUS && byte !== COMMA) {
        const signed = (byte - POINT) >>> 31;
        const negative = signed & (byte >> 2);
        at = (at + signed) | 0;
        let word = bytes.getInt32(at, true) ^ FOUR_ZEROS;
        let mantissa = word & 255;
        if (mantissa > 9) break quick;
        // Up to three digits before the point, all from this word.
        let next = (word >>> 8) & 255;
        at = (at + 1) | 0;
        if (next <= 9) {
          mantissa = mantissa * 10 + next;
          next = (word >>> 16) & 255;
          at = (at + 1) | 0;
          if (next <= 9) {
            mantissa = mantissa * 10 + next;
            next = word >>> 24;
            at = (at + 1) | 0;
            if (next <= 9) break quick;
          }
        }
        let scale = power;
        if (next === (POINT ^ ZERO)) {
          const fractionStart = (at + 1) | 0;
          at = fractionStart;
          word = bytes.getInt32(at, true) ^ FOUR_ZEROS;
          if (areDigits(word)) {
            mantissa = (Math.imul(mantissa, 10000) + valueOf(word)) | 0;
            at = (at + 4) | 0;
            word = bytes.getInt32(at, true) ^ FOUR_ZEROS;
            if (areDigits(word)) {
              mantissa = mantissa * 10000 + valueOf(word);
              at = (at + 4) | 0;
              word = bytes.getInt32(at, true) ^ FOUR_ZEROS;
              if (areDigits(word)) {
                mantissa = mantissa * 10000 + valueOf(word);
                at = (at + 4) | 0;
                word = bytes.getInt32(at, true) ^ FOUR_ZEROS;
              }
            }
          }
          // Up to three more.
          next = word & 255;
          if (next <= 9) {
            let tail = next;
            let tens = 10;
            next = (word >>> 8) & 255;
            at = (at + 1) | 0;
            if (next <= 9) {
              tail = tail * 10 + next;
              tens = 100;
              next = (word >>> 16) & 255;
              at = (at + 1) | 0;
              if (next <= 9) {
                tail = tail * 10 + next;
                tens = 1000;
                next = word >>> 24;
                at = (at + 1) | 0;
              }
            }
            mantissa = mantissa * tens + tail;
          }
          scale = (scale + fractionStart - at) | 0;
        }
        byte = next ^ ZERO;
        if ((byte | LOWER_CASE) === LETTER_E) {
          const exponentSign = bytes.getUint8(++at);
          if (exponentSign === MINUS || exponentSign === PLUS) at = (at + 1) | 0;
          const exponentStart = at;
          let exponent = 0;
          next = bytes.getUint8(at) ^ ZERO;
          while (next <= 9 && at - exponentStart < MOST_EXPONENT_DIGITS) {
            exponent = exponent * 10 + next;
            next = bytes.getUint8(++at) ^ ZERO;
          }
          if (at === exponentStart) break rows;
          scale += exponentSign === MINUS ? -exponent : exponent;
          byte = next ^ ZERO;
        }
        if (
          (byte === SPACE || byte === NEWLINE || byte === RETURN || byte === TAB) &&
          mantissa < TWO_POW_53 &&
          scale >= -LARGEST_EXACT_POWER &&
          scale <= LARGEST_EXACT_POWER
        ) {
          const sign = negative * NEGATIVE;
          numbers[slot] =
            scale < 0 ? mantissa / (POWERS[sign - scale] as number) : mantissa * (POWERS[sign + scale] as number);
          power = 0;
          continue;
        }
      }
      at = scanner.scan(numberStart, power, numbers, slot) | 0;
      if (at < 0) break rows;
      power = 0;
    }
    while (bytes.getUint8(at) === SPACE || bytes.getUint8(at) === TAB) at = (at + 1) | 0;
    if (bytes.getUint8(at) === RETURN) at = (at + 1) | 0;
    if (at >= length || bytes.getUint8(at) !== NEWLINE || scanner.fortranExponents > 0) break;
    const frequency = numbers[row] as number;
    if (!(frequency > previous && frequency >= 0)) break;
    previous = frequency;
    at = (at + 1) | 0;
    rowStart = at;
    row += 1;
  }
  scanner.fortranExponents = 0;
  source.at = rowStart;
  return row - first;
}
