// Reads one decimal number from bytes to the very double that the written decimal is nearest to.

import { longQuotient, POWERS_OF_TEN } from "./touchstone-quotient.ts";

const PLUS = 43;
const MINUS = 45;
const POINT_AFTER_ZERO = 46 - 48;
const ZERO = 48;
const LOWER_CASE = 32;
const LETTER_D = 100;
const LETTER_E = 101;
const TWO_POW_53 = 9007199254740992;
/** Digits kept in each of two 32-bit integers. */
const HALF_DIGITS = 9;
const ALL_DIGITS = 18;
const LARGEST_EXACT_POWER = 22;
/** Characters; the longest exact decimal of a double has fewer than 800. */
const LONGEST_NUMBER = 1000;

/** 1 for the bytes that may follow a number: blank, tab, line ends, comment, separator. */
const ENDS_NUMBER = new Uint8Array(256);
for (const character of " \t\r\n!,;") ENDS_NUMBER[character.charCodeAt(0)] = 1;

/** What `scan` returns instead of a position. */
export const NOT_A_NUMBER = -1;
export const OUT_OF_RANGE = -2;

export class NumberScanner {
  /** How many numbers had D for E so far. */
  fortranExponents = 0;
  private readonly bytes: Uint8Array;

  /** @param bytes must end with a line end */
  constructor(bytes: Uint8Array) {
    this.bytes = bytes;
  }

  /**
   * Reads the number at `start`, times ten to the `exponentShift`, into `out[index]`. Ten's power is added to the written
   * exponent, so that 1.1 GHz is the double nearest to 1100000000 and not a rounded product.
   *
   * Up to 53 bits of digits times or over a power of ten up to 1e22 are both exact, so one operation rounds once
   * (W. D. Clinger, How to read floating point numbers accurately, PLDI 1990); up to 18 digits go through `longQuotient`,
   * all else through `Number`.
   *
   * @returns the position after the number, or NOT_A_NUMBER or OUT_OF_RANGE
   */
  scan(start: number, exponentShift: number, out: Float64Array, index: number): number {
    const bytes = this.bytes;
    let at = start;
    const sign = bytes[at] as number;
    if (sign === MINUS || sign === PLUS) at += 1;
    const digitsStart = at;
    let high = 0;
    let low = 0;
    let significant = 0;
    let scale = exponentShift;
    let exact = true;
    let digit = (bytes[at] as number) - ZERO;
    while (digit >= 0 && digit <= 9) {
      if (significant < HALF_DIGITS) {
        high = high * 10 + digit;
        if (high !== 0) significant += 1;
      } else if (significant < ALL_DIGITS) {
        low = low * 10 + digit;
        significant += 1;
      } else {
        scale += 1;
        if (digit !== 0) exact = false;
      }
      digit = (bytes[++at] as number) - ZERO;
    }
    let digits = at - digitsStart;
    if (digit === POINT_AFTER_ZERO) {
      const fractionStart = ++at;
      digit = (bytes[at] as number) - ZERO;
      while (digit >= 0 && digit <= 9) {
        if (significant < HALF_DIGITS) {
          high = high * 10 + digit;
          if (high !== 0) significant += 1;
          scale -= 1;
        } else if (significant < ALL_DIGITS) {
          low = low * 10 + digit;
          significant += 1;
          scale -= 1;
        } else if (digit !== 0) exact = false;
        digit = (bytes[++at] as number) - ZERO;
      }
      digits += at - fractionStart;
    }
    if (digits === 0) return NOT_A_NUMBER;
    const digitsEnd = at;
    let exponent = 0;
    const letter = (digit + ZERO) | LOWER_CASE;
    if (letter === LETTER_E || letter === LETTER_D) {
      at += 1;
      const exponentSign = bytes[at] as number;
      if (exponentSign === MINUS || exponentSign === PLUS) at += 1;
      const exponentStart = at;
      digit = (bytes[at] as number) - ZERO;
      while (digit >= 0 && digit <= 9) {
        if (exponent < 100_000_000) exponent = exponent * 10 + digit;
        digit = (bytes[++at] as number) - ZERO;
      }
      if (at === exponentStart) return NOT_A_NUMBER;
      if (exponentSign === MINUS) exponent = -exponent;
      if (letter === LETTER_D) this.fortranExponents += 1;
    }
    if (ENDS_NUMBER[bytes[at] as number] === 0 || at - start > LONGEST_NUMBER) return NOT_A_NUMBER;
    scale += exponent;
    const lowPower = significant > HALF_DIGITS ? (POWERS_OF_TEN[significant - HALF_DIGITS] as number) : 1;
    const mantissa = high * lowPower + low;
    let value = NaN;
    if (exact && mantissa < TWO_POW_53 && scale >= -LARGEST_EXACT_POWER && scale <= LARGEST_EXACT_POWER) {
      value = scale < 0 ? mantissa / (POWERS_OF_TEN[-scale] as number) : mantissa * (POWERS_OF_TEN[scale] as number);
    } else if (exact && scale <= 0) {
      value = longQuotient(high, lowPower, low, -scale);
    }
    if (Number.isNaN(value)) {
      value = Number(`${this.text(digitsStart, digitsEnd)}e${exponent + exponentShift}`);
      if (value === Infinity) return OUT_OF_RANGE;
    }
    out[index] = sign === MINUS ? -value : value;
    return at;
  }

  private text(start: number, end: number): string {
    let text = "";
    for (let at = start; at < end; at += 1) text += String.fromCharCode(this.bytes[at] as number);
    return text;
  }
}
