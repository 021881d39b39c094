// Times the upload of a 10,001-point file: received, read, deflated, scored against 12 requirements and stored, on a database of its own.
import { mkdir, readFile, rm } from "node:fs/promises";
import path from "node:path";
import { performance } from "node:perf_hooks";
import { reservePort } from "../../db/free-port";
import { createDatabase, grantApplicationUser, startMariadb, type Mariadb } from "../../db/mariadb";
import { migrate } from "../../db/migrate";
import type { SpecificationLine } from "../../app/rf/index";

const FOLDER = path.resolve(".tenderband/bench");
const DATABASE = "tenderband_bench";
const RUNS = 15;
const TARGET_MILLISECONDS = 100;
const FILE = "tests/reference/journey/wide-10001.s2p";

/** Two more lines than the scenario's ten measured ones, of the costlier kinds. */
const MORE_LINES: readonly SpecificationLine[] = [
  {
    lineKey: "line51",
    lineNumber: "5.1",
    definition: { kind: "group-delay-variation", band: [1.92e9, 1.98e9], max: 40e-9 },
  },
  {
    lineKey: "line52",
    lineNumber: "5.2",
    definition: { kind: "ripple", band: [1.92e9, 1.98e9], max: 0.5, window: 5e6 },
  },
];

async function startDatabase(): Promise<Mariadb> {
  await rm(FOLDER, { recursive: true, force: true });
  await mkdir(FOLDER, { recursive: true });
  const reserved = await reservePort();
  await reserved.release();
  const server = await startMariadb({ folder: path.join(FOLDER, "mariadb"), port: reserved.port });
  await createDatabase(server.ownerUrl(""), DATABASE);
  await migrate(server.ownerUrl(DATABASE));
  await grantApplicationUser(server.ownerUrl(""), DATABASE);
  Object.assign(process.env, {
    NODE_ENV: "production",
    DATABASE_URL: server.url(DATABASE),
    DATABASE_OWNER_URL: server.ownerUrl(DATABASE),
    SMTP_URL: "smtp://127.0.0.1:9",
    APP_URL: "http://127.0.0.1:5180",
    SESSION_SECRET: "a-secret-for-the-bench-only-of-40-letters",
    UPLOAD_FOLDER: path.join(FOLDER, "uploads"),
    LOG_LEVEL: "silent",
  });
  return server;
}

interface Timing {
  /** Milliseconds of the service: read from disk, parsed, deflated, scored, stored. */
  readonly stored: number;
  /** The same with receiving the request's body. */
  readonly received: number;
  /** Milliseconds of this process's CPU in all of that, whatever else the machine does. */
  readonly cpu: number;
}

/** Uploads the file again and again, each time under another comment, so that its bytes are new to the quote. */
async function measure(): Promise<{ readonly timings: Timing[]; readonly lines: number }> {
  const { buildJourneyQuote } = await import("../support/supplier-journey");
  const { JOURNEY_LINES } = await import("../support/journey");
  const { addMeasurement } = await import("../../app/services/measurements.server");
  const { receiveFiles } = await import("../../app/services/uploads.server");
  const { sequelize } = await import("../../db/connection.server");
  const lines = [...JOURNEY_LINES, ...MORE_LINES];
  const measured = lines.filter(({ definition }) => definition.kind !== "declared").length;
  const { person, quote } = await buildJourneyQuote("Bench", {}, lines);
  const text = await readFile(FILE, "utf8");
  const timings: Timing[] = [];
  for (let run = 0; run < RUNS; run += 1) {
    const form = new FormData();
    form.set("file", new File([`! run ${run}\n${text}`], `unit-${run}_25C.s2p`));
    const request = new Request("http://127.0.0.1:5180/", { method: "POST", body: form });
    const begun = performance.now();
    const cpuBefore = process.cpuUsage();
    let stored = 0;
    const outcome = await receiveFiles(request, async ({ files: [file] }) => {
      const started = performance.now();
      const bytes = await readFile(file?.path ?? "");
      const added = await addMeasurement(person, quote.publicId, { name: file?.name ?? "", bytes });
      stored = performance.now() - started;
      return added?.ok;
    });
    if (!outcome.ok || outcome.value !== true) throw new Error(`not stored: ${JSON.stringify(outcome)}`);
    const { user, system } = process.cpuUsage(cpuBefore);
    timings.push({ stored, received: performance.now() - begun, cpu: (user + system) / 1000 });
  }
  await sequelize.close();
  return { timings, lines: measured };
}

const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN;

function report({ timings, lines }: Awaited<ReturnType<typeof measure>>): boolean {
  const figures = (pick: (timing: Timing) => number) => {
    const values = timings.map(pick);
    const warm = values.slice(1);
    return { first: values[0] ?? NaN, median: median(warm), most: Math.max(...warm) };
  };
  const rows = [
    ["read, scored, stored", figures(({ stored }) => stored)],
    ["with receiving the body", figures(({ received }) => received)],
    ["CPU of this process", figures(({ cpu }) => cpu)],
  ] as const;
  console.log(`10,001 points, ${lines} requirements, ${timings.length} uploads; milliseconds of server time`);
  console.log(`${"".padEnd(26)}${"first".padStart(9)}${"median".padStart(9)}${"most".padStart(9)}`);
  for (const [name, { first, median: middle, most }] of rows) {
    const cells = [first, middle, most].map((value) => value.toFixed(1).padStart(9)).join("");
    console.log(`${name.padEnd(26)}${cells}`);
  }
  const isWithin = rows[0][1].median < TARGET_MILLISECONDS;
  console.log(isWithin ? `Under ${TARGET_MILLISECONDS} ms.` : `Not under ${TARGET_MILLISECONDS} ms.`);
  return isWithin;
}

const server = await startDatabase();
try {
  if (!report(await measure())) process.exitCode = 1;
} finally {
  await server.stop();
  await rm(FOLDER, { recursive: true, force: true });
}
