// Two filters solved by ngspice, live: their S-parameters at 50 Ω, renormalised and scored, against ngspice's own measurements.
import { beforeAll, expect, test } from "vitest";
import { checkNetwork } from "~/rf/check-network";
import type { Requirement } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { twoPortOf, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";
import { item } from "./sweep-of";

interface Solved {
  readonly name: string;
  readonly f_hz: readonly number[];
  /** At 50 Ω. */
  readonly s: MatrixSeries;
  /** Ohm at port 2 of the circuit that ngspice measured. */
  readonly load: number;
  readonly passband: readonly [number, number];
  readonly stopband: readonly [number, number];
  /** By the names of the recipe; dB, Hz, s. */
  readonly figures: Readonly<Record<string, number>>;
  readonly delay_hz: readonly number[];
}

let filters: readonly Solved[];
beforeAll(() => {
  filters = runPython("ngspice_filters.py") as Solved[];
}, 120_000);

/** ngspice prints seven digits. */
const DIGITS = 1e-6;
const near = (found: number | undefined, wanted: number | undefined, what: string) => {
  expect(Math.abs((found ?? NaN) / (wanted ?? NaN) - 1), `${what}: ${found} for ${wanted}`).toBeLessThan(DIGITS);
};

const scored = (filter: Solved, lines: readonly Requirement[]) =>
  evaluate(twoPortOf(filter.f_hz, filter.s), lines, { impedance: [50, filter.load] }).map(({ value }) => value);

test("a low-pass and a band-pass were solved, passive and reciprocal", () => {
  expect(filters.map(({ name, load }) => [name, load])).toEqual([
    ["low-pass", 75],
    ["band-pass", 62.5],
  ]);
  for (const { f_hz, s } of filters) {
    const codes = checkNetwork(twoPortOf(f_hz, s)).map(({ code }) => code);
    expect(codes).not.toContain("not-passive");
    expect(codes).not.toContain("not-reciprocal");
  }
});

test("losses, ripple, rejection and return loss between other terminations are ngspice's of the circuit so terminated", () => {
  for (const filter of filters) {
    const { passband, stopband, figures, name } = filter;
    const [loss, ripple, rejection, match] = scored(filter, [
      { id: "1", kind: "insertion-loss", band: passband, max: 1 },
      { id: "2", kind: "ripple", band: passband, max: 1 },
      { id: "3", kind: "rejection", band: stopband, min: 1 },
      { id: "4", kind: "return-loss", port: 1, band: passband, min: 1 },
    ]);
    near(loss, figures.loss_max, `${name}, loss`);
    near(rejection, figures.rejection_min, `${name}, rejection`);
    near(match, figures.match_min, `${name}, return loss`);
    // A difference of two figures of seven digits.
    expect(Math.abs((ripple ?? NaN) - ((figures.loss_max ?? NaN) - (figures.loss_min ?? NaN)))).toBeLessThan(2e-7);
  }
});

test("centre, bandwidth and shape factor of the band-pass are ngspice's crossings", () => {
  const filter = item(filters, 1);
  const { lower3 = NaN, upper3 = NaN, lower30 = NaN, upper30 = NaN } = filter.figures;
  const [centre, bandwidth, shape] = scored(filter, [
    { id: "1", kind: "centre-frequency", level: 3, nominal: 1.95e9, tolerance: 1e6 },
    { id: "2", kind: "bandwidth", level: 3, min: 1 },
    { id: "3", kind: "shape-factor", levels: [3, 30], max: 10 },
  ]);
  near(centre, (lower3 + upper3) / 2, "centre");
  // Each crossing is printed to 500 Hz.
  expect(Math.abs((bandwidth ?? NaN) - (upper3 - lower3))).toBeLessThan(1e3);
  expect(Math.abs((shape ?? NaN) - (upper30 - lower30) / (upper3 - lower3))).toBeLessThan(3e-5);
});

test("group delays are those of ngspice's phase", () => {
  for (const filter of filters) {
    const lines = filter.delay_hz.map((hz, k): Requirement => ({
      id: `${k}`,
      kind: "group-delay",
      band: [hz, hz],
      max: 1,
    }));
    scored(filter, lines).forEach((delay, k) => {
      near(delay, filter.figures[`delay${k}`], `${filter.name}, delay ${k}`);
    });
  }
});
