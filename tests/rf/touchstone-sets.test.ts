// Sets are read in blocks of 512: nothing may be lost, repeated or misplaced where one block ends and the next begins.
import { expect, test } from "vitest";
import { parseTouchstone, TouchstoneError } from "~/rf/index";

const BLOCK = 512;

/** Sets whose numbers all tell their place; each `form` writes one as a line or several. */
function fileOf(points: number, form: (numbers: readonly number[], index: number) => string): string {
  const rows = Array.from({ length: points }, (_, index) =>
    form([index + 1, ...Array.from({ length: 8 }, (__, column) => index + column / 8)], index),
  );
  return `# Hz S RI R 50\n${rows.join("\n")}\n`;
}

const plain = (numbers: readonly number[]) => numbers.join(" ");
const wrapped = (numbers: readonly number[]) => `${numbers.slice(0, 3).join(" ")}\n${numbers.slice(3).join(" ")}`;
const commented = (numbers: readonly number[]) => `${numbers.join(" ")} ! measured`;
/** Lines that grow longer, so that the room first made is too little. */
const growing = (numbers: readonly number[], index: number) => numbers.join(" ".repeat(1 + (index >> 6)));
const shrinking = (numbers: readonly number[], index: number) =>
  numbers.join(" ".repeat(20 - Math.min(19, index >> 6)));

function faultOf(text: string, maxPoints?: number): Pick<TouchstoneError, "code" | "line"> {
  try {
    parseTouchstone(text, undefined, maxPoints === undefined ? {} : { maxPoints });
  } catch (error) {
    if (error instanceof TouchstoneError) return { code: error.code, line: error.line };
    throw error;
  }
  throw new Error("the file was read");
}

test.each([
  ["plain lines", plain],
  ["two lines a set", wrapped],
  ["lines with comments", commented],
  ["lines that grow longer", growing],
  ["lines that grow shorter", shrinking],
  ["plain and wrapped sets in turn", (numbers: readonly number[], k: number) => (k % 3 ? plain : wrapped)(numbers)],
])("every set stands in its place, in %s of 1 to 1,600 points", (_, form) => {
  for (const points of [1, 2, BLOCK - 1, BLOCK, BLOCK + 1, 2 * BLOCK, 1600]) {
    const { frequency, s11, s21, s12, s22 } = parseTouchstone(fileOf(points, form));
    const series = [s11.re, s11.im, s21.re, s21.im, s12.re, s12.im, s22.re, s22.im];
    expect(frequency).toEqual(Float64Array.from({ length: points }, (__, index) => index + 1));
    series.forEach((values, column) => {
      expect(values).toEqual(Float64Array.from({ length: points }, (__, index) => index + column / 8));
    });
  }
});

test("a repeated frequency is compared with the set before it, also where that one ends a block", () => {
  for (const points of [1, BLOCK - 1, BLOCK, BLOCK + 1, 2 * BLOCK]) {
    const lines = fileOf(points, plain).trimEnd().split("\n");
    const last = lines.at(-1) ?? "";
    const again = parseTouchstone([...lines, last, ""].join("\n"));
    expect(again.frequency).toHaveLength(points);
    expect(again.notes.map(({ code, line }) => ({ code, line }))).toEqual([
      { code: "repeated-frequency", line: points + 2 },
    ]);
    const other = last.replace(/\S+$/, "77");
    expect(faultOf([...lines, other, ""].join("\n"))).toEqual({ code: "frequency-repeated", line: points + 2 });
  }
});

test("a frequency that falls is refused at its line, also at the start of a block", () => {
  for (const points of [1, BLOCK, BLOCK + 1]) {
    const text = `${fileOf(points, plain)}0.5 1 0 1 0 1 0 1 0\n`;
    expect(faultOf(text)).toEqual({ code: "frequency-order", line: points + 2 });
  }
});

test("the most points are read, and one more is refused at its line", () => {
  for (const most of [1, BLOCK - 1, BLOCK, BLOCK + 1]) {
    expect(parseTouchstone(fileOf(most, plain), undefined, { maxPoints: most }).frequency).toHaveLength(most);
    expect(faultOf(fileOf(most + 1, plain), most)).toEqual({ code: "too-many-points", line: most + 2 });
    expect(faultOf(fileOf(most + 1, wrapped), most).code).toBe("too-many-points");
  }
});

test("a level too high for a double is refused at the line of its set, behind wrapped sets and comments", () => {
  const sets = Array.from({ length: BLOCK + 20 }, (_, k) => `${k + 1} 0 0 -3 0\n-3 0 0 0\n! set ${k}`);
  const text = ["# Hz S DB R 50", ...sets, "9999 0 0 7000 0 0 0 0 0", ""].join("\n");
  expect(faultOf(text)).toEqual({ code: "not-finite", line: 2 + 3 * (BLOCK + 20) });
});
