// Touchstone files that went wrong: the examples with bytes flipped, cut and spliced, the same in every run of a seed.
import { readFileSync, readdirSync } from "node:fs";
import path from "node:path";
import { checkNetwork } from "~/rf/check-network";
import type { Requirement, Result, Setup, Trace, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { formatTouchstone } from "~/rf/format-touchstone";
import { parseTouchstone } from "~/rf/touchstone";
import { TouchstoneError } from "~/rf/touchstone-error";

const FOLDER = path.resolve("tests/reference/touchstone");

export interface Examples {
  readonly all: readonly Uint8Array[];
  /** Those that are read as they stand. */
  readonly sound: readonly Uint8Array[];
}

/** Every Touchstone example. */
export function touchstoneExamples(): Examples {
  const names = readdirSync(FOLDER).filter((name) => name !== "expected.json");
  const all = names.sort().map((name) => Uint8Array.from(readFileSync(path.join(FOLDER, name))));
  return { all, sound: all.filter((bytes) => judge(bytes).outcome === "read") };
}

/** Whole numbers from 0 up to but not including `below` (Park and Miller, Communications of the ACM 31, 1988). */
export type Chance = (below: number) => number;

export function chanceOf(seed: number): Chance {
  let state = (Math.abs(Math.trunc(seed)) % 2147483646) + 1;
  return (below) => {
    state = (state * 48271) % 2147483647;
    return Math.floor((state / 2147483647) * below);
  };
}

/** Pieces that have a meaning somewhere in a file. */
const PIECES = [
  ..."#![]\n\r\t,;-+eD.0\0é".split(""),
  "1e309",
  "NaN",
  "inf",
  "R 50 75",
  "# GHz S DB R 50\n",
  "[Version] 2.0\n",
  "[End]\n",
  "[Reference] 50\n",
  "[Network Data]\n",
  "[Begin Information]\n",
  "[Noise Data]\n",
].map((text) => new TextEncoder().encode(text));
const DIGIT_ZERO = 48;
const isDigit = (byte: number | undefined) => byte !== undefined && byte >= DIGIT_ZERO && byte <= DIGIT_ZERO + 9;

/** Replaces `removed` bytes at `at`. */
function replaced(bytes: Uint8Array, at: number, removed: number, inserted: Uint8Array): Uint8Array {
  const result = new Uint8Array(at + inserted.length + Math.max(0, bytes.length - at - removed));
  result.set(bytes.subarray(0, at));
  result.set(inserted, at);
  result.set(bytes.subarray(at + removed), at + inserted.length);
  return result;
}

type Mutation = (bytes: Uint8Array, chance: Chance, examples: readonly Uint8Array[]) => Uint8Array;

const flipBit: Mutation = (bytes, chance) => {
  const at = chance(bytes.length);
  return replaced(bytes, at, 1, Uint8Array.of((bytes[at] ?? 0) ^ (1 << chance(8))));
};
const anyByte: Mutation = (bytes, chance) => replaced(bytes, chance(bytes.length), 1, Uint8Array.of(chance(256)));
/** A digit for a digit, which keeps most numbers numbers. */
const otherDigit: Mutation = (bytes, chance) => {
  let at = chance(bytes.length);
  for (let tries = 0; tries < 20 && !isDigit(bytes[at]); tries += 1) at = chance(bytes.length);
  return replaced(bytes, at, 1, Uint8Array.of(DIGIT_ZERO + chance(10)));
};
/** Behind a digit: numbers too large and too small to square, to turn from decibels, or to write at all. */
const exponent: Mutation = (bytes, chance) => {
  let at = chance(bytes.length);
  for (let tries = 0; tries < 20 && !isDigit(bytes[at]); tries += 1) at = chance(bytes.length);
  const text = `e${chance(2) === 0 ? "-" : ""}${chance(4) === 0 ? chance(400) : chance(10)}`;
  return replaced(bytes, at + 1, 0, new TextEncoder().encode(text));
};
const cutOut: Mutation = (bytes, chance) =>
  replaced(bytes, chance(bytes.length), 1 + chance(chance(4) === 0 ? 200 : 3), new Uint8Array());
const cutEnd: Mutation = (bytes, chance) => bytes.slice(0, chance(bytes.length) + 1);
const insertPiece: Mutation = (bytes, chance) =>
  replaced(bytes, chance(bytes.length + 1), chance(2), PIECES[chance(PIECES.length)] ?? new Uint8Array());
/** A stretch of another example in place of a stretch of this one. */
const splice: Mutation = (bytes, chance, examples) => {
  const donor = examples[chance(examples.length)] ?? bytes;
  const from = chance(donor.length);
  return replaced(bytes, chance(bytes.length), chance(80), donor.subarray(from, from + chance(80)));
};
/** A whole line of this or another example, put between two lines. */
const spliceLine: Mutation = (bytes, chance, examples) => {
  const donor = chance(2) === 0 ? bytes : (examples[chance(examples.length)] ?? bytes);
  const from = lineStart(donor, chance(donor.length));
  const end = donor.indexOf(10, from);
  return replaced(
    bytes,
    lineStart(bytes, chance(bytes.length)),
    0,
    donor.subarray(from, end < 0 ? undefined : end + 1),
  );
};
const lineStart = (bytes: Uint8Array, near: number) => bytes.lastIndexOf(10, near) + 1;

const MUTATIONS = [
  ...[otherDigit, otherDigit, otherDigit, otherDigit],
  ...[exponent, flipBit, anyByte, cutOut, cutEnd, insertPiece, splice, spliceLine],
];

/** One to three mutations of an example; mostly of one that is read, which is where there is most to break. */
export function mutant({ all, sound }: Examples, chance: Chance): Uint8Array {
  const origins = chance(4) === 0 ? all : sound;
  let bytes = origins[chance(origins.length)] ?? new Uint8Array();
  for (let count = 1 + chance(3); count > 0 && bytes.length > 0; count -= 1) {
    bytes = MUTATIONS[chance(MUTATIONS.length)]?.(bytes, chance, all) ?? bytes;
  }
  return bytes;
}

/**
 * Reads a file that may be wrong; one that is read is written, read back, checked and scored too.
 *
 * @returns "read", "refused", or what is wrong with the reader's answer
 */
export function judge(bytes: Uint8Array): { readonly outcome: "read" | "refused" | "wrong"; readonly fault?: string } {
  try {
    const network = parseTouchstone(bytes);
    const fault = faultOf(network) ?? faultOfFigures(network);
    return fault === undefined ? { outcome: "read" } : { outcome: "wrong", fault };
  } catch (error) {
    if (!(error instanceof TouchstoneError)) {
      return { outcome: "wrong", fault: error instanceof Error ? (error.stack ?? error.message) : String(error) };
    }
    const lines = 1 + bytes.reduce((count, byte) => count + Number(byte === 10 || byte === 13), 0);
    const isPlace = error.line >= 1 && error.line <= lines;
    return isPlace ? { outcome: "refused" } : { outcome: "wrong", fault: `line ${error.line} of ${lines}` };
  }
}

/** What must hold of every network read: finite numbers, as many in each series, frequencies that ascend. */
function faultOf({ frequency, s11, s21, s12, s22, referenceImpedance, notes }: TwoPort): string | undefined {
  if (frequency.length === 0) return "no point";
  for (let k = 0; k < frequency.length; k += 1) {
    const hz = frequency[k] as number;
    if (!(hz >= 0 && hz < Infinity)) return `frequency ${hz}`;
    if (k > 0 && !(hz > (frequency[k - 1] as number))) return `frequency ${hz} after ${frequency[k - 1]}`;
  }
  for (const { re, im } of [s11, s21, s12, s22]) {
    if (re.length !== frequency.length || im.length !== frequency.length) return "a series of another length";
    if (!re.every(Number.isFinite) || !im.every(Number.isFinite)) return "a number that is not finite";
  }
  if (!referenceImpedance.every((ohm) => ohm > 0 && ohm < Infinity)) return `references ${referenceImpedance.join()}`;
  if (new Set(notes.map(({ code }) => code)).size !== notes.length) return "a note twice";
  return undefined;
}

/** What must hold of what is made of a network: the same numbers when written, notes, no figure that is NaN. */
function faultOfFigures(network: TwoPort): string | undefined {
  const back = parseTouchstone(formatTouchstone(network));
  const series = ({ frequency, s11, s21, s12, s22 }: TwoPort) => [frequency, ...[s11, s21, s12, s22].flatMap(both)];
  const both = ({ re, im }: Trace) => [re, im];
  const isSame = series(network).every((numbers, at) => numbers.every((x, k) => Object.is(x, series(back)[at]?.[k])));
  if (!isSame) return "other numbers when written and read";

  const band = [network.frequency[0] ?? 0, network.frequency.at(-1) ?? 0] as const;
  const requirements = band[1] > 0 ? everyKindOver(band) : [];
  checkNetwork(network);
  checkNetwork(network, { requirements, setup: SETUP, impedance: [50, 75] });
  for (const impedance of [network.referenceImpedance, [37, 91]] as const) {
    for (const setup of [{}, SETUP]) {
      const results = evaluate(network, requirements, { impedance, setup });
      const wrong = results.find(({ verdict, ...figures }) => verdict !== "not-covered" && hasNaN(figures));
      if (wrong !== undefined) return `NaN in ${JSON.stringify(wrong)}`;
    }
  }
  return undefined;
}

const SETUP: Setup = {
  transmission: 0.1,
  noiseFloor: 90,
  directivity: 36,
  sourceMatch: 32,
  loadMatch: 36,
  tracking: 0.1,
};

function everyKindOver(band: readonly [number, number]): Requirement[] {
  const [id, max] = ["1", 1];
  return [
    { id, kind: "insertion-loss", band, max },
    { id, kind: "ripple", band, max },
    { id, kind: "rejection", band, min: 3, relativeTo: band },
    { id, kind: "return-loss", port: 1, band, min: 10 },
    { id, kind: "reverse-isolation", band, min: 10 },
    { id, kind: "group-delay", band, max },
    { id, kind: "group-delay-variation", band, max },
    { id, kind: "phase-linearity", band, max },
    { id, kind: "centre-frequency", level: 3, nominal: 1e9, tolerance: 1e9 },
    { id, kind: "bandwidth", level: 3, max: 1e9 },
    { id, kind: "shape-factor", levels: [1, 2], max: 3 },
  ];
}

function hasNaN({ value, frequency, limit, margin, interval, marginInterval, decidingFrequency }: Figures): boolean {
  const figures = [value, frequency, limit, margin, ...interval, ...marginInterval, decidingFrequency];
  return figures.some((figure) => Number.isNaN(figure));
}
type Figures = Omit<Result, "verdict">;

/** Names a mutant in a report so that it can be read again. */
export const inBase64 = (bytes: Uint8Array) => Buffer.from(bytes).toString("base64");
