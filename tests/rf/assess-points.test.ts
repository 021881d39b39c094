// The margin and its ends are the least of all samples', though the ends of most samples are never computed.
import fc from "fast-check";
import { expect, test } from "vitest";
import { evaluate, prepare, type Band, type Limit, type Setup, type TwoPort } from "~/rf/index";
import { marginCurve, type PointwiseRequirement } from "~/rf/margin-curve";

const POINTS = 400;
const BAND: Band = [1e9 + 40, 1e9 + 360];

/** A filter with ripples, notches and deep skirts; `seed` turns and scales it. */
function networkOf(seed: number, depth: number): TwoPort {
  let state = (seed % 2147483646) + 1;
  const random = () => (state = (state * 16807) % 2147483647) / 2147483647; // Park and Miller, CACM 31, 1988
  const trace = (level: (x: number) => number) => {
    const re = new Float64Array(POINTS);
    const im = new Float64Array(POINTS);
    for (let k = 0; k < POINTS; k += 1) {
      const size = 10 ** (-level(k / POINTS) / 20) * (1 + 0.02 * random());
      const angle = 0.1 * k + random();
      re[k] = size * Math.cos(angle);
      im[k] = size * Math.sin(angle);
    }
    return { re, im };
  };
  const skirt = (x: number) => 1 + depth * Math.max(0, Math.abs(x - 0.5) - 0.2) + (random() < 0.02 ? 40 * random() : 0);
  const match = (x: number) => 12 + 25 * Math.sin(9 * x + seed) ** 2;
  return {
    frequency: Float64Array.from({ length: POINTS }, (_, k) => 1e9 + k),
    s11: trace(match),
    s21: trace(skirt),
    s12: trace(skirt),
    s22: trace(match),
    referenceImpedance: [50, 50],
    comments: [],
    version: "1",
    notes: [],
  };
}

const limitOf = (level: number): fc.Arbitrary<Limit> =>
  fc.oneof(
    fc.constant(level),
    fc.constantFrom("linear" as const, "log" as const).map((scale) => ({
      scale,
      points: [
        [BAND[0], level * 0.4],
        [1e9 + 200, level * 1.3],
        [BAND[1], level],
      ] as const,
    })),
  );
const requirement: fc.Arbitrary<PointwiseRequirement> = fc.oneof(
  limitOf(3).map((max) => ({ id: "1", kind: "insertion-loss", band: BAND, max }) as const),
  limitOf(30).map((min) => ({ id: "1", kind: "rejection", band: BAND, min }) as const),
  limitOf(30).map(
    (min) => ({ id: "1", kind: "rejection", band: BAND, min, relativeTo: [1e9 + 180, 1e9 + 220] }) as const,
  ),
  limitOf(30).map((min) => ({ id: "1", kind: "reverse-isolation", band: BAND, min }) as const),
  limitOf(14).map((min) => ({ id: "1", kind: "return-loss", port: 1, band: BAND, min }) as const),
);
const setup: fc.Arbitrary<Setup> = fc.record({
  transmission: fc.constantFrom(0, 0.05, 0.3),
  noiseFloor: fc.constantFrom(45, 60, 90, 120),
  directivity: fc.constantFrom(20, 36, 46),
  sourceMatch: fc.constantFrom(25, 40),
  loadMatch: fc.constantFrom(15, 36),
  tracking: fc.constantFrom(0, 0.1),
});

/** The least of a figure over all stretches, straight from its definition. */
const leastOf = (series: readonly Float64Array[]) => Math.min(...series.map((values) => Math.min(...values)));

test("margin and ends of the margin are the least over every point, whatever the limit, the setup and the depth", () => {
  let conditional = 0;
  fc.assert(
    fc.property(requirement, setup, fc.nat(1e6), fc.constantFrom(50, 200, 400), (line, stated, seed, depth) => {
      const prepared = prepare(networkOf(seed, depth));
      const [result] = evaluate(prepared, [line], { setup: stated });
      const { stretches } = marginCurve(prepared, line, { setup: stated });
      if (result === undefined || stretches.length === 0) return;
      expect(result.margin).toBeCloseTo(leastOf(stretches.map(({ margin }) => margin)), 8);
      const ends = [leastOf(stretches.map(({ lower }) => lower)), leastOf(stretches.map(({ upper }) => upper))];
      ends.forEach((end, k) => {
        if (Number.isFinite(end)) expect(result.marginInterval[k]).toBeCloseTo(end, 8);
        else expect(result.marginInterval[k]).toBe(end);
      });
      if (result.verdict.startsWith("conditional")) conditional += 1;
    }),
    { numRuns: 1_000 },
  );
  expect(conditional).toBeGreaterThan(5);
});
