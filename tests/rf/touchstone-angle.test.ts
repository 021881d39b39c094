// Cosine and sine of a written angle: exact at whole quarter turns, elsewhere within a rounding of the true ones.
import fc from "fast-check";
import { expect, test } from "vitest";
import { turnIntoParts } from "~/rf/touchstone-angle";

function partsOf(magnitude: number, degrees: number): [re: number, im: number] {
  const re = Float64Array.of(magnitude);
  const im = Float64Array.of(degrees);
  turnIntoParts(re, im, 0, 1);
  return [re[0] as number, im[0] as number];
}

test("whole quarter turns are exact, and minus half a turn keeps its sign", () => {
  expect(partsOf(2, 0)).toEqual([2, 0]);
  expect(partsOf(2, 90)).toEqual([0, 2]);
  expect(partsOf(2, 180)).toEqual([-2, 0]);
  expect(partsOf(2, 270)).toEqual([0, -2]);
  expect(partsOf(2, -90)).toEqual([0, -2]);
  const [re, im] = partsOf(2, -180);
  expect([re, Object.is(im, -0)]).toEqual([-2, true]);
  expect((Math.atan2(im, re) * 180) / Math.PI).toBe(-180);
});

test("angles between steps of the table agree with the engine's own functions to the rounding of the angle in radians", () => {
  fc.assert(
    fc.property(fc.double({ min: -720, max: 720, noNaN: true }), (degrees) => {
      const radians = (degrees * Math.PI) / 180;
      // The engine is handed an angle that was rounded three times (pi, product, quotient); then each result is rounded.
      const allowed = 3 * 2 ** -53 * Math.abs(radians) + 2 ** -52;
      const [re, im] = partsOf(1, degrees);
      expect(Math.abs(re - Math.cos(radians))).toBeLessThan(allowed);
      expect(Math.abs(im - Math.sin(radians))).toBeLessThan(allowed);
    }),
    { numRuns: 20_000 },
  );
});

test("the sine of small angles and the cosine beside a quarter turn keep all their digits", () => {
  // By the series: sin x = x - x³/6 for a small x; 1e-6 degrees leave the second term below 1e-16 of the first.
  const small = (1e-6 * Math.PI) / 180;
  expect(partsOf(1, 1e-6)[1] / small - 1).toBeCloseTo(0, 14);
  const beside = 90 + 2 ** -20;
  expect(partsOf(1, beside)[0] / ((-(2 ** -20) * Math.PI) / 180) - 1).toBeCloseTo(0, 14);
});

test("an angle of many turns is taken as written, whole turns exactly", () => {
  expect(partsOf(1, 360 * 1e9 + 90)).toEqual([0, 1]);
  expect(partsOf(1, -360 * 1e9 - 30)[1]).toBeCloseTo(-0.5, 15);
});
