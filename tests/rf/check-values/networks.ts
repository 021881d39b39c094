// Check values, section 2: S, Z and renormalisation of elements, pads, lines and transformers.
import { expect } from "vitest";
import type { TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { renormalise, toImpedance } from "~/rf/network";
import { parseTouchstone } from "~/rf/touchstone";
import {
  expectMatrix,
  matricesOf,
  twoPortOf,
  type ComplexNumber,
  type MatrixSeries,
} from "../../support/complex-matrix";
import { checkValueRows, expectFigures, figuresOf, type CheckValue, type RowCheck } from "./row";

type Matrix = MatrixSeries[number];
type References = readonly [number, number];
interface Conversion {
  readonly S: Matrix;
  readonly Z: Matrix | "does not exist";
  readonly Y: Matrix | "does not exist";
}

const ROUNDING = 1e-14;
const number = (re: number, im = 0): ComplexNumber => ({ re, im });
const flat = (matrix: Matrix) => [matrix[0]?.[0], matrix[0]?.[1], matrix[1]?.[0], matrix[1]?.[1]] as ComplexNumber[];

/** A two-port in ohm, siemens or hybrid figures as the reader turns it into S at the given references. */
function readAs(parameter: "Z" | "Y" | "H", matrix: Matrix, [first, second]: References): TwoPort {
  const [n11, n12, n21, n22] = flat(matrix);
  const written = [n11, n21, n12, n22].map((pair) => `${pair?.re} ${pair?.im}`);
  return parseTouchstone(`[Version] 2.0
# Hz ${parameter} RI
[Number of Ports] 2
[Two-Port Data Order] 21_12
[Number of Frequencies] 1
[Reference] ${first} ${second}
[Network Data]
1e9 ${written.join(" ")}
[End]
`);
}

/** Hybrid parameters of a chain matrix: h11 = B/D, h12 = (AD - BC)/D, h21 = -1/D, h22 = C/D (Frickey, table I). */
function hybridOf(chain: Matrix): Matrix {
  const [a, b, c, d] = flat(chain) as [ComplexNumber, ComplexNumber, ComplexNumber, ComplexNumber];
  const determinant = minus(times(a, d), times(b, c));
  return [
    [over(b, d), over(determinant, d)],
    [over(number(-1), d), over(c, d)],
  ];
}

const times = (x: ComplexNumber, y: ComplexNumber) => number(x.re * y.re - x.im * y.im, x.re * y.im + x.im * y.re);
const minus = (x: ComplexNumber, y: ComplexNumber) => number(x.re - y.re, x.im - y.im);
const over = (x: ComplexNumber, y: ComplexNumber) => {
  const size = y.re ** 2 + y.im ** 2;
  return times(x, number(y.re / size, -y.im / size));
};

const conversions = checkValueRows.filter(({ id }) => /^conv-.*@/.test(id));
const referencesOf = ({ inputs }: CheckValue): References => {
  const { z1, z2 } = inputs as { z1: number; z2: number };
  return [z1, z2];
};

function checkConversion(row: CheckValue): void {
  const { S, Z, Y } = row.value as Conversion;
  const references = referencesOf(row);
  // From the chain matrix that is the row's input, by its hybrid parameters; a quarter wave has none.
  const chain = (row.inputs as { ABCD: Matrix }).ABCD;
  const isQuarterWave = Math.abs(chain[1]?.[1]?.re ?? 0) < 1e-9;
  if (!isQuarterWave) expectMatrix(readAs("H", hybridOf(chain), references), [S], ROUNDING, "from H");
  if (Z !== "does not exist") expectMatrix(readAs("Z", Z, references), [S], ROUNDING, "from Z");
  if (Y !== "does not exist") expectMatrix(readAs("Y", Y, references), [S], ROUNDING, "from Y");
  expect(!isQuarterWave || Z !== "does not exist").toBe(true);

  // From the same element at each other pair of references.
  const element = row.id.replace(/@.*/, "@");
  const others = conversions.filter(({ id }) => id.startsWith(element) && id !== row.id);
  for (const other of others) {
    const network = twoPortOf([1e9], [(other.value as Conversion).S], referencesOf(other));
    expectMatrix(renormalise(network, references), [S], ROUNDING, `from ${other.id}`);
  }

  const { z11, z12, z21, z22 } = toImpedance(twoPortOf([1e9], [S], references));
  const found = [z11, z12, z21, z22].map(({ re, im }) => number(re[0] ?? NaN, im[0] ?? NaN));
  if (Z === "does not exist") expect(found).toEqual(Array(4).fill({ re: NaN, im: NaN }));
  // The quarter wave has 75 ohm off the diagonal and rounding errors on it.
  else flat(Z).forEach((wanted, k) => expectFigures(parts(found[k]), parts(wanted), 1e-11));
}

const parts = (value?: ComplexNumber) => [value?.re ?? NaN, value?.im ?? NaN];

/** The elements worked out by hand, in the figures a data sheet would give, and which S-parameters are stated. */
const BY_HAND: Record<string, () => { network: TwoPort; stated: (s: ComplexNumber[]) => number[] }> = {
  "hand-series R=Z0 50/50: S11,S21": () => ({
    network: readAs("Y", seriesOf(50), [50, 50]),
    stated: reflectionAndGain,
  }),
  "hand-shunt G=Y0 50/50: S11,S21": () => ({ network: readAs("Z", shuntOf(50), [50, 50]), stated: reflectionAndGain }),
  "hand-75-ohm quarter wave in 50: S11, Im S21": () => ({
    network: readAs("Z", quarterWaveOf(75), [50, 50]),
    stated: ([s11, , s21]) => [s11?.re ?? NaN, s21?.im ?? NaN],
  }),
  "hand-2:1 transformer 50/50: S11,S21,S22": () => ({ network: readAs("H", ratioOf(2), [50, 50]), stated: all }),
  "hand-2:1 transformer 200/50 is matched: S11,S21": () => ({
    network: readAs("H", ratioOf(2), [200, 50]),
    stated: reflectionAndGain,
  }),
  "hand-through 50/75: S11,S21,S22": () => ({ network: readAs("H", ratioOf(1), [50, 75]), stated: all }),
  "hand-through 50/200: S11,S21,S22": () => ({ network: readAs("H", ratioOf(1), [50, 200]), stated: all }),
  "hand-series 25 ohm, 50/75: S11,S21,S22": () => ({ network: readAs("Y", seriesOf(25), [50, 75]), stated: all }),
};

const reflectionAndGain = ([s11, , s21]: ComplexNumber[]) => [s11?.re ?? NaN, s21?.re ?? NaN];
const all = ([s11, , s21, s22]: ComplexNumber[]) => [s11?.re ?? NaN, s21?.re ?? NaN, s22?.re ?? NaN];
const seriesOf = (ohm: number): Matrix => [
  [number(1 / ohm), number(-1 / ohm)],
  [number(-1 / ohm), number(1 / ohm)],
];
const shuntOf = (ohm: number): Matrix => [
  [number(ohm), number(ohm)],
  [number(ohm), number(ohm)],
];
const quarterWaveOf = (ohm: number): Matrix => [
  [number(0), number(0, -ohm)],
  [number(0, -ohm), number(0)],
];
/** v1 = n v2, i2 = -n i1. */
const ratioOf = (n: number): Matrix => [
  [number(0), number(n)],
  [number(-n), number(0)],
];
/** Arms r1 and r2 in series, r3 across, as impedance matrix. */
const teeOf = (r1: number, r2: number, r3: number): Matrix => [
  [number(r1 + r3), number(r3)],
  [number(r3), number(r2 + r3)],
];
/** Two equal shunt arms and one in series, as admittance matrix. */
const piOf = (shunt: number, series: number): Matrix => [
  [number(1 / shunt + 1 / series), number(-1 / series)],
  [number(-1 / series), number(1 / shunt + 1 / series)],
];

const lossOf = (network: TwoPort) => scored(network, { id: "1", kind: "insertion-loss", band: [1e9, 1e9], max: 1 });
const returnLossOf = (network: TwoPort) =>
  scored(network, { id: "1", kind: "return-loss", port: 1, band: [1e9, 1e9], min: 0 });

function scored(network: TwoPort, line: Parameters<typeof evaluate>[1][number]): number {
  return evaluate(network, [line], { impedance: network.referenceImpedance })[0]?.value ?? NaN;
}

/** The pad of these resistances has the stated loss and matches both ports. */
function expectPad(network: TwoPort, loss: number): void {
  expect(lossOf(network)).toBeCloseTo(loss, 10);
  const [matrix] = matricesOf(network);
  expect(Math.hypot(...parts(matrix?.[0]?.[0]), ...parts(matrix?.[1]?.[1]))).toBeLessThan(1e-12);
}

export const NETWORK_CHECKS: readonly RowCheck[] = [
  { ids: /^conv-.*@/, check: checkConversion },
  {
    ids: /^hand-/,
    check: (row) => {
      const { network, stated } = BY_HAND[row.id]?.() ?? {};
      if (!network || !stated) throw new RangeError(`no element for ${row.id}`);
      expectFigures(stated(flat(matricesOf(network)[0] ?? [])), figuresOf(row.value), ROUNDING);
      expectFigures(stated(flat(matricesOf(network)[0] ?? [])), figuresOf(row.published), ROUNDING);
    },
  },
  {
    ids: /^pi-\d+dB$/,
    check: ({ inputs, value }) => {
      const [shunt = NaN, series = NaN] = figuresOf(value);
      expectPad(readAs("Y", piOf(shunt, series), [50, 50]), (inputs as { att_db: number }).att_db);
    },
  },
  {
    ids: /^pi-\d+dB-rounded$/,
    check: ({ inputs, value }) => {
      const { shunt, series } = inputs as { shunt: number; series: number };
      const network = readAs("Y", piOf(shunt, series), [50, 50]);
      // The reflection is 1e-6 and less, what is left of figures near 1: nine digits of it remain.
      expectFigures([lossOf(network), returnLossOf(network)], figuresOf(value), [1e-12, 1e-7]);
    },
  },
  {
    ids: /^t-\d+dB$/,
    check: ({ inputs, value }) => {
      const [series = NaN, shunt = NaN] = figuresOf(value);
      expectPad(readAs("Z", teeOf(series, series, shunt), [50, 50]), (inputs as { att_db: number }).att_db);
    },
  },
  {
    ids: /^t-\d+dB@/,
    check: (row) => {
      const { series, shunt } = row.inputs as { series: number; shunt: number };
      const tee = teeOf(series, series, shunt);
      expectMatrix(readAs("Z", tee, referencesOf(row)), [row.value as Matrix], ROUNDING);
      expectMatrix(renormalise(readAs("Z", tee, [50, 50]), referencesOf(row)), [row.value as Matrix], ROUNDING);
    },
  },
  {
    ids: /^mlp-/,
    check: (row) => {
      const [series = NaN, shunt = NaN, loss = NaN] = figuresOf(row.value);
      expectPad(readAs("Z", teeOf(series, 0, shunt), referencesOf(row)), loss);
    },
  },
  {
    ids: /^tpad-/,
    check: (row) => {
      const { R1, R2, R3, S } = row.value as { R1: number; R2: number; R3: number; S: Matrix };
      const network = readAs("Z", teeOf(R1, R2, R3), referencesOf(row));
      expectPad(network, (row.inputs as { att_db: number }).att_db);
      expectMatrix(network, [S], 1e-12);
    },
  },
  {
    ids: /^octave-cross-check$/,
    check: (row) => {
      const { ABCD, z } = row.inputs as { ABCD: number[][]; z: [number, number] };
      const network = readAs("H", hybridOf(complex(ABCD)), z);
      expectMatrix(network, [complex(row.value as number[][])], ROUNDING);
    },
  },
];

const complex = (matrix: readonly (readonly number[])[]): Matrix => matrix.map((line) => line.map((re) => number(re)));
