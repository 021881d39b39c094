// A root of a continuous function between two places where its signs differ.

const MOST_STEPS = 200;

/**
 * Brent's method: inverse quadratic interpolation and secants, kept inside the bracket by bisection.
 *
 * @param tolerance distance from the root at which the search ends, in the argument's unit
 * @returns a place within `tolerance` of a root, or of the last digit of the argument
 * @throws RangeError if the function has the same sign at both ends, or is NaN at one
 * @see R. P. Brent, Algorithms for Minimization without Derivatives, Prentice-Hall, 1973, chapter 4
 */
export function bracketedRoot(of: (x: number) => number, from: number, to: number, tolerance = 0): number {
  let previous = from;
  let best = to;
  let previousValue = of(previous);
  let bestValue = of(best);
  // By their signs: the product of two small figures can underflow to zero.
  if (!(Math.sign(previousValue) * Math.sign(bestValue) <= 0))
    throw new RangeError(`no change of sign between ${from} and ${to}`);
  let opposite = previous;
  let oppositeValue = previousValue;
  let step = best - previous;
  let stepBefore = step;
  for (let count = 0; count < MOST_STEPS; count += 1) {
    if (bestValue > 0 === oppositeValue > 0) {
      opposite = previous;
      oppositeValue = previousValue;
      step = stepBefore = best - previous;
    }
    if (Math.abs(oppositeValue) < Math.abs(bestValue)) {
      [previous, best, opposite] = [best, opposite, best];
      [previousValue, bestValue, oppositeValue] = [bestValue, oppositeValue, bestValue];
    }
    const least = 2 * Number.EPSILON * Math.abs(best) + tolerance / 2;
    const half = (opposite - best) / 2;
    if (Math.abs(half) <= least || bestValue === 0) return best;
    const proposed = interpolatedStep([previous, best, opposite], [previousValue, bestValue, oppositeValue]);
    const isUseful =
      Math.abs(stepBefore) >= least &&
      Math.abs(previousValue) > Math.abs(bestValue) &&
      proposed * Math.sign(half) > 0 &&
      Math.abs(proposed) < Math.min(1.5 * Math.abs(half) - least / 2, Math.abs(stepBefore) / 2);
    stepBefore = isUseful ? step : half;
    step = isUseful ? proposed : half;
    previous = best;
    previousValue = bestValue;
    best += Math.abs(step) > least ? step : Math.sign(half) * least;
    bestValue = of(best);
  }
  return best;
}

type Three = readonly [previous: number, best: number, opposite: number];

/** From the best place to where the inverse parabola through three places, or the secant through two, meets zero. */
function interpolatedStep([previous, best, opposite]: Three, [atPrevious, atBest, atOpposite]: Three): number {
  const ratio = atBest / atPrevious;
  if (previous === opposite) return ((opposite - best) * ratio) / (ratio - 1);
  const q = atPrevious / atOpposite;
  const r = atBest / atOpposite;
  const numerator = ratio * ((opposite - best) * q * (q - r) - (best - previous) * (r - 1));
  return -numerator / ((q - 1) * (r - 1) * (ratio - 1));
}
