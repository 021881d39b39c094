// What every mail says, once: the same sentences become the HTML part and the text part.
import { singleLine, visibleText } from "./format";
import { palette } from "./palette";
import { resultRows, resultText, type ResultLine } from "./results";
import { fillTemplate, html, type Markup } from "./template";

export interface RenderedMail {
  readonly subject: string;
  readonly html: string;
  readonly text: string;
}

export interface Fact {
  readonly label: string;
  readonly value: string;
}

/** Content of one mail; a template has a slot for each part it shows, and only for those. */
export interface MailContent {
  readonly subject: string;
  /** Title block, left: "RFQ" over "RFQ-2027-0012". */
  readonly number: Fact;
  /** Title block, right: "Filter" over "1.95 GHz bandpass filter". */
  readonly title: Fact;
  readonly lead: string;
  readonly facts: readonly Fact[];
  /** A person's words; `null` where the template has room for them and nothing was written. */
  readonly quotation?: { readonly caption: string; readonly text: string } | null;
  readonly results?: readonly ResultLine[];
  readonly action: { readonly label: string; readonly link: string };
  readonly notes: readonly string[];
}

const AUTOMATIC = "Sent automatically by Tenderband.";
const SUBJECT_LENGTH = 150;

/** Renders content by the MJML template of that name. */
export async function renderContent(template: string, content: MailContent): Promise<RenderedMail> {
  const subject = shorten(singleLine(content.subject), SUBJECT_LENGTH);
  const notes = [...content.notes, AUTOMATIC];
  const values: Record<string, string | Markup> = {
    subject,
    preview: singleLine(content.lead),
    numberCaption: content.number.label,
    number: singleLine(content.number.value),
    titleCaption: content.title.label,
    title: singleLine(content.title.value),
    lead: singleLine(content.lead),
    ...(content.facts.length > 0 && { facts: factRows(content.facts) }),
    ...(content.quotation !== undefined && { quotation: quotationMarkup(content.quotation) }),
    ...(content.results !== undefined && { results: resultRows(content.results) }),
    actionLabel: content.action.label,
    actionLink: content.action.link,
    notes: html`${notes.map((note) => html`<div style="padding: 0 0 4px">${singleLine(note)}</div>`)}`,
  };
  return { subject, html: await fillTemplate(template, values), text: plainText(content, notes) };
}

function factRows(facts: readonly Fact[]): Markup {
  const cell = `padding: 7px 12px 7px 0; vertical-align: top; border-bottom: 1px solid ${palette.rule}`;
  const label = `${cell}; width: 128px; font-size: 14px; font-weight: 400; color: ${palette.quiet}`;
  const rows = facts.map(
    (fact) =>
      html`<tr>
        <th class="quiet rule" scope="row" align="left" width="128" style="${label}">${singleLine(fact.label)}</th>
        <td class="rule" style="${cell}; padding-right: 0; word-break: break-word">${singleLine(fact.value)}</td>
      </tr>`,
  );
  return html`${rows}`;
}

function quotationMarkup(quotation: MailContent["quotation"]): Markup {
  if (!quotation) return html``;
  const lines = visibleText(quotation.text).split("\n");
  const style = `margin: 20px 0 0; padding: 0 0 0 13px; border-left: 3px solid ${palette.edge}`;
  return html`<div class="edge" style="${style}">
    <div class="quiet" style="font-size: 14px; line-height: 20px; color: ${palette.quiet}">
      ${singleLine(quotation.caption)}
    </div>
    ${lines.map((line) => html`<div>${line === "" ? "\u00A0" : line}</div>`)}
  </div>`;
}

function plainText(content: MailContent, notes: readonly string[]): string {
  const heading = `${singleLine(content.number.value)} \u00B7 ${singleLine(content.title.value)}`;
  const blocks = [
    heading,
    singleLine(content.lead),
    content.facts.map((fact) => `${singleLine(fact.label)}: ${singleLine(fact.value)}`).join("\n"),
    content.quotation ? `${singleLine(content.quotation.caption)}:\n${quoted(content.quotation.text)}` : "",
    content.results && content.results.length > 0 ? `Results\n${resultText(content.results)}` : "",
    `${content.action.label}:\n${content.action.link}`,
    notes.map(singleLine).join("\n"),
  ];
  return `${blocks.filter((block) => block !== "").join("\n\n")}\n`;
}

// Quoted line by line, so that nobody's words can pass for the product's own.
function quoted(text: string): string {
  return visibleText(text)
    .split("\n")
    .map((line) => `> ${line}`.trimEnd())
    .join("\n");
}

function shorten(text: string, length: number): string {
  const characters = [...text];
  return characters.length <= length
    ? text
    : `${characters
        .slice(0, length - 1)
        .join("")
        .trimEnd()}\u2026`;
}
