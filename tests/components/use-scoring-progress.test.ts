// A page that waits for scoring, in a browser: it outlives a network that is away, and is read anew when scoring is done or the person is signed out.
import { mkdtemp, readFile, rm } from "node:fs/promises";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import os from "node:os";
import path from "node:path";
import { chromium, type Browser } from "playwright-core";
import { afterAll, beforeAll, expect, onTestFinished, test } from "vitest";
import { build } from "vite";

let folder: string;
let script: string;
let browser: Browser;

beforeAll(async () => {
  folder = await mkdtemp(path.join(os.tmpdir(), "tenderband-progress-"));
  await build({
    configFile: false,
    logLevel: "error",
    resolve: { alias: [{ find: /^~\//, replacement: `${path.resolve("app")}/` }] },
    oxc: { jsx: { runtime: "automatic", development: false } },
    define: { "process.env.NODE_ENV": '"production"' },
    build: {
      outDir: folder,
      lib: {
        entry: path.resolve("tests/components/progress-page/entry.tsx"),
        formats: ["iife"],
        name: "page",
        fileName: () => "page.js",
      },
    },
  });
  script = await readFile(path.join(folder, "page.js"), "utf8");
  browser = await chromium.launch({ executablePath: "/usr/bin/chromium", args: ["--no-sandbox"] });
});

afterAll(async () => {
  await browser.close();
  await rm(folder, { recursive: true });
});

interface Answer {
  /** 0: the connection is cut, as by a network that is away. */
  readonly status: number;
  readonly body?: object;
  readonly location?: string;
}

const says = (state: string, done: number): Answer => ({ status: 200, body: { state, done, total: 30 } });
const AWAY: Answer = { status: 0 };
const PAGE = '<!doctype html><body><script src="/page.js"></script></body>';

/** The page, its server, and what it was asked; `answers` are those of the progress address in their order, the last one from then on. */
async function openPage(address: string, answers: Answer[]) {
  const asked: string[] = [];
  const server = {
    /** Whether anything but the progress is answered. */
    isThere: true,
  };
  const host = createServer(({ url = "" }, response) => {
    asked.push(url);
    const isProgress = url === "/api/v1/quotes/quote00000000001/progress";
    const answer = isProgress ? ((answers.length > 1 ? answers.shift() : answers[0]) ?? AWAY) : { status: 200 };
    const { status, body, location }: Answer = isProgress || server.isThere ? answer : AWAY;
    if (status === 0) {
      response.destroy();
      return;
    }
    const type = url === "/page.js" ? "text/javascript" : isProgress ? "application/json" : "text/html";
    response.writeHead(status, { "Content-Type": type, ...(location === undefined ? {} : { Location: location }) });
    response.end(url === "/page.js" ? script : isProgress ? JSON.stringify(body) : PAGE);
  });
  await new Promise<void>((resolve) => host.listen(0, "127.0.0.1", resolve));
  const page = await browser.newPage();
  onTestFinished(async () => {
    await page.close();
    host.close();
  });
  await page.goto(`http://127.0.0.1:${(host.address() as AddressInfo).port}${address}`);
  return { page, server, asked, reads: () => page.evaluate("window.reads") };
}

test("a question that is lost, or answered by a fault, leaves the page and the last answer; the next one counts", async () => {
  const { page, reads } = await openPage("/progress", [
    says("pending", 3),
    AWAY,
    { status: 500, body: {} },
    says("pending", 4),
  ]);
  await page.getByText("pending 3 of 30").waitFor();
  await page.getByText("pending 4 of 30").waitFor();
  expect(await page.getByRole("alert").count()).toBe(0);
  expect(await reads()).toBe(1);
});

test("the page is read anew once scoring is done", async () => {
  const { page } = await openPage("/progress", [says("pending", 29), says("done", 30)]);
  await page.waitForFunction("window.reads > 1");
  await page.getByText("done 30 of 30").waitFor();
});

test.each<[string, Answer]>([
  ["a redirect to sign-in", { status: 302, location: "/sign-in" }],
  ["that it is not there any more", { status: 404, body: {} }],
])("the page is read anew, which leads where the person belongs, where the answer is %s", async (_, answer) => {
  const { page } = await openPage("/progress", [says("pending", 3), answer]);
  await page.waitForFunction("window.reads > 1");
});

test("a page with several quotes is not read while the server is away, and is again when it is back", async () => {
  const { page, server, asked, reads } = await openPage("/reload", []);
  await page.waitForFunction("window.reads > 1");
  server.isThere = false;
  const before = await reads();
  const questions = () => asked.filter((url) => url === "/health").length;
  const until = questions() + 2;
  await expect.poll(questions, { timeout: 10_000 }).toBeGreaterThanOrEqual(until);
  expect(await page.getByRole("alert").count()).toBe(0);
  expect(await reads()).toBe(before);
  server.isThere = true;
  await page.waitForFunction(`window.reads > ${String(before)}`);
});
