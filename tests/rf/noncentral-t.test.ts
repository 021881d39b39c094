// The noncentral t distribution and the functions under it, against scipy, live, and by identities that hold exactly.
import { beforeAll, expect, test } from "vitest";
import { bracketedRoot } from "~/rf/bracketed-root";
import { noncentralTCdf } from "~/rf/noncentral-t";
import { toleranceFactor } from "~/rf/production-outlook";
import { incompleteBeta, logGamma, normalCdf, normalQuantile } from "~/rf/special-functions";
import { runPython } from "../support/python";

const UNITS = [2, 3, 4, 5, 7, 10, 20, 43, 75, 76, 100, 300, 1000];
const SHARES = [1e-6, 1e-4, 0.01, 0.3, 0.5, 0.9, 0.95, 0.99, 0.999, 0.99999, 0.999999];
const DEVIATIONS = [-8, -3, -1.6, -0.5, 0, 0.5, 1.6, 3, 8, 20];

/** Of every number of units and share: arguments around the middle of the distribution and far into both tails. */
const NONCENTRAL = UNITS.flatMap((units) =>
  SHARES.flatMap((share) => {
    const noncentrality = normalQuantile(share) * Math.sqrt(units);
    const width = Math.sqrt(1 + noncentrality ** 2 / (2 * (units - 1)));
    return DEVIATIONS.map((step) => [noncentrality + step * width, units - 1, noncentrality] as const);
  }),
);
// scipy's quantile search itself fails for few units and shares far below one half.
const FACTORS = UNITS.filter((units) => units >= 3).flatMap((units) =>
  SHARES.filter((share) => share >= 0.3).flatMap((share) =>
    [0.5, 0.9, 0.95, 0.99].map((confidence) => [units, share, confidence] as const),
  ),
);
const LOG_GAMMA = [0.01, 0.5, 1.5, 2.5, 7, 11.9, 12, 30, 499.5, 1e4];
const BETA = [1e-6, 0.01, 0.3, 0.5, 0.7, 0.99, 0.999999].flatMap((x) =>
  [0.5, 1, 10, 300].flatMap((a) => [0.5, 1, 3, 499.5].map((b) => [x, a, b] as const)),
);
const NORMAL = Array.from({ length: 150 }, (_, index) => (index - 75) / 2);
const QUANTILE = [1e-300, 1e-10, 1e-4, 0.2, 0.5, 0.8, 0.99999, 1 - 1e-12];

interface Figures {
  readonly noncentral: readonly number[];
  readonly factors: readonly number[];
  readonly log_gamma: readonly number[];
  readonly beta: readonly number[];
  readonly normal: readonly number[];
  readonly quantile: readonly number[];
}
let scipy: Figures;

beforeAll(() => {
  scipy = runPython("noncentral_t.py", [], {
    noncentral: NONCENTRAL,
    factors: FACTORS,
    log_gamma: LOG_GAMMA,
    beta: BETA,
    normal: NORMAL,
    quantile: QUANTILE,
  }) as Figures;
});

/** Largest difference, relative to the figure where that is greater than one. */
const largest = (found: readonly number[], wanted: readonly number[]): number => {
  expect(found).toHaveLength(wanted.length);
  return Math.max(
    ...found.map((figure, index) => {
      const other = wanted[index] ?? NaN;
      return Math.abs(figure - other) / Math.max(1, Math.abs(other));
    }),
  );
};

test("the noncentral t distribution is scipy's within 1e-10, from 2 to 1,000 units and noncentralities from -150 to 150", () => {
  const found = NONCENTRAL.map(([t, degrees, noncentrality]) => noncentralTCdf(t, degrees, noncentrality));
  const difference = largest(found, scipy.noncentral);
  console.log(`${found.length} figures, largest difference ${difference.toExponential(1)}`);
  expect(difference).toBeLessThan(1e-10);
  expect(Math.max(...NONCENTRAL.map(([, , noncentrality]) => noncentrality))).toBeGreaterThan(149);
  // Neither all nothing nor all certain.
  expect(scipy.noncentral.filter((figure) => figure > 0.01 && figure < 0.99).length).toBeGreaterThan(500);
});

test("series and quadrature meet: the distribution does not step where one gives way to the other", () => {
  for (const degrees of [2, 9, 99, 999])
    for (const sign of [-1, 1])
      for (const t of [30, 36, 37, 38, 45].map((figure) => sign * figure)) {
        const [inside, outside] = [36.9999999, 37.0000001].map((size) => noncentralTCdf(t, degrees, sign * size));
        expect(Math.abs((inside ?? NaN) - (outside ?? NaN))).toBeLessThan(2e-7);
      }
});

test("without noncentrality it is Student's t, and at zero it is the normal distribution of the noncentrality", () => {
  // One degree of freedom is the Cauchy distribution: 1/2 + atan(t)/π.
  for (const t of [-20, -1, 0.3, 5]) expect(noncentralTCdf(t, 1, 0)).toBeCloseTo(0.5 + Math.atan(t) / Math.PI, 12);
  for (const noncentrality of [-3, 0, 2, 60])
    expect(noncentralTCdf(0, 7, noncentrality)).toBeCloseTo(normalCdf(-noncentrality), 12);
});

test("no degrees of freedom and no number are refused", () => {
  for (const degrees of [0, -1, NaN]) expect(() => noncentralTCdf(1, degrees, 1)).toThrow(RangeError);
  expect(() => noncentralTCdf(NaN, 3, 1)).toThrow(RangeError);
});

test("exact tolerance factors are those of scipy's quantile within 1e-8", () => {
  const found = FACTORS.map(([units, share, confidence]) => toleranceFactor(units, share, confidence));
  expect(largest(found, scipy.factors)).toBeLessThan(1e-8);
  for (const [units, share, confidence] of [
    [1, 0.9, 0.95],
    [3, 1, 0.95],
    [3, 0.9, 1],
  ] as const)
    expect(() => toleranceFactor(units, share, confidence)).toThrow(RangeError);
});

test("the gamma, beta and normal functions are scipy's", () => {
  expect(largest(LOG_GAMMA.map(logGamma), scipy.log_gamma)).toBeLessThan(1e-13);
  expect(
    largest(
      BETA.map(([x, a, b]) => incompleteBeta(x, a, b)),
      scipy.beta,
    ),
  ).toBeLessThan(1e-12);
  // By their ratio: a tail counts as much as the middle.
  const ratios = NORMAL.map((z, index) => normalCdf(z) / (scipy.normal[index] ?? NaN));
  expect(
    largest(
      ratios,
      ratios.map(() => 1),
    ),
  ).toBeLessThan(1e-12);
  expect(largest(QUANTILE.map(normalQuantile), scipy.quantile)).toBeLessThan(1e-12);
  for (const share of [0, 1, -0.1, NaN]) expect(() => normalQuantile(share)).toThrow(RangeError);
});

test("a bracketed root is found to the last digits, also where the function is flat or steps, and none is claimed without a change of sign", () => {
  // By hand: √2, 1, 0 and the step itself.
  expect(bracketedRoot((x) => x * x - 2, 0, 2)).toBeCloseTo(Math.SQRT2, 14);
  expect(bracketedRoot((x) => (x - 1) ** 9, -3, 2.5)).toBeCloseTo(1, 1);
  expect(bracketedRoot((x) => Math.atan(1e6 * x), -1, 3)).toBeCloseTo(0, 14);
  expect(bracketedRoot((x) => (x < 0.3 ? -1 : 1), 0, 1)).toBeCloseTo(0.3, 12);
  expect(() => bracketedRoot((x) => x * x + 1, -1, 1)).toThrow(RangeError);
  expect(() => bracketedRoot(() => NaN, -1, 1)).toThrow(RangeError);
});

test("two figures of one sign are no bracket, however small they are", () => {
  // Their product, 1e-400, is zero in double precision.
  expect(() => bracketedRoot((x) => 1e-200 * (1 + x * x), 0, 1)).toThrow(RangeError);
  expect(bracketedRoot((x) => 1e-200 * (x - 0.25), 0, 1)).toBeCloseTo(0.25, 12);
});
