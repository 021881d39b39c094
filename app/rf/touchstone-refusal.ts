// A refused Touchstone file in one sentence with its place, the same on the server and in the supplier's browser.
import type { TouchstoneError } from "./touchstone-error.ts";

/** Faults of a file as a whole: a line would point at nothing. */
const WHOLE_FILE: readonly TouchstoneError["code"][] = ["empty-file", "too-large", "not-text", "no-data"];

/** "Line 7, column 12: …"; without a place where the fault is the whole file's. */
export function refusalSentence({ code, line, column, message }: TouchstoneError): string {
  if (WHOLE_FILE.includes(code)) return message;
  return column === undefined ? `Line ${line}: ${message}` : `Line ${line}, column ${column}: ${message}`;
}
