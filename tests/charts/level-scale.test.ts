// Proves the level axis: where the stretched part ends, that it joins without a gap, and where its ticks stand.
import { expect, test } from "vitest";
import {
  breakLevelFor,
  createLevelScale,
  roundedBottom,
  STRETCHED_SHARE,
  stretchesByDefault,
} from "~/charts/level-scale";

test("the stretched part ends at twice the largest loss limit, rounded up to 1, 2, 3 or 5 dB or their tenfold", () => {
  const ends = [0.3, 0.5, 0.95, 1, 1.2, 1.5, 2, 2.5, 3, 9].map(breakLevelFor);
  expect(ends).toEqual([1, 1, 2, 2, 3, 3, 5, 5, 10, 20]);
});

test("a drawing is stretched by itself where a loss limit is under a tenth of the range", () => {
  expect(stretchesByDefault([0.95], 90)).toBe(true);
  expect(stretchesByDefault([9], 90)).toBe(false);
  expect(stretchesByDefault([], 90)).toBe(false);
});

test("the stretched scale gives 36 % of the panel to the passband part and joins there without a gap", () => {
  const scale = createLevelScale(90, [40, 443], 2);
  expect(scale.toPixel(0)).toBeCloseTo(40, 9);
  expect(scale.toPixel(2)).toBeCloseTo(40 + STRETCHED_SHARE * 403, 9);
  expect(scale.toPixel(90)).toBeCloseTo(443, 9);
  expect(scale.toPixel(2 + 1e-9) - scale.toPixel(2 - 1e-9)).toBeLessThan(1e-6);
  // By hand: 1 dB lies half way down the stretched part, 46 dB half way down the rest.
  expect(scale.toPixel(1)).toBeCloseTo(40 + 0.18 * 403, 9);
  expect(scale.toPixel(46)).toBeCloseTo(40 + 0.68 * 403, 9);
});

test("a pixel read back is the level it was drawn for, on both sides of the break", () => {
  const scale = createLevelScale(90, [40, 443], 2);
  for (const level of [0, 0.4, 1.999, 2, 2.001, 30, 89])
    expect(scale.toLevel(scale.toPixel(level))).toBeCloseTo(level, 9);
});

test("the drawing of a 0.95 dB passband over 55 dB stopbands is ticked 0, 1, 2, then every 15 dB to 90", () => {
  expect(createLevelScale(90, [40, 443], 2).ticks.map((tick) => tick.label)).toEqual([
    "0",
    "1",
    "2",
    "15",
    "30",
    "45",
    "60",
    "75",
    "90",
  ]);
});

test("level ticks stand 36 px apart or more and have equal decimals, at any height and range", () => {
  for (const height of [100, 172, 256, 403, 700]) {
    for (const [bottom, breakLevel] of [
      [90, 2],
      [90, 5],
      [60, 3],
      [120, undefined],
      [30, undefined],
      [3, undefined],
      [0.8, undefined],
    ] as const) {
      const { ticks, toPixel } = createLevelScale(bottom, [0, height], breakLevel);
      const pixels = ticks.map((tick) => toPixel(tick.level));
      const gaps = pixels.slice(1).map((pixel, index) => pixel - (pixels[index] ?? 0));
      expect(Math.min(...gaps), `${height} px, ${bottom} dB`).toBeGreaterThanOrEqual(36);
      expect(new Set(ticks.map((tick) => tick.label.split(".")[1]?.length ?? 0)).size).toBe(1);
    }
  }
});

test("the lower end of a panel is a tick at or beyond the level asked", () => {
  expect(roundedBottom(83, 258)).toBe(90);
  expect(roundedBottom(60, 403)).toBe(60);
  const bottom = roundedBottom(88, 164);
  expect(createLevelScale(bottom, [0, 256], 2).ticks.at(-1)?.level).toBe(bottom);
});

test("a null is drawn just beyond the panel, not at infinity", () => {
  expect(createLevelScale(90, [40, 443], 2).toPixel(Infinity)).toBe(483);
});
