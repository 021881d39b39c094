// Works the figure as a person does: readout by pointer and keys, zoom by drag, wheel and keys, reset, scale, table; axe on each scene.
import path from "node:path";
import { AxeBuilder } from "@axe-core/playwright";
import { chromium, type Page } from "playwright-core";
import { preview } from "vite";

const root = path.resolve("tests/screens/charts");
const output = path.resolve("tests/output/charts");
const server = await preview({
  root,
  configFile: false,
  logLevel: "error",
  build: { outDir: path.join(output, "build") },
  preview: { host: "127.0.0.1", port: 0 },
});
const browser = await chromium.launch({ executablePath: "/usr/bin/chromium", args: ["--no-sandbox"] });

/** Prints what was seen and fails the run where it is not what was expected. */
function check(what: string, seen: string, expected: RegExp): void {
  const right = expected.test(seen);
  console.log(`${right ? "right" : "WRONG"} ${what}: ${seen}`);
  if (!right) process.exitCode = 1;
}

const readout = (page: Page) => page.locator("output").innerText();

try {
  const address = server.resolvedUrls?.local[0] ?? "";
  const context = await browser.newContext({ viewport: { width: 1440, height: 1000 } });
  await context.addInitScript("globalThis.__name = f => f");
  const page = await context.newPage();
  for (const scene of ["drawing", "figure", "waiting", "strips"]) {
    await page.goto(`${address}?scene=${scene}`);
    await page.waitForSelector("main svg");
    const { violations } = await new AxeBuilder({ page }).include("main").analyze();
    check(`axe on ${scene}`, violations.map((found) => found.id).join(" "), /^$/);
  }
  await page.goto(`${address}?scene=figure`);
  const surface = page.locator('[role="slider"]:visible');
  const box = await surface.boundingBox();
  if (!box) throw new Error("no surface");
  const at = (share: number): [number, number] => [box.x + 61 + share * (box.width - 81), box.y + 200];
  await page.mouse.move(...at(0.5));
  check("pointer", await readout(page), /^1\.950\d\sGHz: S21 0\.\d\d dB, S11/);
  await surface.focus();
  await page.keyboard.press("Shift+ArrowRight");
  check("ten pixels right", await readout(page), /^1\.952\d\sGHz/);
  const ticks = () => page.locator("svg[role=img]:visible .visx-axis-bottom text").allTextContents();
  await page.keyboard.press("+");
  check("plus", (await ticks()).join(" "), /^1\.90 .* 2\.00$/);
  await page.keyboard.press("0");
  check("0", (await ticks()).join(" "), /^1\.80 .* 2\.10$/);
  await page.mouse.move(...at(0.4));
  await page.mouse.down();
  await page.mouse.move(...at(0.6), { steps: 5 });
  await page.screenshot({ path: path.join(output, "drag.png") });
  await page.mouse.up();
  check("drag", (await ticks()).join(" "), /^1\.92 .* 1\.98$/);
  await page.mouse.wheel(0, -100);
  await page.waitForTimeout(100);
  check("wheel", (await ticks()).join(" "), /^1\.93 .* 1\.98$/);
  await page.mouse.dblclick(...at(0.5));
  check("double press", (await ticks()).join(" "), /^1\.80 .* 2\.10$/);
  await page.getByRole("button", { name: "Passband" }).click();
  check("passband", (await ticks()).join(" "), /^1\.86 .* 2\.04$/);
  await page.getByRole("button", { name: "Even" }).click();
  await page.getByRole("button", { name: "Table" }).click();
  check("rows of the table", String(await page.locator("tbody tr").count()), /^101$/);
  await page.screenshot({ path: path.join(output, "table.png"), fullPage: true });
  for (const [width, scene] of [
    [760, "drawing"],
    [600, "drawing"],
  ] as const) {
    await page.setViewportSize({ width, height: 900 });
    await page.goto(`${address}?scene=${scene}`);
    await page.waitForSelector("main svg:visible");
    await page.screenshot({ path: path.join(output, `${scene}-${width}.png`), fullPage: true });
  }
  const start = Date.now();
  await page.setViewportSize({ width: 1440, height: 1000 });
  await page.goto(`${address}?scene=figure`);
  await surface.waitFor();
  for (let step = 0; step < 100; step += 1) await page.mouse.move(...at(step / 100));
  console.log("100 pointer moves, ms:", Date.now() - start);
} finally {
  await browser.close();
  await server.close();
}
