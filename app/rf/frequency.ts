// Frequencies: comparison within 1e-9 relative, and the place of a frequency on a grid.
import type { Band, Series } from "./contract.ts";

const RELATIVE_TOLERANCE = 1e-9;

/** Frequencies within 1e-9 relative are one. */
export function sameFrequency(a: number, b: number): boolean {
  return Math.abs(a - b) <= RELATIVE_TOLERANCE * Math.max(Math.abs(a), Math.abs(b));
}

/** True where a lies below b by more than the tolerance. */
export function isBelow(a: number, b: number): boolean {
  return b - a > RELATIVE_TOLERANCE * Math.max(Math.abs(a), Math.abs(b));
}

/** Index of the first sample at or above a frequency; the number of samples if none is. */
export function firstAtOrAbove(frequency: Series, hz: number): number {
  let low = 0;
  let high = frequency.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if ((frequency[middle] as number) < hz) low = middle + 1;
    else high = middle;
  }
  return low;
}

/**
 * Place of a frequency on an ascending grid.
 *
 * @returns `exact`: the index of the nearest sample that is the same frequency; otherwise the index of the sample above
 */
export function locate(frequency: Series, hz: number): { readonly index: number; readonly exact: boolean } {
  const above = firstAtOrAbove(frequency, hz);
  const isAbove = above < frequency.length && sameFrequency(frequency[above] as number, hz);
  const isBelowIt = above > 0 && sameFrequency(frequency[above - 1] as number, hz);
  if (!isAbove && !isBelowIt) return { index: above, exact: false };
  if (!isBelowIt) return { index: above, exact: true };
  const isNearer = isAbove && (frequency[above] as number) - hz < hz - (frequency[above - 1] as number);
  return { index: isNearer ? above : above - 1, exact: true };
}

/** The band from the first to the last sample, Hz. */
export function bandOf(frequency: Series): Band {
  return [frequency[0] as number, frequency[frequency.length - 1] as number];
}
