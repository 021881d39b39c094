// Steps of a supplier whose browser checks files before any is sent: nothing leaves until it is asked for, and the figures are the server's.
import assert from "node:assert/strict";
import { execFile } from "node:child_process";
import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import { promisify } from "node:util";
import AxeBuilder from "@axe-core/playwright";
import type { Page } from "playwright-core";
import { withConnection } from "../../db/mariadb";
import { logFileOf } from "../../app/start/programs";
import type { CheckReply, CheckedLot, CheckedSweep } from "../../app/workers/check-messages";
import { plainEnvironment } from "../support/product";
import { plain, sees } from "./asserting";
import { DESKTOP, PHONE, signIn, type JourneyWorld, type Step } from "./journey";

const run = promisify(execFile);
const DATA = path.join("db", "seeds", "demo-data");
/** Where the journeys' product writes what its server answered. */
const SERVER_LOG = logFileOf(path.join(".tenderband", "browser"), "server");
const PERSON = "checking supplier";
const SCORED_WITHIN_MS = 60_000;

interface ChosenFile {
  readonly name: string;
  readonly buffer: Buffer;
}

const read = (folder: string): ChosenFile[] =>
  readdirSync(path.join(DATA, folder))
    .sort()
    .map((name) => ({ name, buffer: readFileSync(path.join(DATA, folder, name)) }));

/** Nine of three units over temperature and one of a unit at ambient alone. */
const PLACED = [...read("kestrel-cavity-filters"), ...read("orme-microwave")];

/** Without serial and temperature, a comma after each row, in ohms that are not the specification's: read with notes. */
function wideFile(): ChosenFile {
  const source = read("orme-microwave")[0]?.buffer.toString("latin1") ?? "";
  const rows = source.replace(/^!.*\n/gm, "").replace(/R 50$/m, "R 75");
  return { name: "wide.s2p", buffer: Buffer.from(rows.replace(/^(\s*\d.*)$/gm, "$1,"), "latin1") };
}

const WIDE = wideFile();
const REFUSED = ["decimal-comma.s2p", "three-port.s3p"].map((name) => ({
  name,
  buffer: readFileSync(path.join("tests", "fixtures", name)),
}));
const SENT = [...PLACED, WIDE];

interface Scene {
  email: string;
  password: string;
  quote: string;
}

/** What the worker said of each file, and of all together. */
interface Heard {
  sweeps: Map<string, CheckedSweep>;
  lot: CheckedLot | undefined;
  /** Name of a file by the number the worker knows it by. */
  names: Map<number, string>;
}

export function checkSteps(world: JourneyWorld): Step[] {
  const scene: Scene = { email: "", password: "", quote: "" };
  const heard: Heard = { sweeps: new Map(), lot: undefined, names: new Map() };
  return [
    {
      title: "a supplier with an open RFQ of every kind of measured line opens the data of its quote",
      run: async () => {
        Object.assign(scene, JSON.parse(await runScene(world, ["prepare"])));
        const page = await world.page(PERSON);
        await listenToWorkers(page);
        await signIn(page, scene.email, scene.password);
        await page.goto(`/supplier/quotes/${scene.quote}`);
        await sees(page, "nothing is sent before you press Upload");
        await page.waitForFunction(() => window.workerMessages.some(({ reply }) => reply?.kind === "ready"));
        await untilQuiet(page);
      },
    },
    {
      title: "dropped files are scored, refused and told without a single request, and with the network gone",
      run: async () => {
        const page = await world.page(PERSON);
        const watch = await watchNetwork(page);
        await chooseFiles(page, [...SENT, ...REFUSED]);
        await sees(page, "Checked on this machine: nothing has been sent.");
        await page.context().setOffline(true);
        await page.getByRole("button", { name: "Remove wide.s2p" }).click();
        await sees(page, `Together, as a quote of these ${PLACED.length} files alone`);
        await chooseFiles(page, [WIDE]);
        await sees(page, "Left out of this, without a unit and a temperature: wide.s2p");
        await checkList(page);
        Object.assign(heard, await heardOf(page));
        assert.deepEqual(await watch.end(), [], "something left the browser");
        await page.context().setOffline(false);
      },
    },
    {
      title: "the checked files can be read by everybody, at all widths, by day and by night",
      run: async () => {
        const page = await world.page(PERSON);
        await page.getByRole("button", { name: `All lines of ${PLACED[0]?.name ?? ""}` }).click();
        await page.getByText(/^Figures of all/).click();
        await checkAccessibility(page);
        await world.pictures(PERSON, "checked-before-upload");
      },
    },
    {
      title: "Upload sends the checked files alone, and the server's figures are those of the browser",
      run: async () => {
        const page = await world.page(PERSON);
        await page.getByRole("button", { name: `Upload ${SENT.length} files` }).click();
        await page.getByText(`${SENT.length} measured files`).waitFor({ timeout: 30_000 });
        const stored = await storedSweeps(world, scene.quote);
        assert.deepEqual([...stored.keys()].sort(), SENT.map(({ name }) => name).sort());
        for (const [name, row] of stored) checkStored(name, row, heard.sweeps.get(name));
      },
    },
    {
      title: "submitted, the quote scores line by line as the browser said it would",
      run: async () => {
        const submitted = JSON.parse(await runScene(world, ["submit", scene.email, scene.quote, WIDE.name])) as object;
        assert.ok("ok" in submitted && submitted.ok === true, JSON.stringify(submitted));
        const { lines, names } = await storedLines(world, scene.quote);
        const { lot } = heard;
        assert.ok(lot, "the worker scored no lot");
        assert.equal(lines.length, lot.lines.length);
        for (const line of lot.lines) {
          const found = lines.find(({ lineKey }) => lineKey === line.lineKey);
          const cells = (from: readonly Cell[], nameOf: (id: string) => string | undefined) =>
            from.map((cell) => ({ ...cell, sweepId: nameOf(cell.sweepId) })).sort(byPlace);
          checkAlike(
            {
              verdict: found?.verdict,
              reason: found?.reason,
              cells: cells(found?.cells ?? [], (id) => names.get(id)),
            },
            {
              verdict: line.verdict,
              reason: line.reason,
              cells: cells(line.cells, (id) => heard.names.get(Number(id))),
            },
            `line ${line.lineKey}`,
          );
        }
      },
    },
  ];
}

type Cell = CheckedLot["lines"][number]["cells"][number];

const byPlace = (a: Pick<Cell, "unit" | "temperature">, b: Pick<Cell, "unit" | "temperature">): number =>
  a.unit.localeCompare(b.unit) || a.temperature - b.temperature;

async function runScene({ product }: JourneyWorld, parameters: readonly string[]): Promise<string> {
  const env = {
    ...plainEnvironment(),
    DATABASE_URL: product.ownerUrl,
    SMTP_URL: `smtp://127.0.0.1:${product.smtpPort}`,
    APP_URL: product.appUrl,
    SESSION_SECRET: "this program signs nothing with its secret",
    LOG_LEVEL: "silent",
  };
  const program = path.join("tests", "browser", "check-scene.ts");
  const { stdout } = await run(process.execPath, ["--import", "tsx", program, ...parameters], { env });
  return stdout.trim().split("\n").at(-1) ?? "";
}

declare global {
  interface Window {
    /** Every message between the page and its workers, as the journey listens to it. */
    workerMessages: { readonly file?: readonly [id: number, name: string]; readonly reply?: CheckReply }[];
  }
}

/** Lets the page's own worker be heard: the product runs as it is, the messages are noted as they pass. */
const listenToWorkers = (page: Page): Promise<unknown> =>
  page.addInitScript(() => {
    window.workerMessages = [];
    const NativeWorker = window.Worker;
    window.Worker = class extends NativeWorker {
      constructor(address: string | URL, options?: WorkerOptions) {
        super(address, options);
        this.addEventListener("message", ({ data }: MessageEvent<CheckReply>) => {
          window.workerMessages.push({ reply: data });
        });
      }
      override postMessage(message: unknown): void {
        const request = message as { readonly kind: string; readonly id: number; readonly file: File };
        if (request.kind === "check") window.workerMessages.push({ file: [request.id, request.file.name] });
        super.postMessage(message);
      }
    };
  });

async function heardOf(page: Page): Promise<Heard> {
  const messages = await page.evaluate(() => window.workerMessages);
  const names = new Map(messages.flatMap(({ file }) => (file ? [file] : [])));
  const sweeps = new Map<string, CheckedSweep>();
  let lot: CheckedLot | undefined;
  for (const { reply } of messages) {
    if (reply?.kind === "checked") sweeps.set(names.get(reply.id) ?? "", reply.checked);
    if (reply?.kind === "lot") lot = reply.lot;
  }
  return { sweeps, lot, names };
}

async function chooseFiles(page: Page, files: readonly ChosenFile[]): Promise<void> {
  const chosen = files.map(({ name, buffer }) => ({ name, buffer, mimeType: "application/octet-stream" }));
  await page.locator("input[type=file]").setInputFiles(chosen);
}

const QUIET_FOR_MS = 2_000;

/** Until the page has loaded all it loads by itself. */
async function untilQuiet(page: Page): Promise<void> {
  let last = Date.now();
  const note = () => void (last = Date.now());
  page.on("request", note);
  page.on("requestfinished", note);
  while (Date.now() - last < QUIET_FOR_MS) await page.waitForTimeout(100);
  page.off("request", note);
  page.off("requestfinished", note);
}

/** What the browser, its developer protocol and the server's log know of anything that leaves. */
async function watchNetwork(page: Page): Promise<{ end(): Promise<string[]> }> {
  const left: string[] = [];
  const note = (what: string) => (address: string) => void left.push(`${what} ${address}`);
  const noteRequest = (request: { method(): string; url(): string }) => note(request.method())(request.url());
  const noteSocket = (socket: { url(): string }) => note("socket")(socket.url());
  const context = page.context();
  context.on("request", noteRequest);
  page.on("websocket", noteSocket);
  const session = await context.newCDPSession(page);
  await session.send("Network.enable");
  session.on("Network.requestWillBeSent", ({ request, type }) => note(type ?? "request")(request.url));
  session.on("Network.webSocketCreated", ({ url }) => note("socket")(url));
  session.on("Network.webTransportCreated", ({ url }) => note("transport")(url));
  const answered = countAnswers();
  return {
    end: async () => {
      await page.waitForTimeout(500); // a beacon or a delayed request would show
      context.off("request", noteRequest);
      page.off("websocket", noteSocket);
      await session.detach();
      const answers = countAnswers() - answered;
      return answers === 0 ? left : [...left, `the server answered ${answers} times`];
    },
  };
}

const countAnswers = (): number => (readFileSync(SERVER_LOG, "utf8").match(/"method":/g) ?? []).length;

/** The list says of each file what was read and how it stands; the refused ones have their place. */
async function checkList(page: Page): Promise<void> {
  const list = page.getByRole("list", { name: "Checked files", exact: true });
  for (const { name } of SENT) await list.getByRole("button", { name: `All lines of ${name}` }).waitFor();
  const refused = page.getByRole("list", { name: "Refused files" });
  for (const { name } of REFUSED) {
    const said = plain(await refused.getByRole("listitem").filter({ hasText: name }).getByRole("alert").innerText());
    assert.match(said, /^Line \d+/, `${name}: “${said}”`);
  }
  await sees(list.getByRole("listitem").filter({ hasText: "wide.s2p" }), /\d notes/);
}

async function checkAccessibility(page: Page): Promise<void> {
  const tags = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"];
  for (const [size, colorScheme] of [[DESKTOP, "light"] as const, [PHONE, "dark"] as const]) {
    await page.setViewportSize(size);
    await page.emulateMedia({ colorScheme, reducedMotion: "reduce" });
    const { violations } = await new AxeBuilder({ page }).withTags(tags).setLegacyMode().analyze();
    assert.deepEqual(
      violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(" ")).join(" | ")}`),
      [],
    );
    const over = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
    assert.ok(over <= 0, `the page is ${over} px wider than ${size.width}`);
  }
  await page.emulateMedia({ colorScheme: "light", reducedMotion: null });
  await page.setViewportSize(DESKTOP);
}

interface StoredSweep {
  readonly serial: string | null;
  readonly temperature: string | null;
  readonly points: number;
  readonly notes: unknown;
  readonly results: unknown;
  readonly verdict: string;
}

/** A JSON column, as text or parsed. */
const parsed = (value: unknown): unknown => (typeof value === "string" ? (JSON.parse(value) as unknown) : value);

async function query<T>(world: JourneyWorld, sql: string, values: readonly unknown[]): Promise<T[]> {
  return withConnection(world.product.ownerUrl, (connection) => connection.query<T[]>(sql, values));
}

async function storedSweeps(world: JourneyWorld, quote: string): Promise<Map<string, StoredSweep>> {
  const rows = await query<StoredSweep & { name: string }>(
    world,
    `SELECT f.name, m.serial, m.temperature, m.points, m.notes, r.results, r.verdict FROM measurements m
       JOIN quotes q ON q.id = m.quote_id JOIN files f ON f.id = m.file_id JOIN measurement_results r ON r.measurement_id = m.id
       WHERE q.public_id = ?`,
    [quote],
  );
  assert.equal(new Set(rows.map(({ name }) => name)).size, rows.length, "a file has more than one result");
  return new Map(rows.map((row) => [row.name, row]));
}

function checkStored(name: string, row: StoredSweep, checked: CheckedSweep | undefined): void {
  assert.ok(checked, `the browser did not check ${name}`);
  const temperature = row.temperature === null ? null : Number(row.temperature);
  const { serial, points, verdict } = row;
  const server = { serial, temperature, points, verdict, notes: parsed(row.notes), results: parsed(row.results) };
  const { notes, results } = checked;
  const { serial: ownSerial, temperature: ownTemperature, points: ownPoints, verdict: ownVerdict } = checked;
  const browser = {
    serial: ownSerial,
    temperature: ownTemperature,
    points: ownPoints,
    verdict: ownVerdict,
    notes,
    results,
  };
  checkAlike(server, browser, name);
}

interface StoredLine {
  readonly lineKey: string;
  readonly verdict: string;
  readonly reason: string | null;
  readonly cells: readonly Cell[];
}

/** The lines of the submitted version once it is scored, and the names of its files by their measurements' ids. */
async function storedLines(world: JourneyWorld, quote: string) {
  const deadline = Date.now() + SCORED_WITHIN_MS;
  for (;;) {
    const rows = await query<StoredLine>(
      world,
      `SELECT l.line_key AS lineKey, l.verdict, l.reason, l.cells FROM quote_line_results l
         JOIN quotes q ON q.current_version_id = l.version_id WHERE q.public_id = ? AND l.verdict NOT IN ('declared', 'exception')`,
      [quote],
    );
    const measured = rows.map((row) => ({ ...row, cells: parsed(row.cells) as Cell[] }));
    const files = await query<{ id: string; name: string }>(
      world,
      `SELECT m.public_id AS id, f.name FROM measurements m JOIN files f ON f.id = m.file_id JOIN quotes q ON q.id = m.quote_id
         WHERE q.public_id = ?`,
      [quote],
    );
    if (measured.length > 0) return { lines: measured, names: new Map(files.map(({ id, name }) => [id, name])) };
    assert.ok(Date.now() < deadline, "the submitted quote was not scored");
    await new Promise((resolve) => setTimeout(resolve, 500));
  }
}

/** Relative: engines differ in the last digits of sines and logarithms. */
const TOLERANCE = 1e-9;
/** Absolute near zero, in dB, degrees, hertz or as a ratio; in seconds a billionth of a nanosecond. */
const NEAR_ZERO = 1e-9;
const NEAR_NO_DELAY = 1e-18;
const DELAY_LINES: readonly unknown[] = ["linedela", "lineaper", "linevari"];

/** The same words everywhere, and figures alike to a billionth. */
function checkAlike(server: unknown, browser: unknown, place: string, nearZero = NEAR_ZERO): void {
  if (typeof server === "number" && typeof browser === "number") {
    const most = Math.max(TOLERANCE * Math.abs(server), nearZero);
    assert.ok(Math.abs(server - browser) <= most, `${place}: ${server} on the server, ${browser} in the browser`);
  } else if (isObject(server) && isObject(browser)) {
    assert.deepEqual(Object.keys(browser).sort(), Object.keys(server).sort(), place);
    const floor = DELAY_LINES.includes(server.id) ? NEAR_NO_DELAY : nearZero;
    for (const [key, value] of Object.entries(server)) checkAlike(value, browser[key], `${place}, ${key}`, floor);
  } else assert.equal(browser, server, place);
}

const isObject = (value: unknown): value is Record<string, unknown> => typeof value === "object" && value !== null;
