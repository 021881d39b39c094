// What a page says while older figures stand.
import { expect, test } from "vitest";
import { allScoredByWords, rescoringWords, scoredByWords } from "~/components/quote-scoring-words";

const view = { coreVersion: "0.1.0", letter: "A", state: "pending", done: 12, total: 30 } as const;

test("core, revision and files are named; before the first file it waits, and a failure is no progress", () => {
  expect(scoredByWords(view)).toBe("core 0.1.0 against revision A");
  expect(rescoringWords(view)).toBe("being scored again: 12 of 30 files");
  expect(rescoringWords({ ...view, done: 0, total: 0 })).toBe("waiting to be scored again");
  expect(rescoringWords({ ...view, state: "failed" })).not.toContain("12");
});

test("of several quotes each core and revision is named once", () => {
  expect(allScoredByWords([view, { ...view, done: 1 }, { ...view, letter: "B" }])).toBe(
    "core 0.1.0 against revision A, core 0.1.0 against revision B",
  );
});
