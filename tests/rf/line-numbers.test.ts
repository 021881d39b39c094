// Line numbers and revision letters as the drawing rules of the product state them.
import { expect, test } from "vitest";
import {
  compareLineNumbers,
  groupOfKind,
  LINE_GROUPS,
  nextRevisionLetter,
  numberLines,
  numberRevision,
} from "../../app/rf/line-numbers.ts";

test("lines are numbered by the group of their kind, in order, whatever stands between", () => {
  expect(
    numberLines([
      "reference-impedance",
      "rejection",
      "insertion-loss",
      "rejection",
      "declared",
      "ripple",
      "return-loss",
      "reverse-isolation",
    ]),
  ).toEqual(["1.1", "3.1", "2.1", "3.2", "6.1", "2.2", "4.1", "3.3"]);
  expect(numberLines([])).toEqual([]);
});

test("there are six groups and delay lines stand in the fifth", () => {
  expect(LINE_GROUPS.map(({ number, title }) => `${number} ${title}`)).toEqual([
    "1 General",
    "2 Passband",
    "3 Stopband",
    "4 Match",
    "5 Delay and phase",
    "6 Declared",
  ]);
  expect(groupOfKind("group-delay-variation")).toBe(5);
});

test("a later revision keeps released numbers and never gives a withdrawn one again", () => {
  const released = new Map([
    ["loss", "2.1"],
    ["low", "3.1"],
    ["withdrawn", "3.2"],
  ]);
  const lines = [
    { lineKey: "new", kind: "rejection" },
    { lineKey: "loss", kind: "insertion-loss" },
    { lineKey: "low", kind: "rejection" },
    { lineKey: "ripple", kind: "ripple" },
  ] as const;
  expect(numberRevision(lines, released)).toEqual(["3.3", "2.1", "3.1", "2.2"]);
});

test("a line whose kind moves it to another group is numbered anew there", () => {
  expect(numberRevision([{ lineKey: "a", kind: "return-loss" }], new Map([["a", "3.1"]]))).toEqual(["4.1"]);
});

test("line 3.2 stands before line 3.10", () => {
  expect(["3.10", "6.1", "3.2", "2.1"].sort(compareLineNumbers)).toEqual(["2.1", "3.2", "3.10", "6.1"]);
});

test("revision letters skip I, O, Q, S, X and Z and go on with AA", () => {
  const letters: string[] = [];
  for (let letter: string | null = null; letters.length < 22;) {
    letter = nextRevisionLetter(letter);
    letters.push(letter);
  }
  expect(letters.join(" ")).toBe("A B C D E F G H J K L M N P R T U V W Y AA AB");
  expect(nextRevisionLetter("AY")).toBe("BA");
  expect(nextRevisionLetter("YY")).toBe("AAA");
  for (const wrong of ["I", "a", "", "A1"]) expect(() => nextRevisionLetter(wrong)).toThrow(RangeError);
});
