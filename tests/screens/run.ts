// Pictures of every page of the demo at 1440 and 390 pixels, light and dark, for somebody to look at: `npm run screens`.
import { rm } from "node:fs/promises";
import path from "node:path";
import { withConnection } from "../../db/mariadb";
import { PASSWORD, PEOPLE } from "../../db/seeds/demo-cast";
import { buildIfStale } from "../../app/start/build";
import { demoIds } from "../browser/access-actors";
import { ADDRESSES, addressOf, standingOf, type Address, type IdName } from "../browser/access-routes";
import { openBrowser, signIn, type JourneyWorld } from "../browser/journey";
import { startProduct } from "../support/product";

const OUTPUT = path.join("tests", "output", "screens");
const QUIET_WITHIN_MS = 10_000;

type Visitor = "nobody" | "engineer" | "supplier";

interface Shot {
  readonly visitor: Visitor;
  readonly address: string;
  readonly name: string;
}

/** Pages of a route's own, each with the demo's row that shows most. */
function shotOf(address: Address, ids: Readonly<Record<IdName, string>>): Shot[] {
  const standing = standingOf(address);
  const name = address.pattern === "/" ? "home" : address.pattern.replace(/[/:*]+/g, "-").replace(/^-|-$/g, "");
  if (standing.kind === "secret") return [];
  if (standing.kind === "public")
    return ["/health", "/theme", "/sign-out"].includes(address.pattern)
      ? []
      : [{ visitor: "nobody", address: address.pattern.replace("*", "no-such-page"), name: name || "not-found" }];
  const visitor = standing.for === "supplier" ? "supplier" : "engineer";
  if (standing.kind === "page") return [{ visitor, address: address.pattern, name }];
  if (standing.rule.resource) return [];
  return [{ visitor, address: addressOf(address.pattern, ids[standing.rule.id]), name }];
}

/** Other states of pages that the routes alone do not reach. */
async function furtherShots(world: JourneyWorld): Promise<Shot[]> {
  const newest = (table: string) =>
    withConnection(world.product.ownerUrl, async (connection) => {
      const rows: { id: string }[] = await connection.query(
        `SELECT t.public_id AS id FROM ${table} t ORDER BY t.id DESC LIMIT 1`,
      );
      return rows[0]?.id ?? "";
    });
  const [draft, rfq, quote] = [await newest("specifications"), await newest("rfqs"), await newest("quotes")];
  const failing = await withConnection(world.product.ownerUrl, async (connection) => {
    const rows: { id: string }[] = await connection.query(
      "SELECT q.public_id AS id FROM quotes q JOIN quote_summaries s ON s.version_id = q.current_version_id WHERE s.verdict = 'fail' LIMIT 1",
    );
    return rows[0]?.id ?? "";
  });
  const of = (visitor: Visitor, address: string, name: string): Shot => ({ visitor, address, name });
  const { specification } = await demoIds(world);
  return [
    of("engineer", `/rfqs/new?specification=${specification}`, "rfq-form"),
    of("engineer", `/specifications/${draft}`, "specification-draft"),
    of("engineer", `/specifications/${draft}/edit`, "specification-draft-edit"),
    of("engineer", `/rfqs/${rfq}`, "rfq-open"),
    of("engineer", `/rfqs/${rfq}?step=close`, "rfq-open-closing"),
    of("engineer", `/rfqs/${rfq}/invitations`, "rfq-open-invitations"),
    of("engineer", `/rfqs/${rfq}/comparison`, "rfq-open-comparison"),
    of("engineer", `/quotes/${failing}`, "quote-failing"),
    of("supplier", `/supplier/quotes/${quote}`, "supplier-quote-draft"),
    of("supplier", `/supplier/quotes/${quote}/terms?check`, "supplier-quote-draft-terms"),
    of("supplier", `/supplier/quotes/${quote}/declarations?check`, "supplier-quote-draft-declarations"),
    of("supplier", `/supplier/quotes/${quote}/review`, "supplier-quote-draft-review"),
  ];
}

/** Takes the pictures of one page, and tells where it is wider than its window or answers with an error. */
async function take(world: JourneyWorld, { visitor, address, name }: Shot): Promise<string[]> {
  const page = await world.page(visitor);
  const answer = await page.goto(address);
  await page.waitForLoadState("networkidle", { timeout: QUIET_WITHIN_MS }).catch(() => undefined);
  const faults: string[] = [];
  const status = answer?.status() ?? 0;
  if (status !== 200 && name !== "not-found") faults.push(`answers ${status}`);
  for (const width of [1440, 390]) {
    await page.setViewportSize({ width, height: 900 });
    const over = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
    if (over > 0) faults.push(`is ${over} px wider than ${width}`);
  }
  await world.pictures(visitor, name, OUTPUT);
  return faults.map((fault) => `${name} (${address}) ${fault}`);
}

const only = process.argv[2];
if (only === undefined) await rm(OUTPUT, { recursive: true, force: true });
await buildIfStale({ logFile: path.join("tests", "output", "build.log"), say: (line) => console.log(line) });
const product = await startProduct({ folder: path.join(".tenderband", "screens") });
const world = await openBrowser(product);
try {
  await signIn(await world.page("engineer"), PEOPLE.engineer.email, PASSWORD);
  await signIn(await world.page("supplier"), PEOPLE.halden.email, PASSWORD);
  const ids = await demoIds(world);
  const shots = [...ADDRESSES.flatMap((address) => shotOf(address, ids)), ...(await furtherShots(world))];
  for (const shot of shots.filter(({ name }) => only === undefined || name.includes(only))) {
    const faults = await take(world, shot);
    console.log(faults.length === 0 ? `${shot.name}: ${shot.address}` : `WRONG: ${faults.join("; ")}`);
  }
  for (const complaint of world.complaints()) console.log(`WRONG: ${complaint}`);
} finally {
  await world.close();
  await product.stop();
}
