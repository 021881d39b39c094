// Exact decimal money: strings in, strings out, never a binary float.
import { Decimal } from "decimal.js";

/** More digits than any product of a DECIMAL(18,4) price and a quantity: sums and products below are exact. */
const Exact = Decimal.clone({ precision: 100, rounding: Decimal.ROUND_HALF_UP, toExpNeg: -100, toExpPos: 100 });

const AMOUNT = /^-?\d{1,30}(\.\d{1,12})?$/;

/** Whether a text is an amount as stored: digits, one decimal point, no marks, no exponent. */
export const isAmount = (text: string): boolean => AMOUNT.test(text);

function read(amount: string): Decimal {
  if (!isAmount(amount)) throw new RangeError(`“${amount}” is not a decimal amount`);
  return new Exact(amount);
}

/** The amount with every digit it has and none it does not need: "1234.5000" becomes "1234.5". */
const exact = (value: Decimal): string => (value.isZero() ? "0" : value.toFixed());

/** @throws RangeError for what is not a decimal amount, as all functions here do */
export const printExact = (amount: string): string => exact(read(amount));

export const add = (...amounts: readonly string[]): string =>
  exact(amounts.reduce((sum, amount) => sum.plus(read(amount)), new Exact(0)));

export const subtract = (from: string, amount: string): string => exact(read(from).minus(read(amount)));

/** An amount times a whole quantity or another decimal, exact. */
export const multiply = (amount: string, factor: number | string): string => {
  if (typeof factor === "number" && !Number.isSafeInteger(factor)) {
    throw new RangeError(`${factor} is not a whole number: give a decimal as text`);
  }
  return exact(read(amount).times(read(String(factor))));
};

/** −1, 0 or 1 as `a` is below, equal to or above `b`. */
export const compare = (a: string, b: string): -1 | 0 | 1 => {
  const sign = read(a).comparedTo(read(b));
  return sign < 0 ? -1 : sign > 0 ? 1 : 0;
};

/** Rounded half up (a half goes away from zero) to a fixed number of decimals, without marks: "1234.50". */
export const formatAmount = (amount: string, decimals = 2): string =>
  read(amount)
    .toFixed(decimals, Decimal.ROUND_HALF_UP)
    .replace(/^-(?=0(\.0*)?$)/, "");
