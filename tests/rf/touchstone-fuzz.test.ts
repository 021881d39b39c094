// Mutated example files: each is read to finite, ascending data or refused with a reason, soon.
import { readFileSync, readdirSync } from "node:fs";
import path from "node:path";
import fc from "fast-check";
import { expect, test } from "vitest";
import type { TwoPort } from "~/rf/contract";
import { parseTouchstone } from "~/rf/touchstone";
import { TouchstoneError } from "~/rf/touchstone-error";

const FOLDER = path.resolve("tests/reference/touchstone");
const examples = readdirSync(FOLDER)
  .filter((name) => name !== "expected.json")
  .map((name) => readFileSync(path.join(FOLDER, name)));

/** Pieces that have a meaning somewhere in a file. */
const PIECES = [
  "#",
  "!",
  "[",
  "]",
  "\n",
  "\r",
  "\t",
  ",",
  ";",
  "-",
  "e",
  "D",
  ".",
  "0",
  "1e309",
  "NaN",
  "\0",
  "é",
  "R 50 75",
];
const KEYWORDS = [
  "[Version] 2.0\n",
  "[End]\n",
  "[Reference] 50\n",
  "[Network Data]\n",
  "[Begin Information]\n",
  "[Noise Data]\n",
];
/** What keeps most numbers numbers. */
const DIGITS = [..."0123456789 "].map((character) => Uint8Array.of(character.charCodeAt(0)));
const insertion = fc.oneof(
  fc.constantFrom(...PIECES, ...KEYWORDS).map((text) => new TextEncoder().encode(text)),
  fc.uint8Array({ minLength: 1, maxLength: 4 }),
);
const edit = fc.record({
  place: fc.double({ min: 0, max: 1, noNaN: true, maxExcluded: true }),
  removed: fc.oneof({ weight: 9, arbitrary: fc.nat(1) }, { weight: 1, arbitrary: fc.nat(200) }),
  inserted: fc.oneof(fc.constant(new Uint8Array(0)), fc.constantFrom(...DIGITS), insertion),
});
const mutant = fc
  .tuple(fc.constantFrom(...examples), fc.array(edit, { minLength: 1, maxLength: 3 }))
  .map(([example, edits]) =>
    edits.reduce<Uint8Array>((bytes, { place, removed, inserted }) => {
      const at = Math.floor(place * bytes.length);
      return Uint8Array.from([...bytes.subarray(0, at), ...inserted, ...bytes.subarray(at + removed)]);
    }, example),
  );

test("2,000 mutated example files are read to finite numbers or refused with a reason", () => {
  let read = 0;
  let refused = 0;
  fc.assert(
    fc.property(mutant, (bytes) => {
      try {
        expectSound(parseTouchstone(bytes));
        read += 1;
      } catch (error) {
        if (!(error instanceof TouchstoneError)) throw error;
        const lines = 1 + bytes.filter((byte) => byte === 10 || byte === 13).length;
        expect(error.line).toBeGreaterThanOrEqual(1);
        expect(error.line).toBeLessThanOrEqual(lines);
        refused += 1;
      }
    }),
    { numRuns: 2000 },
  );
  // The mutations are neither all harmless nor all fatal.
  console.log(`${read} mutants read, ${refused} refused`);
  expect(read).toBeGreaterThan(50);
  expect(refused).toBeGreaterThan(50);
});

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

function expectSound({ frequency, s11, s21, s12, s22, referenceImpedance, notes }: TwoPort): void {
  expect(frequency.length).toBeGreaterThan(0);
  expect(
    frequency.every((hz, k) => Number.isFinite(hz) && hz >= 0 && (k === 0 || hz > (frequency[k - 1] as number))),
  ).toBe(true);
  for (const { re, im } of [s11, s21, s12, s22]) {
    expect([re.length, im.length]).toEqual([frequency.length, frequency.length]);
    expect(re.every(Number.isFinite) && im.every(Number.isFinite)).toBe(true);
  }
  expect(referenceImpedance.every((ohm) => ohm > 0 && ohm < Infinity)).toBe(true);
  expect(new Set(notes.map(({ code }) => code)).size).toBe(notes.length);
}
