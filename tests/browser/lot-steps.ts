// Steps of the lot: the demo's engineer plans the measurement, its supplier sends thirty sweeps, the matrix says what ngspice and numpy say.
import assert from "node:assert/strict";
import { execFile } from "node:child_process";
import { mkdir, readFile, readdir } from "node:fs/promises";
import path from "node:path";
import { promisify } from "node:util";
import type { Locator, Page } from "playwright-core";
import { PASSWORD, PEOPLE } from "../../db/seeds/demo-cast";
import { holds, holdsFigure, linkTo, plain, rowOf, sees } from "./asserting";
import { signIn, type JourneyWorld, type Step } from "./journey";

const run = promisify(execFile);
const FOLDER = path.join("tests", "output", "lot");
const RECIPE = path.join("tests", "reference", "recipes", "make_lot_measurements.py");
const TITLE = "Receive band-pass, lot of five";
const ENGINEER = "lot engineer";
const SUPPLIER = "lot supplier";
const PASSBAND = { from: "1.92G", to: "1.98G" };
const LOSS_LIMIT = 1.03;

/** As the engineer types them; numbered 2.1, 2.2, 3.1 … in this order. */
const LINES: readonly Readonly<Record<string, string>>[] = [
  { kind: "insertion-loss", ...PASSBAND, limit: `${LOSS_LIMIT} dB` },
  { kind: "ripple", ...PASSBAND, limit: "0.6 dB" },
  { kind: "rejection", from: "1.76G", to: "1.87G", limit: "55 dB" },
  { kind: "rejection", from: "2005 MHz", to: "2040 MHz", limit: "32 dB" },
  { kind: "rejection", from: "2040 MHz", to: "2140 MHz", limit: "50 dB" },
  { kind: "return-loss", port: "1", ...PASSBAND, limit: "16 dB" },
  { kind: "return-loss", port: "2", ...PASSBAND, limit: "16 dB" },
  { kind: "group-delay-variation", ...PASSBAND, limit: "20 ns" },
];

/** What numpy reads from the files: the largest loss of a unit at a temperature. */
interface ExpectedLoss {
  readonly unit: string;
  readonly temperature: number;
  /** dB. */
  readonly loss: number;
  /** Hz. */
  readonly frequency: number;
  /** dB, both ends of the reading. */
  readonly interval: readonly [number, number];
}

interface LotScene {
  rfq: string;
  quote: string;
  expected: readonly ExpectedLoss[];
}

export function lotSteps(world: JourneyWorld): Step[] {
  const scene: LotScene = { rfq: "", quote: "", expected: [] };
  return [
    {
      title: "ngspice makes thirty files of five units, and numpy says what they hold",
      run: async () => {
        await mkdir(FOLDER, { recursive: true });
        await run("/usr/bin/python3", [RECIPE, FOLDER]);
        const text = await readFile(path.join(FOLDER, "expected.json"), "utf8");
        scene.expected = JSON.parse(text) as ExpectedLoss[];
        assert.equal(scene.expected.length, 15);
      },
    },
    {
      title: "the engineer writes a specification with a line of delay, and plans units, sweeps and steps for it",
      run: () => planLot(world, scene),
    },
    {
      title: "the supplier accepts and sees what is asked of the data",
      run: () => acceptLot(world),
    },
    {
      title:
        "thirty sweeps are placed under five units and three temperatures by their names, and the evidence is complete",
      run: () => uploadLot(world, scene),
    },
    {
      title: "the supplier states its setup once, and one sweep's own, and submits",
      run: () => submitLot(world, scene),
    },
    {
      title: "every unit and temperature carries the loss that numpy reads, and the verdict its interval gives",
      run: () => checkMatrix(world, scene),
    },
    {
      title:
        "the warm corner of the unit tuned low is a conditional fail, told with its deciding frequency at its place in the curves",
      run: () => checkCorner(world),
    },
    {
      title: "the stretch that one sweep lacks is not covered, and named",
      run: () => checkHole(world),
    },
    {
      title: "curves and outlook show the lot",
      run: () => checkFurtherSheets(world, scene),
    },
  ];
}

async function planLot(world: JourneyWorld, scene: LotScene): Promise<void> {
  const page = await world.page(ENGINEER);
  await signIn(page, PEOPLE.engineer.email, PASSWORD);
  await page.goto("/specifications/new");
  await page.getByLabel("Title").fill(TITLE);
  await page.getByLabel("Temperature from").fill("-30");
  await page.getByLabel("Temperature to").fill("70");
  for (const [index, line] of LINES.entries()) await typeLine(page, index, line);
  await page.getByRole("button", { name: "Save draft" }).click();
  await page.waitForURL(/\/specifications\/[0-9a-z]{16}$/);
  await page.getByRole("button", { name: "Release A" }).click();
  await page.getByRole("link", { name: "Request quotes" }).click();
  await page.getByLabel("Break 1").fill("500");
  await page.getByLabel("Compared at").fill("500");
  await page.getByLabel("Date", { exact: true }).fill(dayAfterToday());
  await page.getByLabel("Units in all").fill("5");
  await page.getByLabel("Of these over temperature").fill("5");
  await page.getByRole("button", { name: "Save the draft" }).click();
  await page.waitForURL(/\/rfqs\/[0-9a-z]{16}\/invitations$/);
  scene.rfq = new URL(page.url()).pathname.replace(/\/invitations$/, "");
  await page.locator('[name="invitations.0.company"]').fill("Halden Resonator Works");
  await page.locator('[name="invitations.0.email"]').fill(PEOPLE.halden.email);
  await page.getByRole("button", { name: "Add to the list" }).click();
  await page.getByRole("link", { name: "Open RFQ…" }).click();
  await page.getByRole("button", { name: "Open and mail 1 invitation" }).click();
  await page.waitForURL((url) => url.pathname === scene.rfq && url.search === "");
  // A hundredth of the passband, a tenth of the narrowest stopband.
  for (const step of ["600 kHz", "3.5 MHz"]) await sees(page, step);
  await world.pictures(ENGINEER, "lot-rfq");
}

async function typeLine(page: Page, index: number, { kind = "", port, ...texts }: Readonly<Record<string, string>>) {
  const field = (name: string) => page.locator(`[name="lines.${index}.${name}"]`);
  if ((await field("kind").count()) === 0) await page.getByRole("button", { name: "Add line" }).click();
  await field("kind").selectOption(kind);
  if (port !== undefined) await field("port").selectOption(port);
  for (const [name, text] of Object.entries(texts)) await field(name).fill(text);
}

const dayAfterToday = () => new Date(Date.now() + 24 * 60 * 60 * 1000).toISOString().slice(0, 10);

async function acceptLot(world: JourneyWorld): Promise<void> {
  const page = await world.page(SUPPLIER);
  await signIn(page, PEOPLE.halden.email, PASSWORD);
  const mail = await world.mail(
    PEOPLE.halden.email,
    new RegExp(`invitation to quote.*${TITLE}|${TITLE}.*invitation`, "i"),
  );
  await page.goto(linkTo(mail, "/invitation/"));
  await page.getByRole("button", { name: /^Accept/ }).click();
  await page.waitForURL(/\/supplier\/invitations\/[0-9a-z]{16}$/);
  for (const words of ["5 in all", "600 kHz", "3.5 MHz"]) await sees(page, words);
}

async function uploadLot(world: JourneyWorld, scene: LotScene): Promise<void> {
  const page = await world.page(SUPPLIER);
  await page.getByRole("button", { name: "Start quote" }).click();
  await page.waitForURL(/\/supplier\/quotes\/[0-9a-z]{16}$/);
  scene.quote = /[0-9a-z]{16}$/.exec(page.url())?.[0] ?? "";
  const names = (await readdir(FOLDER)).filter((name) => name.endsWith(".s2p"));
  await page.locator("input[type=file]").setInputFiles(names.map((name) => path.join(FOLDER, name)));
  await page.getByRole("button", { name: "Upload 30 files" }).click({ timeout: 60_000 });
  await page.getByText("30 measured files").waitFor({ timeout: 60_000 });
  const list = page.getByRole("table", { name: "Measured files" });
  for (const unit of unitsOf(scene)) await list.getByText(`Unit ${unit}`, { exact: false }).first().waitFor();
  await world.pictures(SUPPLIER, "lot-data");
}

const unitsOf = ({ expected }: LotScene): string[] => [...new Set(expected.map(({ unit }) => unit))];

async function submitLot(world: JourneyWorld, scene: LotScene): Promise<void> {
  const page = await world.page(SUPPLIER);
  await stateOwnSetup(page);
  await page.locator('[name="setup.transmission"]').first().fill("0.05");
  await page.locator('[name="setup.noiseFloor"]').first().fill("95");
  await page.locator('[name="basis"]').selectOption("measured");
  await page.locator('[name="drift.ppmPerKelvin"]').fill("-5 ppm/K");
  await page.getByRole("button", { name: /^Save and continue/ }).click();
  await page.waitForURL(/\/terms$/);
  const terms = { "prices.500": "92.00", nre: "0", leadVolumeDays: "60" };
  for (const [name, text] of Object.entries(terms)) await page.locator(`[name="${name}"]`).fill(text);
  await page.getByLabel("Valid to").fill(new Date(Date.now() + 60 * 24 * 60 * 60 * 1000).toISOString().slice(0, 10));
  await page.getByRole("button", { name: "Save and continue" }).click();
  await page.waitForURL(/\/(declarations|review)$/);
  await page.goto(`/supplier/quotes/${scene.quote}/review`);
  await page.getByRole("button", { name: "Submit quote" }).click();
  await page.waitForURL(/\/results$/);
  await page.getByRole("table", { name: "Results by line" }).waitFor({ timeout: 60_000 });
}

/** Of one fine sweep: a difference within it is known better than the two levels. */
async function stateOwnSetup(page: Page): Promise<void> {
  const row = page.getByRole("row").filter({ has: page.getByRole("link", { name: "LF-601_+25C_fine.s2p" }) });
  await row.getByRole("link", { name: /^Setup/ }).click();
  const form = page.locator("form").filter({ has: page.getByRole("button", { name: "Save setup of the sweep" }) });
  await form.locator('[name="setup.transmissionRelative"]').fill("0.02");
  await form.getByRole("button", { name: "Save setup of the sweep" }).click();
  await row.getByText("Own setup").waitFor({ timeout: 30_000 });
}

async function openResults(world: JourneyWorld, scene: LotScene): Promise<Page> {
  const page = await world.page(ENGINEER);
  await page.goto(`/quotes/${scene.quote}`);
  return page;
}

const matrixRow = (page: Page, line: string): Locator => rowOf(page.getByRole("table", { name: /^Compliance/ }), line);

async function checkMatrix(world: JourneyWorld, scene: LotScene): Promise<void> {
  const page = await openResults(world, scene);
  await sees(page, "Compliance of 5 units at 3 temperatures");
  const cells = matrixRow(page, "2.1").getByRole("link");
  assert.equal(await cells.count(), 15);
  for (const expected of scene.expected) {
    const { unit, temperature, loss } = expected;
    const celsius = `${temperature}`.replace("-", "−");
    const cell = cells.and(page.locator(`[href*="unit=${unit}"][href*="temperature=${temperature}"]`));
    const mark = await cell.getByRole("img").getAttribute("aria-label");
    assert.equal(mark, verdictOf(expected), `${unit} at ${celsius} °C`);
    holdsFigure(plain(await cell.innerText()), loss, 2, `${unit} at ${celsius} °C`);
  }
}

/** Of a reading whose ends numpy has computed. */
function verdictOf({ loss, interval: [low, high] }: ExpectedLoss): string {
  if (high <= LOSS_LIMIT) return "pass";
  if (loss <= LOSS_LIMIT) return "conditional pass";
  return low <= LOSS_LIMIT ? "conditional fail" : "fail";
}

async function checkCorner(world: JourneyWorld): Promise<void> {
  const page = await world.page(ENGINEER);
  await matrixRow(page, "2.1").locator('[href*="unit=LF-605"][href*="temperature=70"]').click();
  const details = page.locator("#cell");
  await details.getByRole("heading", { name: /LF-605/ }).waitFor();
  await holds(details, ["conditional fail", "1.9800 GHz", "to settle it"], "the warm corner");
  const figure = page
    .locator("figure")
    .filter({ has: page.locator("svg[role=img]") })
    .first();
  await figure.getByText("1.9800 GHz").filter({ visible: true }).first().waitFor({ timeout: 30_000 });
  await page.waitForLoadState("networkidle");
  await world.pictures(ENGINEER, "lot-results");
  const clip = { x: 0, y: 0, width: 1440, height: 1540 };
  await page.screenshot({ path: path.join("tests", "output", "journeys", "lot.png"), fullPage: true, clip });
}

async function checkHole(world: JourneyWorld): Promise<void> {
  const page = await world.page(ENGINEER);
  await matrixRow(page, "3.3").locator('[href*="unit=LF-603"][href*="temperature=-30"]').click();
  await page
    .locator("#cell")
    .getByRole("heading", { name: /LF-603/ })
    .waitFor();
  await holds(page.locator("#cell"), ["not covered", "2.0600 to 2.0800 GHz"], "the hole");
}

async function checkFurtherSheets(world: JourneyWorld, scene: LotScene): Promise<void> {
  const page = await world.page(ENGINEER);
  const place = "unit=LF-605&temperature=70";
  for (const [name, address] of [
    ["zoom", `curves?${place}&line=2.1`],
    ["margin", `curves?${place}&line=2.1&view=margin`],
    ["smith", `curves?${place}&view=smith`],
    ["delay", `curves?${place}&line=5.1&view=delay`],
    ["impedance", `curves?${place}&view=impedance`],
    ["outlook", "outlook"],
  ] as const) {
    await page.goto(`/quotes/${scene.quote}/${address}`);
    await page.waitForLoadState("networkidle");
    assert.equal(await page.getByText("Loading curves").filter({ visible: true }).count(), 0, `${name} stays empty`);
    await world.pictures(ENGINEER, `lot-${name}`);
  }
  await sees(page, "with 95 % confidence");
}
