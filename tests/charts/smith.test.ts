// The Smith chart: circles as the textbooks have them, stretches beyond a limit, readings and what is emphasised.
import { expect, test } from "vitest";
import {
  radiusOf,
  reactanceAtRim,
  reactanceCircle,
  reflectionOf,
  resistanceCircle,
  smithGrid,
  type Circle,
} from "~/charts/smith-grid";
import { composeSmith, type SmithLocus } from "~/charts/smith-plot";
import { smithReading, smithTable, smithWords } from "~/charts/smith-reading";

const distance = ({ x, y }: { x: number; y: number }, circle: Circle) =>
  Math.abs(Math.hypot(x - circle.x, y - circle.y) - circle.radius);

test("every impedance lies on its circle of resistance and its circle of reactance", () => {
  for (const r of [0, 0.2, 1, 3])
    for (const x of [-2, -0.5, 0.7, 5]) {
      const reflection = reflectionOf(r, x);
      expect(distance(reflection, resistanceCircle(r))).toBeLessThan(1e-12);
      expect(distance(reflection, reactanceCircle(x))).toBeLessThan(1e-12);
    }
});

test("a short, a match and an open lie at -1, 0 and 1; z = j at the top (Pozar, Microwave Engineering, ch. 2.4)", () => {
  expect(reflectionOf(0, 0)).toEqual({ x: -1, y: 0 });
  expect(reflectionOf(1, 0)).toEqual({ x: 0, y: 0 });
  expect(reflectionOf(1e12, 0).x).toBeCloseTo(1, 9);
  expect(reflectionOf(0, 1)).toEqual({ x: 0, y: 1 });
});

test("a return loss of 20 dB is |Γ| = 0.1, of 6.0206 dB 0.5", () => {
  expect(radiusOf(20)).toBeCloseTo(0.1, 12);
  expect(radiusOf(20 * Math.log10(2))).toBeCloseTo(0.5, 12);
});

test("reactances are written where their arc meets the rim, on the whole chart where r = 0", () => {
  for (const reactance of [-5, -1, -0.2, 0.5, 2]) {
    const rim = reactanceAtRim(reactance, 1);
    const { x, y } = reflectionOf(0, reactance);
    expect(Math.hypot(rim.x - x, rim.y - y)).toBeLessThan(1e-9);
  }
  for (const { value, circle } of smithGrid(0.4).reactance) {
    const rim = reactanceAtRim(value, 0.4);
    expect(Math.hypot(rim.x, rim.y)).toBeCloseTo(0.4, 9);
    expect(distance(rim, circle)).toBeLessThan(1e-9);
  }
});

test("an enlarged chart has circles on either side of the middle, all of them in sight", () => {
  for (const reach of [0.1, 0.25, 0.43, 0.6]) {
    const { resistance, reactance } = smithGrid(reach);
    expect(resistance.filter(({ value }) => value < 1).length).toBeGreaterThanOrEqual(1);
    expect(resistance.filter(({ value }) => value > 1).length).toBeGreaterThanOrEqual(1);
    expect(resistance.every(({ value }) => value > 0 && Math.abs((value - 1) / (value + 1)) < reach)).toBe(true);
    expect(reactance.length).toBeGreaterThanOrEqual(2);
    expect(new Set(resistance.map(({ label }) => label)).size).toBe(resistance.length);
  }
});

const locus: SmithLocus = {
  id: "sweep",
  reference: 50,
  frequency: [1e9, 2e9, 3e9, 4e9],
  re: [0, 0.4, 0, 0.4],
  im: [0, 0, 0, 0],
};

test("the stretch beyond a limit is cut where |Γ| passes it, within the limit's band alone", () => {
  const limits = [{ lineNumber: "4.1", returnLoss: 20 * Math.log10(5), band: [1e9, 3e9] as const }];
  const scene = composeSmith({ loci: [locus], bands: [[1e9, 3e9]], limits, size: 500 });
  expect(scene.beyond).toHaveLength(1);
  // |Γ| = 0.2 is passed at 1.5 and 2.5 GHz.
  const [from, middle, to] = scene.beyond[0] ?? [];
  for (const end of [from, to]) {
    const { x, y } = scene.toReflection(end ?? { x: NaN, y: NaN });
    expect(Math.hypot(x, y)).toBeCloseTo(0.2, 9);
  }
  expect(scene.toReflection(middle ?? { x: NaN, y: NaN }).x).toBeCloseTo(0.4, 9);
  expect(scene.ends.map(({ frequency }) => frequency)).toEqual([1e9, 3e9]);
});

test("a reading gives reflection, impedance and standing-wave ratio", () => {
  const reading = smithReading([locus], 1.5e9);
  // By hand: Γ = 0.2: Z = 50 × 1.2/0.8 = 75 Ω, VSWR 1.5.
  expect(reading?.resistance).toBeCloseTo(75, 9);
  expect(reading?.ratio).toBeCloseTo(1.5, 9);
  expect(reading && smithWords(reading)).toBe("1.5000\u00a0GHz: Γ 0.200 at 0.0°, Z 75.0 + j0.0 Ω, VSWR 1.50");
  expect(smithReading([locus], 5e9)).toBeUndefined();
});

test("the table holds the samples of the passband", () => {
  const { rows } = smithTable([locus], [[2e9, 3e9]]);
  expect(rows.map(([frequency]) => frequency)).toEqual(["2.0000", "3.0000"]);
  expect(rows[0]?.slice(1)).toEqual(["0.4000", "0.0", "116.67", "0.00", "2.333"]);
});
