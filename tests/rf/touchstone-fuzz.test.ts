// Mutated example files: each is read to finite, ascending data or refused with a reason, soon.
import { expect, test } from "vitest";
import { parseTouchstone } from "~/rf/touchstone";
import { TouchstoneError } from "~/rf/touchstone-error";
import { chanceOf, inBase64, judge, mutant, touchstoneExamples } from "../support/mutated-touchstone";

const SEED = 20260214;
const FILES = 20_000;
const LONGEST_MS = 2_000;

test("20,000 mutated example files are read to finite numbers or refused with a reason, none for 2 s", () => {
  const examples = touchstoneExamples();
  const chance = chanceOf(SEED);
  const totals = { read: 0, refused: 0, wrong: 0 };
  const faults: string[] = [];
  let longest = 0;
  for (let k = 0; k < FILES; k += 1) {
    const bytes = mutant(examples, chance);
    const started = performance.now();
    const { outcome, fault } = judge(bytes);
    longest = Math.max(longest, performance.now() - started);
    totals[outcome] += 1;
    if (fault !== undefined) faults.push(`file ${k}: ${fault}: ${inBase64(bytes)}`);
  }
  console.log(`seed ${SEED}: ${totals.read} mutants read, ${totals.refused} refused, longest ${longest.toFixed(1)} ms`);
  expect(faults.slice(0, 5)).toEqual([]);
  expect(longest).toBeLessThan(LONGEST_MS);
  // The mutations are neither all harmless nor all fatal.
  expect(totals.read).toBeGreaterThanOrEqual(FILES / 5);
  expect(totals.refused).toBeGreaterThanOrEqual(FILES / 5);
}, 180_000);

test("long runs of one byte, the worst case of a careless scanner, are dealt with at once", () => {
  const started = performance.now();
  for (const byte of [" ", "\t", "\n", "\r", "!", "#", "[", "0", ".", "1 ", "\0", ",", "# R ", "[a"]) {
    const text = byte.repeat(1_000_000 / byte.length);
    for (const start of ["", "# Hz S RI R 50\n", "# Hz S RI R 50\n1 ", "# ", "[Version] 2.0\n", "[Version] "]) {
      expect(() => parseTouchstone(start + text)).toThrow(TouchstoneError);
    }
  }
  // 84 files of 1 MB; one pass over each takes a few milliseconds, a quadratic one minutes.
  expect(performance.now() - started).toBeLessThan(20_000);
});
