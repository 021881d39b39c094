// Steps of the buyer before quotes arrive: accounts, specification, RFQ, invitations.
import assert from "node:assert/strict";
import { execFile } from "node:child_process";
import { promisify } from "node:util";
import type { Page } from "playwright-core";
import { plainEnvironment } from "../support/product";
import { holds, linkTo, plain, rowOf, sees } from "./asserting";
import { signIn, type JourneyWorld, type Step } from "./journey";
import { SPECIFICATION, type ReferenceLine } from "./reference";

const run = promisify(execFile);

export const BUYER = {
  organisation: "Fernmoor Systems",
  admin: { email: "head@fernmoor.example.test", name: "head", password: "seven grey herons wade" },
  engineer: { email: "engineer@fernmoor.example.test", name: "Ines Falkner", password: "quarter wave on brass" },
  purchasing: { email: "buying@fernmoor.example.test", name: "Tom Ashdown", password: "paper clips, no receipts" },
};

/** What later steps need of earlier ones. */
export interface Scene {
  rfqPage: string;
  rfqNumber: string;
}

/** Sets a password by the link of a mail or a command, and signs in with it. */
async function setPassword(page: Page, link: string, email: string, password: string): Promise<void> {
  await page.goto(link);
  assert.ok(!page.url().includes(link.slice(-20)), "the token stays in the address");
  await page.getByLabel("New password", { exact: true }).fill(password);
  await page.getByLabel("New password, again").fill(password);
  await page.getByRole("button", { name: "Set password" }).click();
  await sees(page, "The new password is set");
  await signIn(page, email, password);
}

async function addColleague(page: Page, { email, name }: { email: string; name: string }, role: string) {
  await page.goto("/organisation");
  await page.getByLabel("Name", { exact: true }).fill(name);
  await page.getByLabel("E-mail").fill(email);
  await page.getByLabel("Role").selectOption(role);
  await page.getByRole("button", { name: "Add and mail the link" }).click();
  await page.getByText("The mail is on its way.").waitFor();
}

async function acceptColleague(world: JourneyWorld, person: "engineer" | "purchasing"): Promise<void> {
  const { email, password } = BUYER[person];
  const mail = await world.mail(email, /password/i);
  await setPassword(await world.page(person), linkTo(mail, "/password-reset/"), email, password);
}

export const accountSteps = (world: JourneyWorld): Step[] => [
  {
    title: "the command makes the first administrator and prints a link that sets the password",
    run: async () => {
      const { product } = world;
      const environment = {
        ...plainEnvironment(),
        DATABASE_URL: product.ownerUrl,
        SMTP_URL: `smtp://127.0.0.1:${product.smtpPort}`,
        APP_URL: product.appUrl,
        SESSION_SECRET: "this command signs nothing with its secret",
      };
      const command = ["--import", "tsx", "app/create-administrator.ts", BUYER.admin.email, BUYER.organisation];
      const { stdout } = await run(process.execPath, command, { env: environment });
      const link = /https?:\S+\/password-reset\/\S+/.exec(stdout)?.[0];
      assert.ok(link, `the command printed no link: ${stdout}`);
      await setPassword(await world.page("admin"), link, BUYER.admin.email, BUYER.admin.password);
    },
  },
  {
    title: "the administrator adds an engineer and a purchasing colleague",
    run: async () => {
      const page = await world.page("admin");
      await addColleague(page, BUYER.engineer, "engineer");
      await addColleague(page, BUYER.purchasing, "purchasing");
    },
  },
  {
    title: "both set their passwords by the links of their mails and sign in",
    run: async () => {
      await acceptColleague(world, "engineer");
      await acceptColleague(world, "purchasing");
    },
  },
];

/** The ways an engineer writes a frequency, one after the other. */
const DIALECTS = [
  (hz: number) => `${hz / 1e9}G`,
  (hz: number) => `${hz / 1e6} MHz`,
  (hz: number) => String(hz / 1e6),
  (hz: number) => `${hz / 1e9} GHz`,
] as const;

async function typeLine(page: Page, index: number, line: ReferenceLine): Promise<void> {
  const field = (name: string) => page.locator(`[name="lines.${index}.${name}"]`);
  const write = DIALECTS[index % DIALECTS.length] ?? String;
  await field("kind").selectOption(line.kind);
  await field("from").fill(write(line.band[0]));
  await field("to").fill(write(line.band[1]));
  const limit = line.max ?? line.min;
  if (typeof limit === "object") {
    await field("limit").fill(`${limit.points[0]?.[1]} dB`);
    await field("limitEnd").fill(`${limit.points[1]?.[1]} dB`);
  } else await field("limit").fill(index % 2 === 0 ? `${limit?.toFixed(1)} dB` : String(limit));
  if (line.port !== undefined) await field("port").selectOption(String(line.port));
  if (line.relativeTo) {
    await field("relativeFrom").fill(write(line.relativeTo[0]));
    await field("relativeTo").fill(write(line.relativeTo[1]));
  }
}

async function typeSpecification(page: Page): Promise<void> {
  const { requirements, declared, range, title } = SPECIFICATION;
  await page.getByLabel("Title").fill(title);
  await page.getByLabel("Temperature from").fill(String(range[0]));
  await page.getByLabel("Temperature to").fill(`${range[1]} °C`);
  for (const [index, line] of requirements.entries()) {
    await needRow(page, index);
    await typeLine(page, index, line);
  }
  for (const [place, { name, limit }] of declared.entries()) {
    const index = requirements.length + place;
    await needRow(page, index);
    await page.locator(`[name="lines.${index}.kind"]`).selectOption("declared");
    await page.locator(`[name="lines.${index}.name"]`).fill(name);
    await page.locator(`[name="lines.${index}.limit"]`).fill(limit);
  }
}

async function needRow(page: Page, index: number): Promise<void> {
  const kind = page.locator(`[name="lines.${index}.kind"]`);
  if ((await kind.count()) === 0) await page.getByRole("button", { name: "Add line" }).click();
  await kind.waitFor();
}

/** The limits of the table are those of the reference, whatever dialect they were typed in. */
async function checkTable(page: Page): Promise<void> {
  for (const line of SPECIFICATION.requirements) {
    const limit = line.max ?? line.min;
    const levels = typeof limit === "object" ? limit.points.map(([, level]) => level).join(" to ") : String(limit);
    const edges = line.band.map((hz) => (hz / 1e9).toFixed(4)).join(" to ");
    await holds(
      rowOf(page, line.id),
      [`${line.max === undefined ? "min" : "max"} ${levels} dB`, `${edges} GHz`],
      line.id,
    );
  }
  for (const { id, name, limit } of SPECIFICATION.declared) await holds(rowOf(page, id), [name, limit], id);
}

export const specificationSteps = (world: JourneyWorld): Step[] => [
  {
    title: "the engineer writes the specification in a table, in the dialects an engineer types",
    run: async () => {
      const page = await world.page("engineer");
      await page.goto("/specifications/new");
      await typeSpecification(page);
      await page.getByRole("button", { name: "Save draft" }).click();
      await page.waitForURL(/\/specifications\/[0-9a-z]{16}$/);
      await checkTable(page);
    },
  },
  {
    title: "the drawing shows a wall for every measured line",
    run: async () => {
      const drawing = (await world.page("engineer")).locator("svg[role=img]").filter({ visible: true }).first();
      const text = plain((await drawing.textContent()) ?? "");
      for (const { id } of SPECIFICATION.requirements.filter(({ kind }) => kind !== "ripple"))
        assert.ok(text.includes(id), `the drawing has no wall ${id}`);
    },
  },
  {
    title: "revision A is released and frozen",
    run: async () => {
      const page = await world.page("engineer");
      await page.getByRole("button", { name: "Release A" }).click();
      await page.getByRole("link", { name: "Request quotes" }).waitFor();
      assert.equal(
        await page.getByRole("link", { name: "Edit", exact: true }).count(),
        0,
        "a released revision is edited",
      );
      await world.pictures("engineer", "specification");
    },
  },
];

export const SUPPLIERS = {
  halden: { company: "Halden Resonator Works", email: "sales@halden.example.test", password: "silver plated posts" },
  kestrel: {
    company: "Kestrel Cavity Filters",
    email: "sales@kestrel.example.test",
    password: "tuning screws in a row",
  },
} as const;

export const requestSteps = (world: JourneyWorld, scene: Scene): Step[] => [
  {
    title: "the engineer writes an RFQ for the released revision",
    run: async () => {
      const page = await world.page("engineer");
      await page.getByRole("link", { name: "Request quotes" }).click();
      await page.getByLabel("Title").fill("Receive band-pass, 500 pieces");
      for (const [index, quantity] of [100, 500, 1000].entries())
        await page.getByLabel(`Break ${index + 1}`).fill(String(quantity));
      await page.getByLabel("Compared at").fill("500");
      await page.getByLabel("Date", { exact: true }).fill(dayAfterToday());
      await page.getByLabel("Decision rule").selectOption("simple");
      await page.getByRole("button", { name: "Save the draft" }).click();
      await page.waitForURL(/\/rfqs\/[0-9a-z]{16}\/invitations$/);
      scene.rfqPage = new URL(page.url()).pathname.replace(/\/invitations$/, "");
      await page.waitForFunction(() => document.title.includes("RFQ-"));
      scene.rfqNumber = /RFQ-\d{4}-\d{4}/.exec(await page.title())?.[0] ?? "";
    },
  },
  {
    title: "two suppliers are invited by company and address, and the RFQ is opened",
    run: async () => {
      const page = await world.page("engineer");
      for (const [index, { company, email }] of Object.values(SUPPLIERS).entries()) {
        await page.locator(`[name="invitations.${index}.company"]`).fill(company);
        await page.locator(`[name="invitations.${index}.email"]`).fill(email);
      }
      await page.getByRole("button", { name: "Add to the list" }).click();
      await holds(rowOf(page, `${SUPPLIERS.halden.company} ${SUPPLIERS.halden.email}`), ["not sent yet"], "invitation");
      await page.getByRole("link", { name: "Open RFQ…" }).click();
      await page.getByRole("button", { name: "Open and mail 2 invitations" }).click();
      await page.waitForURL((url) => url.pathname === scene.rfqPage && url.search === "");
      await sees(page, "open");
      await world.pictures("engineer", "rfq-overview");
    },
  },
];

function dayAfterToday(): string {
  return new Date(Date.now() + 24 * 60 * 60 * 1000).toISOString().slice(0, 10);
}
