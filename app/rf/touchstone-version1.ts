// Version 1.0 and 1.1 files: an option line, then sets of nine numbers that start and end at line ends, then perhaps noise.

import type { TouchstoneError } from "./touchstone-error.ts";
import type { LineCursor, LinePosition } from "./touchstone-lines.ts";
import { DEFAULT_OPTIONS, parseOptionLine, type Options } from "./touchstone-option-line.ts";
import { SetStore } from "./touchstone-sets.ts";

const HASH = 35;
const BRACKET = 91;
const SET_SIZE = 9;
const NOISE_SIZE = 5;

export interface Body {
  readonly options: Options;
  readonly sets: SetStore;
}

/**
 * Reads a keyword-less file to its end.
 *
 * A five-number row that falls back to or repeats the last frequency begins the noise data (Touchstone 2.1, p. 25),
 * unless an even row follows: then it is the first line of a set whose frequency is wrong.
 *
 * @param portsByName what the file's name says, for messages only
 */
export function readVersion1(cursor: LineCursor, maxPoints: number, portsByName: number | undefined): Body {
  return new Version1Reader(cursor, maxPoints, portsByName).read();
}

class Version1Reader {
  private readonly cursor: LineCursor;
  private readonly maxPoints: number;
  private sets: SetStore;
  private readonly portsByName: number | undefined;
  private options: Options | undefined;
  private assumedAt = 0;
  /** Numbers of the unfinished set, its first line, and whether it has only that one. */
  private filled = 0;
  private setLine = 0;
  private singleLine = false;
  private noiseRows = 0;
  private readonly noiseRow = new Float64Array(NOISE_SIZE + 1);

  constructor(cursor: LineCursor, maxPoints: number, portsByName: number | undefined) {
    this.cursor = cursor;
    this.maxPoints = maxPoints;
    this.sets = new SetStore(cursor, SET_SIZE, DEFAULT_OPTIONS, maxPoints);
    this.portsByName = portsByName;
  }

  read(): Body {
    const { cursor } = this;
    for (let byte = cursor.nextContent(); byte !== undefined; byte = cursor.nextContent()) {
      if (byte === HASH) this.readOptionLine();
      else if (byte === BRACKET) throw this.keyword();
      else if (this.noiseRows > 0) this.readNoiseLine();
      else this.readSetLine();
    }
    if (this.filled > 0) this.endUnfinished(0);
    return { options: this.options ?? DEFAULT_OPTIONS, sets: this.sets };
  }

  private readOptionLine(): void {
    const { cursor } = this;
    if (this.assumedAt > 0) {
      const message = `The option line stands after data (line ${this.assumedAt}). Move it above the first number.`;
      throw cursor.fail("option-line-late", message);
    }
    if (this.options) {
      cursor.skipLine(); // further option lines mean nothing, wherever they stand
      return;
    }
    const { line } = cursor;
    cursor.at += 1;
    const options = parseOptionLine(cursor.takeWords(), line);
    if (options.parameter !== "S" && options.references.length === 2) {
      const message = `${options.parameter}-parameters with two references have no defined normalisation. Export S-parameters.`;
      throw cursor.fail("reference-impedance", message, line);
    }
    this.options = options;
    this.sets = new SetStore(cursor, SET_SIZE, options, this.maxPoints);
  }

  private assumeOptions(): Options {
    this.assumedAt = this.cursor.line;
    this.cursor.notes.add("default-option-line", this.assumedAt);
    this.options = DEFAULT_OPTIONS;
    return this.options;
  }

  private readSetLine(): void {
    const { cursor, sets, filled } = this;
    const options = this.options ?? this.assumeOptions();
    if (filled === 0 && sets.takePlain()) {
      this.singleLine = true;
      return;
    }
    const start = cursor.position();
    const first = filled === 0;
    const room = SET_SIZE - filled;
    const count = cursor.readNumbers(sets.set, filled, room, first ? options.frequencyExponent : 0);
    if (first) {
      if (count > SET_SIZE || count % 2 === 0) throw this.badFirstLine(count, start.line);
      this.setLine = start.line;
    } else if (count % 2 === 1) {
      this.endUnfinished(count, start);
      return;
    } else if (count > room) {
      throw this.overfull(count, start.line);
    }
    this.singleLine = first;
    this.filled = (filled + count) % SET_SIZE;
    if (this.filled === 0) sets.finish(this.setLine);
  }

  /** An odd row, or the end of the file, after an unfinished set: noise data, or an error. */
  private endUnfinished(nextCount: number, next?: LinePosition): void {
    const { cursor, sets } = this;
    const frequency = sets.set[0] as number;
    const isNoise = this.filled === NOISE_SIZE && this.singleLine && frequency <= sets.lastFrequency();
    if (!isNoise) throw this.unfinished(nextCount, frequency);
    this.filled = 0;
    this.addNoiseRow(this.setLine);
    if (!next) return;
    cursor.returnTo(next);
    this.readNoiseLine();
  }

  private readNoiseLine(): void {
    const { cursor } = this;
    const { line } = cursor;
    const count = cursor.readNumbers(this.noiseRow, 0, NOISE_SIZE, 0);
    if (count !== NOISE_SIZE) {
      const message = `${numbers(count)} in the noise data, which has five a line. Network data must stand before it, in rising frequency.`;
      throw cursor.fail("noise-layout", message, line);
    }
    this.addNoiseRow(line);
  }

  private addNoiseRow(line: number): void {
    this.noiseRows += 1;
    this.cursor.notes.add("noise-data-skipped", line);
  }

  private keyword(): TouchstoneError {
    const [name = ""] = this.cursor.peekText(40).split("]");
    const message = `The keyword ${name}] stands in a file without [Version]. Begin with "[Version] 2.0", or leave keywords out.`;
    return this.cursor.fail("keyword-without-version", message);
  }

  private badFirstLine(count: number, line: number): TouchstoneError {
    const ports = new Map([
      [19, 3],
      [33, 4],
    ]).get(count);
    if (ports) return this.notTwoPort(`${numbers(count)} on a line, as ${ports}-port files have`, line);
    if (count === 8 && this.sets.count === 1)
      return this.notTwoPort("9 numbers and then 8, as 4-port files have", line);
    const message = `${numbers(count)} where a two-port set of 9 begins. Start each frequency on its own line.`;
    return this.cursor.fail("set-layout", message, line);
  }

  private overfull(count: number, line: number): TouchstoneError {
    if (this.filled === 7 && count === 6) return this.notTwoPort("7 numbers and then 6, as 3-port files have", line);
    const message = `${numbers(count)} after ${this.filled}: a two-port set has 9. Start each frequency on its own line.`;
    return this.cursor.fail("set-layout", message, line);
  }

  private unfinished(nextCount: number, frequency: number): TouchstoneError {
    const line = this.setLine;
    const found = `${numbers(this.filled)} where a two-port set has 9`;
    if (this.filled === 3 && this.singleLine && (nextCount === 3 || nextCount === 0)) {
      return this.notTwoPort(`${found}, as 1-port files have`, line);
    }
    if (this.filled === NOISE_SIZE && this.singleLine && this.sets.count > 0) {
      const message = `${found}, at ${frequency} Hz above the sweep, so not noise data. Complete the set or take the row out.`;
      return this.cursor.fail("set-incomplete", message, line);
    }
    const end =
      nextCount === 0
        ? "the file ends there: it is cut short. Export it again."
        : "then a new set begins. Complete it.";
    return this.cursor.fail("set-incomplete", `${found}; ${end}`, line);
  }

  private notTwoPort(found: string, line: number): TouchstoneError {
    const named = this.portsByName && this.portsByName !== 2 ? ` The name says .s${this.portsByName}p.` : "";
    return this.cursor.fail("not-two-port", `${found}.${named} Export the two-port as .s2p.`, line);
  }
}

const numbers = (count: number) => (count === 1 ? "1 number" : `${count} numbers`);
