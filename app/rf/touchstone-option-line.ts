// The option line: "# <unit> <parameter> <format> R <ohm>", in any order and case, each part with a default.

import { TouchstoneError, type TouchstoneErrorCode } from "./touchstone-error.ts";

export type Parameter = "S" | "Y" | "Z" | "G" | "H";
export type NumberFormat = "DB" | "MA" | "RI";

export interface Options {
  /** Power of ten from the file's frequency unit to Hz. */
  readonly frequencyExponent: number;
  readonly parameter: Parameter;
  readonly format: NumberFormat;
  /** Ohm: one value for both ports, or one a port. */
  readonly references: readonly [number] | readonly [number, number];
}

export const DEFAULT_OPTIONS: Options = { frequencyExponent: 9, parameter: "S", format: "MA", references: [50] };

const FREQUENCY_EXPONENTS = new Map([
  ["HZ", 0],
  ["KHZ", 3],
  ["MHZ", 6],
  ["GHZ", 9],
]);
const PARAMETERS: readonly string[] = ["S", "Y", "Z", "G", "H"];
const FORMATS: readonly string[] = ["DB", "MA", "RI"];
const DECIMAL = /^[+-]?(\d+\.?\d*|\.\d+)([ED][+-]?\d+)?$/i;

const isParameter = (word: string): word is Parameter => PARAMETERS.includes(word);
const isFormat = (word: string): word is NumberFormat => FORMATS.includes(word);

/**
 * @param words of the line after "#"
 * @throws TouchstoneError option-token, option-repeated, reference-impedance, not-two-port
 */
export function parseOptionLine(words: readonly string[], line: number): Options {
  const found: { -readonly [Key in keyof Options]?: Options[Key] } = {};
  const set = <Key extends keyof Options>(key: Key, value: Options[Key], word: string) => {
    if (found[key] !== undefined) {
      throw new TouchstoneError(
        "option-repeated",
        line,
        `"${word}" is a second value of its kind. Keep one on the option line.`,
      );
    }
    found[key] = value;
  };
  for (let at = 0; at < words.length; at += 1) {
    const word = words[at] ?? "";
    const upper = word.toUpperCase();
    const exponent = FREQUENCY_EXPONENTS.get(upper);
    if (exponent !== undefined) set("frequencyExponent", exponent, word);
    else if (isParameter(upper)) set("parameter", upper, word);
    else if (isFormat(upper)) set("format", upper, word);
    else if (upper === "R") {
      const values = referencesAfter(words, at, line);
      set("references", values, word);
      at += values.length;
    } else throw unknownToken(word, line);
  }
  return { ...DEFAULT_OPTIONS, ...found };
}

/** Reads one reference impedance. @throws TouchstoneError reference-impedance */
export function parseReference(word: string, line: number): number {
  const fail = (message: string, code: TouchstoneErrorCode = "reference-impedance") =>
    new TouchstoneError(code, line, message);
  if (/^[(]|j/i.test(word))
    throw fail(`The reference "${word}" is complex. Renormalise to a real impedance and export again.`);
  if (!DECIMAL.test(word)) throw fail(`The reference "${word}" is not a number. State it in ohm.`);
  const ohm = Number(word.replace(/d/i, "e"));
  if (!(ohm > 0) || ohm === Infinity)
    throw fail(`The reference impedance is ${word} ohm. It must be a positive number.`);
  return ohm;
}

function referencesAfter(words: readonly string[], at: number, line: number): [number] | [number, number] {
  const fail = (code: TouchstoneErrorCode, message: string) => new TouchstoneError(code, line, message);
  const first = words[at + 1];
  if (first === undefined) throw fail("reference-impedance", "R has no value. State it in ohm, for example R 50.");
  const references: [number] = [parseReference(first, line)];
  const second = words[at + 2];
  if (second === undefined || !DECIMAL.test(second)) return references;
  const third = words[at + 3];
  if (third !== undefined && DECIMAL.test(third)) {
    throw fail("not-two-port", "R has more than two values: this file is no two-port. Export a two-port file.");
  }
  if (third !== undefined) {
    throw fail("reference-impedance", `R has one value a port but "${third}" follows. Put R with its two values last.`);
  }
  return [references[0], parseReference(second, line)];
}

function unknownToken(word: string, line: number): TouchstoneError {
  const message = `"${word.slice(0, 24)}" is not known on the option line. Use Hz, kHz, MHz or GHz; S, Y, Z, G or H; DB, MA or RI; R and ohm.`;
  return new TouchstoneError("option-token", line, message);
}
