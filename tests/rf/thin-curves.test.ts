// Thinning of several curves on one grid and of loci: what is kept, and how far what is left out may lie.
import fc from "fast-check";
import { expect, test } from "vitest";
import { extremeSamples, locusSamples } from "~/rf/thin-curves";

const series = (values: readonly number[]) => Float64Array.from(values);
const values = fc.array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 1, maxLength: 300 });

test("the least and largest of every curve are kept whatever the width, and never more than three a column and curve", () => {
  fc.assert(
    fc.property(values, values, fc.integer({ min: 1, max: 40 }), (one, two, columns) => {
      const points = Math.min(one.length, two.length);
      const frequency = Float64Array.from({ length: points }, (_, index) => 1e9 + index * 1e6);
      const curves = [series(one.slice(0, points)), series(two.slice(0, points))];
      const kept = extremeSamples(frequency, curves, columns);
      expect(kept).toEqual([...new Set(kept)].sort((a, b) => a - b));
      expect(kept[0]).toBe(0);
      expect(kept.at(-1)).toBe(points - 1);
      expect(kept.length).toBeLessThanOrEqual(columns * 6 + 2);
      for (const curve of curves) {
        const shown = kept.map((index) => curve[index] ?? NaN);
        expect(Math.min(...shown)).toBe(Math.min(...curve));
        expect(Math.max(...shown)).toBe(Math.max(...curve));
      }
    }),
  );
});

test("a sample without value is kept where one lies, so that the line breaks there", () => {
  const frequency = Float64Array.from({ length: 100 }, (_, index) => index);
  const curve = frequency.map((hz) => (hz === 50 ? NaN : 1));
  expect(extremeSamples(frequency, [curve], 4)).toContain(50);
});

test("a window keeps one neighbour on either side of it", () => {
  const frequency = Float64Array.from({ length: 100 }, (_, index) => index);
  const kept = extremeSamples(frequency, [frequency], 1000, [20.5, 30.5]);
  expect(kept).toEqual([20, 21, 22, 23, 24, 25, 26, 27, 28, 29, 30, 31]);
});

test("every sample of a locus left out lies nearer than the distance to one that is kept", () => {
  fc.assert(
    fc.property(values, values, (one, two) => {
      const points = Math.min(one.length, two.length);
      const locus = { re: series(one.slice(0, points)), im: series(two.slice(0, points)) };
      const kept = locusSamples(locus, { distance: 5, most: 1000 });
      for (let index = 0; index < points; index += 1) {
        const nearest = Math.min(
          ...kept.map((at) =>
            Math.hypot(
              (locus.re[at] ?? NaN) - (locus.re[index] ?? NaN),
              (locus.im[at] ?? NaN) - (locus.im[index] ?? NaN),
            ),
          ),
        );
        expect(nearest).toBeLessThan(5);
      }
    }),
  );
});

test("a long locus is thinned to the number asked for; wanted samples and both ends stay", () => {
  const points = 20_000;
  const angle = Float64Array.from({ length: points }, (_, index) => index / 50);
  const locus = { re: angle.map(Math.cos), im: angle.map(Math.sin) };
  const kept = locusSamples(locus, { distance: 1e-6, most: 500, wanted: [777, 12_345] });
  expect(kept.length).toBeLessThanOrEqual(502);
  for (const index of [0, 777, 12_345, points - 1]) expect(kept).toContain(index);
});
