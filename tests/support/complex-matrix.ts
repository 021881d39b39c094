// S-matrices of reference tools as plain objects, compared with and turned into the core's traces.
import { expect } from "vitest";
import type { Trace, TwoPort } from "~/rf/contract";

export interface ComplexNumber {
  readonly re: number;
  readonly im: number;
}

/** s[k][i][j]: from port j+1 to port i+1 at point k. */
export type MatrixSeries = readonly (readonly (readonly ComplexNumber[])[])[];

/** Every S-parameter within `tolerance` of the wanted one, relative to max(1, |wanted|). */
export function expectMatrix(network: TwoPort, wanted: MatrixSeries, tolerance: number, name = ""): void {
  expect(network.frequency, name).toHaveLength(wanted.length);
  let worst = 0;
  wanted.forEach((matrix, k) => {
    [network.s11, network.s12, network.s21, network.s22].forEach((trace, at) => {
      const want = matrix[at >> 1]?.[at & 1];
      if (!want) throw new RangeError(`no ${at}th element at point ${k}`);
      const distance = Math.hypot((trace.re[k] ?? NaN) - want.re, (trace.im[k] ?? NaN) - want.im);
      worst = Math.max(worst, distance / Math.max(1, Math.hypot(want.re, want.im)));
    });
  });
  expect(worst, `largest difference ${name}`).toBeLessThanOrEqual(tolerance); // false for NaN
}

/** A two-port from plain numbers. */
export function twoPortOf(
  frequency: readonly number[],
  s: MatrixSeries,
  referenceImpedance: readonly [number, number] = [50, 50],
  comments: readonly string[] = [],
): TwoPort {
  const trace = (i: number, j: number): Trace => ({
    re: Float64Array.from(s, (matrix) => matrix[i]?.[j]?.re ?? NaN),
    im: Float64Array.from(s, (matrix) => matrix[i]?.[j]?.im ?? NaN),
  });
  return {
    frequency: Float64Array.from(frequency),
    s11: trace(0, 0),
    s21: trace(1, 0),
    s12: trace(0, 1),
    s22: trace(1, 1),
    referenceImpedance,
    comments,
    version: "1",
    notes: [],
  };
}

/** The traces of a two-port as plain numbers. */
export function matricesOf({ frequency, s11, s21, s12, s22 }: TwoPort): MatrixSeries {
  const at = ({ re, im }: Trace, k: number): ComplexNumber => ({ re: re[k] ?? NaN, im: im[k] ?? NaN });
  return Array.from(frequency, (_, k) => [
    [at(s11, k), at(s12, k)],
    [at(s21, k), at(s22, k)],
  ]);
}
