// The provisioning script, on a copy of its own with a stand-in for npm: it installs once, one at a time, and survives a kill.
import { execFile, spawn } from "node:child_process";
import { once } from "node:events";
import { chmod, copyFile, mkdir, mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";

let checkout: string;
let environment: NodeJS.ProcessEnv;

beforeEach(async () => {
  checkout = await mkdtemp(path.join(os.tmpdir(), "tenderband-provision-"));
  await mkdir(path.join(checkout, "db"));
  await mkdir(path.join(checkout, "bin"));
  await copyFile("db/provision.sh", path.join(checkout, "db/provision.sh"));
  await writeFile(path.join(checkout, "package-lock.json"), "{}");
  await program("npm", `echo "$*" >> '${checkout}/npm-calls'; sleep "\${NPM_SECONDS:-0}"; mkdir -p node_modules`);
  // A database given from outside: Debian's packages are not asked for.
  const PATH = `${path.join(checkout, "bin")}:${process.env.PATH ?? ""}`;
  environment = { ...process.env, PATH, DATABASE_URL: "mariadb://127.0.0.1/x" };
});
afterEach(() => rm(checkout, { recursive: true, force: true }));

async function program(name: string, script: string): Promise<void> {
  const file = path.join(checkout, "bin", name);
  await writeFile(file, `#!/bin/sh\n${script}\n`);
  await chmod(file, 0o755);
}

function provision(extra: NodeJS.ProcessEnv = {}): Promise<{ code: number; printed: string }> {
  return new Promise((resolve) => {
    const env = { ...environment, ...extra };
    execFile("sh", ["db/provision.sh", "start"], { cwd: checkout, env }, (error, stdout, stderr) => {
      resolve({ code: typeof error?.code === "number" ? error.code : 0, printed: `${stdout}${stderr}` });
    });
  });
}

async function npmCalls(): Promise<string[]> {
  const text = await readFile(path.join(checkout, "npm-calls"), "utf8").catch(() => "");
  return text.split("\n").filter(Boolean);
}

test("the second run does nothing and says nothing; a changed lock file or a missing node_modules installs again", async () => {
  expect((await provision()).code).toBe(0);
  expect(await npmCalls()).toEqual(["ci --include=dev --no-audit --no-fund"]);
  const started = performance.now();
  expect(await provision()).toEqual({ code: 0, printed: "" });
  expect(performance.now() - started).toBeLessThan(5_000);
  expect(await npmCalls()).toHaveLength(1);

  await writeFile(path.join(checkout, "package-lock.json"), '{ "changed": true }');
  await provision();
  expect(await npmCalls()).toHaveLength(2);
  await rm(path.join(checkout, "node_modules"), { recursive: true });
  await provision();
  expect(await npmCalls()).toHaveLength(3);
});

test("two runs at once install once: the second waits for the first", async () => {
  const results = await Promise.all([provision({ NPM_SECONDS: "2" }), provision({ NPM_SECONDS: "2" })]);
  expect(results.map(({ code }) => code)).toEqual([0, 0]);
  expect(await npmCalls()).toHaveLength(1);
  expect(results.map(({ printed }) => printed).join("")).toContain("another run is installing");
});

test("a run that was killed while installing leaves nothing that stops the next, which installs from the beginning", async () => {
  const env = { ...environment, NPM_SECONDS: "60" };
  const first = spawn("sh", ["db/provision.sh", "start"], { cwd: checkout, env, stdio: "ignore", detached: true });
  await expect.poll(npmCalls, { timeout: 10_000 }).toHaveLength(1);
  process.kill(-(first.pid ?? NaN), "SIGKILL");
  await once(first, "exit");
  expect((await provision()).code).toBe(0);
  expect(await npmCalls()).toHaveLength(2);
  expect((await provision()).printed).toBe("");
});

test("an installation that fails is told with its last lines, and is not taken for done", async () => {
  await program("npm", "echo 'the registry is away'; exit 1");
  const { code, printed } = await provision();
  expect(code).toBe(1);
  expect(printed).toContain("the registry is away\n[provision] npm ci failed.");
  expect((await provision()).code).toBe(1);
});

test("an older Node is refused with both versions", async () => {
  await program("node", '[ "$1" = --version ] && echo v18.20.4 && exit 0; exit 1');
  expect(await provision()).toEqual({
    code: 1,
    printed: "[provision] Node 20.19 or newer is needed; this is v18.20.4.\n",
  });
});
