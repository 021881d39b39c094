// Unwrapping without angles gives what unwrapping by angles gives, to the bit, whatever part of the sweep is asked for first.
import fc from "fast-check";
import { expect, test } from "vitest";
import { UnwrappedPhase } from "~/rf/unwrapped-phase";

const DEGREES = 180 / Math.PI;

/** The definition: each sample's phase, turned by whole turns until it lies within half a turn of the one before. */
function unwrappedByAngles(re: Float64Array, im: Float64Array): Float64Array {
  let previous = NaN;
  return re.map((real, index) => {
    const imaginary = im[index] as number;
    if (real === 0 && imaginary === 0) return NaN;
    const wrapped = Math.atan2(imaginary, real) * DEGREES;
    const step = Number.isNaN(previous) ? 0 : (previous - wrapped) / 360;
    previous = wrapped + 360 * (Math.abs(step) <= 0.5 ? 0 : Math.round(step));
    return previous;
  });
}

/** Steps of every size, some of exactly half a turn, zeros, samples on the axes, tiny and huge ones. */
const sample = fc.oneof(
  { weight: 8, arbitrary: fc.tuple(fc.double({ min: -200, max: 200, noNaN: true }), fc.constant(1)) },
  { weight: 2, arbitrary: fc.tuple(fc.constantFrom(180, -180, 90, -90, 179.9999999, 0), fc.constant(1)) },
  {
    weight: 1,
    arbitrary: fc.tuple(fc.double({ min: -200, max: 200, noNaN: true }), fc.constantFrom(1e-200, 1e200, 0)),
  },
);

function traceOf(samples: readonly (readonly [number, number])[]): {
  re: Float64Array<ArrayBuffer>;
  im: Float64Array<ArrayBuffer>;
} {
  const re = new Float64Array(samples.length);
  const im = new Float64Array(samples.length);
  let degrees = 0;
  samples.forEach(([step, size], index) => {
    degrees += step;
    const isOnAxis = degrees % 90 === 0;
    re[index] = size * (isOnAxis ? Math.round(Math.cos(degrees / DEGREES)) : Math.cos(degrees / DEGREES));
    im[index] = size * (isOnAxis ? Math.round(Math.sin(degrees / DEGREES)) : Math.sin(degrees / DEGREES));
  });
  return { re, im };
}

test("the phase of any sweep is that of the definition, part by part and as a whole", () => {
  fc.assert(
    fc.property(fc.array(sample, { minLength: 1, maxLength: 300 }), fc.nat(299), fc.nat(299), (samples, one, other) => {
      const { re, im } = traceOf(samples);
      const wanted = unwrappedByAngles(re, im);
      const first = Math.min(one, other, re.length - 1);
      const last = Math.min(Math.max(one, other), re.length - 1);
      const phase = new UnwrappedPhase({ re, im });
      expect(phase.within(first, last).slice(first, last + 1)).toEqual(wanted.slice(first, last + 1));
      expect(phase.whole()).toEqual(wanted);
    }),
    { numRuns: 2_000 },
  );
});

test("a long line of many turns keeps count: 40,000 samples of a quarter turn less a degree fall by 89 degrees each", () => {
  const points = 40_000;
  const { re, im } = traceOf(Array.from({ length: points }, () => [-89, 1] as const));
  const phase = new UnwrappedPhase({ re, im }).within(points - 2, points - 1);
  expect((phase[points - 1] as number) - (phase[points - 2] as number)).toBeCloseTo(-89, 6);
  expect(phase[points - 1]).toBeCloseTo(-89 * points, 4);
});
