// Programs that are kept running: started again when they end by themselves, not when they were ended.
import { expect, test } from "vitest";
import { keepRunning, type Running } from "~/start/keep-running";

function withResolvers(): { promise: Promise<void>; resolve: () => void } {
  let resolve: () => void = () => undefined;
  const promise = new Promise<void>((settle) => (resolve = settle));
  return { promise, resolve };
}

/** A program that ends when the test says so. */
function fakeProgram() {
  const ends: (() => void)[] = [];
  let starts = 0;
  const start = (): Promise<Running> => {
    starts += 1;
    const { promise: exited, resolve } = withResolvers();
    ends.push(resolve);
    const stop = () => {
      resolve();
      return exited;
    };
    return Promise.resolve({ exited, stop });
  };
  return { start, crash: () => ends.at(-1)?.(), starts: () => starts };
}

test("a program that ends by itself is started again, and what happened is reported", async () => {
  const { start, crash, starts } = fakeProgram();
  const reports: string[] = [];
  const kept = await keepRunning("worker", start, (line) => reports.push(line));
  crash();
  await expect.poll(starts, { timeout: 3_000 }).toBe(2);
  expect(reports).toEqual(["worker ended unexpectedly; starting it again"]);
  await kept.stop(0);
});

test("a program that was ended stays ended, also while it waits to be started again", async () => {
  const { start, crash, starts } = fakeProgram();
  const kept = await keepRunning("worker", start, () => undefined);
  crash();
  await kept.stop(0);
  await new Promise((resolve) => setTimeout(resolve, 500));
  expect(starts()).toBe(1);
});

test("a restart that fails is reported and tried again; the first start's failure is the caller's", async () => {
  const { start, crash, starts } = fakeProgram();
  const reports: string[] = [];
  let failures = 0;
  const failingOnce = () => {
    if (starts() === 1 && failures === 0) {
      failures += 1;
      return Promise.reject(new Error("no room"));
    }
    return start();
  };
  const kept = await keepRunning("server", failingOnce, (line) => reports.push(line));
  crash();
  await expect.poll(starts, { timeout: 3_000 }).toBe(2);
  expect(reports).toContain("server could not be started: no room");
  await kept.stop(0);
  await expect(
    keepRunning(
      "server",
      () => Promise.reject(new Error("no room")),
      () => undefined,
    ),
  ).rejects.toThrow("no room");
});
