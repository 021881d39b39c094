// Proves how curves are cut at walls: crossings against hand calculation, nulls, steps and slopes.
import fc from "fast-check";
import { expect, test } from "vitest";
import { sliver, stretchesInside } from "~/charts/inside-wall";
import { levelOn, limitOutline, type Point } from "~/charts/limit-outline";

test("a curve that rises through a loss limit is cut where it crosses, linear in dB", () => {
  const trace: Point[] = [
    [10, 0.5],
    [20, 1.5],
    [30, 0.5],
  ];
  // By hand: 0.5 to 1.5 dB over 10 Hz passes 0.9 dB 4 Hz in, and 4 Hz before the end on the way back.
  const [stretch, ...rest] = stretchesInside(trace, limitOutline(0.9, [10, 30]), "floor");
  expect(rest).toEqual([]);
  expect(stretch?.points.map(([frequency]) => frequency)).toEqual([14, 20, 26]);
  expect(stretch?.points.map(([, level]) => level)).toEqual([0.9, 1.5, 0.9]);
});

test("a stretch ends at the wall's side when the curve is still inside, with the level interpolated there", () => {
  const trace: Point[] = [
    [0, 0],
    [10, 2],
  ];
  const [stretch] = stretchesInside(trace, limitOutline(0.5, [0, 6]), "floor");
  expect(stretch?.points[0]?.[0]).toBeCloseTo(2.5, 12);
  expect(stretch?.points.at(-1)).toEqual([6, 1.2]);
});

test("a hanging wall holds what has less than its limit, and a sloped edge is crossed where both are equal", () => {
  const trace: Point[] = [
    [0, 40],
    [10, 40],
  ];
  const outline = limitOutline(
    {
      scale: "linear",
      points: [
        [0, 30],
        [10, 50],
      ],
    },
    [0, 10],
  );
  // By hand: 30 + 2 f = 40 at f = 5; beyond it the limit asks for more than 40 dB.
  const [stretch] = stretchesInside(trace, outline, "ceiling");
  expect(stretch?.points).toEqual([
    [5, 40],
    [10, 40],
  ]);
  expect(stretch?.edge).toEqual([
    [5, 40],
    [10, 50],
  ]);
  expect(stretch && sliver(stretch)).toEqual([
    [5, 40],
    [10, 40],
    [10, 50],
    [5, 40],
  ]);
});

test("a curve on the edge is outside, to either side of the wall", () => {
  const trace: Point[] = [
    [0, 1],
    [5, 1],
    [10, 1],
  ];
  expect(stretchesInside(trace, limitOutline(1, [0, 10]), "floor")).toEqual([]);
  expect(stretchesInside(trace, limitOutline(1, [0, 10]), "ceiling")).toEqual([]);
});

test("a null is infinite loss right beside its neighbours: inside a loss limit, outside a rejection", () => {
  const trace: Point[] = [
    [0, 0.2],
    [1, Infinity],
    [2, 0.2],
  ];
  expect(stretchesInside(trace, limitOutline(1, [0, 2]), "floor")[0]?.points.map(([frequency]) => frequency)).toEqual([
    0, 1, 2,
  ]);
  const [before, after] = stretchesInside(trace, limitOutline(1, [0, 2]), "ceiling");
  expect(before?.points.at(-1)).toEqual([0, 1]);
  expect(after?.points[0]).toEqual([2, 1]);
});

test("at a step of the limit the stretch goes on, its sliver following both levels", () => {
  const trace: Point[] = [
    [0, 20],
    [10, 20],
  ];
  const outline = limitOutline(
    {
      scale: "linear",
      points: [
        [0, 30],
        [5, 30],
        [5, 50],
        [10, 50],
      ],
    },
    [0, 10],
  );
  const stretches = stretchesInside(trace, outline, "ceiling");
  expect(stretches).toHaveLength(1);
  expect(stretches[0]?.edge).toEqual([
    [0, 30],
    [5, 30],
    [5, 50],
    [10, 50],
  ]);
});

test("a limit straight in log f lies on its log line at every drawn point", () => {
  const points = limitOutline(
    {
      scale: "log",
      points: [
        [1e9, 60],
        [4e9, 20],
      ],
    },
    [2e9, 4e9],
  );
  // By hand: 2 GHz is half way from 1 to 4 GHz on a log axis.
  expect(points[0]?.[0]).toBe(2e9);
  expect(points[0]?.[1]).toBeCloseTo(40, 9);
  for (const [frequency, level] of points) expect(level).toBeCloseTo(60 - 20 * Math.log2(frequency / 1e9), 1);
});

test("every point of every stretch lies inside or on the wall, and every sample inside is in a stretch", () => {
  const samples = fc.array(fc.double({ min: 0, max: 3, noNaN: true }), { minLength: 3, maxLength: 30 });
  fc.assert(
    fc.property(samples, fc.constantFrom("floor" as const, "ceiling" as const), (levels, side) => {
      const trace = levels.map((level, index): Point => [index, level]);
      const outline = limitOutline(
        {
          scale: "linear",
          points: [
            [0, 1],
            [15, 2],
            [30, 0.5],
          ],
        },
        [1, Math.min(28, levels.length - 1)],
      );
      const stretches = stretchesInside(trace, outline, side);
      const sign = side === "floor" ? 1 : -1;
      for (const { points } of stretches) {
        for (const [frequency, level] of points) {
          expect(sign * (level - levelOn(outline, frequency))).toBeGreaterThanOrEqual(-1e-9);
        }
      }
      const within = trace.filter(([frequency, level]) => {
        const last = outline.at(-1)?.[0] ?? 0;
        return frequency >= 1 && frequency <= last && sign * (level - levelOn(outline, frequency)) > 1e-6;
      });
      const cut = stretches.flatMap(({ points }) => points);
      for (const [frequency, level] of within) {
        expect(cut.some((point) => point[0] === frequency && Math.abs(point[1] - level) < 1e-9)).toBe(true);
      }
    }),
    { seed: 7, numRuns: 200 },
  );
});
