// Assertions on what a page says, with blanks of every kind read as one space.
import assert from "node:assert/strict";
import type { Locator, Page } from "playwright-core";

const WITHIN_MS = 20_000;

export const plain = (text: string): string => text.replace(/\s+/gu, " ").trim();

/** Waits until the text is visible somewhere on the page. */
export async function sees(where: Page | Locator, text: string | RegExp): Promise<void> {
  await where.getByText(text).filter({ visible: true }).first().waitFor({ timeout: WITHIN_MS });
}

/** The row of a table whose head is exactly `head`. */
export function rowOf(where: Page | Locator, head: string): Locator {
  const page = "page" in where ? where.page() : where;
  return where
    .getByRole("row")
    .filter({ has: page.getByRole("rowheader", { name: head, exact: true }) })
    .first();
}

/** Everything in `texts` stands in the element, whatever stands between. */
export async function holds(where: Locator, texts: readonly string[], what: string): Promise<void> {
  const text = plain(await where.innerText());
  for (const wanted of texts) assert.ok(text.includes(plain(wanted)), `${what}: “${wanted}” is missing in “${text}”`);
}

/** Every figure of a text, with the digits it is shown to; both minus signs are read. */
export function figuresIn(text: string): { value: number; decimals: number }[] {
  return [...plain(text).matchAll(/(?<![\w.])([+−-]?)(\d[\d,]*)(?:\.(\d+))?/gu)].map((match) => {
    const [, sign = "", whole = "", fraction = ""] = match;
    const size = Number(`${whole.replaceAll(",", "")}.${fraction || "0"}`);
    return { value: sign === "" || sign === "+" ? size : -size, decimals: fraction.length };
  });
}

/** One of the text's figures is the wanted one, rounded to at least `least` decimals. */
export function holdsFigure(text: string, wanted: number, least: number, what: string): void {
  const isIt = ({ value, decimals }: { value: number; decimals: number }) =>
    decimals >= least && Math.abs(value - wanted) <= 0.5 * 10 ** -decimals + 1e-9;
  assert.ok(figuresIn(text).some(isIt), `${what}: no figure in “${plain(text)}” is ${wanted}`);
}

/** None of `texts` stands anywhere in the source. */
export function holdsNothingOf(source: string, texts: readonly string[], what: string): void {
  for (const text of texts) assert.ok(!source.includes(text), `${what} contains “${text}”`);
}

/** A link of the mail that leads to a part of the product. */
export function linkTo(mail: { readonly links: readonly string[]; readonly subject: string }, part: string): string {
  const link = mail.links.find((one) => one.includes(part));
  assert.ok(link, `the mail “${mail.subject}” has no link to ${part}: ${mail.links.join(" ")}`);
  return link;
}
