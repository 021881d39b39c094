// The margin curve against `evaluate`: the same least margin, least ends and frequencies, over kinds, limits, setups and holes.
import { expect, test } from "vitest";
import type { Requirement, Setup, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { isPointwise, marginCurve, type MarginCurve, type PointwiseRequirement } from "~/rf/margin-curve";
import { prepare } from "~/rf/prepare";
import { readFileSync } from "node:fs";
import { parseTouchstone } from "~/rf/touchstone";
import { cut, item, sweepOf } from "./sweep-of";

const SETUPS: readonly Setup[] = [
  {},
  {
    transmission: 0.1,
    noiseFloor: 90,
    directivity: 36,
    sourceMatch: 32,
    loadMatch: 36,
    tracking: 0.1,
    groupDelay: 0.5e-9,
  },
  { transmission: 0.05, transmissionRelative: 0.03, noiseFloor: 80, noiseFloorKind: "rms" },
];

const PASSBAND = [1.92e9, 1.98e9] as const;
const LINES: readonly PointwiseRequirement[] = [
  { id: "loss", kind: "insertion-loss", band: PASSBAND, max: 1.2 },
  {
    id: "sloped loss",
    kind: "insertion-loss",
    band: [1.9213e9, 1.9787e9],
    max: {
      scale: "log",
      points: [
        [1.92e9, 1.4],
        [1.95e9, 0.8],
        [1.98e9, 1.6],
      ],
    },
  },
  { id: "rejection", kind: "rejection", band: [2.02e9, 2.13e9], min: 40 },
  {
    id: "stepped rejection",
    kind: "rejection",
    band: [2.0101e9, 2.1e9],
    min: {
      scale: "linear",
      points: [
        [2.0101e9, 30],
        [2.05e9, 50],
        [2.05e9, 45],
        [2.1e9, 45],
      ],
    },
  },
  { id: "relative", kind: "rejection", band: [2.02e9, 2.1e9], min: 40, relativeTo: PASSBAND },
  { id: "port 1", kind: "return-loss", port: 1, band: PASSBAND, min: 16 },
  { id: "port 2", kind: "return-loss", port: 2, band: PASSBAND, min: 16 },
  { id: "reverse", kind: "reverse-isolation", band: [2.03e9, 2.08e9], min: 40 },
  { id: "delay", kind: "group-delay", band: PASSBAND, max: 60e-9 },
  { id: "delay over an aperture", kind: "group-delay", band: [1.9203e9, 1.9797e9], max: 60e-9, aperture: 2e6 },
  { id: "spot", kind: "rejection", band: [2.03337e9, 2.03337e9], min: 40 },
  { id: "coarse", kind: "rejection", band: [2.02e9, 2.13e9], min: 40, maxStep: 0.4e6 },
];

/** The least of a series over all stretches and the lowest frequency at which it is reached within the tolerance. */
function least({ stretches }: MarginCurve, key: "margin" | "lower" | "upper", tolerance: number) {
  const points = stretches.flatMap((stretch) =>
    Array.from(stretch.frequency, (hz, index) => ({ hz, figure: stretch[key][index] ?? NaN })),
  );
  const figure = Math.min(...points.map((point) => point.figure));
  const hz = Math.min(...points.filter((point) => point.figure <= figure + tolerance).map((point) => point.hz));
  return { figure: Math.abs(figure) <= tolerance ? 0 : figure, hz };
}

function expectSame(network: TwoPort, line: PointwiseRequirement, setup: Setup): boolean {
  const prepared = prepare(network);
  const result = item(evaluate(prepared, [line], { setup }));
  const curve = marginCurve(prepared, line, { setup });
  const name = `${line.id}, ${JSON.stringify(setup)}`;
  if (Number.isNaN(result.margin)) {
    expect(curve.stretches, name).toEqual([]);
    return false;
  }
  const tolerance = line.kind === "group-delay" ? 1e-9 * line.max : 1e-9;
  const margin = least(curve, "margin", tolerance);
  const lower = least(curve, "lower", tolerance);
  const upper = least(curve, "upper", tolerance);
  expect(margin.figure, name).toBe(result.margin);
  expect(margin.hz, name).toBe(result.frequency);
  expect([lower.figure, upper.figure], name).toEqual(result.marginInterval);
  expect(result.verdict === "fail" ? upper.hz : lower.hz, name).toBe(result.decidingFrequency);
  expect(curve.missing.length > 0, name).toBe(result.covered !== undefined);
  return true;
}

test("least margin, least ends and their frequencies are those evaluate reports, on measured sweeps", () => {
  let compared = 0;
  for (const file of ["KCF-0205_+25C.s2p", "KCF-0207_+70C.s2p"]) {
    const network = parseTouchstone(readFileSync(`db/seeds/demo-data/kestrel-cavity-filters/${file}`), file);
    for (const setup of SETUPS) for (const line of LINES) compared += expectSame(network, line, setup) ? 1 : 0;
  }
  // All but none: each of the lines is reached by both files.
  expect(compared).toBe(2 * SETUPS.length * LINES.length);
});

test("they agree on a part of the sweep, where bands are cut off and reference passbands are missing", () => {
  const file = "db/seeds/demo-data/kestrel-cavity-filters/KCF-0206_+25C.s2p";
  const network = parseTouchstone(readFileSync(file), file);
  const { frequency } = network;
  const upper = cut(
    network,
    frequency.findIndex((hz) => hz > 1.95e9),
    frequency.length - 1,
  );
  const reached = LINES.filter((line) => expectSame(upper, line, item(SETUPS, 1)));
  expect(reached.map(({ id }) => id)).not.toContain("relative");
  expect(reached.length).toBe(LINES.length - 1);
});

test("margins by hand: limit less loss in a passband, loss less limit in a stopband, infinite at a null", () => {
  const network = sweepOf({ frequency: [1e9, 2e9, 3e9, 4e9], loss: [1, 2, 41, Infinity] });
  const prepared = prepare(network);
  const passband = marginCurve(prepared, { id: "a", kind: "insertion-loss", band: [1e9, 2e9], max: 1.5 });
  expect(passband.stretches).toHaveLength(1);
  expect(Array.from(item(passband.stretches).margin, (value) => Number(value.toFixed(9)))).toEqual([0.5, -0.5]);
  const setup = { transmission: 0.1 };
  const stopband = item(
    marginCurve(prepared, { id: "b", kind: "rejection", band: [3e9, 4e9], min: 40 }, { setup }).stretches,
  );
  expect(Array.from(stopband.margin, (value) => Number(value.toFixed(9)))).toEqual([1, Infinity]);
  // ± 0.10 dB without a floor moves a loss by just that (JCGM 106 interval of the margin).
  expect(stopband.lower[0]).toBeCloseTo(0.9, 9);
  expect(stopband.upper[0]).toBeCloseTo(1.1, 9);
});

test("a step of the limit starts a new stretch at the same frequency, a hole leaves the part between out", () => {
  const frequency = [1e9, 1.1e9, 1.2e9, 1.6e9, 1.7e9];
  const prepared = prepare(sweepOf({ frequency, loss: [50, 50, 50, 50, 50] }));
  const stepped = marginCurve(prepared, {
    id: "a",
    kind: "rejection",
    band: [1e9, 1.2e9],
    min: {
      scale: "linear",
      points: [
        [1e9, 40],
        [1.1e9, 40],
        [1.1e9, 30],
        [1.2e9, 30],
      ],
    },
  });
  const shown = stepped.stretches.map((stretch) => Array.from(stretch.margin, (value) => Math.round(value)));
  expect(shown).toContainEqual([10, 10]);
  expect(shown).toContainEqual([20, 20]);
  const holed = marginCurve(prepared, { id: "b", kind: "rejection", band: [1e9, 1.7e9], min: 40, maxStep: 0.1e9 });
  expect(holed.stretches.map((stretch) => Array.from(stretch.frequency))).toEqual([
    [1e9, 1.1e9, 1.2e9],
    [1.6e9, 1.7e9],
  ]);
  expect(holed.missing).toEqual([[1.2e9, 1.6e9]]);
});

test("ripple, variation, phase linearity, bandwidths and shape factors have no margin at a frequency", () => {
  const others: Requirement[] = [
    { id: "a", kind: "ripple", band: PASSBAND, max: 1 },
    { id: "b", kind: "group-delay-variation", band: PASSBAND, max: 1e-9 },
    { id: "c", kind: "phase-linearity", band: PASSBAND, max: 5 },
    { id: "d", kind: "centre-frequency", level: 3, nominal: 1.95e9, tolerance: 1e6 },
    { id: "e", kind: "bandwidth", level: 3, min: 6e7 },
    { id: "f", kind: "shape-factor", levels: [3, 30], max: 2 },
  ];
  expect(others.filter(isPointwise)).toEqual([]);
  expect(LINES.every(isPointwise)).toBe(true);
});
