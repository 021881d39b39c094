// Check values, sections 7 and 8: passivity and reciprocity of two-ports, drift with temperature.
import { expect } from "vitest";
import { checkNetwork } from "~/rf/check-network";
import { largestSingularValue } from "~/rf/check-waves";
import type { Drift } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { twoPortOf, type MatrixSeries } from "../../support/complex-matrix";
import { item, sweepOf } from "../sweep-of";
import { expectFigures, figuresOf, rowOf, type RowCheck } from "./row";

interface PassivityFigures {
  readonly sigma_max: number;
  readonly min_eig_I_SHS: number;
  readonly "passive(tol 1e-6)": boolean;
  readonly "passive(tol 0.001)": boolean;
  readonly "reciprocal(tol 1e-6)": boolean;
}

/** Where the worst point of a notch at `hz` is predicted to lie, Hz. */
function predictedAt(hz: number, drift: Drift): number {
  const notch = sweepOf({ frequency: [hz * 0.9, hz, hz * 1.1], loss: [1, 3, 1] });
  const line = { id: "1", kind: "insertion-loss", band: [hz * 0.95, hz * 1.05], max: 4 } as const;
  return item(evaluate(notch, [line], { drift })).frequency;
}

export const PASSIVITY_CHECKS: readonly RowCheck[] = [
  {
    ids: /^pass-/,
    check: ({ inputs, value }) => {
      const network = twoPortOf([1e9], [(inputs as { S: MatrixSeries[number] }).S]);
      const wanted = value as PassivityFigures;
      const largest = largestSingularValue(network, 0);
      expectFigures([largest, 1 - largest ** 2], [wanted.sigma_max, wanted.min_eig_I_SHS], 1e-12);
      for (const tolerance of ["1e-6", "0.001"] as const) {
        const codes = checkNetwork(network, { setup: { transmission: 20 * Math.log10(1 + Number(tolerance)) } });
        const isPassive = !codes.some(({ code }) => code === "not-passive");
        expect(isPassive, tolerance).toBe(wanted[`passive(tol ${tolerance})`]);
      }
      // An exactly zero S12 is a column not measured: whether the network is reciprocal cannot be said.
      const codes = checkNetwork(network).map(({ code }) => code);
      const isUnknown = codes.includes("not-measured") && network.s12.re[0] === 0;
      if (!isUnknown) expect(!codes.includes("not-reciprocal")).toBe(wanted["reciprocal(tol 1e-6)"]);
    },
  },
  {
    ids: /^tcf-[\d.]+e/,
    check: ({ inputs, value }) => {
      const { f, tcf_ppm_per_K, T0, T } = inputs as { f: number; tcf_ppm_per_K: number; T0: number; T: number };
      const shift = predictedAt(f, { ppmPerKelvin: tcf_ppm_per_K, from: T0, to: [T] }) - f;
      expectFigures([shift], figuresOf(value), 1e-3);
    },
  },
  {
    ids: /^guard-needed$/,
    check: ({ value }) => {
      const shifts = [-40, 85].map((to) => predictedAt(2.45e9, { ppmPerKelvin: -4, from: 25, to: [to] }) - 2.45e9);
      expectFigures(shifts, figuresOf(value), 1e-3);
      // The shift at 85 °C is a row of its own.
      expectFigures(shifts.slice(1), figuresOf(rowOf("tcf-2.45e+09--4").value), 1e-3);
    },
  },
];
