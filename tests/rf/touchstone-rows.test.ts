// The quick way through plain rows: every number the very double that Number gives, every angle as Math.cos and Math.sin have it.
import { expect, test } from "vitest";
import { parseTouchstone, type Trace, type TwoPort } from "~/rf/index";

/** Lehmer's generator with Park and Miller's constants (Communications of the ACM 31, 1988): the same numbers each run. */
function randomNumbers(seed: number): () => number {
  let state = seed;
  return () => (state = (state * 16_807) % 2_147_483_647) / 2_147_483_647;
}

/** A number as instruments write it: digits before and after the point, sometimes a sign or an exponent. */
function writtenNumber(random: () => number): string {
  const decimals = Math.floor(random() * 17);
  const size = 10 ** Math.floor(random() * 5);
  const exponent = random() < 0.15 ? `e${Math.floor(random() * 40) - 30}` : "";
  return `${random() < 0.5 ? "-" : ""}${(random() * size).toFixed(decimals)}${exponent}`;
}

const rows = (count: number, random: () => number, write: (random: () => number) => string): string[][] =>
  Array.from({ length: count }, () => Array.from({ length: 8 }, () => write(random)));

const fileOf = (format: "RI" | "MA", data: readonly string[][]): TwoPort =>
  parseTouchstone(`# Hz S ${format} R 50\n${data.map((row, k) => `${k + 1} ${row.join(" ")}`).join("\n")}\n`);

/** Columns in the order version 1 writes them. */
const columns = ({ s11, s21, s12, s22 }: TwoPort): readonly Trace[] => [s11, s21, s12, s22];

test("40,000 written numbers come out as the very doubles Number gives, in plain rows and between unusual ones", () => {
  const data = rows(5_000, randomNumbers(20_261_201), writtenNumber);
  const network = fileOf("RI", data);
  let compared = 0;
  columns(network).forEach((trace, column) =>
    data.forEach((row, k) => {
      if (!Object.is(trace.re[k], Number(row[2 * column])))
        throw new Error(`${row[2 * column]} read as ${trace.re[k]}`);
      if (!Object.is(trace.im[k], Number(row[2 * column + 1])))
        throw new Error(`${row[2 * column + 1]} read as ${trace.im[k]}`);
      compared += 2;
    }),
  );
  expect(compared).toBe(40_000);
});

test("magnitude and angle give real and imaginary part to 2e-15 of the magnitude", () => {
  const random = randomNumbers(7);
  const data = rows(5_000, random, (next) => (next() * 720 - 360).toFixed(6));
  const network = fileOf("MA", data);
  let largest = 0;
  columns(network).forEach((trace, column) =>
    data.forEach((row, k) => {
      const magnitude = Number(row[2 * column]);
      const angle = (Number(row[2 * column + 1]) * Math.PI) / 180;
      const scale = Math.abs(magnitude) || 1;
      largest = Math.max(
        largest,
        Math.abs((trace.re[k] ?? NaN) - magnitude * Math.cos(angle)) / scale,
        Math.abs((trace.im[k] ?? NaN) - magnitude * Math.sin(angle)) / scale,
      );
    }),
  );
  // Degrees to radians rounds twice on the way, up to 9e-16 at 360 degrees whichever order is taken.
  expect(largest).toBeLessThan(2e-15);
});
