// Filters of scipy.signal, live: what the evaluation finds in their samples against scipy's figures of the continuous response.
import { beforeAll, expect, test } from "vitest";
import type { Requirement, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { twoPortOf, type ComplexNumber } from "../support/complex-matrix";
import { runPython } from "../support/python";
import { item } from "./sweep-of";

interface Filter {
  readonly name: string;
  /** Hz: −3.01 dB of a Butterworth filter, the ripple's edge of the others. */
  readonly edges: readonly [number, number];
  readonly ripple: number | null;
  readonly attenuation: number | null;
  readonly f_hz: readonly number[];
  readonly s21: readonly ComplexNumber[];
  readonly s11: readonly ComplexNumber[];
  readonly peak: number;
  readonly edge_loss: readonly [number, number];
  readonly stop: readonly [number, number];
  readonly stop_loss: number;
  readonly crossings: Readonly<Record<string, readonly [number, number]>>;
  readonly delays: readonly (readonly [hz: number, seconds: number])[];
}

/** Hz between samples. */
const STEP = 125e3;
let filters: readonly Filter[];
beforeAll(() => {
  filters = runPython("scipy_filters.py") as Filter[];
});

const networkOf = ({ f_hz, s11, s21 }: Filter): TwoPort =>
  twoPortOf(
    f_hz,
    f_hz.map((_, k) => [
      [item(s11, k), item(s21, k)],
      [item(s21, k), item(s11, k)],
    ]),
  );
const valueOf = (filter: Filter, line: Requirement) => item(evaluate(networkOf(filter), [line])).value;

test("six filters of three families are compared", () => {
  expect(filters.map(({ name }) => name.split(" ")[0])).toEqual([
    ...["Butterworth", "Butterworth", "Chebyshev", "Chebyshev", "elliptic", "elliptic"],
  ]);
});

test("the loss at a passband edge is scipy's, and over the passband the worse of its edges", () => {
  for (const filter of filters) {
    const [low, high] = filter.edges;
    const loss = (from: number, to: number) =>
      valueOf(filter, { id: "1", kind: "insertion-loss", band: [from, to], max: 1 });
    expect(loss(low, low), filter.name).toBeCloseTo(filter.edge_loss[0], 9);
    expect(loss(high, high), filter.name).toBeCloseTo(filter.edge_loss[1], 9);
    // Inside the band the loss reaches the edges' at most: by definition of each family.
    expect(Math.abs(loss(low, high) - Math.max(...filter.edge_loss)), filter.name).toBeLessThan(1e-9);
  }
});

test("the ripple of an equal-ripple passband is the one it was designed for, at most a sampling step short of it", () => {
  for (const filter of filters.filter(({ ripple }) => ripple !== null)) {
    const ripple = valueOf(filter, { id: "1", kind: "ripple", band: filter.edges, max: 1 });
    expect(ripple, filter.name).toBeLessThanOrEqual((filter.ripple ?? NaN) + 1e-6);
    expect(ripple, filter.name).toBeGreaterThan((filter.ripple ?? NaN) - 1e-3);
  }
});

test("rejection is scipy's at the edge of a monotonic stopband, the designed one in an equal-ripple stopband", () => {
  for (const filter of filters) {
    const rejection = valueOf(filter, { id: "1", kind: "rejection", band: filter.stop, min: 1 });
    if (filter.attenuation === null) expect(rejection, filter.name).toBeCloseTo(filter.stop_loss, 9);
    else {
      expect(rejection, filter.name).toBeGreaterThanOrEqual(filter.attenuation - 1e-6);
      expect(rejection, filter.name).toBeLessThan(filter.attenuation + 0.01);
    }
  }
});

test("return loss is what a lossless filter's transmission leaves", () => {
  for (const filter of filters) {
    const value = valueOf(filter, {
      id: "1",
      kind: "return-loss",
      port: 2,
      band: [filter.edges[1], filter.edges[1]],
      min: 1,
    });
    // |S11|² = 1 − |S21|², from scipy's loss at the edge.
    const wanted = -10 * Math.log10(1 - 10 ** (-filter.edge_loss[1] / 10));
    expect(value, filter.name).toBeCloseTo(wanted, 6);
  }
});

test("centre, bandwidth and shape factor are scipy's crossings within a fiftieth of a step", () => {
  for (const filter of filters) {
    const [low3, high3] = item([filter.crossings["3"] ?? [NaN, NaN]]);
    const [low20, high20] = item([filter.crossings["20"] ?? [NaN, NaN]]);
    const [centre, bandwidth, shape] = evaluate(networkOf(filter), [
      { id: "1", kind: "centre-frequency", level: 3, nominal: 1.95e9, tolerance: 1e6 },
      { id: "2", kind: "bandwidth", level: 3, min: 1 },
      { id: "3", kind: "shape-factor", levels: [3, 20], max: 10 },
    ]);
    // A straight line between samples departs from the response by its curvature: under 2 % of a step on these skirts.
    expect(Math.abs((centre?.value ?? NaN) - (low3 + high3) / 2), filter.name).toBeLessThan(0.02 * STEP);
    expect(Math.abs((bandwidth?.value ?? NaN) - (high3 - low3)), filter.name).toBeLessThan(0.02 * STEP);
    const tolerance = (0.02 * STEP * (1 + (high20 - low20) / (high3 - low3))) / (high3 - low3);
    expect(Math.abs((shape?.value ?? NaN) - (high20 - low20) / (high3 - low3)), filter.name).toBeLessThan(tolerance);
  }
});

test("group delay over the two steps about a sample is scipy's from poles and zeros within 0.1 %", () => {
  for (const filter of filters) {
    const lines = filter.delays.map(([hz], k): Requirement => ({
      id: `${k}`,
      kind: "group-delay",
      band: [hz, hz],
      max: 1,
    }));
    evaluate(networkOf(filter), lines).forEach(({ value }, k) => {
      const wanted = filter.delays[k]?.[1] ?? NaN;
      expect(Math.abs(value / wanted - 1), `${filter.name}, ${k}`).toBeLessThan(1e-3);
    });
  }
});
