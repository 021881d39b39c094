// Files checked one at a time in a worker that is ended when one takes too long, cancelled, removed, and handed over to be sent.
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedLot, CheckedSweep, CheckReply, CheckRequest } from "~/workers/check-messages";
import { CheckQueue } from "~/components/check-queue";

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

const FRAME: CheckFrame = {
  requirements: [],
  impedance: [50, 50],
  ambient: 25,
  lines: [],
  assumedSetup: {},
  statedSetup: {},
  statedDrift: null,
  basis: "measured",
  decisionRule: "simple",
  unitsAsked: 3,
  unitsOverRange: 1,
  mostPoints: 1_000,
};

const SWEEP: CheckedSweep = {
  serial: "A1",
  temperature: 25,
  points: 100,
  sweep: [1e9, 2e9],
  notes: [],
  results: [],
  verdict: "pass",
  worstLineKey: null,
};

const LOT: CheckedLot = { ids: [], lines: [], verdict: "pass", notes: [], units: 1, unitsOverRange: null };

interface StartedWorker {
  readonly posted: CheckRequest[];
  readonly reply: (reply: CheckReply) => void;
  readonly breakDown: () => void;
  isEnded: boolean;
}

/** A queue with workers that answer when the test says so. */
function setUp() {
  const workers: StartedWorker[] = [];
  const queue = new CheckQueue((reply, breakDown) => {
    const worker: StartedWorker = { posted: [], reply, breakDown, isEnded: false };
    workers.push(worker);
    return { post: (request) => worker.posted.push(request), end: () => (worker.isEnded = true) };
  });
  queue.open(FRAME);
  const worker = () => workers.at(-1) as StartedWorker;
  const states = () => queue.state().items.map(({ name, state }) => `${name} ${state}`);
  const asked = () =>
    worker().posted.map((request) => ("id" in request ? `${request.kind} ${request.id}` : request.kind));
  const check = (id: number, checked: Partial<CheckedSweep> = {}) =>
    worker().reply({ kind: "checked", id, checked: { ...SWEEP, ...checked } });
  return { queue, workers, worker, states, asked, check };
}

const files = (...names: string[]) => names.map((name) => new File(["x"], name));

test("the worker is started before any file is there, and gets the frame first", () => {
  const { workers, asked } = setUp();
  expect(workers).toHaveLength(1);
  expect(asked()).toEqual(["open"]);
});

test("files are checked one at a time once the worker is ready, then all together", () => {
  const { queue, worker, states, asked, check } = setUp();
  queue.add(files("a", "b"));
  expect(asked()).toEqual(["open"]);
  worker().reply({ kind: "ready" });
  expect(states()).toEqual(["a reading", "b waiting"]);
  worker().reply({ kind: "scoring", id: 1 });
  expect(states()).toEqual(["a scoring", "b waiting"]);
  check(1);
  expect(states()).toEqual(["a checked", "b reading"]);
  expect(queue.state().lot).toBeNull();
  check(2);
  expect(asked()).toEqual(["open", "check 1", "check 2", "lot"]);
  expect(worker().posted.at(-1)).toEqual({ kind: "lot", ids: [1, 2] });
  expect(queue.state().isScoringLot).toBe(true);
  worker().reply({ kind: "lot", lot: LOT });
  expect(queue.state()).toMatchObject({ lot: LOT, isScoringLot: false });
});

test("a refused file keeps its sentence and is not handed over", () => {
  const { queue, worker, states, check } = setUp();
  queue.add(files("a", "b"));
  worker().reply({ kind: "ready" });
  worker().reply({ kind: "refused", id: 1, refusal: { code: "decimal-comma", line: 3, sentence: "Line 3: a comma." } });
  expect(queue.state().items[0]).toMatchObject({ state: "refused", sentence: "Line 3: a comma." });
  check(2);
  expect(queue.take().map(({ name }) => name)).toEqual(["b"]);
  expect(states()).toEqual(["a refused"]);
});

test("a file over 64 MiB is refused before it is read", () => {
  const { queue, worker, asked } = setUp();
  const large = new File(["x"], "large");
  Object.defineProperty(large, "size", { value: 64 * 1024 * 1024 + 1 });
  queue.add([large]);
  worker().reply({ kind: "ready" });
  expect(queue.state().items[0]).toMatchObject({
    state: "refused",
    sentence: expect.stringContaining("64 MiB") as string,
  });
  expect(asked()).toEqual(["open"]);
});

test("a check that hangs is stopped after 20 s, said, and the next goes on in a new worker", () => {
  const { queue, workers, worker, states, check } = setUp();
  queue.add(files("a", "b"));
  worker().reply({ kind: "ready" });
  vi.advanceTimersByTime(19_999);
  expect(states()).toEqual(["a reading", "b waiting"]);
  vi.advanceTimersByTime(1);
  expect(workers[0]?.isEnded).toBe(true);
  expect(queue.state().items[0]).toMatchObject({
    state: "unchecked",
    sentence: expect.stringContaining("20 s") as string,
  });
  worker().reply({ kind: "ready" });
  expect(states()).toEqual(["a unchecked", "b reading"]);
  check(2);
  expect(queue.take().map(({ name }) => name)).toEqual(["a", "b"]); // the server may still be able to
});

test("what an ended worker still says is not heard", () => {
  const { queue, workers, worker, states } = setUp();
  queue.add(files("a"));
  worker().reply({ kind: "ready" });
  vi.advanceTimersByTime(20_000);
  workers[0]?.reply({ kind: "checked", id: 1, checked: SWEEP });
  expect(states()).toEqual(["a unchecked"]);
});

test("after a worker was replaced, the lot is scored once the new one has read the files again", () => {
  const { queue, worker, states, asked, check } = setUp();
  queue.add(files("a", "b"));
  worker().reply({ kind: "ready" });
  check(1);
  vi.advanceTimersByTime(20_000);
  worker().reply({ kind: "ready" });
  expect(states()).toEqual(["a checked", "b unchecked"]);
  expect(asked()).toEqual(["open", "check 1"]);
  check(1, { verdict: "fail" });
  expect(queue.state().items[0]?.checked?.verdict).toBe("pass");
  expect(worker().posted.at(-1)).toEqual({ kind: "lot", ids: [1] });
});

test("cancelling takes off what is not checked, even the one being read, and keeps the rest", () => {
  const { queue, workers, worker, states, check } = setUp();
  queue.add(files("a", "b", "c"));
  worker().reply({ kind: "ready" });
  check(1);
  queue.cancelRest();
  expect(states()).toEqual(["a checked"]);
  expect(workers[0]?.isEnded).toBe(true);
});

test("a removed file is dropped by the worker and the rest scored together again", () => {
  const { queue, worker, asked, check } = setUp();
  queue.add(files("a", "b"));
  worker().reply({ kind: "ready" });
  check(1);
  check(2);
  worker().reply({ kind: "lot", lot: LOT });
  queue.remove(1);
  expect(asked().slice(-2)).toEqual(["drop 1", "lot"]);
  expect(worker().posted.at(-1)).toEqual({ kind: "lot", ids: [2] });
  expect(queue.state().lot).toBeNull();
});

test("files without unit or temperature are not asked for in the lot", () => {
  const { queue, worker, asked, check } = setUp();
  queue.add(files("a", "b"));
  worker().reply({ kind: "ready" });
  check(1, { temperature: null });
  check(2, { serial: null });
  expect(asked()).toContain("check 2");
  expect(asked()).not.toContain("lot");
  expect(queue.state()).toMatchObject({ lot: null, isScoringLot: false });
});

test("more points than a quote takes are said instead of being scored together", () => {
  const { queue, worker, asked, check } = setUp();
  queue.add(files("a", "b"));
  worker().reply({ kind: "ready" });
  check(1, { points: 600 });
  check(2, { points: 600 });
  expect(asked()).not.toContain("lot");
  expect(queue.state().lotRefusal).toContain("1,000 points");
  queue.remove(2);
  expect(queue.state().lotRefusal).toBeNull();
  expect(asked().at(-1)).toBe("lot");
});

test("the worker keeps no more than a lot can hold: beyond that, and of files without a place, it drops what it read", () => {
  const { queue, worker, states, asked, check } = setUp();
  queue.add(files("a", "b", "c", "d"));
  worker().reply({ kind: "ready" });
  check(1, { points: 600, temperature: null });
  check(2, { points: 300 });
  check(3, { points: 300 });
  check(4, { points: 300 });
  expect(states()).toEqual(["a checked", "b checked", "c checked", "d checked"]);
  const dropped = ["check 1", "drop 1", "check 2", "check 3", "drop 3", "check 4", "drop 4"];
  expect(asked()).toEqual(["open", ...dropped]);
  // With fewer files there is a lot again, of those that are read once more.
  queue.remove(1);
  expect(asked().slice(-1)).toEqual(["check 3"]);
  check(3, { points: 300 });
  check(4, { points: 300 });
  expect(asked().slice(-3)).toEqual(["check 3", "check 4", "lot"]);
  expect(worker().posted.at(-1)).toEqual({ kind: "lot", ids: [2, 3, 4] });
});

test("with another frame all files are checked again, with the same one none", () => {
  const { queue, workers, worker, states, check } = setUp();
  queue.add(files("a"));
  worker().reply({ kind: "ready" });
  check(1);
  queue.open({ ...FRAME });
  expect(workers).toHaveLength(1);
  queue.open({ ...FRAME, ambient: 20 });
  expect(workers[0]?.isEnded).toBe(true);
  expect(states()).toEqual(["a waiting"]);
  worker().reply({ kind: "ready" });
  expect(states()).toEqual(["a reading"]);
});

test("closed, the worker is ended; opened again with the same frame there is a new one", () => {
  const { queue, workers } = setUp();
  queue.close();
  expect(workers[0]?.isEnded).toBe(true);
  queue.open(FRAME);
  expect(workers).toHaveLength(2);
});

test("a worker that cannot be loaded leaves the files to the server", () => {
  const { queue, worker, states } = setUp();
  queue.add(files("a"));
  worker().breakDown();
  expect(queue.state().canCheck).toBe(false);
  expect(states()).toEqual(["a unchecked"]);
  expect(queue.take()).toHaveLength(1);
});

test("a worker that comes after one was given up checks files again", () => {
  const { queue, worker, states } = setUp();
  queue.add(files("a"));
  worker().breakDown();
  queue.open({ ...FRAME });
  expect(queue.state().canCheck).toBe(false);
  worker().reply({ kind: "ready" });
  expect(queue.state().canCheck).toBe(true);
  queue.retry(1);
  expect(states()).toEqual(["a reading"]);
});

test("a worker that never comes is not waited for without end, once files wait for it", () => {
  const { queue, workers, states } = setUp();
  vi.advanceTimersByTime(60_000);
  expect(workers[0]?.isEnded).toBe(false);
  queue.add(files("a"));
  vi.advanceTimersByTime(19_999);
  queue.add(files("b"));
  expect(states()).toEqual(["a waiting", "b waiting"]);
  vi.advanceTimersByTime(1);
  expect(workers[0]?.isEnded).toBe(true);
  expect(queue.state().items[0]).toMatchObject({
    state: "unchecked",
    sentence: expect.stringMatching(/not be started/) as string,
  });
});

test("a browser without workers is told so at once", () => {
  const queue = new CheckQueue(() => null);
  queue.open(FRAME);
  expect(queue.state().canCheck).toBe(false);
});

test("a fault of ours in one file is said, and it can be tried again", () => {
  const { queue, worker, states, asked } = setUp();
  queue.add(files("a"));
  worker().reply({ kind: "ready" });
  worker().reply({ kind: "fault", message: "a bug" });
  expect(states()).toEqual(["a unchecked"]);
  queue.retry(1);
  expect(states()).toEqual(["a reading"]);
  expect(asked()).toEqual(["open", "check 1", "check 1"]);
});
