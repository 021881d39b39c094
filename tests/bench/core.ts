// Times the core: reading 10,001 points against a plain split and against scikit-rf, scoring, checks, renormalising.
import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { performance } from "node:perf_hooks";
import { checkNetwork, evaluate, parseTouchstone, type Requirement, type Setup } from "../../app/rf/index";
import type { Series, Trace, TwoPort } from "../../app/rf/contract";
import { renormalise } from "../../app/rf/network";

const POINTS = 10_001;
const WARM_UPS = 100;
const RUNS = 9;
/** Not the first python3 of the PATH: that one may have no scikit-rf. */
const PYTHON = "/usr/bin/python3";
const SPLIT_TIMES = 7;
const SCIKIT_RF_TIMES = 10;
const SCORED_FILE = "tests/reference/journey/wide-10001.s2p";
const PASSBAND = [1.92e9, 1.98e9] as const;
const ABOVE = [2.02e9, 2.2e9] as const;

const REQUIREMENTS: readonly Requirement[] = [
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
const SETUP: Setup = {
  transmission: 0.05,
  noiseFloor: 110,
  directivity: 40,
  sourceMatch: 38,
  loadMatch: 40,
  tracking: 0.03,
  groupDelay: 0.3e-9,
};

/** About 1 MB: GHz, magnitude and angle, with the digits analysers write. */
function writeSample(): Uint8Array {
  let state = 1;
  const random = () => (state = (state * 16807) % 2147483647) / 2147483647;
  const pair = () => `${random().toFixed(9)} ${(random() * 360 - 180).toFixed(6)}`;
  const rows = Array.from(
    { length: POINTS },
    (_, k) => `${(1.7 + k * 0.00005).toFixed(9)} ${pair()} ${pair()} ${pair()} ${pair()}`,
  );
  return new TextEncoder().encode(["# GHz S MA R 50", ...rows, ""].join("\n"));
}

/** What the reading is measured against: lines, white space and `Number`, and nothing else. */
function splitOnly(bytes: Uint8Array): number {
  let sum = 0;
  for (const line of new TextDecoder().decode(bytes).split("\n")) {
    for (const word of line.split(/\s+/)) sum += Number(word);
  }
  return sum;
}

const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN;

/** Median milliseconds, once warm; each run gets an input of its own, made outside the clock. */
function time<Input>(make: () => Input, run: (input: Input) => unknown): number {
  for (let k = 0; k < WARM_UPS; k += 1) run(make());
  return median(
    Array.from({ length: RUNS }, () => {
      const input = make();
      const begun = performance.now();
      run(input);
      return performance.now() - begun;
    }),
  );
}

/** The same network in new memory, so that nothing kept of an earlier run can answer. */
function fresh(network: TwoPort): TwoPort {
  const copy = (series: Series) => series.slice();
  const trace = ({ re, im }: Trace): Trace => ({ re: copy(re), im: copy(im) });
  const { frequency, s11, s21, s12, s22 } = network;
  return {
    ...network,
    frequency: copy(frequency),
    s11: trace(s11),
    s21: trace(s21),
    s12: trace(s12),
    s22: trace(s22),
  };
}

function timeScikitRf(bytes: Uint8Array): number {
  const folder = mkdtempSync(path.join(tmpdir(), "core-bench-"));
  try {
    const file = path.join(folder, "sample.s2p");
    writeFileSync(file, bytes);
    const script = path.resolve("tests/bench/read_with_scikit_rf.py");
    const printed = execFileSync(PYTHON, [script, file, String(RUNS)], {
      encoding: "utf8",
      stdio: ["ignore", "pipe", "ignore"],
    });
    return median(JSON.parse(printed) as number[]);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

interface Row {
  readonly name: string;
  readonly milliseconds: number;
  /** What is asked for, in words, and whether it is reached; left out where nothing is asked. */
  readonly target?: string;
  readonly reached?: boolean;
}

function readingRows(): Row[] {
  const bytes = writeSample();
  const begun = performance.now();
  parseTouchstone(bytes);
  const cold = performance.now() - begun;
  const read = time(() => bytes, parseTouchstone);
  const split = time(() => bytes, splitOnly);
  const scikitRf = timeScikitRf(bytes);
  const against = (name: string, other: number, times: number): Row => ({
    name: `${name}, ${(other / read).toFixed(1)} times as long`,
    milliseconds: other,
    target: `${times} times as long`,
    reached: other >= times * read,
  });
  return [
    { name: `read ${(bytes.length / 1e6).toFixed(2)} MB, first time`, milliseconds: cold },
    { name: "read, warm", milliseconds: read },
    against("split and Number", split, SPLIT_TIMES),
    against("scikit-rf", scikitRf, SCIKIT_RF_TIMES),
  ];
}

function scoringRows(): Row[] {
  const network = parseTouchstone(readFileSync(SCORED_FILE));
  const make = () => fresh(network);
  const bounded = (name: string, most: number, run: (input: TwoPort) => unknown): Row => {
    const milliseconds = time(make, run);
    return { name, milliseconds, target: `under ${most} ms`, reached: milliseconds < most };
  };
  const requirements = REQUIREMENTS;
  return [
    bounded("score 12 requirements", 0.8, (input) => evaluate(input, requirements)),
    bounded("score 12 requirements, setup", 1.5, (input) => evaluate(input, requirements, { setup: SETUP })),
    { name: "checkNetwork", milliseconds: time(make, (input) => checkNetwork(input, { requirements, setup: SETUP })) },
    { name: "renormalise to 75 ohm", milliseconds: time(make, (input) => renormalise(input, [75, 75])) },
  ];
}

console.log(`${POINTS} points; medians of ${RUNS} runs after ${WARM_UPS}, milliseconds`);
for (const { name, milliseconds, target, reached } of [...readingRows(), ...scoringRows()]) {
  const verdict = target === undefined ? "" : `  ${target}: ${reached ? "reached" : "not reached"}`;
  console.log(`${name.padEnd(42)}${milliseconds.toFixed(3).padStart(10)}${verdict}`);
}
