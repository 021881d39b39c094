// Sliding windows: what is visited holds the worst of all windows, by the definition applied window by window.
import fc from "fast-check";
import { expect, test } from "vitest";
import type { Band } from "~/rf/contract";
import { segmentsWithin, valueBetween } from "~/rf/coverage";
import { readingsOf } from "~/rf/readings";
import { forEachWindow, spreadOf } from "~/rf/spread";

/** Largest less least of one window: its samples, and its edges interpolated where they do not lie in a hole. */
function spreadBetween(
  frequency: Float64Array<ArrayBuffer>,
  values: Float64Array<ArrayBuffer>,
  from: number,
  to: number,
) {
  const within = [...values].filter((value, k) => {
    const hz = frequency[k] as number;
    return hz >= from - 1e-9 * from && hz <= to + 1e-9 * to && !Number.isNaN(value);
  });
  for (const edge of [from, to]) {
    const above = frequency.findIndex((hz) => hz >= edge);
    if (above > 0 && frequency[above] !== edge) within.push(valueBetween(frequency, values, above - 1, edge));
  }
  const present = within.filter((value) => !Number.isNaN(value));
  return present.length === 0 ? NaN : spreadOf({ largest: Math.max(...present), least: Math.min(...present) });
}

const sweep = fc.array(
  fc.tuple(fc.integer({ min: 1, max: 40 }), fc.double({ min: 0, max: 3, noNaN: true }), fc.nat(9)),
  {
    minLength: 2,
    maxLength: 60,
  },
);
const share = fc.integer({ min: 0, max: 1000 }).map((part) => part / 1000);

test("the widest window visited is the widest of all, with holes wherever they lie", () => {
  let compared = 0;
  fc.assert(
    fc.property(sweep, share, share, share, fc.array(share, { maxLength: 40 }), (steps, one, other, part, tried) => {
      let hz = 1000;
      const frequency = Float64Array.from(steps, ([step]) => (hz += step));
      // One sample in ten is absent.
      const values = Float64Array.from(steps, ([, value, chance]) => (chance === 0 ? NaN : value));
      const [first, last] = [frequency[0] as number, frequency.at(-1) as number];
      const at = (place: number) => first + (last - first) * place;
      const band: Band = [at(Math.min(one, other)), at(Math.max(one, other))];
      const window = (band[1] - band[0]) * part;
      const segments = segmentsWithin(frequency, values, band);
      if (segments.length === 0 || !(window > 1)) return;

      let widest = -Infinity;
      forEachWindow(
        readingsOf(frequency, values, (value) => [value, value], true),
        segments,
        band,
        window,
        (extent) => {
          widest = Math.max(widest, spreadOf(extent));
        },
      );
      const lastStart = band[1] - window;
      const starts = [band[0], lastStart, ...frequency, ...frequency.map((edge) => edge - window)];
      for (const start of [...starts, ...tried.map((place) => band[0] + (lastStart - band[0]) * place)]) {
        if (start < band[0] || start > lastStart) continue;
        const spread = spreadBetween(frequency, values, start, start + window);
        if (Number.isNaN(spread)) continue;
        expect(widest).toBeGreaterThanOrEqual(spread - 1e-9);
        compared += 1;
      }
      expect(widest).toBeLessThanOrEqual(spreadBetween(frequency, values, band[0], band[1]) + 1e-9);
    }),
    { numRuns: 2_000 },
  );
  expect(compared).toBeGreaterThan(5_000);
});

test("a window that ends with the band reads its end, though start and width add up to a rounding more", () => {
  const frequency = Float64Array.of(1001, 1140, 1158, 1162, 1239);
  const values = Float64Array.of(NaN, 0, 1, NaN, NaN);
  const band: Band = [1001, 1001 + 238 * 0.645];
  const window = (band[1] - band[0]) * 0.453;
  expect(band[1] - window + window).toBeGreaterThan(band[1]);
  let widest = -Infinity;
  const readings = readingsOf(frequency, values, (value) => [value, value], true);
  forEachWindow(readings, segmentsWithin(frequency, values, band), band, window, (extent) => {
    widest = Math.max(widest, spreadOf(extent));
  });
  // By hand: (1154.51 - 1140) / 18 of the way from 0 to 1 dB.
  expect(widest).toBeCloseTo((band[1] - 1140) / 18, 9);
});

test("a window behind a long hole is visited, though the band begins many samples before it", () => {
  const frequency = Float64Array.from({ length: 40 }, (_, k) => 1000 + k);
  const values = Float64Array.from({ length: 40 }, (_, k) => (k < 38 ? NaN : k - 37));
  const band: Band = [1000, 1039];
  const spreads: number[] = [];
  const segments = segmentsWithin(frequency, values, band);
  forEachWindow(
    readingsOf(frequency, values, (value) => [value, value], true),
    segments,
    band,
    5,
    (extent) => {
      spreads.push(spreadOf(extent));
    },
  );
  expect(Math.max(...spreads)).toBe(1);
});
