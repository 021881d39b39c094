// The scored lines of one quote as a mail shows them, in HTML and in text.
import { z } from "zod";
import { singleLine } from "./format";
import { palette } from "./palette";
import { html, type Markup } from "./template";

export const LineVerdict = z.enum([
  "pass",
  "conditional-pass",
  "conditional-fail",
  "fail",
  "not-covered",
  "declared",
  "exception",
]);
export type LineVerdict = z.infer<typeof LineVerdict>;

/** One requirement with its worst point; figures come formatted, with unit and sign. */
export const ResultLine = z.strictObject({
  /** "2.1" */
  line: z.string(),
  /** "Insertion loss, max 0.95 dB" */
  requirement: z.string(),
  /** "1.01 dB"; for a declared line what was declared; absent where nothing was reached. */
  value: z.string().optional(),
  /** "1.9800 GHz" */
  frequency: z.string().optional(),
  /** "−0.06 dB" */
  margin: z.string().optional(),
  verdict: LineVerdict,
});
export type ResultLine = z.infer<typeof ResultLine>;

// Marks are characters shaped as the product's own (full, dome, bowl, cross, ring, square, square with a slash); the word beside them carries the meaning.
const SHOWN: Readonly<
  Record<LineVerdict, { word: string; mark: string; tone: "pass" | "near" | "fail" | "bare" | "quiet" }>
> = {
  pass: { word: "pass", mark: "\u25CF", tone: "pass" },
  "conditional-pass": { word: "conditional pass", mark: "\u25D3", tone: "near" },
  "conditional-fail": { word: "conditional fail", mark: "\u25D2", tone: "near" },
  fail: { word: "fail", mark: "\u00D7", tone: "fail" },
  "not-covered": { word: "not covered", mark: "\u25CB", tone: "bare" },
  declared: { word: "declared", mark: "\u25A1", tone: "quiet" },
  exception: { word: "exception", mark: "\u25EA", tone: "near" },
};

const HEAD = `padding: 0 12px 5px 0; font-size: 14px; line-height: 18px; font-weight: 400; color: ${palette.quiet}; border-bottom: 1.5px solid ${palette.ink}`;
const CELL = `padding: 7px 12px 8px 0; vertical-align: top; border-bottom: 1px solid ${palette.rule}`;

/** Rows of a table, its head first. */
export function resultRows(lines: readonly ResultLine[]): Markup {
  const rows = lines.map(resultRow);
  return html`<tr>
      <th class="quiet heavy" scope="col" align="left" width="44" style="${HEAD}">Line</th>
      <th class="quiet heavy" scope="col" align="left" style="${HEAD}">Requirement, worst value</th>
      <th class="quiet heavy" scope="col" align="right" style="${HEAD}; padding-right: 0">Margin, verdict</th>
    </tr>
    ${rows}`;
}

function resultRow(line: ResultLine): Markup {
  const { word, mark, tone } = SHOWN[line.verdict];
  return html`<tr>
    <td class="rule" width="44" style="${CELL}; font-weight: 600">${singleLine(line.line)}</td>
    <td class="rule" style="${CELL}">
      ${singleLine(line.requirement)}
      <div class="quiet" style="font-size: 14px; line-height: 20px; color: ${palette.quiet}">${worstPoint(line)}</div>
    </td>
    <td class="rule verdict" align="right" style="${CELL}; padding-right: 0; white-space: nowrap">
      ${singleLine(line.margin ?? "")}
      <div class="${tone}" style="font-weight: 600; color: ${palette[tone]}">
        <span aria-hidden="true">${mark}&nbsp;</span>${word}
      </div>
    </td>
  </tr>`;
}

/** The same lines as text, two rows each. */
export function resultText(lines: readonly ResultLine[]): string {
  return lines
    .map((line) => {
      const facts = [worstPoint(line), line.margin === undefined ? "" : `margin ${singleLine(line.margin)}`];
      const found = facts.filter((fact) => fact !== "").join(", ");
      const { word } = SHOWN[line.verdict];
      const name = `${singleLine(line.line).padEnd(5)} ${singleLine(line.requirement)}`;
      return `${name}\n      ${found === "" ? word : `${found}: ${word}`}`;
    })
    .join("\n");
}

function worstPoint({ value, frequency }: ResultLine): string {
  if (value === undefined) return "";
  return singleLine(frequency === undefined ? value : `${value} at ${frequency}`);
}
