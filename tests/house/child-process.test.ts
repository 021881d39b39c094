// Child processes: they end with their starter, even if it is killed, and a signal to the starter's terminal is not theirs.
import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { expect, test } from "vitest";
import { startChild } from "../../db/child-process";

async function until(condition: () => Promise<boolean> | boolean): Promise<boolean> {
  for (let round = 0; round < 200; round += 1) {
    if (await condition()) return true;
    await delay(50);
  }
  return false;
}

/** False for a zombie too: where nobody reaps orphans, they stay listed. */
async function runs(pid: number): Promise<boolean> {
  const stat = await readFile(`/proc/${pid}/stat`, "utf8").catch(() => "");
  return stat !== "" && !/\) Z /.test(stat);
}

test("a child and its own children end when the starter is killed", async () => {
  const folder = await mkdtemp(path.join(os.tmpdir(), "tenderband-child-"));
  const pidFile = path.join(folder, "pids");
  const program = path.join(folder, "starter.ts");
  const script = `sleep 60 & echo "$$ $!" > '${pidFile}'; wait`;
  const source = `import { startChild } from ${JSON.stringify(path.resolve("db/child-process.ts"))};
    startChild("/bin/sh", ["-c", ${JSON.stringify(script)}]); setInterval(() => undefined, 1000);`;
  await writeFile(program, source);
  const starter = spawn(process.execPath, ["--import", "tsx", program], { stdio: "ignore" });
  const readPids = async () => (await readFile(pidFile, "utf8").catch(() => "")).trim().split(" ").map(Number);
  expect(await until(async () => (await readPids()).length === 2)).toBe(true);
  const pids = await readPids();
  expect(await Promise.all(pids.map(runs))).toEqual([true, true]);
  starter.kill("SIGKILL");
  await once(starter, "exit");
  expect(await until(async () => !(await Promise.all(pids.map(runs))).includes(true))).toBe(true);
  await rm(folder, { recursive: true });
});

test("a child that ends by itself tells its code, and leaves no guard behind", async () => {
  const child = startChild("/bin/sh", ["-c", "exit 7"]);
  expect(await child.exited).toEqual({ code: 7, signal: null });
  expect(
    await until(() => {
      try {
        return !process.kill(-child.pid, 0);
      } catch {
        return true;
      }
    }),
  ).toBe(true);
});

test("a child that ignores the request to end is ended by force when its grace has passed", async () => {
  const child = startChild("/bin/sh", ["-c", "trap '' TERM; echo ready; sleep 60 & wait; sleep 60"], {
    output: ["pipe", "inherit"],
  });
  if (child.process.stdout) await once(child.process.stdout, "data");
  const started = performance.now();
  expect(await child.stop(300)).toEqual({ code: null, signal: "SIGKILL" });
  expect(performance.now() - started).toBeGreaterThan(250);
});
