// Check values, section 4: group delay of lines, a resonator and Butterworth band-passes.
import { expect } from "vitest";
import type { Requirement, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { twoPortOf, type ComplexNumber } from "../../support/complex-matrix";
import { expectFigures, figuresOf, type RowCheck } from "./row";

/** Hz; at such steps the chord is the tangent to eight digits, and the phase still moves by 1e-5 rad and more. */
const FINE_STEP = 2e3;
type Transmission = (hz: number) => ComplexNumber;

const polar = (radians: number): ComplexNumber => ({ re: Math.cos(radians), im: Math.sin(radians) });
const lineOf =
  (delay: number): Transmission =>
  (hz) =>
    polar(-2 * Math.PI * hz * delay);

function sweepOf(transmission: Transmission, frequency: readonly number[]): TwoPort {
  const matrices = frequency.map((hz) => [
    [{ re: 0.1, im: 0 }, transmission(hz)],
    [transmission(hz), { re: 0.1, im: 0 }],
  ]);
  return twoPortOf(frequency, matrices);
}

const grid = (from: number, to: number, step: number) =>
  Array.from({ length: Math.round((to - from) / step) + 1 }, (_, k) => from + k * step);

/** Delay at one sample of a sweep, s. */
function delayAt(network: TwoPort, hz: number): number {
  return valueOf(network, { id: "delay", kind: "group-delay", band: [hz, hz], max: 1 });
}

function valueOf(network: TwoPort, line: Requirement): number {
  return evaluate(network, [line])[0]?.value ?? NaN;
}

const tangentAt = (transmission: Transmission, hz: number) =>
  delayAt(sweepOf(transmission, [hz - FINE_STEP, hz, hz + FINE_STEP]), hz);

/** 1/(1 + j Q (f/f0 - f0/f)): a lossless resonator between its loads. */
function resonatorOf(centre: number, quality: number): Transmission {
  return (hz) => {
    const detuning = quality * (hz / centre - centre / hz);
    const size = 1 + detuning ** 2;
    return { re: 1 / size, im: -detuning / size };
  };
}

/** Poles of the low-pass on the unit circle, the band-pass by f/f0 - f0/f over the fractional width (any filter text). */
function butterworthOf(order: number, lower: number, upper: number): Transmission {
  const centre = Math.sqrt(lower * upper);
  const poles = Array.from({ length: order }, (_, k) => polar((Math.PI * (2 * k + order + 1)) / (2 * order)));
  return (hz) => {
    const lowPass = (centre / (upper - lower)) * (hz / centre - centre / hz);
    return poles.reduce(
      ({ re, im }, pole) => {
        // Divided by j Omega - pole.
        const below = { re: -pole.re, im: lowPass - pole.im };
        const size = below.re ** 2 + below.im ** 2;
        return { re: (re * below.re + im * below.im) / size, im: (im * below.re - re * below.im) / size };
      },
      { re: 1, im: 0 },
    );
  };
}

interface Sampled {
  readonly chord: readonly number[];
  readonly analytic: readonly number[];
  readonly max_rel_error_interior: number;
  readonly variation_960_1040_s: number;
}

export const DELAY_CHECKS: readonly RowCheck[] = [
  {
    ids: /^line-.*-er/,
    check: ({ inputs, value }) => {
      const { step_hz: step } = inputs as { step_hz: number };
      const frequency = grid(1e9, 1e9 + 40 * step, step);
      const network = sweepOf(lineOf(Number(value)), frequency);
      const delays = frequency.map((hz) => delayAt(network, hz));
      expectFigures(delays, Array<number>(41).fill(Number(value)), 1e-15);
    },
  },
  {
    ids: /^line-aliased$/,
    check: ({ inputs, value }) => {
      const { true_s: delay, step_hz: step } = inputs as { true_s: number; step_hz: number };
      const network = sweepOf(lineOf(delay), grid(1e9, 1e9 + 20 * step, step));
      expectFigures([delayAt(network, 1e9 + 10 * step)], figuresOf(value), 1e-15);
    },
  },
  {
    ids: /^resonator-/,
    check: ({ inputs, value, tolerance }) => {
      const { f0, QL } = inputs as { f0: number; QL: number };
      expectFigures([tangentAt(resonatorOf(f0, QL), f0)], figuresOf(value), Number(tolerance));
    },
  },
  {
    ids: /^butter-bp-n\d+$/,
    check: ({ inputs, value, published }) => {
      const { n, f1, f2 } = inputs as { n: number; f1: number; f2: number };
      const delay = tangentAt(butterworthOf(n, f1, f2), Math.sqrt(f1 * f2));
      expectFigures([delay, delay], [Number(value), Number(published)], 1e-14);
    },
  },
  {
    ids: /^butter-bp-n\d+-sampled$/,
    check: ({ id, inputs, value }) => {
      const { f_hz: listed } = inputs as { f_hz: number[] };
      const wanted = value as Sampled;
      const transmission = butterworthOf(Number(/n(\d+)/.exec(id)?.[1]), 950e6, 1050e6);
      const frequency = grid(900e6, 1100e6, 1e6);
      const network = sweepOf(transmission, frequency);
      const chords = listed.map((hz) => delayAt(network, hz));
      expectFigures(chords, wanted.chord, 1e-13);
      expectFigures(
        listed.map((hz) => tangentAt(transmission, hz)),
        wanted.analytic,
        1e-13,
      );
      const interior = frequency.slice(1, -1);
      const errors = interior.map((hz) => Math.abs(delayAt(network, hz) / tangentAt(transmission, hz) - 1));
      expectFigures([Math.max(...errors)], [wanted.max_rel_error_interior], 1e-7);
      const variation = valueOf(network, { id: "v", kind: "group-delay-variation", band: [960e6, 1040e6], max: 1 });
      expectFigures([variation], [wanted.variation_960_1040_s], 1e-13);
      expect(listed).toHaveLength(wanted.chord.length);
    },
  },
];
