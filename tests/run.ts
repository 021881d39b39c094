// What `npm test` runs after provisioning: checks, Vitest, the build, the browser journeys; ends with the line of totals.
import { once } from "node:events";
import { mkdir, readFile, rm } from "node:fs/promises";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { startChild, type Child } from "../db/child-process";
import { takeLock } from "../db/lock";
import { buildIfStale } from "../app/start/build";
import { plainEnvironment } from "./support/product";

interface Totals {
  passed: number;
  failed: number;
}

const OUTPUT = path.join("tests", "output");
const VITEST_REPORT = path.join(OUTPUT, "vitest.json");
const JOURNEYS = path.join("tests", "browser", "run.ts");
/** A guard, not the aim: a shared machine may be three times as slow as a quiet one. */
const ALL_WITHIN_MS = 30 * 60_000;
const STOP_WITHIN_MS = 10_000;

const environment = plainEnvironment();
const totals: Totals = { passed: 0, failed: 0 };
const times: string[] = [];
let running: Child | undefined;
let ending = false;

async function runAll(): Promise<void> {
  await mkdir(OUTPUT, { recursive: true });
  for (const script of ["typecheck", "lint", "depcruise"]) {
    await stage(script, async () => verdict((await run("npm", ["run", "--silent", script])).code === 0));
  }
  await stage("vitest", runVitest);
  const built = await stage("build", async () => {
    await buildIfStale({ logFile: path.join(OUTPUT, "build.log"), say: (line) => console.log(line) });
    return verdict(true);
  });
  if (built) await stage("browser journeys", runJourneys);
}

/** Runs one part, adds its totals, keeps its time, and tells if all of it passed; one that throws counts as one failure. */
async function stage(name: string, run: () => Promise<Totals>): Promise<boolean> {
  if (ending) return false;
  console.log(`\n== ${name}`);
  const started = performance.now();
  const result = await run().catch((error: unknown) => {
    console.error(error instanceof Error ? error.message : error);
    return verdict(false);
  });
  totals.passed += result.passed;
  totals.failed += result.failed;
  times.push(`${name} ${((performance.now() - started) / 1000).toFixed(1)} s`);
  return result.failed === 0;
}

function verdict(passed: boolean): Totals {
  return { passed: passed ? 1 : 0, failed: passed ? 0 : 1 };
}

async function runVitest(): Promise<Totals> {
  await rm(VITEST_REPORT, { force: true });
  const reporters = ["--reporter=default", "--reporter=json", `--outputFile.json=${VITEST_REPORT}`];
  const { code } = await run(path.join("node_modules", ".bin", "vitest"), ["run", ...reporters]);
  const report = JSON.parse(await readFile(VITEST_REPORT, "utf8")) as Record<string, unknown>;
  const passed = Number(report.numPassedTests);
  const failed = Number(report.numFailedTests);
  // A file that cannot be loaded, or an error outside any test, fails the run without a failed test.
  return { passed, failed: code !== 0 && failed === 0 ? 1 : failed };
}

/** The journeys' own last line holds their totals. */
async function runJourneys(): Promise<Totals> {
  const { code, output } = await run(process.execPath, ["--import", "tsx", JOURNEYS]);
  const line = /^(\d+) passed, (\d+) failed$/.exec(output.trimEnd().split("\n").at(-1) ?? "");
  if (!line) throw new Error("the browser journeys ended without their totals");
  const failed = Number(line[2]);
  return { passed: Number(line[1]), failed: code !== 0 && failed === 0 ? 1 : failed };
}

async function run(command: string, parameters: string[]): Promise<{ code: number | null; output: string }> {
  const child = startChild(command, parameters, { env: environment, output: ["pipe", "inherit"] });
  running = child;
  let output = "";
  child.process.stdout?.on("data", (chunk: Buffer) => {
    process.stdout.write(chunk);
    output = (output + chunk.toString()).slice(-10_000);
  });
  const { code } = await child.exited;
  running = undefined;
  killGroup(child.pid);
  const stdout = child.process.stdout;
  if (stdout && !stdout.closed) await Promise.race([once(stdout, "close"), delay(2_000)]); // its last lines
  return { code, output };
}

/** Whatever a part has left running in its group goes with it. */
function killGroup(leaderPid: number): void {
  try {
    process.kill(-leaderPid, "SIGKILL");
  } catch {
    // Nothing is left.
  }
}

function endEarly(reason: string): void {
  if (ending) return;
  ending = true;
  totals.failed += 1;
  console.error(`\n${reason}`);
  void running?.stop(STOP_WITHIN_MS);
}

const taken = await takeLock(path.join(".tenderband", "test.lock"));
if (!taken.ok) {
  console.error(`npm test runs in this checkout already (process ${taken.holder.pid}).\n0 passed, 1 failed`);
  process.exit(1);
}
for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) process.on(signal, () => endEarly(`ended by ${signal}`));
setTimeout(() => endEarly("the tests took longer than 30 minutes"), ALL_WITHIN_MS).unref();
await runAll();
await taken.lock.release();
console.log(`\n${times.join(", ")}`);
console.log(`${totals.passed} passed, ${totals.failed} failed`);
process.exit(totals.failed === 0 && totals.passed > 0 ? 0 : 1);
