// Steps after the quotes are in: matrix and plot, closing, comparison, recommendation, approval, and the mails of the end.
import assert from "node:assert/strict";
import type { Locator, Page } from "playwright-core";
import type { StoredMail } from "../../emails/mailbox";
import { holds, holdsFigure, holdsNothingOf, linkTo, plain, rowOf, sees } from "./asserting";
import { BUYER, SUPPLIERS, type Scene } from "./buyer-steps";
import type { JourneyWorld, Step } from "./journey";
import { celsius, referenceOf, SPECIFICATION, worstOf } from "./reference";

const HALDEN = SUPPLIERS.halden.company;
const KESTREL = SUPPLIERS.kestrel.company;

export const resultSteps = (world: JourneyWorld): Step[] => [
  {
    title: "the engineer follows the mails to both matrices, and every worst cell shows the independent figures",
    run: async () => {
      const page = await world.page("engineer");
      for (const company of [HALDEN, KESTREL]) {
        const mail = await world.mail(BUYER.engineer.email, new RegExp(`quote from ${company}`));
        await page.goto(linkTo(mail, "/quotes/"));
        await sees(page, "Compliance of 3 units at 3 temperatures");
        for (const { id } of SPECIFICATION.requirements) await checkCell(page, company, id);
      }
    },
  },
  {
    title: "the plot shows the measured curves over the walls, and flags line 2.1 at its corner",
    run: async () => {
      const page = await world.page("engineer");
      const figure = page
        .locator("figure[aria-busy=false]")
        .filter({ has: page.getByRole("button", { name: "Full" }) });
      await figure.waitFor({ timeout: 30_000 });
      const picture = figure.locator("svg[role=img]").filter({ visible: true }).first();
      const curves = await picture.locator("g[fill=none] path.visx-linepath").count();
      assert.ok(curves >= 18, `only ${curves} curves are drawn for nine files in two panels`);
      assert.ok(plain((await picture.textContent()) ?? "").includes("2.1"), "the worst line is not flagged");
      await openCell(page, KESTREL, "2.1");
      await world.pictures("engineer", "quote-results");
    },
  },
];

/** The matrix's cell of a line's worst unit and temperature. */
async function openCell(page: Page, company: string, line: string): Promise<Locator> {
  const { unit, temperature } = worstOf(company, line);
  const search = new URLSearchParams({ line, unit, temperature: String(temperature) }).toString();
  const link = page.getByRole("table", { name: "Compliance matrix" }).locator(`a[href$="?${search}"]`);
  await link.click();
  const title = `Line ${line}, unit ${unit}, ${temperature > 0 ? "+" : ""}${celsius(temperature)} °C`;
  const panel = page
    .locator("section")
    .filter({ has: page.getByRole("heading", { name: title, exact: true }) })
    .last();
  await panel.waitFor();
  return panel;
}

async function checkCell(page: Page, company: string, line: string): Promise<void> {
  const worst = worstOf(company, line);
  const panel = await openCell(page, company, line);
  const text = await panel.innerText();
  const what = `${company}, cell of line ${line}`;
  await holds(panel, [worst.verdict, `${(worst.frequency / 1e9).toFixed(4)} GHz`], what);
  holdsFigure(text, worst.value, 1, `${what}, value`);
  holdsFigure(text, worst.margin, 2, `${what}, margin`);
  const row = rowOf(page.getByRole("table", { name: "Compliance matrix" }), line);
  holdsFigure(await row.getByRole("cell").last().innerText(), worst.margin, 2, `${what}, worst margin of the row`);
}

export const decisionSteps = (world: JourneyWorld, scene: Scene): Step[] => [
  {
    title: "the engineer closes the RFQ early",
    run: async () => {
      const page = await world.page("engineer");
      await page.goto(scene.rfqPage);
      await page.getByRole("link", { name: "Close early…" }).click();
      await page.getByRole("button", { name: "Close now" }).click();
      await page.getByRole("link", { name: "Compare quotes" }).click();
      await page.waitForURL(/\/comparison$/);
    },
  },
  {
    title: "the comparison has Halden among the conforming, and Kestrel apart for line 2.1 at 1.9800 GHz",
    run: async () => {
      const page = await world.page("engineer");
      const table = page.getByRole("table", { name: "Comparison" });
      await sees(table, KESTREL);
      const rows = await table.getByRole("row").allInnerTexts();
      const place = (text: string) => rows.findIndex((row) => plain(row).includes(text));
      const order = [place(HALDEN), place("Nonconforming"), place(KESTREL)];
      assert.ok(
        order[0] !== -1 && [...order].sort((a, b) => a - b).join() === order.join(),
        `rows: ${rows.join(" | ")}`,
      );
      for (const company of [HALDEN, KESTREL]) {
        const { worstLine, verdict } = referenceOf(company);
        const worst = worstOf(company, worstLine);
        const row = plain(rows[place(company)] ?? "");
        for (const text of [verdict, `line ${worstLine} at ${(worst.frequency / 1e9).toFixed(4)} GHz`])
          assert.ok(row.includes(text), `${company}: “${text}” is missing in “${row}”`);
        holdsFigure(row, worst.margin, 2, `${company}, worst margin`);
      }
      // By hand: 500 × 96.50 + 4,800 and 500 × 79.80 + 2,500.
      assert.ok(rows[place(HALDEN)]?.includes("53,050.00"), rows[place(HALDEN)]);
      assert.ok(rows[place(KESTREL)]?.includes("42,400.00"), rows[place(KESTREL)]);
      await world.pictures("engineer", "comparison");
    },
  },
  {
    title: "the engineer recommends Halden with a reason, cannot choose Kestrel, and cannot approve",
    run: async () => {
      const page = await world.page("engineer");
      await page.getByRole("link", { name: "Recommend award" }).click();
      await page.waitForURL(/\/decision$/);
      assert.ok(await page.getByRole("radio", { name: KESTREL }).isDisabled(), "a nonconforming quote can be chosen");
      await page.getByRole("radio", { name: HALDEN }).check();
      await page.getByLabel("Reason").fill(REASON);
      await page.getByRole("button", { name: "Recommend award" }).click();
      await sees(page, REASON);
      assert.equal(await page.getByRole("button", { name: "Approve award" }).count(), 0, "the recommender may approve");
    },
  },
  {
    title: "the purchasing colleague gets the mail, follows its link, signs in and approves",
    run: async () => {
      const { email, password } = BUYER.purchasing;
      const mail = await world.mail(email, new RegExp(`award to ${HALDEN} recommended$`));
      const page = await world.page("purchasing, at another desk");
      await page.goto(linkTo(mail, "/rfqs/"));
      await page.getByLabel("E-mail").fill(email);
      await page.getByLabel("Password").fill(password);
      await page.getByRole("button", { name: "Sign in" }).click();
      await page.waitForURL(/\/decision$/);
      await sees(page, REASON);
      await page.getByRole("button", { name: "Approve award" }).click();
      await sees(page, "Approved by");
      await world.pictures("purchasing, at another desk", "decision");
    },
  },
  {
    title: "the award reaches Halden, the regret Kestrel, each with its own results and nothing of the other",
    run: async () => {
      const award = await world.mail(SUPPLIERS.halden.email, /award, notice of intent$/);
      const regret = await world.mail(SUPPLIERS.kestrel.email, /decision on your quote$/);
      assertOwnOnly(award, HALDEN, KESTREL, ["79.8", "74.2", "42,400", "KCF-"]);
      assertOwnOnly(regret, KESTREL, HALDEN, ["96.5", "128.00", "53,050", "HR2-"]);
      for (const { email } of Object.values(SUPPLIERS)) {
        const ends = (await world.mails(email)).filter(({ subject }) => /notice of intent|decision on/.test(subject));
        assert.equal(ends.length, 1, `${email} got ${ends.map(({ subject }) => subject).join(", ")}`);
      }
    },
  },
  {
    title: "the engineer's page says decided, and each supplier's page its own outcome",
    run: async () => {
      const page = await world.page("engineer");
      await page.goto(scene.rfqPage);
      await sees(page, "decided");
      for (const [name, word] of [["halden", "awarded"] as const, ["kestrel", "regretted"] as const]) {
        const own = await world.page(name);
        await own.reload();
        await sees(own, word);
      }
    },
  },
];

const REASON = "The only quote that holds every line at all three temperatures; lead time fits the series.";

/** Own results line by line; no name, price, serial or figure of the other. */
function assertOwnOnly(mail: StoredMail, own: string, other: string, secrets: readonly string[]): void {
  const source = plain(`${mail.subject} ${mail.text} ${mail.html}`);
  for (const { id } of SPECIFICATION.requirements)
    holdsFigure(mail.text, worstOf(own, id).margin, 2, `${mail.subject}, ${id}`);
  const ownFigures = SPECIFICATION.requirements.map(({ id }) => signed(worstOf(own, id).margin));
  const otherFigures = SPECIFICATION.requirements.map(({ id }) => signed(worstOf(other, id).margin));
  const foreign = otherFigures.filter((figure) => !ownFigures.includes(figure));
  holdsNothingOf(source, [other, other.split(" ")[0] ?? other, ...secrets, ...foreign], `“${mail.subject}” to ${own}`);
}

const signed = (margin: number): string => `${margin < 0 ? "−" : "+"}${Math.abs(margin).toFixed(2)} dB`;
