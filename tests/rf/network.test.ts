// Renormalisation against scikit-rf, live, and what it keeps.
import fc from "fast-check";
import { beforeAll, expect, test } from "vitest";
import { largestSingularValue } from "~/rf/check-waves";
import { renormalise } from "~/rf/network";
import { expectMatrix, matricesOf, twoPortOf, type ComplexNumber, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";

interface Case {
  readonly s: MatrixSeries;
  readonly from: readonly [number, number];
  readonly to: readonly [number, number];
  readonly through_z?: boolean;
}

const number = (re: number, im = 0): ComplexNumber => ({ re, im });
const THROUGH: MatrixSeries = [
  [
    [number(0), number(1)],
    [number(1), number(0)],
  ],
];
const frequencies = (s: MatrixSeries) => s.map((_, k) => 1e9 + k);

/** Numbers in [-1, 1) that are the same in every run (Park and Miller's generator, Communications of the ACM 31, 1988). */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48271) % 2147483647;
    return (2 * state) / 2147483647 - 1;
  };
}

function randomCases(): Case[] {
  const next = generator(20260101);
  // Half the largest passive size and less, so that 1 - S is well away from singular.
  const element = () => number(0.35 * next(), 0.35 * next());
  const matrix = () => [
    [element(), element()],
    [element(), element()],
  ];
  const ohm = () => 10 ** (1.7 + next());
  return Array.from({ length: 20 }, () => ({
    s: Array.from({ length: 10 }, matrix),
    from: [ohm(), ohm()] as const,
    to: [ohm(), ohm()] as const,
  }));
}

const random = randomCases();
const throughs: Case[] = [
  { s: THROUGH, from: [50, 50], to: [50, 75], through_z: false },
  { s: THROUGH, from: [50, 50], to: [75, 50], through_z: false },
  { s: THROUGH, from: [50, 50], to: [12.5, 200], through_z: false },
  { s: THROUGH, from: [50, 50], to: [75, 75], through_z: false },
];
let answers: { cascade: MatrixSeries; through_z?: MatrixSeries }[];
beforeAll(() => {
  answers = runPython("renormalise.py", [], [...random, ...throughs]) as typeof answers;
});

const renormalised = ({ s, from, to }: Case) => renormalise(twoPortOf(frequencies(s), s, from), to);

test("200 random networks between unequal impedances renormalise as in scikit-rf, by Z and by impedance steps", () => {
  expect(answers).toHaveLength(24);
  random.forEach((one, k) => {
    const network = renormalised(one);
    expect(network.referenceImpedance).toEqual(one.to);
    expectMatrix(network, answers[k]?.cascade ?? [], 1e-12, `case ${k} by steps`);
    expectMatrix(network, answers[k]?.through_z ?? [], 1e-12, `case ${k} through Z`);
  });
});

test("a through, which has no Z, renormalises as scikit-rf's cascade of impedance steps", () => {
  throughs.forEach((one, k) => expectMatrix(renormalised(one), answers[random.length + k]?.cascade ?? [], 1e-12));
  // By hand: from 50 to 50 and 75 ohm, S11 = (75 - 50)/(75 + 50) = 0.2 and S21 = 2 sqrt(50 75)/125.
  const [matrix] = matricesOf(renormalised(throughs[0] as Case));
  expect(matrix?.[0]?.[0]?.re).toBeCloseTo(0.2, 15);
  expect(matrix?.[1]?.[0]?.re).toBeCloseTo((2 * Math.sqrt(50 * 75)) / 125, 15);
});

const unit = fc.double({ min: -0.5, max: 0.5, noNaN: true });
const ohm = fc.double({ min: 1, max: 1000, noNaN: true });
const element = fc.record({ re: unit, im: unit });
type MatrixOf<Value> = readonly [readonly [Value, Value], readonly [Value, Value]];
const pair = <Value>(value: fc.Arbitrary<Value>) => fc.tuple(value, value);

test("renormalising there and back gives the same network", () => {
  fc.assert(
    fc.property(pair(pair(element)), pair(ohm), pair(ohm), (matrix, from, to) => {
      const network = twoPortOf([1e9], [matrix], from);
      // Steps of 1 to 1000 ohm lose three digits at most each way.
      expectMatrix(renormalise(renormalise(network, to), from), [matrix], 1e-9);
    }),
  );
});

test("renormalising keeps reciprocity", () => {
  fc.assert(
    fc.property(element, element, element, pair(ohm), (s11, s21, s22, to) => {
      const { s21: forward, s12: backward } = renormalise(
        twoPortOf(
          [1e9],
          [
            [
              [s11, s21],
              [s21, s22],
            ],
          ],
        ),
        to,
      );
      expect(forward).toEqual(backward);
    }),
  );
});

/** The size of S^H S - 1 at one point: zero for a network that gives back all the power it takes. */
function lossOf([[s11, s12], [s21, s22]]: MatrixOf<ComplexNumber>): number {
  const power = (...numbers: ComplexNumber[]) => numbers.reduce((sum, { re, im }) => sum + re * re + im * im, 0);
  const across = number(
    s11.re * s12.re + s11.im * s12.im + s21.re * s22.re + s21.im * s22.im,
    s11.re * s12.im - s11.im * s12.re + s21.re * s22.im - s21.im * s22.re,
  );
  return Math.max(Math.abs(power(s11, s21) - 1), Math.abs(power(s12, s22) - 1), Math.hypot(across.re, across.im));
}

test("a lossless network stays lossless between any references, reciprocal or not", () => {
  const angle = fc.double({ min: 0, max: 2 * Math.PI, noNaN: true });
  // Up to a hundred times apart: steps of which rounding leaves 1e-12.
  const moderate = fc.double({ min: 5, max: 500, noNaN: true });
  const polar = (size: number, radians: number) => number(size * Math.cos(radians), size * Math.sin(radians));
  fc.assert(
    fc.property(angle, angle, angle, angle, pair(moderate), pair(moderate), (split, p11, p21, p12, from, to) => {
      // Every unitary 2 x 2 matrix: the phase of S22 follows from the three others.
      const [reflected, passed] = [Math.cos(split), Math.sin(split)];
      const matrix: MatrixOf<ComplexNumber> = [
        [polar(reflected, p11), polar(passed, p12)],
        [polar(passed, p21), polar(-reflected, p12 + p21 - p11)],
      ];
      expect(lossOf(matrix)).toBeLessThan(1e-14);
      const [moved] = matricesOf(renormalise(twoPortOf([1e9], [matrix], from), to));
      expect(lossOf(moved as unknown as MatrixOf<ComplexNumber>)).toBeLessThan(1e-11);
    }),
  );
});

test("a passive network stays passive between any references", () => {
  fc.assert(
    fc.property(pair(pair(element)), pair(ohm), pair(ohm), (matrix, from, to) => {
      const network = twoPortOf([1e9], [matrix], from);
      fc.pre(largestSingularValue(network, 0) <= 1);
      expect(largestSingularValue(renormalise(network, to), 0)).toBeLessThanOrEqual(1 + 1e-9);
    }),
  );
});

test("the same references give the same network, and references that are not positive are refused", () => {
  const network = twoPortOf([1e9], THROUGH);
  expect(renormalise(network, [50, 50])).toBe(network);
  for (const wrong of [0, -50, NaN, Infinity]) expect(() => renormalise(network, [50, wrong])).toThrow(RangeError);
});
