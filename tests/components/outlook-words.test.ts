// The outlook in words: a share is never said greater than it was shown to be, and every reason is told.
import { expect, test } from "vitest";
import {
  driftWords,
  jointSentence,
  listed,
  noOutlookWords,
  shareSentence,
  shareWords,
} from "~/components/outlook-words";

test("shares are rounded down, with a digit more where little is missing", () => {
  expect([0.97349, 0.9, 0.5, 0, 0.99899].map(shareWords)).toEqual(["97.3 %", "90.0 %", "50.0 %", "0.0 %", "99.8 %"]);
  expect([0.99999, 0.9999, 1 - 1e-6].map(shareWords)).toEqual(["99.99 %", "99.99 %", "99.99 %"]);
  // 0.29 · 1000 is 289.99999999999994 in binary.
  expect([0.29, 0.57, 0.983].map(shareWords)).toEqual(["29.0 %", "57.0 %", "98.3 %"]);
});

test("a share comes with its confidence and its assumption, and lines that leave nothing have none", () => {
  const sentence = "at least 97.3 % conform, with 95 % confidence, if these units are a random sample";
  expect(shareSentence(0.97349)).toBe(sentence);
  expect(jointSentence(0.97349)).toBe(sentence);
  expect(jointSentence(0)).not.toContain("%");
});

test("each reason for no outlook says how many units there were where that is the reason", () => {
  expect(noOutlookWords("too-few-units", 1)).toBe("None: 1 unit measured, 3 are needed.");
  expect(noOutlookWords("duplicate-data", 2)).toBe("None: 2 units with different data, 3 are needed.");
  expect(noOutlookWords("not-covered", 0)).toBe("None: the data of 0 units covers the line, 3 are needed.");
  expect(noOutlookWords("predicted", 0)).toContain("predicted");
});

test("drifts carry their sign and a true minus, none where they round to nothing", () => {
  expect([2.04, -6, 0.04, -0.04].map(driftWords)).toEqual(["+2.0", "−6.0", "0.0", "0.0"]);
});

test("lists are joined as a sentence has them", () => {
  expect([[], ["2.1"], ["2.1", "2.2"], ["2.1", "2.2", "3.1"]].map(listed)).toEqual([
    "",
    "2.1",
    "2.1 and 2.2",
    "2.1, 2.2 and 3.1",
  ]);
});
