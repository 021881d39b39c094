// What the benchmarks work on: a file as analysers write it, a plain reader to compare with, a specification and its setup.
import type { Requirement, Series, Setup, Trace, TwoPort } from "../../app/rf/contract";

const PASSBAND = [1.92e9, 1.98e9] as const;
const ABOVE = [2.02e9, 2.2e9] as const;

/** Twelve lines of nine kinds, as a specification of a duplexer's receive filter has them. */
export const REQUIREMENTS: readonly Requirement[] = [
  { id: "1", kind: "insertion-loss", band: PASSBAND, max: 1.2 },
  { id: "2", kind: "ripple", band: PASSBAND, max: 0.8 },
  { id: "3", kind: "ripple", band: PASSBAND, max: 0.5, window: 5e6 },
  { id: "4", kind: "rejection", band: [1.7e9, 1.88e9], min: 50 },
  {
    id: "5",
    kind: "rejection",
    band: ABOVE,
    min: {
      points: [
        [2.02e9, 40],
        [2.2e9, 60],
      ],
      scale: "linear",
    },
  },
  { id: "6", kind: "return-loss", port: 1, band: PASSBAND, min: 15 },
  { id: "7", kind: "return-loss", port: 2, band: PASSBAND, min: 15 },
  { id: "8", kind: "reverse-isolation", band: ABOVE, min: 40 },
  { id: "9", kind: "group-delay-variation", band: PASSBAND, max: 40e-9, window: 10e6 },
  { id: "10", kind: "bandwidth", level: 3, min: 60e6 },
  { id: "11", kind: "centre-frequency", level: 3, nominal: 1.95e9, tolerance: 2e6 },
  { id: "12", kind: "shape-factor", levels: [3, 30], max: 2 },
];
export const SETUP: Setup = {
  transmission: 0.05,
  noiseFloor: 110,
  directivity: 40,
  sourceMatch: 38,
  loadMatch: 40,
  tracking: 0.03,
  groupDelay: 0.3e-9,
};

/** The requirements with constant limits moved by some dB, as a hand drags them. */
export function movedRequirements(db: number): Requirement[] {
  return REQUIREMENTS.map((requirement) => {
    if (requirement.kind === "insertion-loss" && typeof requirement.max === "number") {
      return { ...requirement, max: requirement.max + db };
    }
    if ("min" in requirement && typeof requirement.min === "number" && requirement.kind !== "bandwidth") {
      return { ...requirement, min: requirement.min - db };
    }
    return requirement;
  });
}

/** A file in GHz, magnitude and angle with the digits analysers write; about 105 bytes a point. */
export function writeSample(points: number): Uint8Array {
  let state = 1;
  const random = () => (state = (state * 16807) % 2147483647) / 2147483647;
  const pair = () => `${random().toFixed(9)} ${(random() * 360 - 180).toFixed(6)}`;
  const step = 0.5 / (points - 1);
  const rows = Array.from(
    { length: points },
    (_, k) => `${(1.7 + k * step).toFixed(9)} ${pair()} ${pair()} ${pair()} ${pair()}`,
  );
  return new TextEncoder().encode(["# GHz S MA R 50", ...rows, ""].join("\n"));
}

/** What the reading is measured against: lines, white space and `Number`, and nothing else. */
export function splitOnly(bytes: Uint8Array): number {
  let sum = 0;
  for (const line of new TextDecoder().decode(bytes).split("\n")) {
    for (const word of line.split(/\s+/)) sum += Number(word);
  }
  return sum;
}

/** The same network in new memory, so that nothing kept of an earlier run can answer. */
export function fresh(network: TwoPort): TwoPort {
  return mapSeries(network, (series) => series.slice());
}

/** The same network with a number of steps in place of each: linear in real and imaginary part between the samples. */
export function refined(network: TwoPort, steps: number): TwoPort {
  return mapSeries(network, (series) =>
    Float64Array.from({ length: (series.length - 1) * steps + 1 }, (_, index) => {
      const below = Math.min(Math.floor(index / steps), series.length - 2);
      const start = series[below] as number;
      return start + ((series[below + 1] as number) - start) * (index / steps - below);
    }),
  );
}

function mapSeries(network: TwoPort, change: (series: Series) => Series): TwoPort {
  const trace = ({ re, im }: Trace): Trace => ({ re: change(re), im: change(im) });
  const { frequency, s11, s21, s12, s22 } = network;
  return {
    ...network,
    frequency: change(frequency),
    s11: trace(s11),
    s21: trace(s21),
    s12: trace(s12),
    s22: trace(s22),
  };
}
