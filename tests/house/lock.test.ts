// Locks between processes: one holder at a time, and none is held by the dead.
import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { identify, takeLock } from "../../db/lock";

let folder: string;
let file: string;

beforeEach(async () => {
  folder = await mkdtemp(path.join(os.tmpdir(), "tenderband-lock-"));
  file = path.join(folder, "some.lock");
});
afterEach(() => rm(folder, { recursive: true }));

test("of twenty that ask at once, one gets the lock and the others learn who has it", async () => {
  const results = await Promise.all(Array.from({ length: 20 }, () => takeLock(file, "at home")));
  expect(results.filter(({ ok }) => ok)).toHaveLength(1);
  for (const result of results) {
    if (!result.ok) expect(result.holder).toEqual({ ...(await identify(process.pid)), note: "at home" });
  }
});

test("what the holder says about itself can change, and a released lock can be taken again", async () => {
  const first = await takeLock(file);
  if (!first.ok) throw new Error("the lock was free");
  await first.lock.describe("moved");
  expect(await takeLock(file)).toMatchObject({ ok: false, holder: { note: "moved" } });
  await first.lock.release();
  expect(await takeLock(file)).toMatchObject({ ok: true });
});

test("a dead holder's lock is taken over, by one of those that ask at once", async () => {
  const dead = spawn("true");
  await once(dead, "exit");
  await writeFile(file, JSON.stringify({ pid: dead.pid, startedAt: "1", note: "" }));
  const results = await Promise.all(Array.from({ length: 20 }, () => takeLock(file)));
  expect(results.filter(({ ok }) => ok)).toHaveLength(1);
});

test("a process that was given a dead holder's number does not hold its lock", async () => {
  await writeFile(file, JSON.stringify({ pid: process.pid, startedAt: "1", note: "" }));
  expect(await takeLock(file)).toMatchObject({ ok: true });
});

test("a lock file that makes no sense is nobody's", async () => {
  await writeFile(file, "{");
  expect(await takeLock(file)).toMatchObject({ ok: true });
});
