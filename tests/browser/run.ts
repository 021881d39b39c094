// Runs the browser journeys against the built product, the real MariaDB and the sink's mailbox; ends with the totals.
import { readdir } from "node:fs/promises";
import { pathToFileURL } from "node:url";
import path from "node:path";
import { buildIfStale } from "../../app/start/build";
import { startProduct } from "../support/product";
import { openBrowser, type Journey, type JourneyWorld } from "./journey";

const FOLDER = path.join(".tenderband", "browser");
const here = import.meta.dirname;

async function loadJourneys(only: readonly string[]): Promise<Journey[]> {
  const files = (await readdir(here)).filter((file) => file.endsWith(".journey.ts")).sort();
  const chosen = only.length > 0 ? files.filter((file) => only.some((name) => file.startsWith(name))) : files;
  const modules = await Promise.all(
    chosen.map((file) => import(pathToFileURL(path.join(here, file)).href) as Promise<{ default: Journey }>),
  );
  return modules.map((module) => module.default);
}

/** Runs the steps in order; after one fails the rest of its journey cannot stand and counts as failed. */
async function runJourney(journey: Journey, world: JourneyWorld): Promise<{ passed: number; failed: number }> {
  console.log(`\n${journey.title}`);
  let passed = 0;
  for (const [position, step] of journey.steps(world).entries()) {
    const started = performance.now();
    try {
      await step.run();
      passed += 1;
      console.log(`  ok  ${step.title} (${Math.round(performance.now() - started)} ms)`);
    } catch (error) {
      console.log(`  NOT ${step.title}\n${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
      await world.screenshotAll(`failed-${position + 1}`);
      return { passed, failed: journey.steps(world).length - passed };
    }
  }
  return { passed, failed: 0 };
}

const totals = { passed: 0, failed: 0 };
await buildIfStale({ logFile: path.join("tests", "output", "build.log"), say: (line) => console.log(line) });
const product = await startProduct({ folder: FOLDER });
const world = await openBrowser(product);
try {
  for (const journey of await loadJourneys(process.argv.slice(2))) {
    const { passed, failed } = await runJourney(journey, world);
    totals.passed += passed;
    totals.failed += failed;
  }
  const complaints = world.complaints();
  if (complaints.length > 0) {
    totals.failed += 1;
    console.log(`\nThe browser complained:\n${complaints.join("\n")}`);
  } else totals.passed += 1;
} finally {
  await world.close();
  await product.stop();
}
console.log(`\n${totals.passed} passed, ${totals.failed} failed`);
process.exit(totals.failed === 0 && totals.passed > 0 ? 0 : 1);
