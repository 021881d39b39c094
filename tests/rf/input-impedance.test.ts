// Impedances at the ports and standing-wave ratios: by hand, and as scikit-rf has them, live.
import { beforeAll, expect, test } from "vitest";
import type { Trace } from "~/rf/contract";
import { aperturesWithin, delayCurve } from "~/rf/delay-curve";
import { curvesOf } from "~/rf/curves";
import { impedanceOf, openImpedance, standingWaveRatio, terminatedImpedance } from "~/rf/input-impedance";
import { prepare } from "~/rf/prepare";
import { twoPortOf, type ComplexNumber, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";

interface Generated {
  readonly f_hz: readonly number[];
  readonly s: MatrixSeries;
  readonly z0: readonly [number, number];
}
interface Described {
  readonly terminated: readonly (readonly ComplexNumber[])[];
  readonly open: readonly (readonly (ComplexNumber | null)[])[];
  readonly vswr: readonly (readonly number[])[];
  readonly delay: readonly (number | null)[];
}

const APERTURE = 4e6;
let networks: readonly Generated[];
let wanted: readonly Described[];

beforeAll(() => {
  ({ networks } = runPython("generate_two_ports.py", [], { seed: 20260308, count: 24 }) as { networks: Generated[] });
  const asked = networks.map(({ f_hz, s, z0 }) => ({ f_hz, s, z0, aperture: APERTURE }));
  wanted = runPython("port_impedances.py", [], asked) as Described[];
});

const preparedOf = ({ f_hz, s, z0 }: Generated) => prepare(twoPortOf(f_hz, s, z0), z0);

/** Largest distance relative to the wanted figure, over the points that have one. */
function distance(found: Trace, figures: readonly (ComplexNumber | null)[] | undefined): number {
  const distances = (figures ?? []).flatMap((figure, k) =>
    figure === null
      ? []
      : [
          Math.hypot((found.re[k] ?? NaN) - figure.re, (found.im[k] ?? NaN) - figure.im) /
            Math.hypot(figure.re, figure.im),
        ],
  );
  expect(distances.length).toBeGreaterThan(0);
  return Math.max(...distances);
}

test("input impedances with the far port terminated are scikit-rf's of the cascade with a matched load within 1e-9", () => {
  networks.forEach((network, k) => {
    for (const port of [1, 2] as const)
      expect(distance(terminatedImpedance(preparedOf(network), port), wanted[k]?.terminated[port - 1])).toBeLessThan(
        1e-9,
      );
  });
});

test("open-circuit impedances are scikit-rf's within 1e-9 where 1 - S is well conditioned", () => {
  networks.forEach((network, k) => {
    for (const port of [1, 2] as const)
      expect(distance(openImpedance(preparedOf(network), port), wanted[k]?.open[port - 1])).toBeLessThan(1e-9);
  });
});

test("standing-wave ratios are scikit-rf's within 1e-9", () => {
  networks.forEach(({ s }, k) => {
    s.forEach((matrix, point) => {
      for (const port of [0, 1]) {
        const { re, im } = matrix[port]?.[port] ?? { re: NaN, im: NaN };
        const ratio = wanted[k]?.vswr[port]?.[point] ?? NaN;
        expect(Math.abs(standingWaveRatio(Math.hypot(re, im)) / ratio - 1)).toBeLessThan(1e-9);
      }
    });
  });
});

test("delays over an aperture are numpy's from the interpolated unwrapped phase within 1e-9, and absent where it leaves the sweep", () => {
  networks.forEach((network, k) => {
    const { delay, frequency } = delayCurve(curvesOf(preparedOf(network)), { aperture: APERTURE });
    const figures = wanted[k]?.delay ?? [];
    const largest = Math.max(...figures.map((figure) => Math.abs(figure ?? 0)));
    expect(Array.from(frequency)).toEqual(network.f_hz);
    figures.forEach((figure, point) => {
      if (figure === null) expect(delay[point]).toBeNaN();
      else expect(Math.abs((delay[point] ?? NaN) - figure)).toBeLessThan(1e-9 * largest);
    });
  });
});

test("a 100 ohm series resistor: 150 ohm into a 50 ohm load, no open-circuit impedance; a shunt one has 100 ohm open", () => {
  // By hand: series Z has S11 = Z/(Z + 2 Z0) = 0.5, S21 = 0.5; shunt R has S11 = -Z0/(Z0 + 2R) = -0.2, S21 = 0.8.
  const real = (value: number): ComplexNumber => ({ re: value, im: 0 });
  const symmetric = (s11: number, s21: number) =>
    prepare(
      twoPortOf(
        [1e9],
        [
          [
            [real(s11), real(s21)],
            [real(s21), real(s11)],
          ],
        ],
      ),
    );
  const series = symmetric(0.5, 0.5);
  expect(terminatedImpedance(series, 1).re[0]).toBeCloseTo(150, 9);
  expect(openImpedance(series, 1).re[0]).toBeNaN();
  const shunt = symmetric(-0.2, 0.8);
  expect(terminatedImpedance(shunt, 2).re[0]).toBeCloseTo(100 / 3, 9); // 100 Ω beside 50 Ω
  expect(openImpedance(shunt, 2).re[0]).toBeCloseTo(100, 9);
});

test("no impedance where the reflection is total and in phase, none from a file without its transmission", () => {
  expect(impedanceOf(1, 0, 50)).toEqual({ re: NaN, im: NaN });
  expect(impedanceOf(-1, 0, 50).re).toBe(0);
  expect(standingWaveRatio(1)).toBe(Infinity);
  expect(standingWaveRatio(1.01)).toBeNaN();
  const nothing = { re: 0, im: 0 };
  const onePath = prepare(
    twoPortOf(
      [1e9],
      [
        [
          [{ re: 0.1, im: 0 }, nothing],
          [nothing, { re: 0.1, im: 0 }],
        ],
      ],
    ),
  );
  expect(openImpedance(onePath, 1).re[0]).toBeNaN();
  expect(terminatedImpedance(onePath, 1).re[0]).toBeCloseTo((50 * 1.1) / 0.9, 9);
});

test("the aperture in use spans two steps inside a run and one at its ends", () => {
  const matrix = [
    [
      { re: 0.1, im: 0 },
      { re: 0, im: 0.9 },
    ],
    [
      { re: 0, im: 0.9 },
      { re: 0.1, im: 0 },
    ],
  ];
  const frequency = [1e9, 1.001e9, 1.002e9, 1.004e9];
  const curve = delayCurve(
    curvesOf(
      prepare(
        twoPortOf(
          frequency,
          frequency.map(() => matrix),
        ),
      ),
    ),
  );
  expect(Array.from(curve.aperture)).toEqual([1e6, 2e6, 3e6, 2e6]);
  expect(aperturesWithin(curve, [1e9, 1.002e9])).toEqual([1e6, 3e6]);
  expect(aperturesWithin(curve, [2e9, 3e9])).toBeUndefined();
});
