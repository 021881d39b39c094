// Check values, section 1: VSWR, return loss, reflection and mismatch loss of one another.
import { expect } from "vitest";
import type { Requirement, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { renormalise } from "~/rf/network";
import { parseQuantity } from "~/rf/quantity";
import { magnitudeOf } from "~/rf/uncertainty";
import { twoPortOf, type ComplexNumber } from "../../support/complex-matrix";
import { expectFigures, expectPublished, figuresOf, type RowCheck } from "./row";

const CLOSED_FORM = 1e-12;
const real = (re: number): ComplexNumber => ({ re, im: 0 });

/** Return loss of port 1 and insertion loss at one frequency, dB, as scored between the network's own references. */
function lossesOf(network: TwoPort): [returnLoss: number, insertionLoss: number] {
  const band = [1e9, 1e9] as const;
  const requirements: Requirement[] = [
    { id: "return", kind: "return-loss", port: 1, band, min: 0 },
    { id: "insertion", kind: "insertion-loss", band, max: 100 },
  ];
  const [reflected, transmitted] = evaluate(network, requirements, { impedance: network.referenceImpedance });
  return [reflected?.value ?? NaN, transmitted?.value ?? NaN];
}

/** A through between 50 s and 50 ohm: the reflection of a VSWR s, and as loss what the mismatch alone takes. */
function mismatchedThrough(vswr: number): TwoPort {
  const through = [
    [real(0), real(1)],
    [real(1), real(0)],
  ];
  return renormalise(twoPortOf([1e9], [through]), [50 * vswr, 50]);
}

/** As a buyer types it: "1.5:1" is a return loss. */
function returnLossOf(vswr: number): number {
  const parsed = parseQuantity(`${vswr.toPrecision(15)}:1`, { kind: "level", meaning: "return-loss" });
  return parsed.ok ? parsed.value : NaN;
}

/** A lossless network of a real reflection at its first sample; at the second no S-parameter is zero: all are measured. */
function losslessSweepOf(reflection: number): TwoPort {
  const matrixOf = (reflected: number) => {
    const transmitted = Math.sqrt(1 - reflected ** 2);
    return [
      [real(reflected), real(transmitted)],
      [real(transmitted), real(-reflected)],
    ];
  };
  return twoPortOf([1e9, 2e9], [matrixOf(reflection), matrixOf(0.5)]);
}

export const REFLECTION_CHECKS: readonly RowCheck[] = [
  {
    ids: /^vswr-/,
    check: (row) => {
      const { vswr } = row.inputs as { vswr: number };
      const [returnLoss, mismatchLoss] = lossesOf(mismatchedThrough(vswr));
      const found = [returnLoss, magnitudeOf(returnLoss), mismatchLoss];
      expectFigures(found, figuresOf(row.value), CLOSED_FORM);
      expectPublished(found, row);
      expect(returnLossOf(vswr)).toBeCloseTo(returnLoss, 12);
    },
  },
  {
    ids: /^rl-\d/,
    check: (row) => {
      const { rl_db: wanted } = row.inputs as { rl_db: number };
      const [reflection = NaN, vswr = NaN] = figuresOf(row.value);
      const [returnLoss, mismatchLoss] = lossesOf(mismatchedThrough(vswr));
      const found = [magnitudeOf(wanted), vswr, mismatchLoss];
      expectFigures(found, figuresOf(row.value), CLOSED_FORM);
      expectPublished(found, row);
      // The way from a return loss to a VSWR is read backwards: this VSWR has this return loss.
      expectFigures(
        [returnLossOf(vswr), returnLoss, magnitudeOf(returnLoss)],
        [wanted, wanted, reflection],
        CLOSED_FORM,
      );
    },
  },
  {
    ids: /^limit-/,
    check: ({ inputs, value }) => {
      const { gamma } = inputs as { gamma: ComplexNumber };
      const [returnLoss = NaN, , mismatchLoss = NaN] = figuresOf(value);
      expectFigures(lossesOf(losslessSweepOf(gamma.re)), [returnLoss, mismatchLoss], 0);
    },
  },
  {
    ids: /^rl-gain$/,
    check: ({ inputs, value }) => {
      const { gamma } = inputs as { gamma: ComplexNumber };
      const active = [
        [gamma, real(0.1)],
        [real(0.1), gamma],
      ];
      const [returnLoss] = lossesOf(twoPortOf([1e9], [active]));
      expectFigures([returnLoss], figuresOf(value), CLOSED_FORM);
    },
  },
];
