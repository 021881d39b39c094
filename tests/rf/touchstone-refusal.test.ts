// The sentence a refused file is answered with: its place in front, unless the fault is the whole file's.
import { expect, test } from "vitest";
import { parseTouchstone } from "~/rf/index";
import { TouchstoneError } from "~/rf/touchstone-error";
import { refusalSentence } from "~/rf/touchstone-refusal";

function refusalOf(text: string): string {
  try {
    parseTouchstone(text, "filter.s2p");
  } catch (error) {
    if (error instanceof TouchstoneError) return refusalSentence(error);
    throw error;
  }
  throw new Error("the file was read");
}

test("a fault has its line, and its column where it is known", () => {
  expect(refusalOf("# GHz S RI R 50\n1,5 0 0 0 0 0 0 0 0\n")).toMatch(/^Line 2, column \d+: \S/);
  expect(refusalSentence(new TouchstoneError("set-incomplete", 7, "Too short."))).toBe("Line 7: Too short.");
});

test("a fault of the whole file has no line", () => {
  expect(refusalOf("")).not.toMatch(/^Line/);
  expect(refusalSentence(new TouchstoneError("not-text", 1, "No text."))).toBe("No text.");
});
