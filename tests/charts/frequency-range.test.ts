// Proves how far the frequency axis reaches, its ticks, and how a window is zoomed.
import { expect, test } from "vitest";
import { frequencyTicks, fullRange, passbandWindow } from "~/charts/frequency-range";
import { wallsFromRequirements } from "~/charts/walls";
import { keepWithin, zoomAbout, zoomTo } from "~/charts/zoom";

const walls = wallsFromRequirements([
  { id: "a", lineNumber: "2.1", kind: "insertion-loss", band: [1.92e9, 1.98e9], max: 0.95 },
  { id: "b", lineNumber: "3.1", kind: "rejection", band: [1.76e9, 1.87e9], min: 55 },
  { id: "c", lineNumber: "3.2", kind: "rejection", band: [2.04e9, 2.14e9], min: 55 },
]);

test("the axis reaches from the outermost wall to the outermost wall, and beyond where a curve does", () => {
  expect(fullRange(walls)).toEqual([1.76e9, 2.14e9]);
  const trace = {
    id: "t",
    label: "S21",
    parameter: "s21",
    emphasis: "worst",
    frequency: [1e9, 3e9],
    level: [80, 80],
  } as const;
  expect(fullRange(walls, [trace])).toEqual([1e9, 3e9]);
  expect(fullRange([])).toBeUndefined();
});

test("a passband alone has half its width free on either side", () => {
  expect(fullRange(walls.slice(0, 1))).toEqual([1.89e9, 2.01e9]);
});

test("the passband window has one passband width free on either side", () => {
  expect(passbandWindow(walls, [1.76e9, 2.14e9])).toEqual([1.86e9, 2.04e9]);
  expect(passbandWindow(walls.slice(1), [1.76e9, 2.14e9])).toBeUndefined();
});

test("1.76 to 2.14 GHz over 780 px is ticked every 0.05 GHz with two decimals", () => {
  const { unit, ticks } = frequencyTicks([1.76e9, 2.14e9], 780);
  expect(unit.name).toBe("GHz");
  expect(ticks.map((tick) => tick.label)).toEqual(["1.80", "1.85", "1.90", "1.95", "2.00", "2.05", "2.10"]);
});

test("frequency ticks stand 70 px apart or more, and no step of 1, 2 or 5 would be closer to that", () => {
  for (const range of [
    [0, 6e9],
    [9e3, 150e6],
    [433.05e6, 434.79e6],
    [1.9e9, 1.9001e9],
  ] as const) {
    for (const width of [334, 780, 1100]) {
      const { ticks } = frequencyTicks(range, width);
      const step = (ticks[1]?.frequency ?? 0) - (ticks[0]?.frequency ?? 0);
      const spacing = (step / (range[1] - range[0])) * width;
      expect(spacing).toBeGreaterThanOrEqual(70 - 1e-6);
      expect(spacing).toBeLessThan(70 * 2.5);
      expect(new Set(ticks.map((tick) => tick.label)).size).toBe(ticks.length);
    }
  }
});

test("a zoom keeps the frequency under the pointer where it is, and all is shown once it spans all", () => {
  const window = zoomAbout([0, 100], 25, 0.5, [0, 100]);
  expect(window).toEqual([12.5, 62.5]);
  expect(zoomAbout([10, 90], 50, 2, [0, 100])).toBeUndefined();
  expect(zoomTo(60, 20, [0, 100])).toEqual([20, 60]);
});

test("a window never leaves the full range and never vanishes", () => {
  expect(keepWithin([-10, 20], [0, 100])).toEqual([0, 30]);
  expect(keepWithin([90, 120], [0, 100])).toEqual([70, 100]);
  const least = keepWithin([50, 50], [0, 100]);
  expect((least?.[1] ?? 0) - (least?.[0] ?? 0)).toBeCloseTo(0.01, 9);
});
