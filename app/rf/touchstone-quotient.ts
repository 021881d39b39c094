// A decimal of up to 18 digits over a power of ten, rounded once: arithmetic with twice the digits of a double.

/** The doubles nearest to 10^0 … 10^60, and what is missing from them: exact up to 10^22, then within 2^-106. */
const LARGEST_POWER = 60;
const POWERS = Array.from({ length: LARGEST_POWER + 1 }, (_, power) => 10n ** BigInt(power));
export const POWERS_OF_TEN = Float64Array.from(POWERS, Number);
const MISSING = Float64Array.from(POWERS, (power) => Number(power - BigInt(Number(power))));

/** 2^27 + 1: splits a double into halves whose products are exact (T. J. Dekker, Numerische Mathematik 18, 1971). */
const SPLITTER = 134217729;
/** The error of the second term is below 2^-103 of the quotient; this is eight times more. */
const DOUBT = 2 ** -100;

/** What rounding took from the product a b. */
function productError(a: number, b: number, product: number): number {
  const splitA = SPLITTER * a;
  const highA = splitA - (splitA - a);
  const lowA = a - highA;
  const splitB = SPLITTER * b;
  const highB = splitB - (splitB - b);
  const lowB = b - highB;
  return lowA * lowB - (product - highA * highB - lowA * highB - highA * lowB);
}

/**
 * The double nearest to (high lowPower + low) / 10^power.
 *
 * The quotient is taken twice, the second time of the first one's remainder; the sum of both is right unless it lies so near
 * the middle of two doubles that the second term's own error could decide.
 *
 * @param high, low whole numbers below 1e9
 * @param lowPower a power of ten up to 1e9
 * @returns NaN if that is undecided, or the power is beyond 60
 */
export function longQuotient(high: number, lowPower: number, low: number, power: number): number {
  if (power > LARGEST_POWER) return NaN;
  // Exact: of the product only high 5^9 needs bits, and that is below 2^53. So is the sum's error, for product >= low.
  const product = high * lowPower;
  const sum = product + low;
  const rest = low - (sum - product);
  const divisor = POWERS_OF_TEN[power] as number;
  const quotient = sum / divisor;
  const back = quotient * divisor;
  const remainder = sum - back - productError(quotient, divisor, back);
  const second = (remainder + rest - quotient * (MISSING[power] as number)) / divisor;
  const doubt = quotient * DOUBT;
  const value = quotient + (second + doubt);
  return value === quotient + (second - doubt) ? value : NaN;
}
