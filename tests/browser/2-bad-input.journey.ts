// Bad input gets a clear message with the place, and leaves nothing half-stored: the demo's people make every usual mistake.
import assert from "node:assert/strict";
import { mkdtemp, open, rm } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import type { Page } from "playwright-core";
import { withConnection } from "../../db/mariadb";
import { PASSWORD, PEOPLE } from "../../db/seeds/demo-cast";
import { linkTo, plain, sees } from "./asserting";
import { signIn, type Journey, type JourneyWorld, type Step } from "./journey";

const FIXTURES = path.join("tests", "fixtures");

/** Each refused file with what its sentence has to name. */
const REFUSED: readonly (readonly [file: string, sentence: RegExp])[] = [
  ["not-touchstone.s2p", /not Touchstone/],
  ["three-port.s3p", /port/i],
  ["three-port-renamed.s2p", /^Line \d+/],
  ["empty.s2p", /empty/i],
  ["decimal-comma.s2p", /^Line \d+.*(comma|point)/i],
];

const MAILED_LINK = /invitation to quote/;

const GONE = "This link is no longer valid";
const NOTHING = "Nothing is here";

/** Tables a refused upload, form or link must leave as they were. */
const WATCHED = [
  "files",
  "file_chunks",
  "measurements",
  "measurement_results",
  "rfqs",
  "rfq_quantities",
  "invitations",
];

async function countRows(world: JourneyWorld): Promise<Record<string, number>> {
  return withConnection(world.product.ownerUrl, async (connection) => {
    const counts: [string, number][] = [];
    for (const table of WATCHED) {
      const rows: { n: number }[] = await connection.query(`SELECT COUNT(*) AS n FROM ${table}`);
      counts.push([table, Number(rows[0]?.n)]);
    }
    return Object.fromEntries(counts);
  });
}

/** Runs a step and holds that it has stored nothing. */
const storingNothing = (world: JourneyWorld, work: () => Promise<void>) => async () => {
  const before = await countRows(world);
  await work();
  assert.deepEqual(await countRows(world), before, "something was stored");
};

async function withLargeFile(work: (file: string) => Promise<void>): Promise<void> {
  const folder = await mkdtemp(path.join(os.tmpdir(), "tenderband-large-"));
  try {
    const file = path.join(folder, "too-large.s2p");
    const handle = await open(file, "w");
    await handle.truncate(65 * 1024 * 1024);
    await handle.close();
    await work(file);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

async function openDraftQuote(page: Page): Promise<void> {
  await page.goto("/supplier/open-points");
  await page.getByRole("row").filter({ hasText: "outdoor series" }).getByRole("link").click();
  await page.waitForURL(/\/supplier\/quotes\/[0-9a-z]{16}$/);
}

/** What sign-in says, without the typed address. */
async function refusalOf(page: Page, email: string): Promise<string> {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(email);
  await page.getByLabel("Password").fill("a password that is not the one");
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.getByRole("alert").waitFor();
  return plain((await page.locator("body").innerText()).replaceAll(email, ""));
}

const signInSteps = (world: JourneyWorld): Step[] => [
  {
    title: "a wrong password gets the same words whether or not the account exists",
    run: async () => {
      const page = await world.page("visitor");
      const known = await refusalOf(page, PEOPLE.engineer.email);
      const unknown = await refusalOf(page, "nobody.at.all@northgate.example.com");
      assert.equal(known, unknown);
      assert.ok(known.includes("No account fits this address and password."), known);
    },
  },
  {
    title: "the demo's engineer and supplier sign in with what the terminal prints",
    run: async () => {
      await signIn(await world.page("demo engineer"), PEOPLE.engineer.email, PASSWORD);
      await signIn(await world.page("demo supplier"), PEOPLE.halden.email, PASSWORD);
    },
  },
];

const uploadSteps = (world: JourneyWorld): Step[] => [
  {
    title: "files that are no Touchstone, have three ports, are empty or have decimal commas are refused, each by name",
    run: storingNothing(world, async () => {
      const page = await world.page("demo supplier");
      await openDraftQuote(page);
      await page.locator("input[type=file]").setInputFiles(REFUSED.map(([file]) => path.join(FIXTURES, file)));
      for (const [file, sentence] of REFUSED) {
        const row = page.getByRole("listitem").filter({ hasText: file });
        const said = plain(await row.getByRole("alert").innerText({ timeout: 20_000 }));
        assert.match(said, sentence, `${file}: “${said}”`);
      }
      await sees(page, "3 measured files");
      await world.pictures("demo supplier", "refused-files");
    }),
  },
  {
    title: "a file over the limit is refused before it is sent",
    run: storingNothing(world, () =>
      withLargeFile(async (file) => {
        const page = await world.page("demo supplier");
        await page.locator("input[type=file]").setInputFiles(file);
        await sees(page.getByRole("listitem").filter({ hasText: "too-large.s2p" }), "larger than 64 MiB");
      }),
    ),
  },
  {
    title: "without script the same files are refused, and the browser shows the 413 of the large one",
    run: storingNothing(world, async () => {
      const address = (await world.page("demo supplier")).url();
      const page = await world.pageWithoutScript("demo supplier");
      await page.goto(address);
      const send = async (files: string[]) => {
        await page.locator("input[type=file]").setInputFiles(files);
        const answered = page.waitForResponse((response) => response.request().method() === "POST");
        await page.getByRole("button", { name: "Upload", exact: true }).click();
        return (await answered).status();
      };
      assert.equal(await send(REFUSED.map(([file]) => path.join(FIXTURES, file))), 400);
      for (const [file] of REFUSED) await sees(page.getByRole("alert"), file);
      await withLargeFile(async (file) => {
        assert.equal(await send([file]), 413);
        await sees(page.getByRole("alert"), "larger than 64 MiB");
      });
    }),
  },
];

const requestSteps = (world: JourneyWorld): Step[] => [
  {
    title: "a due date in the past is refused at its field, and what was typed stays",
    run: storingNothing(world, async () => {
      const page = await world.page("demo engineer");
      await page.goto("/rfqs/new");
      await page.getByRole("link", { name: "SPEC-0001" }).click();
      await page.getByLabel("Break 1").fill("250");
      await page.getByLabel("Compared at").fill("250");
      await page.getByLabel("Date", { exact: true }).fill("2026-01-15");
      await page.getByRole("button", { name: "Save the draft" }).click();
      await sees(page.getByRole("alert").first(), "The due date lies in the past. Choose a later one.");
      const date = page.getByLabel("Date", { exact: true });
      assert.equal(await date.getAttribute("aria-invalid"), "true");
      assert.equal(await date.inputValue(), "2026-01-15");
      assert.equal(await page.getByLabel("Break 1").inputValue(), "250");
    }),
  },
  {
    title: "an invitation's link that was used leads to a page that says so, signed in or not",
    run: storingNothing(world, async () => {
      const { email } = PEOPLE.orme; // invited once, and accepted
      const link = linkTo(await world.mail(email, MAILED_LINK), "/invitation/");
      for (const person of ["visitor", "demo supplier"]) {
        const page = await world.page(person);
        await page.goto(link);
        await sees(page, GONE);
        assert.equal(await page.getByRole("button", { name: /accept/i }).count(), 0);
      }
    }),
  },
  {
    title: "an invitation accepted in one browser cannot be accepted in another that still shows it",
    run: async () => {
      const { email } = PEOPLE.kestrel;
      const link = linkTo(await world.mail(email, MAILED_LINK), "/invitation/");
      const [first, second] = [await world.page("kestrel here"), await world.page("kestrel there")];
      for (const page of [first, second]) {
        await signIn(page, email, PASSWORD);
        await page.goto(link);
      }
      await first.getByRole("button", { name: /^Accept as/ }).click();
      await first.waitForURL(/\/supplier\/invitations\//);
      await second.getByRole("button", { name: /^Accept as/ }).click();
      await sees(second, GONE);
    },
  },
  {
    title: "somebody else's RFQ in the address is not found, as an unknown one is not",
    run: async () => {
      const rfq = await withConnection(world.product.ownerUrl, async (connection) => {
        const rows: { id: string }[] = await connection.query(
          "SELECT r.public_id AS id FROM rfqs r ORDER BY r.id LIMIT 1",
        );
        return rows[0]?.id ?? "";
      });
      const page = await world.page("demo supplier");
      const pages: string[] = [];
      for (const id of [rfq, "0000000000000000"]) {
        const answer = await page.goto(`/rfqs/${id}`);
        assert.equal(answer?.status(), 404);
        await sees(page, NOTHING);
        pages.push(plain(await page.locator("body").innerText()));
      }
      assert.equal(pages[0], pages[1]);
    },
  },
];

const journey: Journey = {
  title: "Bad input gets a clear message",
  steps: (world) => [...signInSteps(world), ...uploadSteps(world), ...requestSteps(world)],
};

export default journey;
