// What a port looks like: its impedance with the far port terminated or open, and its standing-wave ratio.
import type { Prepared, Trace } from "./contract.ts";
import { curvesOf, type Parameter } from "./curves.ts";
import { toImpedance } from "./network.ts";

/** |1 - Γ| up to which no impedance exists: an open circuit. */
const OPEN_CIRCUIT = 1e-14;

const PARAMETERS = ["s11", "s21", "s12", "s22"] as const satisfies readonly Parameter[];

/**
 * Input impedance of a port with the far port terminated in its reference impedance, ohm, n points:
 * Zin = Z0 (1 + Γ)/(1 - Γ), Γ = S11 or S22 (D. M. Pozar, Microwave Engineering, ch. 2 and 4).
 *
 * @returns NaN where Γ = 1 (no finite impedance exists), and throughout where the port's reflection was not measured
 */
export function terminatedImpedance(prepared: Prepared, port: 1 | 2): Trace {
  const { network } = prepared;
  const parameter = port === 1 ? "s11" : "s22";
  const reference = network.referenceImpedance[port - 1] as number;
  const isMeasured = curvesOf(prepared).isMeasured(parameter);
  const { re, im } = network[parameter];
  const impedance = nothing(re.length);
  for (let index = 0; index < re.length && isMeasured; index += 1) {
    const found = impedanceOf(re[index] as number, im[index] as number, reference);
    impedance.re[index] = found.re;
    impedance.im[index] = found.im;
  }
  return impedance;
}

/** Z0 (1 + Γ)/(1 - Γ) of one reflection coefficient, ohm; NaN where Γ = 1. */
export function impedanceOf(re: number, im: number, reference: number): { readonly re: number; readonly im: number } {
  const power = (1 - re) ** 2 + im ** 2;
  if (!(power > OPEN_CIRCUIT ** 2)) return { re: NaN, im: NaN };
  return { re: (reference * (1 - re * re - im * im)) / power, im: (reference * 2 * im) / power };
}

/**
 * Open-circuit impedance of a port, Z11 or Z22, ohm, n points: the far port left open. It is another figure than the
 * terminated input impedance wherever anything passes through the two-port.
 *
 * @returns NaN where no impedance matrix exists (1 - S singular), and throughout where one of the four S-parameters was
 *   not measured
 */
export function openImpedance(prepared: Prepared, port: 1 | 2): Trace {
  const curves = curvesOf(prepared);
  const isComplete = PARAMETERS.every((parameter) => curves.isMeasured(parameter));
  if (!isComplete) return nothing(prepared.network.frequency.length);
  const matrix = toImpedance(prepared.network);
  return port === 1 ? matrix.z11 : matrix.z22;
}

/**
 * Standing-wave ratio of a reflection, (1 + |Γ|)/(1 - |Γ|).
 *
 * @param magnitude |Γ|, linear
 * @returns Infinity for total reflection; NaN beyond it, where no standing-wave ratio is defined
 */
export function standingWaveRatio(magnitude: number): number {
  if (magnitude === 1) return Infinity;
  return magnitude < 1 ? (1 + magnitude) / (1 - magnitude) : NaN;
}

function nothing(points: number): Trace {
  return { re: new Float64Array(points).fill(NaN), im: new Float64Array(points).fill(NaN) };
}
