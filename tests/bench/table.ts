// The benchmark's figures as lines of text and as the table the README quotes.
import { readFileSync, writeFileSync } from "node:fs";

export interface Row {
  readonly name: string;
  readonly figure: string;
  /** What is asked for, in words, and whether it is reached; left out where nothing is asked. */
  readonly target?: string;
  readonly reached?: boolean;
}

const BEGIN = "<!-- bench -->";
const END = "<!-- /bench -->";

export function print(rows: readonly Row[]): void {
  for (const { name, figure, target, reached } of rows) {
    const verdict = target === undefined ? "" : `  ${target}: ${reached ? "reached" : "not reached"}`;
    console.log(`${name.padEnd(52)}${figure.padStart(12)}${verdict}`);
  }
}

/** Puts the table between the README's two marks. */
export function writeTable(file: string, heading: string, rows: readonly Row[]): void {
  const text = readFileSync(file, "utf8");
  const begin = text.indexOf(BEGIN);
  const end = text.indexOf(END);
  if (begin < 0 || end < begin) throw new Error(`${file} has no ${BEGIN} … ${END}`);
  const lines = rows.map(({ name, figure, target = "" }) => `| ${name} | ${figure} | ${target} |`);
  const table = [heading, "", "| | figure | asked for |", "|---|---|---|", ...lines].join("\n");
  writeFileSync(file, `${text.slice(0, begin + BEGIN.length)}\n\n${table}\n\n${text.slice(end)}`);
}
