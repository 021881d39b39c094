// Every example file of the reference against its expected numbers, or against what its refusal must be about.
import { readFileSync, readdirSync } from "node:fs";
import path from "node:path";
import { expect, test } from "vitest";
import type { NoteCode } from "~/rf/contract";
import { parseTouchstone } from "~/rf/touchstone";
import { TouchstoneError, type TouchstoneErrorCode } from "~/rf/touchstone-error";
import { expectMatrix, type MatrixSeries } from "../support/complex-matrix";

interface Example {
  readonly file: string;
  readonly rule: string;
  readonly expect: string;
  readonly f_hz?: readonly number[];
  readonly z0_ohm?: readonly [number, number];
  readonly s?: MatrixSeries;
}

const FOLDER = path.resolve("tests/reference/touchstone");
// Expected S at the file's own references, made with numpy; the rules are those of the Touchstone 2.1 document
// (IBIS Open Forum, 26 January 2024) and the Rev 1.1 text of 2002.
const { files } = JSON.parse(readFileSync(path.join(FOLDER, "expected.json"), "utf8")) as { files: Example[] };

/** Files that are refused: by which reason, in which line, with which words of the message. */
const REFUSED: Record<string, readonly [TouchstoneErrorCode, number, RegExp]> = {
  "21c-v2-reference-short.ts": ["reference-impedance", 7, /\[Reference\] has 1 of 2/],
  "23a-v2-nfreq-too-few.ts": ["frequency-count", 10, /3 frequencies.* is 4/],
  "23b-v2-nfreq-too-many.ts": ["frequency-count", 10, /3 frequencies.* is 2/],
  "27b-v2-after-end.ts": ["after-end", 11, /"stray text 1 2 3"/],
  "30-v2-unknown-version.ts": ["unknown-version", 1, /3\.0/],
  "31-v2-no-ports.ts": ["keyword-missing", 3, /\[Number of Ports\]/],
  "32-v2-three-ports.ts": ["not-two-port", 3, /is 3/],
  "33a-descending.s2p": ["frequency-order", 3, /falls from 2250000000 Hz to 1500000000 Hz/],
  "34-data-before-option.s2p": ["option-line-late", 2, /line 1/],
  "35-bad-option-token.s2p": ["option-token", 1, /"THz"/],
  "36-r-zero.s2p": ["reference-impedance", 1, /0 ohm.*positive/],
  "37-v2-mixed-mode.ts": ["mixed-mode", 6, /mixed-mode/],
  "40-s1p.s1p": ["not-two-port", 2, /1-port.*\.s1p/],
  "41-s1p-named-s2p.s2p": ["not-two-port", 2, /3 numbers where a two-port set has 9/],
  "42-v11-r-not-last.s2p": ["reference-impedance", 1, /last/],
  "43-v2-r-two-values.ts": ["reference-impedance", 2, /\[Reference\]/],
  "47-v1-with-keyword.s2p": ["keyword-without-version", 2, /\[Two-Port Data Order\]/],
};

/** Files that are read with a note; every other one that is read has none. */
const NOTED: Record<string, readonly NoteCode[]> = {
  "10-no-option-line.s2p": ["default-option-line"],
  "13b-cr.s2p": ["carriage-return-line-ends"],
  "20c-v2-order-missing.ts": ["default-data-order"],
  "26a-v2-noise.ts": ["noise-data-skipped"],
  "26b-v1-noise-tail.s2p": ["noise-data-skipped"],
  "26c-v1-noise-equal-frequency.s2p": ["noise-data-skipped"],
  "26d-v1-noise-one-point.s2p": ["noise-data-skipped"],
  "26e-v1-noise-db-format.s2p": ["noise-data-skipped"],
  "27a-v2-no-end.ts": ["missing-end"],
  "33b-duplicate.s2p": ["repeated-frequency"],
  "44-v2-keyword-indented.ts": ["keyword-indented"],
  "46-v2-noise-no-count.ts": ["noise-count-missing", "noise-data-skipped"],
  "48-v11-noise.s2p": ["noise-data-skipped"],
};

const read = (file: string) => parseTouchstone(readFileSync(path.join(FOLDER, file)), file);

test("the expectations cover every example file, and no other", () => {
  const named = readdirSync(FOLDER).filter((name) => name !== "expected.json");
  expect(files.map(({ file }) => file).sort()).toEqual(named.sort());
  expect(named).toHaveLength(79);
});

for (const example of files) {
  const refusal = REFUSED[example.file];
  if (refusal) {
    const [code, line, words] = refusal;
    test(`${example.file} is refused: ${example.rule}`, () => {
      expect(example.expect).toMatch(/reject/);
      const error = catchError(() => read(example.file));
      expect(error).toMatchObject({ name: "TouchstoneError", code, line });
      expect(error.message).toMatch(words);
    });
  } else {
    test(`${example.file} is read: ${example.rule}`, () => {
      const network = read(example.file);
      expect(network.notes.map(({ code }) => code)).toEqual(NOTED[example.file] ?? []);
      if (!example.s) {
        expect(example.expect).toMatch(/accept|warning/);
        return;
      }
      expect([...network.frequency]).toEqual(example.f_hz);
      expect(network.referenceImpedance).toEqual(example.z0_ohm);
      expectMatrix(network, example.s, 1e-12);
    });
  }
}

test("where an example has no expected numbers, the reading is that of its sound neighbour", () => {
  const data = (file: string) => {
    const { frequency, s11, s21, s12, s22 } = read(file);
    return { frequency, s11, s21, s12, s22 };
  };
  const sound = data("20a-v2-21_12.ts");
  expect(data("20c-v2-order-missing.ts")).toEqual(sound);
  expect(data("33b-duplicate.s2p")).toEqual(sound);
  expect(data("46-v2-noise-no-count.ts")).toEqual(sound);
});

test("version 2 Y, H and G between 50 and 75 ohm give the S-parameters of the same network's Z", () => {
  const wanted = files.find(({ file }) => file === "19e-v2-z-ref-50-75.ts")?.s ?? [];
  for (const file of ["19b-v2-y.ts", "19c-v2-h.ts", "19d-v2-g.ts"]) {
    const text = readFileSync(path.join(FOLDER, file), "utf8").replace(
      "[Network Data]",
      "[Reference] 50 75\n[Network Data]",
    );
    const network = parseTouchstone(text);
    expect(network.referenceImpedance).toEqual([50, 75]);
    // The four files state the network to 12 digits.
    expectMatrix(network, wanted, 1e-11, file);
  }
});

test("a file without option line is read by the defaults: GHz, magnitude and angle, 50 ohm", () => {
  const network = read("10-no-option-line.s2p");
  expect(network.frequency[0]).toBe(1e18);
  expect(network.referenceImpedance).toEqual([50, 50]);
  // By hand: 0.125 at -0.25 degrees.
  expect(network.s11.re[0]).toBeCloseTo(0.125 * Math.cos((0.25 * Math.PI) / 180), 15);
  expect(network.s11.im[0]).toBeCloseTo(-0.125 * Math.sin((0.25 * Math.PI) / 180), 15);
});

test("comments are kept, those after data too, and nothing in them is read as data or keyword", () => {
  expect(read("12-comments.s2p").comments).toEqual([
    "first",
    "# MHz Z DB R 75",
    "trailing # GHz",
    "[End]",
    "9 9 9",
    "1 2 3 4 5 6 7 8 9",
    "no blank before",
    "last",
  ]);
});

function catchError(run: () => unknown): TouchstoneError {
  try {
    run();
  } catch (error) {
    if (error instanceof TouchstoneError) return error;
    throw error;
  }
  throw new Error("the file was read");
}
