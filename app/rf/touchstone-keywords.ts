// Keywords of version 2 files: their spelling, and the arguments of those that have one word.

import { TouchstoneError } from "./touchstone-error.ts";

const KEYWORDS = [
  "version",
  "number of ports",
  "two port data order",
  "number of frequencies",
  "number of noise frequencies",
  "reference",
  "matrix format",
  "mixed mode order",
  "begin information",
  "end information",
  "network data",
  "noise data",
  "end",
] as const;

export type Keyword = (typeof KEYWORDS)[number];

export interface KeywordLine {
  readonly keyword: Keyword;
  /** As written, with brackets. */
  readonly written: string;
  readonly words: readonly string[];
  readonly line: number;
}

/**
 * Splits "[Keyword] argument" into keyword and argument words. Case does not matter; words are joined by one blank or a dash.
 *
 * @param text of the line without its comment
 * @throws TouchstoneError unknown-keyword
 */
export function parseKeywordLine(text: string, line: number): KeywordLine {
  const close = text.indexOf("]");
  const written = close < 0 ? text.slice(0, 24) : text.slice(0, Math.min(close + 1, 60));
  const name = text.slice(1, Math.max(close, 1)).toLowerCase().replaceAll("-", " ");
  const keyword = KEYWORDS.find((known) => known === name);
  if (!keyword) {
    throw new TouchstoneError(
      "unknown-keyword",
      line,
      `${written} is no keyword of Touchstone 2. Correct it or take it out.`,
    );
  }
  const words = text
    .slice(close + 1)
    .split(/[ \t]+/)
    .filter((word) => word !== "");
  return { keyword, written, words, line };
}

/** The one argument of a keyword. @throws TouchstoneError keyword-argument */
export function soleArgument({ written, words, line }: KeywordLine, wanted: string): string {
  const [word] = words;
  if (word !== undefined && words.length === 1) return word.toLowerCase();
  throw argumentError(written, words, wanted, line);
}

/** A whole number of at least 1. @throws TouchstoneError keyword-argument */
export function countArgument(keywordLine: KeywordLine): number {
  const word = soleArgument(keywordLine, "one whole number");
  const count = Number(word);
  if (/^\+?\d+$/.test(word) && count > 0) return count;
  throw argumentError(keywordLine.written, keywordLine.words, "a whole number of at least 1", keywordLine.line);
}

/** One of the words given. @throws TouchstoneError keyword-argument */
export function choiceArgument<Choice extends string>(keywordLine: KeywordLine, choices: readonly Choice[]): Choice {
  const wanted = choices.join(" or ");
  const word = soleArgument(keywordLine, wanted);
  const choice = choices.find((candidate) => candidate === word);
  if (choice) return choice;
  throw argumentError(keywordLine.written, keywordLine.words, wanted, keywordLine.line);
}

/** Refuses anything after a keyword that takes no argument. @throws TouchstoneError keyword-argument */
export function noArgument({ written, words, line }: KeywordLine): void {
  if (words.length > 0) throw argumentError(written, words, "nothing", line);
}

function argumentError(written: string, words: readonly string[], wanted: string, line: number): TouchstoneError {
  const found = words.length === 0 ? "nothing" : `"${words.join(" ").slice(0, 40)}"`;
  return new TouchstoneError("keyword-argument", line, `${written} is followed by ${found}. Write ${wanted} after it.`);
}
