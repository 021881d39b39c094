// Builds the harness page with the product's own style sheet and photographs each scene by day and night, wide and narrow.
import path from "node:path";
import tailwindcss from "@tailwindcss/vite";
import { chromium } from "playwright-core";
import { build, preview } from "vite";

const root = path.resolve("tests/screens/charts");
const output = path.resolve("tests/output/charts");
const options = {
  root,
  configFile: false as const,
  logLevel: "error" as const,
  plugins: [tailwindcss()],
  resolve: { alias: [{ find: /^~\//, replacement: path.resolve("app") + "/" }] },
  build: { outDir: path.join(output, "build"), emptyOutDir: true, assetsInlineLimit: 0 },
};
const scenes = (process.argv[2] ?? "drawing,walls,even,many,figure,strips,scales,smith,delay").split(",");
const themes = (process.argv[3] ?? "light,dark").split(",");

await build(options);
const server = await preview({ ...options, preview: { host: "127.0.0.1", port: 0 } });
const browser = await chromium.launch({ executablePath: "/usr/bin/chromium", args: ["--no-sandbox"] });
try {
  const address = server.resolvedUrls?.local[0];
  for (const theme of themes) {
    for (const width of [1440, 390]) {
      const page = await browser.newPage({
        viewport: { width, height: 900 },
        colorScheme: theme === "dark" ? "dark" : "light",
        deviceScaleFactor: width === 390 ? 2 : 1,
      });
      page.on("pageerror", (error) => console.error(error.message));
      page.on("console", (message) => message.type() === "error" && console.error(message.text()));
      for (const scene of scenes) {
        await page.goto(`${address}?scene=${scene}`);
        await page.waitForSelector("main svg");
        await page.evaluate(() => document.fonts.ready);
        await page.locator("main").screenshot({ path: path.join(output, `${scene}-${theme}-${width}.png`) });
      }
      await page.close();
    }
  }
} finally {
  await browser.close();
  await server.close();
}
