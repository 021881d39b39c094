// The form in a browser: pressed twice it sends once, its button waits, its summary takes focus, unsaved input is asked about.
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { chromium, type Browser, type Page } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { build } from "vite";

let folder: string;
let browser: Browser;

beforeAll(async () => {
  folder = await mkdtemp(path.join(os.tmpdir(), "tenderband-form-"));
  const entry = path.resolve("tests/components/form-page/entry.tsx");
  await build({
    configFile: false,
    logLevel: "error",
    resolve: { alias: [{ find: /^~\//, replacement: `${path.resolve("app")}/` }] },
    oxc: { jsx: { runtime: "automatic", development: false } },
    define: { "process.env.NODE_ENV": '"production"' },
    build: { outDir: folder, lib: { entry, formats: ["iife"], name: "page", fileName: () => "page.js" } },
  });
  await writeFile(path.join(folder, "page.html"), '<!doctype html><body><script src="page.js"></script></body>');
  browser = await chromium.launch({ executablePath: "/usr/bin/chromium", args: ["--no-sandbox"] });
});

afterAll(async () => {
  await browser.close();
  await rm(folder, { recursive: true });
});

async function openPage(): Promise<Page> {
  const page = await browser.newPage();
  await page.goto(`file://${folder}/page.html`);
  await page.getByLabel("Title").waitFor();
  return page;
}

const posts = (page: Page) => page.evaluate("window.seen.posts");

test("a double press sends once, and the pressed button alone waits until the answer", async () => {
  const page = await openPage();
  await page.getByRole("button", { name: "Save" }).dblclick();
  await page.getByRole("button", { name: "Release" }).click();
  expect(await posts(page)).toEqual(["save"]);
  expect(await page.getByRole("button", { name: "Save" }).getAttribute("aria-busy")).toBe("true");
  expect(await page.getByRole("button", { name: "Release" }).getAttribute("aria-busy")).toBeNull();
  await page.close();
});

test("a refusal moves focus to the summary, keeps the input, and the form can be sent again", async () => {
  const page = await openPage();
  await page.getByLabel("Title").fill("A title");
  await page.getByRole("button", { name: "Save" }).click();
  await page.evaluate("window.seen.answer()");
  const summary = page.getByRole("alert");
  await summary.waitFor();
  await page.waitForFunction("document.activeElement?.getAttribute('role') === 'alert'");
  await summary.getByRole("link", { name: "Give a shorter title." }).click();
  expect(await page.getByLabel("Title").evaluate((element) => element === document.activeElement)).toBe(true);
  expect(await page.getByLabel("Title").inputValue()).toBe("A title");
  await page.getByRole("button", { name: "Release" }).click();
  await page.waitForFunction("window.seen.posts.length > 1");
  expect(await posts(page)).toEqual(["save", "release"]);
  await page.close();
});

test("leaving with unsaved input is asked about, and stays when the answer is no", async () => {
  const page = await openPage();
  const questions: string[] = [];
  page.on("dialog", (dialog) => {
    questions.push(dialog.message());
    void (questions.length === 1 ? dialog.dismiss() : dialog.accept());
  });
  await page.getByLabel("Title").fill("Half a title");
  await page.getByRole("link", { name: "Elsewhere" }).click();
  expect(await page.getByLabel("Title").inputValue()).toBe("Half a title");
  await page.getByRole("link", { name: "Elsewhere" }).click();
  await page.getByRole("heading", { name: "Elsewhere" }).waitFor();
  expect(questions).toHaveLength(2);
  await page.close();
});
