// Version 2.0 and 2.1 files: keywords in their order, sets read by count, noise data skipped.

import { TouchstoneError } from "./touchstone-error.ts";
import { choiceArgument, countArgument, noArgument, parseKeywordLine, soleArgument } from "./touchstone-keywords.ts";
import type { Keyword, KeywordLine } from "./touchstone-keywords.ts";
import type { LineCursor } from "./touchstone-lines.ts";
import { DEFAULT_OPTIONS, parseOptionLine, parseReference, type Options } from "./touchstone-option-line.ts";
import { SetStore } from "./touchstone-sets.ts";
import type { Body } from "./touchstone-version1.ts";

const HASH = 35;
const BRACKET = 91;
const NOISE_SIZE = 5;

export interface Body2 extends Body {
  readonly version: "2.0" | "2.1";
  readonly order: "21_12" | "12_21";
  /** Lower or upper: N11 N21 N22 and N12 = N21. */
  readonly symmetric: boolean;
  /** Ohm, from [Reference]; replaces R. */
  readonly references?: readonly [number, number];
}

type Place = "header" | "information" | "reference" | "network" | "noise" | "end";

/** Reads a file that begins with [Version] to its end. */
export function readVersion2(cursor: LineCursor, maxPoints: number): Body2 {
  return new Version2Reader(cursor, maxPoints).read();
}

class Version2Reader {
  private readonly cursor: LineCursor;
  private readonly maxPoints: number;
  private readonly seen = new Set<Keyword>();
  private place: Place = "header";
  private version: Body2["version"] = "2.0";
  private options: Options | undefined;
  private order: Body2["order"] = "21_12";
  private symmetric = false;
  private frequencies = 0;
  private noiseFrequencies = 0;
  private readonly references: number[] = [];
  private sets: SetStore;
  private filled = 0;
  private setLine = 0;
  private noiseRows = 0;
  private readonly noiseRow = new Float64Array(NOISE_SIZE + 1);

  constructor(cursor: LineCursor, maxPoints: number) {
    this.cursor = cursor;
    this.maxPoints = maxPoints;
    this.sets = new SetStore(cursor, 9, DEFAULT_OPTIONS, maxPoints);
  }

  read(): Body2 {
    const { cursor } = this;
    for (let byte = cursor.nextContent(); byte !== undefined; byte = cursor.nextContent()) {
      if (this.place === "information") this.readInformationLine(byte);
      else if (this.place === "end") throw this.afterEnd();
      else if (byte === HASH) this.readOptionLine();
      else if (byte === BRACKET) this.readKeyword();
      else this.readDataLine();
    }
    return this.finish();
  }

  private readOptionLine(): void {
    const { cursor } = this;
    if (this.options) {
      cursor.skipLine(); // further option lines mean nothing, wherever they stand
      return;
    }
    const { line } = cursor;
    cursor.at += 1;
    const options = parseOptionLine(cursor.takeWords(), line);
    if (options.references.length === 2) {
      const message = "R has two values. In version 2 state R once and the ports' own values with [Reference].";
      throw cursor.fail("reference-impedance", message, line);
    }
    this.options = options;
  }

  private readInformationLine(byte: number): void {
    if (byte === BRACKET && /^\[end[ -]information\]/i.test(this.cursor.peekText(17))) this.place = "header";
    this.cursor.skipLine();
  }

  private readKeyword(): void {
    const { cursor } = this;
    const { line, indented } = cursor;
    const keywordLine = parseKeywordLine(cursor.takeWords().join(" "), line);
    if (indented) cursor.notes.add("keyword-indented", line);
    const { keyword, written } = keywordLine;
    if (this.seen.has(keyword) && keyword !== "begin information") {
      throw cursor.fail("keyword-repeated", `${written} stands twice. Keep one.`, line);
    }
    this.checkOrder(keywordLine);
    this.seen.add(keyword);
    this.leave(line);
    this.apply(keywordLine);
  }

  /** [Version], option line, [Number of Ports], then the header in any order, then the data (Touchstone 2.1, p. 5). */
  private checkOrder({ keyword, written, line }: KeywordLine): void {
    const fail = (message: string) => this.cursor.fail("keyword-order", `${written} ${message}`, line);
    if (keyword === "version") return;
    if (!this.options) {
      this.cursor.notes.add("default-option-line", line);
      this.options = DEFAULT_OPTIONS;
    }
    if (keyword !== "number of ports" && !this.seen.has("number of ports")) {
      const message = `[Number of Ports] is missing before ${written}. Write "[Number of Ports] 2" after the option line.`;
      throw this.cursor.fail("keyword-missing", message, line);
    }
    const inData = this.seen.has("network data");
    const data = keyword === "noise data" || keyword === "end";
    if (inData && !data) throw fail("stands after [Network Data]. Move it above.");
    if (!inData && data) throw fail("stands before [Network Data]. Move it below.");
    if (keyword === "end information") throw fail("has no [Begin Information] before it. Take it out.");
  }

  /** Ends what the lines before the keyword belong to. */
  private leave(line: number): void {
    if (this.place === "reference" && this.references.length !== 2) throw this.referenceCount(line);
    if (this.place === "network") this.endNetwork(line);
    if (this.place === "noise") this.endNoise(line);
    if (this.place !== "end") this.place = "header";
  }

  private apply(keywordLine: KeywordLine): void {
    const { keyword } = keywordLine;
    if (keyword === "version") this.version = parseVersion(keywordLine);
    else if (keyword === "number of ports") this.checkPorts(keywordLine);
    else if (keyword === "two port data order") this.order = choiceArgument(keywordLine, ["21_12", "12_21"]);
    else if (keyword === "number of frequencies") this.frequencies = countArgument(keywordLine);
    else if (keyword === "number of noise frequencies") this.noiseFrequencies = countArgument(keywordLine);
    else if (keyword === "matrix format")
      this.symmetric = choiceArgument(keywordLine, ["full", "lower", "upper"]) !== "full";
    else if (keyword === "reference") this.beginReference(keywordLine);
    else if (keyword === "mixed mode order") throw this.mixedMode(keywordLine.line);
    else this.enter(keywordLine);
  }

  private enter(keywordLine: KeywordLine): void {
    const { keyword, line } = keywordLine;
    noArgument(keywordLine);
    if (keyword === "begin information") this.place = "information";
    else if (keyword === "network data") this.beginNetwork(line);
    else if (keyword === "noise data") this.beginNoise(line);
    else if (keyword === "end") this.place = "end";
  }

  private checkPorts(keywordLine: KeywordLine): void {
    const ports = countArgument(keywordLine);
    if (ports === 2) return;
    throw this.cursor.fail("not-two-port", `[Number of Ports] is ${ports}. Export a two-port file.`, keywordLine.line);
  }

  private beginReference({ words, line }: KeywordLine): void {
    this.place = "reference";
    this.addReferences(words, line);
  }

  private addReferences(words: readonly string[], line: number): void {
    for (const word of words) this.references.push(parseReference(word, line));
    if (this.references.length > 2) throw this.referenceCount(line);
  }

  private beginNetwork(line: number): void {
    if (this.frequencies === 0) {
      throw this.cursor.fail(
        "keyword-missing",
        "[Number of Frequencies] is missing. Write it before [Network Data].",
        line,
      );
    }
    if (!this.seen.has("two port data order")) this.cursor.notes.add("default-data-order", line);
    const options = this.options ?? DEFAULT_OPTIONS;
    this.sets = new SetStore(this.cursor, this.symmetric ? 7 : 9, options, this.maxPoints);
    this.place = "network";
  }

  private beginNoise(line: number): void {
    if (this.noiseFrequencies === 0) this.cursor.notes.add("noise-count-missing", line);
    this.place = "noise";
  }

  private readDataLine(): void {
    if (this.place === "network") this.readSetLine();
    else if (this.place === "noise") this.readNoiseLine();
    else if (this.place === "reference") {
      const { line } = this.cursor;
      this.addReferences(this.cursor.takeWords(), line);
    } else {
      const found = this.cursor.peekText(24);
      throw this.cursor.fail(
        "keyword-missing",
        `"${found}" stands before [Network Data]. Write that keyword above the data.`,
      );
    }
  }

  /** A set may go over any number of lines, but begins on its own (Touchstone 2.1, p. 14). */
  private readSetLine(): void {
    const { cursor, sets, filled } = this;
    if (filled === 0 && sets.takePlain()) return;
    const { line } = cursor;
    const size = this.symmetric ? 7 : 9;
    const room = size - filled;
    const shift = filled === 0 ? (this.options ?? DEFAULT_OPTIONS).frequencyExponent : 0;
    const count = cursor.readNumbers(sets.set, filled, room, shift);
    if (filled === 0) this.setLine = line;
    if (count > room) {
      const message = `${filled + count} numbers where a set has ${size}. Start each frequency on its own line.`;
      throw cursor.fail("set-layout", message, line);
    }
    this.filled = (filled + count) % size;
    if (this.filled === 0) sets.finish(this.setLine);
  }

  private readNoiseLine(): void {
    const { line } = this.cursor;
    const count = this.cursor.readNumbers(this.noiseRow, 0, NOISE_SIZE, 0);
    if (count !== NOISE_SIZE) {
      throw this.cursor.fail("noise-layout", `${count} numbers in a row of noise data. Write five a line.`, line);
    }
    this.noiseRows += 1;
    this.cursor.notes.add("noise-data-skipped", line);
  }

  private endNetwork(line: number): void {
    const size = this.symmetric ? 7 : 9;
    if (this.filled > 0) {
      const message = `${this.filled} numbers where a set has ${size}: it is cut short. Export the file again.`;
      throw this.cursor.fail("set-incomplete", message, this.setLine);
    }
    if (this.sets.written !== this.frequencies) {
      const message = `${this.sets.written} frequencies, but [Number of Frequencies] is ${this.frequencies}. Export the file again.`;
      throw this.cursor.fail("frequency-count", message, line);
    }
  }

  private endNoise(line: number): void {
    if (this.noiseFrequencies > 0 && this.noiseRows !== this.noiseFrequencies) throw this.noiseCount(line);
  }

  private finish(): Body2 {
    const { cursor } = this;
    const line = Math.max(1, cursor.line - 1);
    if (this.place === "information") {
      throw cursor.fail(
        "information-open",
        "[Begin Information] has no [End Information]. Write it where the block ends.",
        line,
      );
    }
    if (!this.seen.has("network data")) {
      throw cursor.fail("no-data", "No [Network Data]. Export the file again with its data.", line);
    }
    if (this.place !== "end") {
      this.leave(line);
      cursor.notes.add("missing-end", line);
    }
    if (this.noiseFrequencies > 0 && !this.seen.has("noise data")) throw this.noiseCount(line);
    const [first, second] = this.references;
    return {
      version: this.version,
      options: this.options ?? DEFAULT_OPTIONS,
      order: this.order,
      symmetric: this.symmetric,
      sets: this.sets,
      ...(first !== undefined && second !== undefined && { references: [first, second] as const }),
    };
  }

  private noiseCount(line: number): TouchstoneError {
    const message = `${this.noiseRows} rows of noise data, but [Number of Noise Frequencies] is ${this.noiseFrequencies}. Export the file again.`;
    return this.cursor.fail("noise-count", message, line);
  }

  private referenceCount(line: number): TouchstoneError {
    const { length } = this.references;
    return this.cursor.fail(
      "reference-impedance",
      `[Reference] has ${length} of 2 values. State one a port, in ohm.`,
      line,
    );
  }

  private mixedMode(line: number): TouchstoneError {
    const message = "[Mixed-Mode Order]: mixed-mode data. Export single-ended S-parameters.";
    return this.cursor.fail("mixed-mode", message, line);
  }

  private afterEnd(): TouchstoneError {
    const found = this.cursor.peekText(24);
    return this.cursor.fail("after-end", `"${found}" stands after [End]. Take it out or make it a comment.`);
  }
}

function parseVersion(keywordLine: KeywordLine): Body2["version"] {
  const version = soleArgument(keywordLine, "2.0 or 2.1");
  if (version === "2.0" || version === "2.1") return version;
  const message = `[Version] ${version.slice(0, 16)} is not known. Export the file as version 1.1, 2.0 or 2.1.`;
  throw new TouchstoneError("unknown-version", keywordLine.line, message);
}
