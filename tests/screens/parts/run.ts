// Renders the sheet of parts to static pages with the built styles and photographs them: two widths, light and dark, and print.
import { mkdir, readdir, writeFile } from "node:fs/promises";
import path from "node:path";
import tailwindcss from "@tailwindcss/vite";
import { chromium, type Browser, type Page } from "playwright-core";
import { createElement } from "react";
import { renderToStaticMarkup } from "react-dom/server";
import { createRoutesStub } from "react-router";
import { build } from "vite";
import { PartsSheet, PlainSheet } from "./sheet";

const folder = path.resolve("tests/output/parts");

async function buildStyles(): Promise<string> {
  const input = path.resolve("tests/screens/parts/parts.css");
  await build({
    configFile: false,
    logLevel: "warn",
    base: "./",
    plugins: [tailwindcss()],
    build: { outDir: folder, emptyOutDir: true, assetsInlineLimit: 0, rolldownOptions: { input } },
  });
  const styles = (await readdir(path.join(folder, "assets"))).find((name) => name.endsWith(".css"));
  if (styles === undefined) throw new Error("the build wrote no stylesheet");
  return `assets/${styles}`;
}

type SheetName = "short" | "long" | "plain";

async function writePage(title: SheetName, theme: "light" | "dark", styles: string): Promise<string> {
  const Stub = createRoutesStub([
    {
      path: "*",
      Component: () => (title === "plain" ? createElement(PlainSheet) : createElement(PartsSheet, { title })),
    },
  ]);
  const body = renderToStaticMarkup(createElement(Stub, { initialEntries: ["/rfqs"] }));
  const head = `<meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>Parts</title>`;
  const link = `<link rel="stylesheet" href="${styles}">`;
  const file = path.join(folder, `${title}-${theme}.html`);
  await writeFile(
    file,
    `<!doctype html><html lang="en" data-theme="${theme}"><head>${head}${link}</head><body>${body}</body></html>`,
  );
  return file;
}

async function photograph(browser: Browser, file: string, width: number): Promise<void> {
  const page = await browser.newPage({ viewport: { width, height: 900 } });
  await page.goto(`file://${file}`);
  await page.evaluate("document.fonts.ready");
  await page.evaluate("document.activeElement?.blur(); scrollTo(0, 0)");
  const name = path.basename(file, ".html");
  await page.screenshot({ path: path.join(folder, `${name}-${width}.png`), fullPage: true });
  const overflow = await page.evaluate("document.documentElement.scrollWidth - document.documentElement.clientWidth");
  console.log(`${name} at ${width}: page wider than the window by ${String(overflow)} px`);
  if (width === 1440) await photographPrint(page, name);
  await page.close();
}

/** A4 less its margins is 186 mm, 703 px. */
async function photographPrint(page: Page, name: string): Promise<void> {
  await page.emulateMedia({ media: "print" });
  await page.setViewportSize({ width: 703, height: 1000 });
  await page.screenshot({ path: path.join(folder, `${name}-print.png`), fullPage: true });
  await page.pdf({ path: path.join(folder, `${name}.pdf`), format: "A4" });
}

await mkdir(folder, { recursive: true });
const styles = await buildStyles();
const browser = await chromium.launch({
  executablePath: "/usr/bin/chromium",
  args: ["--no-sandbox", "--allow-file-access-from-files"],
});
try {
  for (const [title, theme, widths] of [
    ["short", "light", [1440, 390]],
    ["short", "dark", [1440, 390]],
    ["long", "light", [1440, 1200, 800, 390]],
    ["plain", "light", [1440, 800, 390]],
  ] as const) {
    const file = await writePage(title, theme, styles);
    for (const width of widths) await photograph(browser, file, width);
  }
} finally {
  await browser.close();
}
