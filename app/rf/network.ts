// Two-port networks as waves: other reference impedances, and the impedance matrix.

import type { Trace, TwoPort } from "./contract.ts";

/** Relative size of a determinant up to which it is taken for zero: no such matrix exists. */
const SINGULAR = 1e-14;

const newTrace = (length: number): Trace => ({ re: new Float64Array(length), im: new Float64Array(length) });

/**
 * The same network at other real reference impedances, without a way through Z or Y, which a through does not have.
 *
 * With r = (z' - z)/(z' + z), A = 2 sqrt(z z')/(z + z') at each port: S' = A^-1 (S - R)(1 - R S)^-1 A
 * (power waves: K. Kurokawa, IEEE Trans. MTT 13, 1965). Multiplied out with 1 - r^2 = A^2:
 * D = (1 - r1 S11)(1 - r2 S22) - r1 r2 S12 S21, S11' = ((S11 - r1)(1 - r2 S22) + r2 S12 S21)/D, S21' = A1 A2 S21/D.
 * Passivity and reciprocity stay. D is not zero for a passive network; where it is, the point is not finite.
 *
 * @param impedance ohm, of port 1 and port 2, real and positive
 * @returns the network itself if nothing changes
 * @throws RangeError if an impedance is not positive and finite
 */
export function renormalise(network: TwoPort, impedance: readonly [number, number]): TwoPort {
  const [from1, from2] = network.referenceImpedance;
  const [to1, to2] = impedance;
  if (!(to1 > 0 && to1 < Infinity && to2 > 0 && to2 < Infinity)) {
    throw new RangeError(`reference impedances must be positive, got ${to1} and ${to2} ohm`);
  }
  if (from1 === to1 && from2 === to2) return network;
  const r1 = (to1 - from1) / (to1 + from1);
  const r2 = (to2 - from2) / (to2 + from2);
  const transfer = ((2 * Math.sqrt(from1 * to1)) / (from1 + to1)) * ((2 * Math.sqrt(from2 * to2)) / (from2 + to2));
  const length = network.frequency.length;
  const s11 = newTrace(length);
  const s21 = newTrace(length);
  const s12 = newTrace(length);
  const s22 = newTrace(length);
  for (let k = 0; k < length; k += 1) {
    const re11 = network.s11.re[k] as number;
    const im11 = network.s11.im[k] as number;
    const re21 = network.s21.re[k] as number;
    const im21 = network.s21.im[k] as number;
    const re12 = network.s12.re[k] as number;
    const im12 = network.s12.im[k] as number;
    const re22 = network.s22.re[k] as number;
    const im22 = network.s22.im[k] as number;
    const loopRe = re12 * re21 - im12 * im21;
    const loopIm = re12 * im21 + im12 * re21;
    // u = 1 - r1 S11, v = 1 - r2 S22
    const uRe = 1 - r1 * re11;
    const uIm = -r1 * im11;
    const vRe = 1 - r2 * re22;
    const vIm = -r2 * im22;
    const denominatorRe = uRe * vRe - uIm * vIm - r1 * r2 * loopRe;
    const denominatorIm = uRe * vIm + uIm * vRe - r1 * r2 * loopIm;
    const power = denominatorRe * denominatorRe + denominatorIm * denominatorIm;
    const dRe = denominatorRe / power;
    const dIm = -denominatorIm / power;
    const n11Re = (re11 - r1) * vRe - im11 * vIm + r2 * loopRe;
    const n11Im = (re11 - r1) * vIm + im11 * vRe + r2 * loopIm;
    const n22Re = (re22 - r2) * uRe - im22 * uIm + r1 * loopRe;
    const n22Im = (re22 - r2) * uIm + im22 * uRe + r1 * loopIm;
    s11.re[k] = n11Re * dRe - n11Im * dIm;
    s11.im[k] = n11Re * dIm + n11Im * dRe;
    s22.re[k] = n22Re * dRe - n22Im * dIm;
    s22.im[k] = n22Re * dIm + n22Im * dRe;
    s21.re[k] = transfer * (re21 * dRe - im21 * dIm);
    s21.im[k] = transfer * (re21 * dIm + im21 * dRe);
    s12.re[k] = transfer * (re12 * dRe - im12 * dIm);
    s12.im[k] = transfer * (re12 * dIm + im12 * dRe);
  }
  return { ...network, s11, s21, s12, s22, referenceImpedance: [to1, to2] };
}

export interface ImpedanceMatrix {
  readonly z11: Trace;
  readonly z12: Trace;
  readonly z21: Trace;
  readonly z22: Trace;
}

/**
 * The open-circuit impedance matrix, ohm: Z = Q (1 - S)^-1 (1 + S) Q, Q = diag(sqrt(z1), sqrt(z2))
 * (D. A. Frickey, IEEE Trans. MTT 42(2), 1994; comment by R. B. Marks and D. F. Williams, MTT 43(4), 1995: real
 * references only).
 *
 * @returns NaN in all four where 1 - S is singular (its determinant at most 1e-14 of its terms): a through or a series
 *   element has no Z
 */
export function toImpedance(network: TwoPort): ImpedanceMatrix {
  const [ohm1, ohm2] = network.referenceImpedance;
  const mean = Math.sqrt(ohm1 * ohm2);
  const length = network.frequency.length;
  const matrix = { z11: newTrace(length), z12: newTrace(length), z21: newTrace(length), z22: newTrace(length) };
  for (let k = 0; k < length; k += 1) {
    const re11 = network.s11.re[k] as number;
    const im11 = network.s11.im[k] as number;
    const re21 = network.s21.re[k] as number;
    const im21 = network.s21.im[k] as number;
    const re12 = network.s12.re[k] as number;
    const im12 = network.s12.im[k] as number;
    const re22 = network.s22.re[k] as number;
    const im22 = network.s22.im[k] as number;
    const loopRe = re12 * re21 - im12 * im21;
    const loopIm = re12 * im21 + im12 * re21;
    const productRe = (1 - re11) * (1 - re22) - im11 * im22;
    const productIm = -(1 - re11) * im22 - im11 * (1 - re22);
    const determinantRe = productRe - loopRe;
    const determinantIm = productIm - loopIm;
    const power = determinantRe * determinantRe + determinantIm * determinantIm;
    const terms = Math.hypot(productRe, productIm) + Math.hypot(loopRe, loopIm);
    const exists = Math.sqrt(power) > SINGULAR * terms;
    const dRe = exists ? determinantRe / power : NaN;
    const dIm = exists ? -determinantIm / power : NaN;
    const put = (trace: Trace, ohm: number, re: number, im: number) => {
      trace.re[k] = ohm * (re * dRe - im * dIm);
      trace.im[k] = ohm * (re * dIm + im * dRe);
    };
    put(
      matrix.z11,
      ohm1,
      (1 + re11) * (1 - re22) + im11 * im22 + loopRe,
      im11 * (1 - re22) - (1 + re11) * im22 + loopIm,
    );
    put(
      matrix.z22,
      ohm2,
      (1 - re11) * (1 + re22) + im11 * im22 + loopRe,
      (1 - re11) * im22 - im11 * (1 + re22) + loopIm,
    );
    put(matrix.z12, mean, 2 * re12, 2 * im12);
    put(matrix.z21, mean, 2 * re21, 2 * im21);
  }
  return matrix;
}
