// The noncentral t distribution: what the exact one-sided tolerance factors of a normal sample come from.
import { incompleteBeta, logGamma, normalCdf } from "./special-functions.ts";

/** Beyond it exp(−δ²/2) underflows, with which the series begins. */
const SERIES_TO = 37;
const SERIES_ERROR = 1e-14;
const MOST_TERMS = 20_000;

/**
 * P(T <= t) of T = (Z + δ)/√(V/ν), Z standard normal and V chi-squared with ν degrees of freedom, independent.
 *
 * Lenth's series while |δ| <= 37; beyond, where its first weight exp(−δ²/2) underflows, quadrature of the definition. Absolute error under
 * 1e-10 for ν from 1 to 2,000 and |δ| up to 200.
 *
 * @param degrees ν, positive
 * @param noncentrality δ
 * @throws RangeError if ν is not positive or a figure is NaN
 * @see R. V. Lenth, Algorithm AS 243, Applied Statistics 38(1), 1989, pp. 185-189
 */
export function noncentralTCdf(t: number, degrees: number, noncentrality: number): number {
  if (!(degrees > 0) || Number.isNaN(t + noncentrality)) {
    throw new RangeError(`no noncentral t for t ${t}, ${degrees} degrees of freedom, noncentrality ${noncentrality}`);
  }
  if (Math.abs(noncentrality) > SERIES_TO) return byQuadrature(t, degrees, noncentrality);
  // P(T <= t; δ) = 1 − P(T <= −t; −δ).
  const probability = t < 0 ? 1 - bySeries(-t, degrees, -noncentrality) : bySeries(t, degrees, noncentrality);
  return Math.min(1, Math.max(0, probability));
}

/**
 * Φ(−δ) + ½ Σ (p_j I_x(j + ½, ν/2) + q_j I_x(j + 1, ν/2)) with x = t²/(t² + ν), for t >= 0: Poisson weights, incomplete beta ratios by
 * recurrence, until what is left of the weights cannot matter.
 */
function bySeries(t: number, degrees: number, noncentrality: number): number {
  const x = (t * t) / (t * t + degrees);
  const below = normalCdf(-noncentrality);
  if (x === 0) return below;
  const halfSquare = noncentrality ** 2 / 2;
  const b = degrees / 2;
  const logRest = b * Math.log(degrees / (t * t + degrees)); // of (1 − x)^b, without cancellation near 1
  let p = 0.5 * Math.exp(-halfSquare);
  let q = Math.sqrt(2 / Math.PI) * p * noncentrality;
  let left = 0.5 - p;
  let odd = incompleteBeta(x, 0.5, b);
  let even = -Math.expm1(logRest);
  let oddStep = (2 * Math.exp(0.5 * Math.log(x) + logRest + logGamma(b + 0.5) - logGamma(b))) / Math.sqrt(Math.PI);
  let evenStep = b * x * Math.exp(logRest);
  let sum = p * odd + q * even;
  for (let j = 1; j <= MOST_TERMS && 2 * left * (odd - oddStep) > SERIES_ERROR; j += 1) {
    odd -= oddStep;
    even -= evenStep;
    oddStep *= (x * (j + b - 0.5)) / (j + 0.5);
    evenStep *= (x * (j + b)) / (j + 1);
    p *= halfSquare / j;
    q *= halfSquare / (j + 0.5);
    left -= p;
    sum += p * odd + q * even;
  }
  return below + sum;
}

/**
 * E Φ(tW − δ) with W = √(V/ν): the trapezoidal rule over u = ln W. The density of u is proportional to exp(νu − νe^(2u)/2), has its mode at 0 and a width of
 * 1/√(2ν); Φ rises within 1/|δ| where tW = δ. The integrand is analytic and dies out at both ends, so that the rule converges exponentially
 * once its step is a fraction of either width.
 *
 * @see L. N. Trefethen, J. A. C. Weideman, The Exponentially Convergent Trapezoidal Rule, SIAM Review 56(3), 2014
 */
function byQuadrature(t: number, degrees: number, noncentrality: number): number {
  const width = 1 / Math.sqrt(2 * degrees);
  const step = Math.min(width, 1 / Math.abs(noncentrality), 0.3) / 4;
  const from = -10 * width - 40 / degrees;
  const count = Math.ceil((10 * width - from) / step);
  const b = degrees / 2;
  const logScale = Math.LN2 + b * Math.log(b) - logGamma(b);
  let sum = 0;
  for (let index = 0; index <= count; index += 1) {
    const u = from + index * step;
    const density = Math.exp(logScale + degrees * u - b * Math.exp(2 * u));
    if (density > 0) sum += density * normalCdf(t * Math.exp(u) - noncentrality);
  }
  return Math.min(1, sum * step);
}
