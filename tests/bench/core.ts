// Times the core: reading beside a plain split and scikit-rf, its memory, scoring and its growth, a frame of live rescoring.
import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { cpus, tmpdir } from "node:os";
import path from "node:path";
import { performance } from "node:perf_hooks";
import type { TwoPort } from "../../app/rf/contract";
import { checkNetwork, evaluate, parseTouchstone, prepare } from "../../app/rf/index";
import { renormalise } from "../../app/rf/network";
import { fresh, movedRequirements, refined, REQUIREMENTS, SETUP, splitOnly, writeSample } from "./samples";
import { print, writeTable, type Row } from "./table";

const POINTS = 10_001;
const MANY_POINTS = 100_001;
const WARM_UPS = 100;
/** For what takes long and is warm soon: the plain split, and scoring of what the small sweeps have warmed. */
const FEW_WARM_UPS = 10;
const RUNS = 9;
/** Not the first python3 of the PATH: that one may have no scikit-rf. */
const PYTHON = "/usr/bin/python3";
const SCORED_FILE = "tests/reference/journey/wide-10001.s2p";
const DOUBLES_A_POINT = 9;
const TRACES = 20;
const FRAME_MS = 16;
const MEGABYTE = 1e6;

const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN;
const milliseconds = (value: number) => `${value.toFixed(value < 10 ? 2 : 1)} ms`;
const megabytes = (bytes: number) => `${(bytes / MEGABYTE).toFixed(1)} MB`;

/** Median milliseconds, once warm; each run gets an input of its own, made outside the clock. */
function time<Input>(make: () => Input, run: (input: Input) => unknown, warmUps = WARM_UPS): number {
  for (let k = 0; k < warmUps; k += 1) run(make());
  return median(
    Array.from({ length: RUNS }, () => {
      const input = make();
      const begun = performance.now();
      run(input);
      return performance.now() - begun;
    }),
  );
}

/** What a program in another process prints about a file that holds these bytes, as JSON. */
function askAbout(bytes: Uint8Array, program: string, parameters: (file: string) => readonly string[]): unknown {
  const folder = mkdtempSync(path.join(tmpdir(), "core-bench-"));
  try {
    const file = path.join(folder, "sample.s2p");
    writeFileSync(file, bytes);
    const printed = execFileSync(program, parameters(file), { encoding: "utf8", stdio: ["ignore", "pipe", "ignore"] });
    return JSON.parse(printed) as unknown;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function timeScikitRf(bytes: Uint8Array): number {
  const script = path.resolve("tests/bench/read_with_scikit_rf.py");
  return median(askAbout(bytes, PYTHON, (file) => [script, file, String(RUNS)]) as number[]);
}

/** @param times how many times as long a plain split and scikit-rf are to take */
function readingRows(points: number, times: readonly [split: number, scikitRf: number]): Row[] {
  const bytes = writeSample(points);
  const read = time(() => bytes, parseTouchstone);
  const against = (name: string, other: number, least: number): Row => ({
    name: `the same by ${name}, ${milliseconds(other)}`,
    figure: `${(other / read).toFixed(1)} times`,
    target: `at least ${least} times`,
    reached: other >= least * read,
  });
  return [
    { name: `read ${points.toLocaleString("en-GB")} points, ${megabytes(bytes.length)}`, figure: milliseconds(read) },
    against(
      "split and Number",
      time(() => bytes, splitOnly, FEW_WARM_UPS),
      times[0],
    ),
    against("scikit-rf", timeScikitRf(bytes), times[1]),
  ];
}

/** The first reading of a process: nothing is compiled yet. */
function coldRow(): Row {
  const bytes = writeSample(POINTS);
  const begun = performance.now();
  parseTouchstone(bytes);
  const cold = performance.now() - begun;
  return { name: `read ${POINTS.toLocaleString("en-GB")} points, first time`, figure: milliseconds(cold) };
}

/** In a process of its own: what the resident set rises to while a file is read that is in memory already. */
function memoryRow(): Row {
  const script = path.resolve("tests/bench/memory.ts");
  const asked = askAbout(writeSample(MANY_POINTS), process.execPath, (file) => [
    "--expose-gc",
    "--import",
    "tsx",
    script,
    file,
  ]);
  const { points, fileBytes, extraBytes } = asked as { points: number; fileBytes: number; extraBytes: number };
  const times = extraBytes / (points * DOUBLES_A_POINT * Float64Array.BYTES_PER_ELEMENT);
  return {
    name: `peak of extra memory, reading ${megabytes(fileBytes)}: ${megabytes(extraBytes)}`,
    figure: `${times.toFixed(2)} series`,
    target: "under 3 times its series",
    reached: times < 3,
  };
}

function bounded(name: string, most: number, value: number): Row {
  return { name, figure: milliseconds(value), target: `under ${most} ms`, reached: value < most };
}

function scoringRows(network: TwoPort): Row[] {
  const make = () => fresh(network);
  const plain = time(make, (input) => evaluate(input, REQUIREMENTS));
  const withSetup = time(make, (input) => evaluate(input, REQUIREMENTS, { setup: SETUP }));
  const context = { requirements: REQUIREMENTS, setup: SETUP };
  return [
    bounded("score 12 requirements, 10,001 points", 0.8, plain),
    bounded("the same with a setup's uncertainty", 1.5, withSetup),
    {
      name: "checks of the data, 10,001 points",
      figure: milliseconds(time(make, (input) => checkNetwork(input, context))),
    },
    {
      name: "renormalise to 75 Ω, 10,001 points",
      figure: milliseconds(time(make, (input) => renormalise(input, [75, 75]))),
    },
  ];
}

/** Scoring finer sweeps over the same range: the cost a point is to stay what it is. */
function growthRows(network: TwoPort): Row[] {
  return [10, 100].map((steps) => {
    const fine = refined(network, steps);
    const taken = time(
      () => fresh(fine),
      (input) => evaluate(input, REQUIREMENTS, { setup: SETUP }),
      FEW_WARM_UPS,
    );
    const points = fine.frequency.length;
    const nanoseconds = (taken * 1e6) / points;
    return {
      name: `score with a setup, ${points.toLocaleString("en-GB")} points: ${nanoseconds.toFixed(0)} ns a point`,
      figure: milliseconds(taken),
    };
  });
}

/** Limits move, the curves stay: what a page does while a limit is dragged. */
function frameRow(network: TwoPort): Row {
  const traces = Array.from({ length: TRACES }, () => prepare(fresh(network)));
  let frame = 0;
  const rescore = () => {
    frame += 1;
    const requirements = movedRequirements(0.01 * (frame % 100));
    for (const trace of traces) evaluate(trace, requirements, { setup: SETUP });
  };
  return bounded(
    `rescore ${TRACES} prepared traces, 12 moved limits each`,
    FRAME_MS,
    time(() => undefined, rescore),
  );
}

const cold = coldRow();
const network = parseTouchstone(readFileSync(SCORED_FILE));
const rows: Row[] = [
  ...readingRows(POINTS, [7, 10]),
  cold,
  ...readingRows(MANY_POINTS, [7, 12]),
  memoryRow(),
  ...scoringRows(network),
  ...growthRows(network),
  frameRow(network),
];
const processor = cpus()[0]?.model.trim() ?? "unknown processor";
const heading = `Medians of ${RUNS} runs after ${WARM_UPS} (${FEW_WARM_UPS} of the plain split and of the sweeps finer than 10,001 points), Node ${process.versions.node}, ${processor}.`;
console.log(heading);
print(rows);
writeTable("README.md", heading, rows);
