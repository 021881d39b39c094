// Reads a two-port Touchstone file, version 1.0, 1.1, 2.0 or 2.1 (IBIS Open Forum), from its bytes.

import type { Trace, TwoPort } from "./contract.ts";
import { checkFinite, normalise, toScattering, type Matrix } from "./touchstone-convert.ts";
import { LineCursor } from "./touchstone-lines.ts";
import { ReaderNotes } from "./touchstone-notes.ts";
import { readSource } from "./touchstone-source.ts";
import { readVersion1, type Body } from "./touchstone-version1.ts";
import { readVersion2, type Body2 } from "./touchstone-version2.ts";

export const MAX_POINTS = 1_000_000;

const BRACKET = 91;

/**
 * Reads a two-port file. Data in Y, Z, G or H become S-parameters at the file's references.
 *
 * @param input the file's bytes (UTF-8, Latin-1 or UTF-16), or its text; at most 64 MiB
 * @param fileName used in messages only: the contents decide
 * @param options maxPoints: the most points read, 1,000,000 by default
 * @throws TouchstoneError with code, line, what was found and the remedy; never a partial result
 */
export function parseTouchstone(
  input: Uint8Array | string,
  fileName?: string,
  options: { maxPoints?: number } = {},
): TwoPort {
  const { maxPoints = MAX_POINTS } = options;
  const notes = new ReaderNotes();
  const cursor = new LineCursor(readSource(input, notes), notes);
  const body = readBody(cursor, maxPoints, portsInName(fileName));
  if (body.sets.count === 0) {
    throw cursor.fail("no-data", "The file has no data. Export it again.", Math.max(1, cursor.line - 1));
  }
  const references = referencesOf(body);
  const { frequency, pairs } = body.sets.series();
  const [s11, s21, s12, s22] = readMatrix(body, pairs, references);
  return {
    frequency,
    s11,
    s21,
    s12,
    s22,
    referenceImpedance: references,
    comments: cursor.comments,
    version: body.version,
    notes: notes.toNotes(),
  };
}

type AnyBody = (Body & { readonly version: "1" }) | Body2;

function readBody(cursor: LineCursor, maxPoints: number, portsByName: number | undefined): AnyBody {
  const first = cursor.nextContent();
  if (first === undefined) throw cursor.fail("no-data", "The file has only comments. Export it again.", 1);
  if (first === BRACKET && /^\[version\]/i.test(cursor.peekText(9))) return readVersion2(cursor, maxPoints);
  if (!/^[#[\d.+-]/.test(cursor.peekText(1))) {
    const found = cursor.peekText(24);
    const code = /[^\t\x20-\x7e\xa0-\xff]/.test(found) ? "not-text" : "not-touchstone";
    throw cursor.fail(code, `The file begins with "${printable(found)}": this is not Touchstone. Export an .s2p file.`);
  }
  return { ...readVersion1(cursor, maxPoints, portsByName), version: "1" };
}

const printable = (text: string) => text.replace(/[^\x20-\x7e\xa0-\xff]/g, "?");

function portsInName(fileName: string | undefined): number | undefined {
  const match = /\.s(\d+)p$/i.exec(fileName ?? "");
  return match ? Number(match[1]) : undefined;
}

function referencesOf(body: AnyBody): readonly [number, number] {
  if (body.version !== "1" && body.references) return body.references;
  const [first, second = first] = body.options.references;
  return [first, second];
}

function readMatrix(body: AnyBody, pairs: readonly Trace[], references: readonly [number, number]): Matrix {
  const { sets, options } = body;
  const lineOf = (index: number) => sets.lineOf(index);
  const matrix = orderPairs(body, pairs);
  // Finite as written, and no other format makes a number larger.
  if (options.format === "DB") checkFinite(matrix, lineOf);
  if (options.parameter === "S") return matrix;
  // Version 1 states Y, Z, G and H normalised to R, version 2 in ohm and siemens (Touchstone 2.1, pp. 8 and 29).
  if (body.version !== "1") normalise(matrix, options.parameter, references);
  toScattering(matrix, options.parameter, lineOf);
  checkFinite(matrix, lineOf);
  return matrix;
}

function orderPairs(body: AnyBody, pairs: readonly Trace[]): Matrix {
  const [first, second, third, fourth] = pairs as Matrix;
  if (body.version === "1") return [first, second, third, fourth];
  if (body.symmetric) return [first, second, copyOf(second), third];
  return body.order === "12_21" ? [first, third, second, fourth] : [first, second, third, fourth];
}

const copyOf = ({ re, im }: Trace): Trace => ({ re: re.slice(), im: im.slice() });
