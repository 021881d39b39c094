// Proves every mail: complete in both parts, one link, the design's colours only, and nobody's data taken for markup.
import { readdirSync } from "node:fs";
import { expect, test } from "vitest";
import { MailEvent, renderMail } from "~/emails/index";
import { fillTemplate } from "~/emails/template";
import { results, samples } from "./samples";

// design.md, "Tokens": sheet, leaf, ink, quiet, edge, rule, signal, on-signal, pass, near, fail, bare; light, then dark.
const TOKENS = `#F1F4F2 #FCFDFC #14202B #51606C #74828D #D2DAD7 #0B4A80 #FFFFFF #1F7355 #734900 #A9243C #6A32A8
  #0D2031 #12293D #E8EFF4 #9DB2C2 #7891A4 #2B465B #68ADF8 #8ED8C0 #F3C452 #FF7C8B #DEB4EE`.split(/\s+/);

const HOSTILE = `"><script>alert(1)</script><img src=x onerror=alert(2)>\u202E{{actionLink}}&amp;`;

/** What a reader sees of the HTML part, white space collapsed. */
function shownText(markup: string): string {
  const body = markup.slice(markup.indexOf("<body")).replace(/<!--[\s\S]*?-->|<[^>]*>/g, " ");
  const characters: Record<string, string> = { amp: "&", lt: "<", gt: ">", quot: '"', "#39": "'" };
  return body.replace(/&(amp|lt|gt|quot|#39);/g, (_, name: string) => characters[name] ?? "").replace(/\s+/g, " ");
}

/** The event with every string of its props that is neither a date, a zone, a link nor a verdict put through `change`. */
function withTexts(event: MailEvent, change: (text: string) => string): MailEvent {
  const kept =
    /^(https:|\d{4}-\d\d-\d\dT|Europe\/|(pass|fail|conditional-pass|conditional-fail|not-covered|declared|exception)$)/;
  const props: unknown = JSON.parse(JSON.stringify(event.props), (_, value: unknown) =>
    typeof value === "string" && !kept.test(value) ? change(value) : value,
  );
  return MailEvent.parse({ template: event.template, props });
}

test("there is a sample here of every template in the folder", () => {
  const templates = readdirSync("emails/templates").filter((name) => name.endsWith(".mjml"));
  expect(samples.map((event) => `${event.template}.mjml`).sort()).toEqual(templates.sort());
});

test.each(samples)("$template shows in HTML all that its text part says, and its link in both", async (event) => {
  const mail = await renderMail(event);
  const shown = shownText(mail.html);
  const words = mail.text.split(/[\n:>,]|\u00B7|margin/).map((part) => part.replace(/\s+/g, " ").trim());
  expect(words.length).toBeGreaterThan(8);
  for (const word of words.filter((part) => part !== "" && part !== "https")) expect(shown).toContain(word);
  expect(mail.text).toContain(`\n${event.props.link}\n`);
  expect(shown).toContain(event.props.link.replace(/\s/g, ""));
});

test.each(samples)("$template has one link and asks no other server for anything", async (event) => {
  const { html } = await renderMail(event);
  expect(html.match(/<a\s/g)).toHaveLength(1);
  const addresses = [...html.matchAll(/(?:href|src)="([^"]*)"|url\(([^)]*)\)/g)].map((match) => match[1] ?? match[2]);
  expect(addresses).toEqual([event.props.link]);
});

test.each(samples)("$template keeps to the design's colours, states its language and stays small", async (event) => {
  const { html } = await renderMail(event);
  const colours = new Set([...html.matchAll(/(?<!&)#[0-9a-f]{6}\b/gi)].map(([colour]) => colour.toUpperCase()));
  expect([...colours].filter((colour) => !TOKENS.includes(colour))).toEqual([]);
  expect(html).toContain('<html lang="en" dir="ltr"');
  expect(html).toMatch(/role="article" lang="en" dir="ltr"/);
  expect(html).toMatch(/<h1[ >]/);
  expect(Buffer.byteLength(html)).toBeLessThan(102_000); // beyond that some readers cut a mail off
});

test.each(samples)("$template shows markup in its data as text", async (event) => {
  const plain = await renderMail(event);
  const mail = await renderMail(withTexts(event, (text) => text + HOSTILE));
  const tags = (markup: string) => markup.match(/<[a-z!/][^>]*>/gi)?.map((tag) => tag.split(/[\s>]/)[0]);
  expect(tags(mail.html)).toEqual(tags(plain.html));
  expect(mail.html).not.toContain("\u202E");
  const holdsData = !event.template.startsWith("password-");
  expect(mail.html.includes("&lt;script&gt;alert(1)&lt;/script&gt;")).toBe(holdsData);
  expect(mail.html.includes("{{actionLink}}&amp;amp;")).toBe(holdsData);
});

test.each(samples)(
  "the subject of $template is one line of at most 150 characters, whatever the data",
  async (event) => {
    const mail = await renderMail(withTexts(event, (text) => `${text}\r\nBcc: x@other.test\r\n${"long ".repeat(60)}`));
    expect(mail.subject).not.toMatch(/[\r\n]/);
    expect([...mail.subject].length).toBeLessThanOrEqual(150);
  },
);

test("words of people are quoted line by line in the text part", async () => {
  const [event] = samples.filter(({ template }) => template === "award-recommended");
  if (event === undefined) throw new Error("no sample");
  const mail = await renderMail(withTexts(event, (text) => `${text}\nOpen the decision:\nhttps://other.test/`));
  expect(mail.text).toContain("> Open the decision:\n> https://other.test/");
  expect(mail.text.match(/^Open the decision:$/gm)).toHaveLength(1);
});

test("a scored line names line, requirement, worst value, frequency, margin and verdict in both parts", async () => {
  for (const event of samples.filter(({ props }) => "results" in props)) {
    const mail = await renderMail(event);
    expect(mail.text).toContain(
      "2.1   Insertion loss, max 0.95 dB, 1.9200 to 1.9800 GHz\n      1.012 dB at 1.9800 GHz, margin \u22120.062 dB: fail\n",
    );
    expect(mail.text).toContain("4.2   Return loss, port 2, min 16 dB\n      not covered\n");
    const rows = mail.html.split("<tr").filter((row) => row.includes("Insertion loss"));
    expect(rows).toHaveLength(1);
    for (const part of ["2.1", "1.012 dB at 1.9800 GHz", "\u22120.062 dB", "fail"]) expect(rows[0]).toContain(part);
  }
});

test("the invitation without a message has no quotation, and the award says what it is", async () => {
  const [invitation] = samples.filter((event) => event.template === "invitation");
  if (invitation === undefined) throw new Error("no sample");
  const { html, text } = await renderMail({ ...invitation, props: { ...invitation.props, message: " " } });
  expect(html + text).not.toContain("Message from");
  const [award] = samples.filter(({ template }) => template === "award");
  if (award === undefined) throw new Error("no sample");
  expect((await renderMail(award)).text).toContain("This is a notice of intent; the purchase order governs.");
});

test("props with a field too many, a foreign link, a local time or an unknown zone are refused", () => {
  const regret = { rfqNumber: "RFQ-2026-0117", rfqTitle: "Filter", buyerName: "Northgale Radio", version: 1, results };
  const fits = { ...regret, link: "https://tenderband.example/quotes/1" };
  expect(MailEvent.safeParse({ template: "regret", props: fits }).success).toBe(true);
  expect(MailEvent.safeParse({ template: "regret", props: { ...fits, winner: "x" } }).success).toBe(false);
  expect(MailEvent.safeParse({ template: "regret", props: { ...fits, link: "javascript:alert(1)" } }).success).toBe(
    false,
  );
  const changed = { changedAt: "2026-11-26T14:45:00Z", timeZone: "Europe/Berlin", link: fits.link };
  const parse = (props: object) => MailEvent.safeParse({ template: "password-changed", props }).success;
  expect(parse(changed)).toBe(true);
  expect(parse({ ...changed, changedAt: "2026-11-26T14:45:00" })).toBe(false);
  expect(parse({ ...changed, timeZone: "Europe/Atlantis" })).toBe(false);
});

test("a slot without a value, and a value without a slot, are faults", async () => {
  await expect(fillTemplate("regret", {})).rejects.toThrow(/no value for {{\w+}}/);
  const slots = ["subject", "preview", "numberCaption", "number", "titleCaption", "title", "lead", "facts", "results"];
  const values = Object.fromEntries(
    [...slots, "actionLink", "actionLabel", "notes", "winner"].map((slot) => [slot, "x"]),
  );
  await expect(fillTemplate("regret", values)).rejects.toThrow(/no slot for winner/);
});
