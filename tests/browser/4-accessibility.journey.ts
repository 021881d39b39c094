// Every page of the demo, for each role, by day and by night, wide and narrow: axe finds nothing against WCAG 2.2 AA.
import assert from "node:assert/strict";
import AxeBuilder from "@axe-core/playwright";
import type { Page } from "playwright-core";
import { PASSWORD, PEOPLE } from "../../db/seeds/demo-cast";
import { demoIds } from "./access-actors";
import { ADDRESSES, addressOf, standingOf, type Address, type IdName } from "./access-routes";
import { DESKTOP, PHONE, signIn, type Journey, type JourneyWorld, type Step } from "./journey";

const TAGS = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22a", "wcag22aa"];
const QUIET_WITHIN_MS = 5_000;

/** Each colour and each width is seen once; what depends on both is drawn from the same tokens. */
const VIEWS = [
  { name: "light, 1440", size: DESKTOP, colorScheme: "light" },
  { name: "dark, 390", size: PHONE, colorScheme: "dark" },
] as const;

/** Addresses that answer with a document, but with none of the product's pages. */
const NO_PAGES = ["/health", "/theme", "/sign-out"];

/** What a page shows only when it is asked for. */
const FURTHER: Readonly<Record<string, readonly string[]>> = {
  "/rfqs/:rfqId": ["?step=close"],
  "/quotes/:quoteId/curves": ["?view=margin", "?view=smith", "?view=delay", "?view=impedance&values=1"],
  "/supplier/quotes/:quoteId": ["?check=1"],
  "/supplier/quotes/:quoteId/terms": ["?check=1"],
  "/supplier/quotes/:quoteId/declarations": ["?check=1"],
};

type Ids = Readonly<Record<IdName, string>>;
type Visitor = "nobody" | "buyer" | "supplier";

/** Addresses of the route's page, with the ids of each document; none where the visitor has no business. */
function pagesOf(address: Address, visitor: Visitor, ids: readonly Ids[]): string[] {
  const { pattern } = address;
  const standing = standingOf(address);
  const further = (path: string) => ["", ...(FURTHER[pattern] ?? [])].map((search) => path + search);
  if (standing.kind === "secret" || NO_PAGES.includes(pattern)) return [];
  if (standing.kind === "public") return visitor === "nobody" ? further(pattern.replace("*", "no-such-page")) : [];
  if (standing.for !== visitor && (standing.for !== "anybody" || visitor === "nobody")) return [];
  if (standing.kind === "page") return further(pattern);
  if (standing.rule.resource) return [];
  // A buyer sees no quote that was not submitted.
  const seen = visitor === "buyer" && standing.rule.id === "quote" ? ids.slice(0, 1) : ids;
  return [...new Set(seen.map((own) => addressOf(pattern, own[standing.rule.id])))].flatMap(further);
}

/** What axe finds on a page, with the place of each fault. */
async function faultsOf(page: Page, address: string): Promise<string[]> {
  await page.goto(address);
  await page.waitForLoadState("networkidle", { timeout: QUIET_WITHIN_MS }).catch(() => undefined);
  const faults: string[] = [];
  for (const { name, size, colorScheme } of VIEWS) {
    await page.setViewportSize(size);
    await page.emulateMedia({ colorScheme, reducedMotion: "reduce" });
    // There are no frames inside: the page itself may answer.
    const { violations } = await new AxeBuilder({ page }).withTags(TAGS).setLegacyMode().analyze();
    for (const { id, help, nodes } of violations)
      faults.push(`${address} (${name}): ${id}, ${help}: ${nodes.map(({ target }) => target.join(" ")).join(" | ")}`);
  }
  return faults;
}

interface Role {
  readonly person: string;
  readonly visitor: Visitor;
  readonly email?: string;
  /** Documents of the demo: those that are furthest, and those just begun. */
  readonly documents: readonly ("submitted" | "draft")[];
  /** Pages there are at least: fewer would mean that the routes are not found any more. */
  readonly least: number;
}

const ROLES: readonly Role[] = [
  { person: "nobody", visitor: "nobody", documents: ["submitted"], least: 7 },
  {
    person: "engineer",
    visitor: "buyer",
    email: PEOPLE.engineer.email,
    documents: ["submitted", "draft"],
    least: 25,
  },
  { person: "purchasing", visitor: "buyer", email: PEOPLE.purchasing.email, documents: ["submitted"], least: 18 },
  {
    person: "supplier",
    visitor: "supplier",
    email: PEOPLE.halden.email,
    documents: ["submitted", "draft"],
    least: 14,
  },
];

/** Every page of a role, and what is found there. */
async function visitAll(world: JourneyWorld, { person, visitor, email, documents, least }: Role): Promise<string[]> {
  const ids = await Promise.all(documents.map((which) => demoIds(world, which)));
  const addresses = ADDRESSES.flatMap((address) => pagesOf(address, visitor, ids));
  assert.ok(addresses.length >= least, `only ${addresses.length} pages were found for ${person}`);
  const page = await world.page(`${person}, looked at by axe`);
  if (email !== undefined) await signIn(page, email, PASSWORD);
  const faults: string[] = [];
  for (const address of addresses) faults.push(...(await faultsOf(page, address)));
  return faults.map((fault) => `${person} at ${fault}`);
}

function steps(world: JourneyWorld): Step[] {
  return [
    {
      title: "each role's pages, all at a time",
      run: async () => {
        const faults = await Promise.all(ROLES.map((role) => visitAll(world, role)));
        assert.deepEqual(faults.flat(), []);
      },
    },
  ];
}

const journey: Journey = { title: "Every page can be used by everybody", steps };

export default journey;
