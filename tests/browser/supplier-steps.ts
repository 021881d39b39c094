// Steps of the invited suppliers: accept, read, upload, price, declare, submit, read the receipt.
import assert from "node:assert/strict";
import path from "node:path";
import type { Locator, Page } from "playwright-core";
import { holds, holdsFigure, linkTo, rowOf, sees } from "./asserting";
import { BUYER, SUPPLIERS, type Scene } from "./buyer-steps";
import type { JourneyWorld, Step } from "./journey";
import { celsius, decidingOf, referenceOf, SPECIFICATION, worstOf, type ReferenceFile } from "./reference";

export type SupplierName = keyof typeof SUPPLIERS;

const NAMES = ["halden", "kestrel"] as const;

/** As typed: once in the dialect of a spreadsheet, once plain. */
const TERMS: Readonly<Record<SupplierName, Readonly<Record<string, string>>>> = {
  halden: {
    "prices.100": "128.00",
    "prices.500": "96.50",
    "prices.1000": "88",
    nre: "4,800.00",
    leadFirstDays: "42",
    leadVolumeDays: "70",
    place: "Berlin",
    paymentTerms: "30 days net",
  },
  kestrel: {
    "prices.100": "104",
    "prices.500": "79.80",
    "prices.1000": "74.20",
    nre: "2500",
    leadFirstDays: "35",
    leadVolumeDays: "56",
    place: "Leeds",
  },
};

const validUntil = () => new Date(Date.now() + 90 * 24 * 60 * 60 * 1000).toISOString().slice(0, 10);

export const supplierSteps = (world: JourneyWorld, scene: Scene): Step[] => [
  {
    title: "both suppliers accept by the link of their mail, with new accounts, and see the specification as drawn",
    run: async () => {
      for (const name of NAMES) await accept(world, scene, name);
    },
  },
  {
    title: "each uploads nine files at once: unit and temperature are read from the names, the verdict shows at once",
    run: async () => {
      for (const name of NAMES) await upload(await world.page(name), SUPPLIERS[name].company);
      await world.pictures("kestrel", "supplier-data");
    },
  },
  {
    title: "each states basis, instrument and setup of its data",
    run: async () => {
      for (const name of NAMES) await stateSetup(await world.page(name));
    },
  },
  {
    title: "each enters prices, NRE, lead times, validity and delivery",
    run: async () => {
      for (const name of NAMES) await enterTerms(await world.page(name), name);
    },
  },
  {
    title: "each declares the lines that are not measured",
    run: async () => {
      for (const name of NAMES) await declare(await world.page(name));
    },
  },
  {
    title: "each submits, and sees the own results with the figures of the independent tools",
    run: async () => {
      for (const name of NAMES) {
        const page = await world.page(name);
        await page.getByRole("button", { name: "Submit quote" }).click();
        await page.waitForURL(/\/supplier\/quotes\/[0-9a-z]{16}\/results$/);
        const table = page.getByRole("table", { name: "Results by line" });
        await table.waitFor({ timeout: 60_000 });
        for (const { id } of SPECIFICATION.requirements)
          await checkResult(rowOf(table, id), SUPPLIERS[name].company, id);
      }
      await world.pictures("kestrel", "supplier-results");
    },
  },
  {
    title: "receipts with results arrive by mail, at each supplier and at the engineer",
    run: async () => {
      for (const name of NAMES) {
        const { company, email } = SUPPLIERS[name];
        const receipt = await world.mail(email, /quote version 1 received$/);
        const toBuyer = await world.mail(BUYER.engineer.email, new RegExp(`quote from ${company}, version 1$`));
        for (const mail of [receipt, toBuyer])
          for (const { id } of SPECIFICATION.requirements) checkMailedResult(mail.text, company, id);
        assert.equal((await world.mails(email)).filter(({ subject }) => /received$/.test(subject)).length, 1);
      }
    },
  },
];

async function accept(world: JourneyWorld, scene: Scene, name: SupplierName): Promise<void> {
  const { email, password } = SUPPLIERS[name];
  const mail = await world.mail(email, /invitation to quote/);
  const page = await world.page(name);
  await page.goto(linkTo(mail, "/invitation/"));
  await sees(page, BUYER.organisation);
  await page.getByLabel("Your name").fill(`${name} sales`);
  await page.getByLabel("Password", { exact: true }).fill(password);
  await page.getByLabel("Password, again").fill(password);
  await page.getByRole("button", { name: "Create the account and accept" }).click();
  await page.waitForURL(/\/supplier\/invitations\/[0-9a-z]{16}$/);
  await sees(page, scene.rfqNumber);
  for (const { id, kind } of SPECIFICATION.requirements) await holds(rowOf(page, id), [id], `${kind} for the supplier`);
  await page.locator("svg[role=img]").filter({ visible: true }).first().waitFor();
}

async function upload(page: Page, company: string): Promise<void> {
  await page.getByRole("button", { name: "Start quote" }).click();
  await page.waitForURL(/\/supplier\/quotes\/[0-9a-z]{16}$/);
  const { files } = referenceOf(company);
  await page.locator("input[type=file]").setInputFiles(files.map((file) => file.path));
  await page.getByRole("button", { name: "Upload 9 files" }).click({ timeout: 60_000 });
  await sees(page, "9 measured files");
  for (const file of files) await checkFile(page, file);
}

/** Under unit and temperature as read from the name, with the line that decides this file. */
async function checkFile(page: Page, file: ReferenceFile): Promise<void> {
  const name = path.basename(file.path);
  const row = page
    .getByRole("table", { name: "Measured files" })
    .getByRole("rowgroup", { name: `${file.unit}, ${celsius(file.temperature)} °C`, exact: true })
    .getByRole("row")
    .filter({ has: page.getByRole("link", { name, exact: true }) });
  const worst = decidingOf(file);
  const text = await row.innerText();
  await holds(row, [worst.verdict, worst.id, `${celsius(file.temperature)} °C`], name);
  holdsFigure(text, worst.margin, 2, `margin of ${name}`);
  holdsFigure(text, worst.frequency / 1e9, 4, `frequency of ${name}`);
}

/** What the RFQ assumes is stated in the same figure, so that the reference's intervals hold. */
async function stateSetup(page: Page): Promise<void> {
  await page.getByLabel("Basis of the data").selectOption("measured");
  await page.getByLabel("Analyser").fill("Two-port network analyser");
  await page.locator('[name="setup.transmission"]').fill("0.10 dB");
  await page.getByRole("button", { name: "Save and continue" }).click();
  await page.waitForURL(/\/terms$/);
}

async function enterTerms(page: Page, name: SupplierName): Promise<void> {
  for (const [field, text] of Object.entries(TERMS[name])) await page.locator(`[name="${field}"]`).fill(text);
  await page.getByLabel("Incoterms 2020 rule").selectOption(name === "halden" ? "DAP" : "FCA");
  await page.getByLabel("Valid to").fill(validUntil());
  await page.getByRole("button", { name: "Save and continue" }).click();
  await page.waitForURL(/\/declarations$/);
}

async function declare(page: Page): Promise<void> {
  for (const { name } of SPECIFICATION.declared) await page.getByRole("group", { name }).getByLabel("Comply").check();
  await page.getByLabel("6.1, offered figure or exception in words").fill("25 W");
  await page.getByRole("button", { name: "Save and continue" }).click();
  await page.waitForURL(/\/review$/);
  await sees(page, "9 measured files");
}

/** Value, frequency, margin, verdict, unit and temperature of a line, within the rounding shown. */
export async function checkResult(row: Locator, company: string, line: string): Promise<void> {
  const worst = worstOf(company, line);
  const text = await row.innerText();
  const what = `${company}, line ${line}`;
  await holds(row, [worst.verdict, worst.unit, `${celsius(worst.temperature)} °C`], what);
  holdsFigure(text, worst.value, 2, `${what}, value`);
  holdsFigure(text, worst.frequency / 1e9, 4, `${what}, frequency`);
  holdsFigure(text, worst.margin, 2, `${what}, margin`);
}

function checkMailedResult(mail: string, company: string, line: string): void {
  const worst = worstOf(company, line);
  const text = new RegExp(`^${line.replace(".", "\\.")} [^\\n]*\\n[^\\n]*$`, "m").exec(mail)?.[0];
  assert.ok(text, `the mail to or about ${company} has no line ${line}:\n${mail}`);
  holdsFigure(text, worst.value, 1, `mail of ${company}, value of ${line}`);
  holdsFigure(text, worst.margin, 2, `mail of ${company}, margin of ${line}`);
  holdsFigure(text, worst.frequency / 1e9, 2, `mail of ${company}, frequency of ${line}`);
  assert.ok(text.endsWith(worst.verdict), `mail of ${company}, verdict of ${line}: ${text}`);
}
