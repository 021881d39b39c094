// Written files read back to the same numbers, in our reader and in scikit-rf.
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import fc from "fast-check";
import { expect, test } from "vitest";
import { formatTouchstone } from "~/rf/format-touchstone";
import { parseTouchstone } from "~/rf/touchstone";
import { expectMatrix, matricesOf, twoPortOf, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";

// Sizes whose sum does not overflow: the reader refuses a level beyond what a double holds.
const level = fc.double({ min: -1e300, max: 1e300, noNaN: true });
const element = fc.record({ re: level, im: level });
const matrix = fc.tuple(fc.tuple(element, element), fc.tuple(element, element));
const frequencies = fc
  .uniqueArray(fc.double({ min: 0, max: 1e15, noNaN: true }), {
    minLength: 1,
    maxLength: 12,
    comparator: "SameValueZero",
  })
  .map((list) => list.map((hz) => hz + 0).sort((one, other) => one - other));
const ohm = fc.double({ min: 1e-3, max: 1e6, noNaN: true });

test("what is written reads back to the very same numbers, the sign of zero too", () => {
  const networks = frequencies.chain((grid) =>
    fc.record({
      grid: fc.constant(grid),
      s: fc.array(matrix, { minLength: grid.length, maxLength: grid.length }),
      references: fc.tuple(ohm, ohm),
    }),
  );
  fc.assert(
    fc.property(networks, ({ grid, s, references }) => {
      const network = twoPortOf(grid, s, references, ["unit 12", "25 °C"]);
      expect(parseTouchstone(formatTouchstone(network))).toEqual(network);
    }),
  );
});

test("scikit-rf reads a written file to the same numbers", () => {
  const s: MatrixSeries = [
    [
      [
        { re: 0.1, im: -0.2 },
        { re: 1 / 3, im: 0 },
      ],
      [
        { re: -0.7, im: 1e-9 },
        { re: 0, im: 2 / 7 },
      ],
    ],
    [
      [
        { re: 0.3, im: 0.4 },
        { re: 0.5, im: 0.6 },
      ],
      [
        { re: 1e-20, im: 0.8 },
        { re: -0.9, im: 0.01 },
      ],
    ],
  ];
  const network = twoPortOf([1.1e9, 2.2e9 + 1 / 3], s, [37.5, 37.5]);
  const folder = mkdtempSync(path.join(tmpdir(), "touchstone-"));
  try {
    const file = path.join(folder, "written.s2p");
    writeFileSync(file, formatTouchstone(network));
    const read = runPython("read_touchstone.py", [file]) as { f_hz: number[]; s: MatrixSeries; z0: { re: number }[][] };
    expect(read.f_hz).toEqual([...network.frequency]);
    expectMatrix(network, read.s, 0);
    expect(read.z0[0]?.map(({ re }) => re)).toEqual([37.5, 37.5]);
    expect(read.s).toEqual(matricesOf(network));
  } finally {
    rmSync(folder, { recursive: true });
  }
});

test("a written file is version 1.1 in Hz, with both references last when they differ", () => {
  const network = twoPortOf(
    [1e9],
    [
      [
        [
          { re: 0, im: 0 },
          { re: 0.5, im: 0 },
        ],
        [
          { re: 1, im: 0 },
          { re: 0, im: -0 },
        ],
      ],
    ],
    [50, 75],
    ["two\nlines"],
  );
  expect(formatTouchstone(network)).toBe("! two lines\n# Hz S RI R 50 75\n1000000000 0 0 1 0 0.5 0 0 -0\n");
});

test("a number that is not finite is not written", () => {
  fc.assert(
    fc.property(fc.constantFrom(NaN, Infinity, -Infinity), matrix, (bad, [, below]) => {
      const network = twoPortOf(
        [1e9],
        [
          [
            [
              { re: bad, im: 0 },
              { re: 0, im: 0 },
            ],
            below,
          ],
        ],
      );
      expect(() => formatTouchstone(network)).toThrow(RangeError);
    }),
    { numRuns: 10 },
  );
});
