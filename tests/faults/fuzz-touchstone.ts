// Reads a million mutated Touchstone files; prints totals and ends with 1 if any was read wrong or took 2 s.
// Usage: node --import tsx tests/faults/fuzz-touchstone.ts [files] [seed]
import { Worker, isMainThread, parentPort, workerData } from "node:worker_threads";
import { chanceOf, inBase64, judge, mutant, touchstoneExamples } from "../support/mutated-touchstone";

interface Work {
  readonly files: number;
  readonly seed: number;
  /** [index of the file being read], shared. */
  readonly progress: Int32Array;
  /** Address of this file. */
  readonly file: string;
}
interface Report {
  readonly read: number;
  readonly refused: number;
  readonly wrong: number;
  readonly longest: number;
}

const FILES = 1_000_000;
const SEED = 20260214;
const LONGEST_MS = 2_000;
const ALL_WITHIN_MS = 25 * 60_000;
const FAULTS_PRINTED = 20;
/** A thread does not inherit the loader of TypeScript. */
const READER = `import("tsx/esm/api").then(({ register }) => {
  register();
  return import(require("node:worker_threads").workerData.file);
});`;

if (isMainThread) supervise(Number(process.argv[2] ?? FILES), Number(process.argv[3] ?? SEED));
else parentPort?.postMessage(readAll(workerData as Work));

/** Reads in a thread, so that a file that never ends is stopped and named. */
function supervise(files: number, seed: number): void {
  if (!Number.isSafeInteger(files) || files < 1 || !Number.isSafeInteger(seed)) {
    throw new RangeError("usage: fuzz-touchstone.ts [files] [seed], whole numbers");
  }
  console.log(`${files} mutated files, seed ${seed}`);
  const started = performance.now();
  const progress = new Int32Array(new SharedArrayBuffer(4));
  const work = { files, seed, progress, file: import.meta.url } satisfies Work;
  const worker = new Worker(READER, { eval: true, workerData: work });
  let last = -1;
  let since = started;
  const watch = setInterval(() => {
    const now = performance.now();
    const current = Atomics.load(progress, 0);
    if (current !== last) {
      last = current;
      since = now;
    }
    // Nothing moves before the first file while the thread starts.
    const isStuck = current > 0 && now - since > LONGEST_MS;
    if (isStuck || now - started > ALL_WITHIN_MS) {
      end(isStuck ? `file ${current} took over ${LONGEST_MS} ms` : `stopped after ${current} files: time is up`, 1);
    }
  }, 250);

  const end = (line: string, code: number) => {
    clearInterval(watch);
    console.log(`${line} (${((performance.now() - started) / 1000).toFixed(1)} s)`);
    process.exitCode = code;
    void worker.terminate();
  };
  worker.on("message", ({ read, refused, wrong, longest }: Report) => {
    const totals = `${read} read, ${refused} refused, ${wrong} wrong, longest ${longest.toFixed(1)} ms`;
    end(totals, wrong === 0 && longest < LONGEST_MS && read >= files / 5 ? 0 : 1);
  });
  worker.on("error", (error) => {
    end(`the reading thread failed: ${String(error)}`, 1);
  });
}

function readAll({ files, seed, progress }: Work): Report {
  const examples = touchstoneExamples();
  const chance = chanceOf(seed);
  const totals = { read: 0, refused: 0, wrong: 0 };
  let longest = 0;
  for (let k = 0; k < files; k += 1) {
    Atomics.store(progress, 0, k);
    const bytes = mutant(examples, chance);
    const started = performance.now();
    const { outcome, fault } = judge(bytes);
    longest = Math.max(longest, performance.now() - started);
    totals[outcome] += 1;
    if (fault !== undefined && totals.wrong <= FAULTS_PRINTED) console.log(`file ${k}: ${fault}: ${inBase64(bytes)}`);
  }
  return { ...totals, longest };
}
