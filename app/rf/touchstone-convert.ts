// From numbers as written (DB, MA or RI; S, Y, Z, G or H) to S-parameters at the file's references.

import type { Series, Trace } from "./contract.ts";
import { turnIntoParts } from "./touchstone-angle.ts";
import { TouchstoneError } from "./touchstone-error.ts";
import type { NumberFormat, Parameter } from "./touchstone-option-line.ts";

/** Four traces in the order 11, 21, 12, 22. */
export type Matrix = readonly [Trace, Trace, Trace, Trace];

/** Relative size of a determinant below which it is taken for zero. */
const SINGULAR = 1e-14;

export function newTrace(length: number): Trace {
  return { re: new Float64Array(length), im: new Float64Array(length) };
}

/**
 * Real and imaginary parts in place of the numbers as written, from the sample `from` up to `to`.
 *
 * @param first real parts, magnitudes or decibels
 * @param second imaginary parts or angles in degrees
 */
export function toParts(first: Series, second: Series, from: number, to: number, format: NumberFormat): void {
  if (format === "RI") return;
  if (format === "DB") for (let k = from; k < to; k += 1) first[k] = 10 ** ((first[k] as number) / 20);
  turnIntoParts(first, second, from, to);
}

/** Refuses a number that overflowed on the way from decibels. */
export function checkFinite(matrix: Matrix, lineOf: (index: number) => number): void {
  for (const { re, im } of matrix) {
    for (let k = 0; k < re.length; k += 1) {
      if (Number.isFinite((re[k] as number) + (im[k] as number))) continue;
      const message = "A level too high for any number a computer keeps. Measure or export the point again.";
      throw new TouchstoneError("not-finite", lineOf(k), message);
    }
  }
}

/** What multiplies n11, n21, n12 and n22 of version 2 data (ohm, siemens) to make them normalised; version 1 data are. */
function normalisation(parameter: Parameter, [first, second]: readonly [number, number]): readonly number[] {
  const mean = Math.sqrt(first * second);
  const ratio = Math.sqrt(second / first);
  if (parameter === "Z") return [1 / first, 1 / mean, 1 / mean, 1 / second];
  if (parameter === "Y") return [first, mean, mean, second];
  if (parameter === "H") return [1 / first, ratio, ratio, second];
  return [first, 1 / ratio, 1 / ratio, 1 / second];
}

export function normalise(matrix: Matrix, parameter: Parameter, references: readonly [number, number]): void {
  const factors = normalisation(parameter, references);
  matrix.forEach((trace, k) => {
    scale(trace.re, factors[k] as number);
    scale(trace.im, factors[k] as number);
  });
}

function scale(series: Series, factor: number): void {
  for (let k = 0; k < series.length; k += 1) series[k] = (series[k] as number) * factor;
}

/**
 * How S follows from normalised Z, Y, H or G: with D = (1 + n11)(1 + n22) - n12 n21,
 * S11 = sign11 ((n11 - 1)(1 + n22) - n12 n21) / D, S22 = sign22 ((1 + n11)(n22 - 1) - n12 n21) / D,
 * S21 = 2 sign21 n21 / D, S12 = 2 sign12 n12 / D
 * (D. A. Frickey, IEEE Trans. MTT 42(2), 1994, for real references; each follows from v = a + b, i = a - b).
 */
const SIGNS = {
  Z: { s11: 1, s21: 1, s12: 1, s22: 1 },
  Y: { s11: -1, s21: -1, s12: -1, s22: -1 },
  H: { s11: 1, s21: -1, s12: 1, s22: -1 },
  G: { s11: -1, s21: 1, s12: -1, s22: 1 },
} as const;

/**
 * S-parameters, in place of normalised Y, Z, G or H.
 *
 * @param matrix normalised, in the order 11, 21, 12, 22; overwritten
 * @throws TouchstoneError no-scattering where D is zero: an active network at its own resonance, or a wrong number
 */
export function toScattering(
  matrix: Matrix,
  parameter: Exclude<Parameter, "S">,
  lineOf: (index: number) => number,
): void {
  const [n11, n21, n12, n22] = matrix;
  const signs = SIGNS[parameter];
  for (let k = 0; k < n11.re.length; k += 1) {
    const re11 = n11.re[k] as number;
    const im11 = n11.im[k] as number;
    const re22 = n22.re[k] as number;
    const im22 = n22.im[k] as number;
    const re21 = n21.re[k] as number;
    const im21 = n21.im[k] as number;
    const re12 = n12.re[k] as number;
    const im12 = n12.im[k] as number;
    const loopRe = re12 * re21 - im12 * im21;
    const loopIm = re12 * im21 + im12 * re21;
    const productRe = (1 + re11) * (1 + re22) - im11 * im22;
    const productIm = (1 + re11) * im22 + im11 * (1 + re22);
    const denominatorRe = productRe - loopRe;
    const denominatorIm = productIm - loopIm;
    const size = Math.hypot(denominatorRe, denominatorIm);
    const terms = Math.hypot(productRe, productIm) + Math.hypot(loopRe, loopIm);
    if (!(size > SINGULAR * terms) || !Number.isFinite(terms)) throw noScattering(parameter, lineOf(k));
    const inverseRe = denominatorRe / size / size;
    const inverseIm = -denominatorIm / size / size;
    const put = (trace: Trace, sign: number, re: number, im: number) => {
      trace.re[k] = sign * (re * inverseRe - im * inverseIm);
      trace.im[k] = sign * (re * inverseIm + im * inverseRe);
    };
    put(n11, signs.s11, (re11 - 1) * (1 + re22) - im11 * im22 - loopRe, (re11 - 1) * im22 + im11 * (1 + re22) - loopIm);
    put(n22, signs.s22, (1 + re11) * (re22 - 1) - im11 * im22 - loopRe, (1 + re11) * im22 + im11 * (re22 - 1) - loopIm);
    put(n21, signs.s21, 2 * re21, 2 * im21);
    put(n12, signs.s12, 2 * re12, 2 * im12);
  }
}

function noScattering(parameter: Parameter, line: number): TouchstoneError {
  const message = `These ${parameter}-parameters have no S-parameters (the conversion divides by zero). Export S-parameters.`;
  return new TouchstoneError("no-scattering", line, message);
}
