// Special functions of statistics: the gamma function's logarithm, the incomplete beta ratio, the normal distribution.
import { bracketedRoot } from "./bracketed-root.ts";

const HALF_LOG_TWO_PI = 0.5 * Math.log(2 * Math.PI);
/** 1/12, −1/360 … of Stirling's series. */
const STIRLING = [1 / 12, -1 / 360, 1 / 1260, -1 / 1680, 1 / 1188, -691 / 360360, 1 / 156];
const STIRLING_FROM = 12;

/**
 * ln Γ(x) for x > 0: Stirling's series from 12 on, by the recurrence Γ(x + 1) = x Γ(x) below.
 *
 * @see Abramowitz & Stegun, Handbook of Mathematical Functions, 1964, 6.1.41 and 6.1.15
 */
export function logGamma(x: number): number {
  let shift = 0;
  let z = x;
  for (; z < STIRLING_FROM; z += 1) shift -= Math.log(z);
  const series = STIRLING.reduceRight((sum, term) => sum / z ** 2 + term, 0) / z;
  return shift + (z - 0.5) * Math.log(z) - z + HALF_LOG_TWO_PI + series;
}

/**
 * The regularised incomplete beta function I_x(a, b), by its continued fraction (modified Lentz), on the side of the mean
 * where that converges fast.
 *
 * @param x 0 to 1
 * @param a positive, as is `b`
 * @see Abramowitz & Stegun 26.5.8; NIST Digital Library of Mathematical Functions 8.17.22
 */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const logFront = logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x);
  return (Math.exp(logFront) / a) * betaFraction(x, a, b);
}

const TINY = 1e-300;
const MOST_TERMS = 100_000;

function betaFraction(x: number, a: number, b: number): number {
  const apart = (value: number) => (Math.abs(value) < TINY ? TINY : value);
  let c = 1;
  let d = 1 / apart(1 - ((a + b) * x) / (a + 1));
  let fraction = d;
  for (let m = 1; m <= MOST_TERMS; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    let change = 1;
    for (const coefficient of [even, odd]) {
      d = 1 / apart(1 + coefficient * d);
      c = apart(1 + coefficient / c);
      change = c * d;
      fraction *= change;
    }
    if (Math.abs(change - 1) < Number.EPSILON) break;
  }
  return fraction;
}

/** Where the series of the error function gives way to the continued fraction. */
const SERIES_TO = 2.5;

/**
 * Φ(z), the standard normal distribution: the error function's series of positive terms near zero, its continued fraction
 * in the tails.
 *
 * @see Abramowitz & Stegun 7.1.6 and 7.1.14
 */
export function normalCdf(z: number): number {
  const x = Math.abs(z) / Math.SQRT2;
  const upper = x < SERIES_TO ? 0.5 - erfSeries(x) / 2 : erfcFraction(x) / 2;
  return z < 0 ? upper : 1 - upper;
}

/** 2/√π e^(−x²) Σ 2ⁿ x^(2n+1) / (1 · 3 ⋯ (2n + 1)). */
function erfSeries(x: number): number {
  let term = x;
  let sum = x;
  for (let n = 1; term > sum * 1e-17; n += 1) {
    term *= (2 * x * x) / (2 * n + 1);
    sum += term;
  }
  return (2 / Math.sqrt(Math.PI)) * Math.exp(-x * x) * sum;
}

/** e^(−x²)/√π · 1/(x + (1/2)/(x + 1/(x + (3/2)/(x + ⋯)))), from the innermost term outwards. */
function erfcFraction(x: number): number {
  let fraction = x;
  for (let n = 60; n >= 1; n -= 1) fraction = x + n / 2 / fraction;
  return Math.exp(-x * x) / Math.sqrt(Math.PI) / fraction;
}

/** Where quantiles are looked for: Φ(−38), 3e-316, is about the least share a double holds. */
const FARTHEST = 38;

/** z with Φ(z) = p, by bracketed root finding. @throws RangeError unless 0 < p < 1 */
export function normalQuantile(p: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`a probability between 0 and 1 was expected, got ${p}`);
  // From the lesser tail, which has all its digits.
  if (p > 0.5) return -normalQuantile(1 - p);
  return bracketedRoot((z) => normalCdf(z) - p, -FARTHEST, 0);
}
