// What the reader refuses, repairs with a note, or tells apart, beyond the example files.
import { expect, test } from "vitest";
import { parseTouchstone } from "~/rf/touchstone";
import { TouchstoneError, type TouchstoneErrorCode } from "~/rf/touchstone-error";

const OPTIONS = "# Hz S RI R 50";
const ROWS = ["1e9 .1 0 .9 0 .9 0 .1 0", "2e9 .2 0 .8 0 .8 0 .2 0", "3e9 .3 0 .7 0 .7 0 .3 0"];
const SOUND = [OPTIONS, ...ROWS].join("\n");

const version2 = (header: readonly string[], data: readonly string[], tail: readonly string[] = ["[End]"]) =>
  ["[Version] 2.0", OPTIONS, "[Number of Ports] 2", ...header, "[Network Data]", ...data, ...tail].join("\n");
const HEADER = ["[Two-Port Data Order] 21_12", "[Number of Frequencies] 3"];

function refusal(input: Uint8Array | string, fileName?: string): TouchstoneError {
  try {
    parseTouchstone(input, fileName);
  } catch (error) {
    if (error instanceof TouchstoneError) return error;
    throw error;
  }
  throw new Error("the file was read");
}

function expectRefusal(input: Uint8Array | string, code: TouchstoneErrorCode, line: number, column?: number): void {
  const error = refusal(input);
  expect([error.code, error.line], error.message).toEqual([code, line]);
  if (column !== undefined) expect(error.column).toBe(column);
  // What was found, then the remedy: two sentences, or one joined by a colon.
  expect(error.message).toMatch(/\. |: /);
}

const codes = (input: Uint8Array | string) => parseTouchstone(input).notes.map(({ code }) => code);
const withNumber = (text: string) => [OPTIONS, `1e9 .1 0 ${text} 0 .9 0 .1 0`].join("\n");

test("empty, comment-only and data-less files are refused", () => {
  expectRefusal("", "empty-file", 1);
  expectRefusal(new Uint8Array(0), "empty-file", 1);
  expectRefusal("! only a comment\n\n", "no-data", 1);
  expectRefusal(`${OPTIONS}\n`, "no-data", 1);
  expectRefusal("[Version] 2.0\n# Hz\n[Number of Ports] 2\n", "no-data", 3);
});

test("a file of another kind is refused with its beginning quoted", () => {
  expectRefusal("%PDF-1.7\n1 0 obj", "not-touchstone", 1);
  expectRefusal("Freq,S11,S21\n1,2,3", "not-touchstone", 1);
  expectRefusal(Uint8Array.of(0x50, 0x4b, 3, 4, 20, 0), "not-text", 1);
  expect(refusal("%PDF-1.7").message).toContain('"%PDF-1.7"');
});

test("numbers that are none are refused at their line and column", () => {
  expectRefusal(withNumber("NaN"), "not-finite", 2, 10);
  expectRefusal(withNumber("-inf"), "not-finite", 2, 10);
  expectRefusal(withNumber("1.#QNAN"), "not-finite", 2, 10);
  expectRefusal(withNumber("1e999"), "not-finite", 2, 10);
  expectRefusal(withNumber("0x1F"), "bad-number", 2, 10);
  expectRefusal(withNumber("1e"), "bad-number", 2, 10);
  expectRefusal(withNumber("1.2.3"), "bad-number", 2, 10);
  expectRefusal(withNumber("*****"), "bad-number", 2, 10);
  expectRefusal(withNumber("."), "bad-number", 2, 10);
  expectRefusal(withNumber("0,9"), "decimal-comma", 2, 11);
  expectRefusal(withNumber("0.9;"), "bad-number", 2, 13);
  expectRefusal(withNumber("1\u00a0"), "bad-number", 2, 10);
  expectRefusal(withNumber(`1${"0".repeat(2000)}`), "bad-number", 2, 10);
});

test("a level that overflows on the way from decibels is refused, and one that vanishes is zero", () => {
  expectRefusal("# Hz S DB R 50\n1 0 0 7000 0 0 0 0 0", "not-finite", 2);
  expect(parseTouchstone("# Hz S DB R 50\n1 0 0 -9000 0 0 0 0 0").s21.re[0]).toBe(0);
});

test("files with one, three and four ports are refused as such, also under a two-port name", () => {
  const row = (count: number) => Array.from({ length: count }, (_, k) => (k === 0 ? "1e9" : ".1")).join(" ");
  const ports = (...counts: number[]) => [OPTIONS, ...counts.map(row)].join("\n");
  for (const counts of [[3], [3, 3], [7, 6, 6], [19], [33], [9, 8, 8, 8]]) {
    expect(refusal(ports(...counts), "part.s2p").code, `rows of ${counts.join()}`).toBe("not-two-port");
  }
  expect(refusal(ports(3, 3), "part.s1p").message).toContain("The name says .s1p.");
});

test("a version 1 set starts and ends at line ends, odd first and even after", () => {
  expectRefusal([OPTIONS, "1e9 .1 0 .9", "0 .9 0 .1 0"].join("\n"), "set-layout", 2);
  expectRefusal([OPTIONS, `${ROWS[0] ?? ""} ${ROWS[1] ?? ""}`].join("\n"), "set-layout", 2);
  expectRefusal([OPTIONS, "1e9 .1 0 .9 0", ".9 0 .1 0 2e9 .1"].join("\n"), "set-layout", 3);
  expectRefusal([OPTIONS, "1e9 .1 0 .9 0 .9 0", ROWS[1]].join("\n"), "set-incomplete", 2);
  expectRefusal([SOUND, "4e9 .1 0 .9 0 .9 0"].join("\n"), "set-incomplete", 5);
});

test("a five-number row above the sweep that no even row completes is refused", () => {
  expectRefusal([SOUND, "4e9 1 .3 40 .25"].join("\n"), "set-incomplete", 5);
  expectRefusal([SOUND, "4e9 1 .3 40 .25", "5e9 1 .3 40 .25"].join("\n"), "set-incomplete", 5);
  expect(parseTouchstone([SOUND, "4e9 .1 0 .9 0", ".9 0 .1 0"].join("\n")).frequency).toHaveLength(4);
});

test("a five-number row that falls back is noise, unless an even row makes it a set out of order", () => {
  const network = parseTouchstone([SOUND, "2e9 1 .3 40 .25", "9e9 1 .3 40 .25"].join("\n"));
  expect(network.frequency).toHaveLength(3);
  expect(network.notes).toMatchObject([{ code: "noise-data-skipped", line: 5 }]);
  expect(network.notes[0]?.message).toMatch(/^2 rows/);
  expectRefusal([SOUND, "2e9 .2 0 .8 0", ".8 0 .2 0"].join("\n"), "frequency-order", 5);
  expectRefusal([SOUND, "2e9 1 .3 40 .25", ROWS[1]].join("\n"), "noise-layout", 6);
  expectRefusal([OPTIONS, "1e9 1 .3 40 .25"].join("\n"), "set-incomplete", 2);
  // Five numbers on two lines are no noise row.
  expectRefusal([SOUND, "2e9 1 .3", "40 .25", "9e9 1 .3 40 .25"].join("\n"), "set-incomplete", 5);
});

test("a repeated frequency is dropped when its numbers are equal, wrapped or not, and refused when they differ", () => {
  const wrapped = parseTouchstone([SOUND, "3e9 .3 0 .7 0", ".7 0 .3 0"].join("\n"));
  expect(wrapped.frequency).toHaveLength(3);
  expect(wrapped.notes).toMatchObject([{ code: "repeated-frequency", line: 5, frequency: [3e9, 3e9] }]);
  expectRefusal([SOUND, "3e9 .3 0 .7 0 .7 0 .3 1e-9"].join("\n"), "frequency-repeated", 5);
  expectRefusal([OPTIONS, "-1 0 0 1 0 1 0 0 0"].join("\n"), "frequency-negative", 2);
});

test("option lines: each part once, known words, a real positive reference", () => {
  const options = (text: string) => [text, ROWS[0]].join("\n");
  expectRefusal(options("# Hz MHz S RI R 50"), "option-repeated", 1);
  expectRefusal(options("# Hz S RI R"), "reference-impedance", 1);
  expectRefusal(options("# Hz S RI R -50"), "reference-impedance", 1);
  expectRefusal(options("# Hz S RI R 50j"), "reference-impedance", 1);
  expectRefusal(options("# Hz S RI R (50+50j)"), "reference-impedance", 1);
  expectRefusal(options("# Hz S RI R 50 50 50"), "not-two-port", 1);
  expectRefusal(options("# Hz S RI R50"), "option-token", 1);
  for (const parameter of ["Y", "Z", "G", "H"]) {
    expectRefusal(options(`# Hz ${parameter} RI R 50 75`), "reference-impedance", 1);
  }
  expect(parseTouchstone(options("#hz ri")).frequency[0]).toBe(1e9);
});

test("data in Y, Z, G or H that have no S-parameters are refused, never NaN", () => {
  // By hand: z11 = z22 = -1 makes (1 + z11)(1 + z22) - z12 z21 zero.
  for (const parameter of ["Y", "Z", "G", "H"]) {
    expectRefusal([`# Hz ${parameter} RI R 50`, "1 -1 0 0 0 0 0 -1 0"].join("\n"), "no-scattering", 2);
    expectRefusal([`# Hz ${parameter} RI R 50`, "1 1e300 0 0 0 0 0 1e300 0"].join("\n"), "no-scattering", 2);
  }
});

test("version 2: order, repetition and arguments of keywords", () => {
  expectRefusal(version2([...HEADER, "[Fancy] 1"], ROWS), "unknown-keyword", 6);
  expectRefusal(version2([...HEADER, "[ Matrix Format] Full"], ROWS), "unknown-keyword", 6);
  expectRefusal(version2([...HEADER, "[Number of Frequencies] 3"], ROWS), "keyword-repeated", 6);
  expectRefusal(version2(["[Two-Port Data Order] 11_22", "[Number of Frequencies] 3"], ROWS), "keyword-argument", 4);
  expectRefusal(version2(["[Two-Port Data Order] 21_12", "[Number of Frequencies] 0"], ROWS), "keyword-argument", 5);
  expectRefusal(version2(["[Two-Port Data Order] 21_12"], ROWS), "keyword-missing", 5);
  expectRefusal(version2([...HEADER, "1 2 3"], ROWS), "keyword-missing", 6);
  expectRefusal(version2(HEADER, [...ROWS, "[Matrix Format] Full"]), "keyword-order", 10);
  expectRefusal(version2([...HEADER, "[End]"], ROWS), "keyword-order", 6);
  expectRefusal(version2([...HEADER, "[Reference] 50 75 100"], ROWS), "reference-impedance", 6);
  expectRefusal(version2([...HEADER, "[Reference] 50", "-75"], ROWS), "reference-impedance", 7);
  expectRefusal(version2([...HEADER, "[Begin Information]", "x"], ROWS), "information-open", 12);
  expectRefusal(`${OPTIONS}\n[Version] 2.0\n`, "keyword-without-version", 2);
});

test("version 2: sets by count, each from its own line, and noise as announced", () => {
  expectRefusal(version2(HEADER, [ROWS.join(" ")]), "set-layout", 7);
  expectRefusal(version2(HEADER, [ROWS[0] ?? "", ROWS[1] ?? "", "3e9 .3 0 .7 0"]), "set-incomplete", 9);
  const noisy = [...HEADER, "[Number of Noise Frequencies] 2"];
  expectRefusal(version2(noisy, ROWS), "noise-count", 11);
  expectRefusal(version2(noisy, ROWS, ["[Noise Data]", "1e9 1 .3 40 12", "[End]"]), "noise-count", 13);
  expectRefusal(version2(noisy, ROWS, ["[Noise Data]", "1e9 1 .3 40", "[End]"]), "noise-layout", 12);
});

test("version 2 without option line takes the defaults with a note, and refuses a late one", () => {
  const lines = ["[Version] 2.0", "[Number of Ports] 2", ...HEADER, "[Network Data]", ...ROWS, "[End]"];
  expect(codes(lines.join("\n"))).toEqual(["default-option-line"]);
  expect(parseTouchstone(lines.join("\n")).frequency[0]).toBe(1e18);
});

test("text in other encodings is read with a note", () => {
  const plain = parseTouchstone(SOUND);
  const utf16 = (text: string, bigEndian: boolean) => {
    const bytes = new Uint8Array(2 * text.length);
    for (let k = 0; k < text.length; k += 1)
      new DataView(bytes.buffer).setUint16(2 * k, text.charCodeAt(k), !bigEndian);
    return bytes;
  };
  expect(codes(`\ufeff${SOUND}`)).toEqual(["byte-order-mark"]);
  expect(codes(new TextEncoder().encode(`\ufeff${SOUND}`))).toEqual(["byte-order-mark"]);
  for (const bigEndian of [false, true]) {
    for (const mark of ["", "\ufeff"]) {
      const network = parseTouchstone(utf16(mark + SOUND, bigEndian));
      expect(network.notes.map(({ code }) => code)).toEqual(["utf-16"]);
      expect(network.s21).toEqual(plain.s21);
    }
  }
});

test("comments in UTF-8 and Latin-1 are decoded, control characters are not kept", () => {
  expect(parseTouchstone(`! 25 °C\n${SOUND}`).comments).toEqual(["25 °C"]);
  const latin1 = Uint8Array.from(`! 25 °C\n${SOUND}`, (character) => character.charCodeAt(0));
  expect(parseTouchstone(latin1).comments).toEqual(["25 °C"]);
  expect(codes(latin1)).toEqual(["latin-1"]);
  expect(parseTouchstone(`! a\u0000b\u001bc\n${SOUND}`).comments).toEqual(["a b c"]);
});

test("of many or long comments 1,000 lines of 1,000 bytes are kept, with a note", () => {
  const many = parseTouchstone(`${"! x\n".repeat(1001)}${SOUND}`);
  expect(many.comments).toHaveLength(1000);
  expect(many.notes).toMatchObject([{ code: "comments-cut", line: 1001 }]);
  const long = parseTouchstone(`! ${"é".repeat(2000)}\n${SOUND}`);
  expect(long.comments[0]).toMatch(/^é{499}$/);
  expect(long.notes.map(({ code }) => code)).toEqual(["comments-cut"]);
});

test("Fortran exponents and one trailing comma or semicolon a line are read with a note", () => {
  const fortran = parseTouchstone(SOUND.replace("1e9", "1.0D+09").replace("2e9", "2d9"));
  expect([...fortran.frequency]).toEqual([1e9, 2e9, 3e9]);
  expect(fortran.notes).toMatchObject([{ code: "fortran-exponent", line: 2 }]);
  expect(fortran.notes[0]?.message).toMatch(/^2 numbers/);
  const separated = parseTouchstone(SOUND.split("\n").join(" ;\n"));
  expect(separated.s11).toEqual(parseTouchstone(SOUND).s11);
  expect(separated.notes).toMatchObject([{ code: "trailing-separator", line: 1 }]);
  expectRefusal(SOUND.replace("\n2e9", ",,\n2e9"), "bad-number", 2);
});

test("limits: points, and bytes", () => {
  expect(() => parseTouchstone(SOUND, "part.s2p", { maxPoints: 2 })).toThrow(/More than 2 points/);
  expect(parseTouchstone(SOUND, "part.s2p", { maxPoints: 3 }).frequency).toHaveLength(3);
  expectRefusal(new Uint8Array(64 * 1024 * 1024 + 1), "too-large", 1);
});

test("the input is not changed, and what is returned does not share its memory", () => {
  const bytes = new TextEncoder().encode(SOUND);
  const before = bytes.slice();
  const network = parseTouchstone(bytes);
  expect(bytes).toEqual(before);
  expect(network.frequency.buffer).not.toBe(bytes.buffer);
});
