// Files on their way: two at a time, with progress, cancelled or sent again one by one.
import { expect, test } from "vitest";
import { UploadQueue, type SendCallbacks } from "~/components/upload-queue";

function setUp() {
  const sent: { name: string; callbacks: SendCallbacks; isCancelled: boolean }[] = [];
  let stored = 0;
  const queue = new UploadQueue(
    (file, callbacks) => {
      const entry = { name: file.name, callbacks, isCancelled: false };
      sent.push(entry);
      return () => (entry.isCancelled = true);
    },
    () => (stored += 1),
  );
  const states = () => queue.items().map(({ name, state }) => `${name} ${state}`);
  return { queue, sent, states, stored: () => stored };
}

const files = (...names: string[]) => names.map((name) => new File(["x"], name));

test("two files are sent at once, and the next begins when one is stored", () => {
  const { queue, sent, states, stored } = setUp();
  queue.add(files("a", "b", "c"));
  expect(states()).toEqual(["a sending", "b sending", "c waiting"]);
  sent[0]?.callbacks.onAnswer(201, { files: [{ name: "a" }] });
  expect(states()).toEqual(["b sending", "c sending"]);
  expect(stored()).toBe(1);
  expect(sent.map(({ name }) => name)).toEqual(["a", "b", "c"]);
});

test("progress is told, and what has left is being checked", () => {
  const { queue, sent, states } = setUp();
  queue.add(files("a"));
  sent[0]?.callbacks.onProgress(0.25);
  expect(queue.items()[0]).toMatchObject({ state: "sending", progress: 0.25 });
  sent[0]?.callbacks.onProgress(1);
  expect(states()).toEqual(["a checking"]);
});

test("a refusal stays with the server's sentence, frees its place, and is dismissed", () => {
  const { queue, sent, states, stored } = setUp();
  queue.add(files("a", "b", "c"));
  sent[0]?.callbacks.onAnswer(400, { files: [{ name: "a", error: "Line 3: a comma." }] });
  expect(queue.items()[0]).toMatchObject({ state: "refused", error: "Line 3: a comma.", canRetry: false });
  expect(states()).toEqual(["a refused", "b sending", "c sending"]);
  queue.cancel(queue.items()[0]?.id ?? 0);
  expect(states()).toEqual(["b sending", "c sending"]);
  sent[1]?.callbacks.onAnswer(413, { error: "The file is larger than 64 MiB.", files: [] });
  expect(queue.items()[0]).toMatchObject({ error: "The file is larger than 64 MiB." });
  expect(stored()).toBe(0);
});

test("a connection that broke can be tried again, and so can an answer without words", () => {
  const { queue, sent, states } = setUp();
  queue.add(files("a", "b"));
  sent[0]?.callbacks.onBroken();
  sent[1]?.callbacks.onAnswer(500, null);
  expect(queue.items().map(({ canRetry }) => canRetry)).toEqual([true, true]);
  queue.retry(queue.items()[0]?.id ?? 0);
  expect(states()).toEqual(["a sending", "b refused"]);
  expect(sent).toHaveLength(3);
});

test("cancelling breaks the transfer off and lets the next begin", () => {
  const { queue, sent, states } = setUp();
  queue.add(files("a", "b", "c"));
  queue.cancel(queue.items()[1]?.id ?? 0);
  expect(sent[1]?.isCancelled).toBe(true);
  expect(states()).toEqual(["a sending", "c sending"]);
});

test("a file over 64 MiB is refused before a byte leaves", () => {
  const { queue, sent } = setUp();
  const large = new File(["x"], "large");
  Object.defineProperty(large, "size", { value: 64 * 1024 * 1024 + 1 });
  queue.add([large]);
  expect(queue.items()[0]?.state).toBe("refused");
  expect(queue.items()[0]?.error).toContain("64 MiB");
  expect(sent).toHaveLength(0);
});

test("listeners are told of each change, and the snapshot is the same until then", () => {
  const { queue, sent } = setUp();
  let told = 0;
  const stop = queue.subscribe(() => (told += 1));
  queue.add(files("a"));
  const before = told;
  expect(queue.items()).toBe(queue.items());
  sent[0]?.callbacks.onProgress(0.5);
  expect(told).toBe(before + 1);
  stop();
  sent[0]?.callbacks.onProgress(0.6);
  expect(told).toBe(before + 1);
});
