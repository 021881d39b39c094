// Decimation for drawing: two points a column at most, extremes and ends kept, in order.
import fc from "fast-check";
import { expect, test } from "vitest";
import { decimate } from "~/rf/decimate";

const series = (values: readonly number[]) => Float64Array.from(values);

test("each column keeps its least and largest value in the order they occur", () => {
  const frequency = series([0, 1, 2, 3, 4, 5, 6, 7]);
  const value = series([5, 9, 1, 4, 4, 0, 8, 2]);
  // Two columns: samples 0 to 3 with extremes 9 and 1, samples 4 to 6 with 0 and 8; the ends 5 and 2 besides.
  const { x, y } = decimate(frequency, value, 2);
  expect([...x]).toEqual([0, 1, 2, 5, 6, 7]);
  expect([...y]).toEqual([5, 9, 1, 0, 8, 2]);
});

test("a curve with fewer samples than columns is kept whole", () => {
  const { x, y } = decimate(series([1, 2, 4]), series([3, 2, 1]), 100);
  expect([...x]).toEqual([1, 2, 4]);
  expect([...y]).toEqual([3, 2, 1]);
});

test("a range keeps one neighbour on each side, so that the line runs to the edges", () => {
  const frequency = series([0, 1, 2, 3, 4, 5]);
  expect([...decimate(frequency, frequency, 100, [1.5, 3.5]).x]).toEqual([1, 2, 3, 4]);
  expect([...decimate(frequency, frequency, 100, [2, 3]).x]).toEqual([2, 3]);
  expect([...decimate(frequency, frequency, 100, [2.2, 2.8]).x]).toEqual([2, 3]);
  expect([...decimate(frequency, frequency, 100, [-3, 9]).x]).toEqual([0, 1, 2, 3, 4, 5]);
});

test("an infinite value is large and finite, an absent one is left out", () => {
  const { x, y } = decimate(series([0, 1, 2, 3]), series([NaN, Infinity, 2, -Infinity]), 10);
  expect([...x]).toEqual([1, 2, 3]);
  expect([...y]).toEqual([1e6, 2, -1e6]);
  expect(decimate(series([0]), series([NaN]), 10).x).toHaveLength(0);
  expect(decimate(series([]), series([]), 10).x).toHaveLength(0);
});

test("one column or more is needed", () => {
  expect(() => decimate(series([0]), series([0]), 0)).toThrow(RangeError);
});

test("any curve keeps its extremes and ends, ascends and stays within two points a column", () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 1, maxLength: 300 }),
      fc.integer({ min: 1, max: 40 }),
      (values, columns) => {
        const frequency = series(values.map((_, index) => 1e9 + index * 1e6));
        const { x, y } = decimate(frequency, series(values), columns);
        expect(x.length).toBeLessThanOrEqual(Math.min(values.length, 2 * (columns + 1) + 2));
        expect(Math.max(...y)).toBe(Math.max(...values));
        expect(Math.min(...y)).toBe(Math.min(...values));
        expect(x[0]).toBe(frequency[0]);
        expect(x.at(-1)).toBe(frequency.at(-1));
        expect([...x].every((hz, index) => index === 0 || hz > (x[index - 1] as number))).toBe(true);
        expect([...y].every((level, index) => level === values[Math.round(((x[index] as number) - 1e9) / 1e6)])).toBe(
          true,
        );
      },
    ),
  );
});
