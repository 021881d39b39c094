// Files received: streamed to private files that never stay behind, and refused with a status the browser gets to see.
import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, statSync, utimesSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { expect, test } from "vitest";
import { receiveFiles, removeAbandoned, TOO_LARGE, type ReceivedFile } from "~/services/uploads.server";

const address = "http://127.0.0.1:5180/upload";
const MEBIBYTE = 1024 * 1024;

function post(files: readonly File[], signal?: AbortSignal): Request {
  const form = new FormData();
  form.set("intent", "upload");
  for (const file of files) form.append("file", file);
  return new Request(address, { method: "POST", body: form, ...(signal ? { signal } : {}) });
}

test("files arrive whole, readable by this account alone, and are gone afterwards", async () => {
  const seen: ReceivedFile[] = [];
  const outcome = await receiveFiles(
    post([new File(["one"], "a.s2p"), new File(["two!"], "b.s2p")]),
    async ({ files, fields }) => {
      seen.push(...files);
      expect(fields).toEqual({ intent: "upload" });
      return Promise.resolve(
        files.map(({ path: place }) => [readFileSync(place, "utf8"), statSync(place).mode & 0o777]),
      );
    },
  );
  expect(outcome).toEqual({
    ok: true,
    value: [
      ["one", 0o600],
      ["two!", 0o600],
    ],
  });
  expect(seen.map(({ name, size }) => [name, size])).toEqual([
    ["a.s2p", 3],
    ["b.s2p", 4],
  ]);
  for (const { path: place } of seen) expect(existsSync(path.dirname(place))).toBe(false);
});

test("an empty file and a name with folders are handed on; a field nobody filled is no file", async () => {
  const files = [new File([], "empty.s2p"), new File(["x"], "C:\\data\\unit 1.s2p"), new File([], "")];
  const outcome = await receiveFiles(post(files), (received) =>
    Promise.resolve(received.files.map(({ name, size }) => [name, size])),
  );
  expect(outcome).toEqual({
    ok: true,
    value: [
      ["empty.s2p", 0],
      ["unit 1.s2p", 1],
    ],
  });
});

test("one byte over 64 MiB is refused with 413, the rest is read, and nothing stays on the disk", async () => {
  const request = post([
    new File([Buffer.alloc(64 * MEBIBYTE + 1)], "large.s2p"),
    new File([Buffer.alloc(MEBIBYTE)], "more.s2p"),
  ]);
  let wasUsed = false;
  const outcome = await receiveFiles(request, () => {
    wasUsed = true;
    return Promise.resolve();
  });
  expect(outcome).toMatchObject({ ok: false, status: 413, error: TOO_LARGE });
  expect(wasUsed).toBe(false);
});

test("64 MiB exactly are taken", async () => {
  const outcome = await receiveFiles(post([new File([Buffer.alloc(64 * MEBIBYTE)], "full.s2p")]), ({ files }) =>
    Promise.resolve(files[0]?.size),
  );
  expect(outcome).toEqual({ ok: true, value: 64 * MEBIBYTE });
});

test("201 files at once are refused with 413", async () => {
  const files = Array.from({ length: 201 }, (_, k) => new File(["x"], `${k}.s2p`));
  expect(await receiveFiles(post(files), () => Promise.resolve())).toMatchObject({ ok: false, status: 413 });
});

test.each([
  ["no multipart at all", { "Content-Type": "text/plain" }, "x"],
  ["a boundary that is missing", { "Content-Type": "multipart/form-data" }, "x"],
  [
    "a body that ends in the middle",
    { "Content-Type": "multipart/form-data; boundary=b" },
    '--b\r\nContent-Disposition: form-data; name="file"; filename="a"\r\n\r\nhalf',
  ],
])("%s is refused with 400", async (_what, headers, body) => {
  const request = new Request(address, { method: "POST", headers, body });
  expect(await receiveFiles(request, () => Promise.resolve())).toMatchObject({ ok: false, status: 400 });
});

test("an upload the client breaks off is thrown, and its folder is gone", async () => {
  const controller = new AbortController();
  const head =
    '--b\r\nContent-Disposition: form-data; name="file"; filename="a.s2p"\r\nContent-Type: text/plain\r\n\r\n';
  const body = new ReadableStream({
    start: (stream) => stream.enqueue(Buffer.from(`${head}${"x".repeat(1000)}`)),
  });
  const headers = { "Content-Type": "multipart/form-data; boundary=b" };
  const request = new Request(address, {
    method: "POST",
    headers,
    body,
    signal: controller.signal,
    duplex: "half",
  } as RequestInit);
  const receiving = receiveFiles(request, () => Promise.resolve());
  setTimeout(() => controller.abort(), 100);
  await expect(receiving).rejects.toThrow(/broke/);
});

test("what the handler throws is thrown, and its files are gone all the same", async () => {
  let place = "";
  const failing = receiveFiles(post([new File(["x"], "a.s2p")]), ({ files }) => {
    place = files[0]?.path ?? "";
    return Promise.reject(new Error("database away"));
  });
  await expect(failing).rejects.toThrow("database away");
  expect(place).not.toBe("");
  expect(existsSync(place)).toBe(false);
});

test("what a killed process left behind is removed a day later, and nothing else in the folder", async () => {
  const root = mkdtempSync(path.join(tmpdir(), "abandoned-"));
  const aged = new Date(Date.now() - 25 * 60 * 60 * 1000);
  for (const name of ["upload-0123456789abcdef", "upload-fedcba9876543210", "photographs"]) {
    mkdirSync(path.join(root, name));
    if (name !== "upload-fedcba9876543210") utimesSync(path.join(root, name), aged, aged);
  }
  await removeAbandoned(root);
  expect(readdirSync(root).sort()).toEqual(["photographs", "upload-fedcba9876543210"]);
  rmSync(root, { recursive: true });
});
