// A cursor over the lines of a Touchstone file: comments, line ends, header words and rows of numbers.

import { TouchstoneError, type TouchstoneErrorCode } from "./touchstone-error.ts";
import type { ReaderNotes } from "./touchstone-notes.ts";
import { NumberScanner, OUT_OF_RANGE } from "./touchstone-number.ts";
import { takeRows, type RowBlock, type RowSource } from "./touchstone-rows.ts";

const TAB = 9;
const NEWLINE = 10;
const RETURN = 13;
const SPACE = 32;
const COMMENT = 33;
const COMMA = 44;
const SEMICOLON = 59;
const MAX_COMMENTS = 1000;
const MAX_COMMENT_BYTES = 1000;
const QUOTED_BYTES = 24;

export class LineCursor {
  /** Position in the bytes. */
  at = 0;
  /** 1-based number of the line the cursor is on. */
  line = 1;
  readonly comments: string[] = [];
  readonly notes: ReaderNotes;
  private lineStart = 0;
  private readonly bytes: Uint8Array;
  private readonly numbers: NumberScanner;
  private readonly rows: RowSource;
  private readonly utf8 = new TextDecoder("utf-8", { fatal: true });
  private readonly latin1 = new TextDecoder("latin1");

  /** @param bytes must end with a line end */
  constructor(bytes: Uint8Array, notes: ReaderNotes) {
    this.bytes = bytes;
    this.numbers = new NumberScanner(bytes);
    const words = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
    this.rows = { bytes: words, scanner: this.numbers, at: 0 };
    this.notes = notes;
  }

  /**
   * Goes to the first byte of the next line with content, over blank lines and comments.
   *
   * @returns that byte, or undefined at the end of the file
   */
  nextContent(): number | undefined {
    while (this.at < this.bytes.length) {
      this.skipBlanks();
      const byte = this.bytes[this.at] as number;
      if (byte !== COMMENT && byte !== NEWLINE && byte !== RETURN) return byte;
      this.finishLine();
    }
    return undefined;
  }

  /** Whether blanks stand before the cursor on its line. */
  get indented(): boolean {
    return this.at > this.lineStart;
  }

  /** Bytes from the cursor to the end. */
  get remaining(): number {
    return this.bytes.length - this.at;
  }

  /** Takes the rest of the line: nothing, or a comment. The cursor must stand at either or at blanks before it. */
  finishLine(): void {
    this.skipBlanks();
    if (this.bytes[this.at] === COMMENT) this.takeComment();
    const bytes = this.bytes;
    if (bytes[this.at] === RETURN) {
      if (bytes[this.at + 1] === NEWLINE) this.at += 1;
      else this.notes.add("carriage-return-line-ends", this.line);
    }
    this.at += 1;
    this.line += 1;
    this.lineStart = this.at;
  }

  /** Goes to the next line whatever stands in between. */
  skipLine(): void {
    this.skipTo(false);
    this.finishLine();
  }

  /** The words of the rest of the line, without its comment; goes to the next line. */
  takeWords(): string[] {
    const start = this.at;
    this.skipTo(true);
    const text = this.latin1.decode(this.bytes.subarray(start, this.at)).trimEnd();
    const separated = text.endsWith(",") || text.endsWith(";");
    if (separated) this.notes.add("trailing-separator", this.line);
    this.finishLine();
    return (separated ? text.slice(0, -1) : text).split(/[ \t]+/).filter((word) => word !== "");
  }

  /** The start of the line as text, to look at or to quote. */
  peekText(length: number): string {
    let end = this.at;
    while (end < this.at + length && this.bytes[end] !== NEWLINE && this.bytes[end] !== RETURN) end += 1;
    return this.latin1.decode(this.bytes.subarray(this.at, end));
  }

  /**
   * Reads the numbers from the cursor to the end of the line into `out` from `index` on; goes to the next line.
   *
   * @param room how many numbers are wanted at most; further ones are counted, not stored
   * @param firstShift power of ten that multiplies the first number (the frequency's unit)
   * @returns how many numbers the line has
   */
  readNumbers(out: Float64Array, index: number, room: number, firstShift: number): number {
    const bytes = this.bytes;
    let at = this.at;
    let count = 0;
    let shift = firstShift;
    for (;;) {
      let byte = bytes[at] as number;
      while (byte === SPACE || byte === TAB) byte = bytes[++at] as number;
      if (byte === NEWLINE || byte === RETURN || byte === COMMENT) break;
      if (count > 0 && (byte === COMMA || byte === SEMICOLON)) {
        at = this.skipSeparator(at);
        break;
      }
      // Beyond the room each number falls on the last place again: the caller refuses the line by its count.
      const next = this.numbers.scan(at, shift, out, index + (count < room ? count : room));
      if (next < 0) throw this.badNumber(at, next);
      at = next;
      shift = 0;
      count += 1;
    }
    this.at = at;
    const { fortranExponents } = this.numbers;
    if (fortranExponents > 0) this.noteFortran(fortranExponents);
    this.finishLine();
    return count;
  }

  /**
   * Takes whole plain rows, one a line, from the cursor on; stops at the first line that needs care.
   *
   * @param block filled from the place `first` up to `end`
   * @param firstShift power of ten that multiplies the first number of each row
   * @param last what the first number of the first row must exceed
   * @returns how many rows were taken
   */
  readPlainRows(block: RowBlock, first: number, end: number, firstShift: number, last: number): number {
    this.rows.at = this.at;
    const taken = takeRows(this.rows, block, first, end, firstShift, last);
    if (taken === 0) return 0;
    this.at = this.rows.at;
    this.line += taken;
    this.lineStart = this.at;
    return taken;
  }

  /** Back to the start of a line that was read. */
  returnTo(position: LinePosition): void {
    this.at = position.at;
    this.line = position.line;
    this.lineStart = position.lineStart;
  }

  position(): LinePosition {
    return { at: this.at, line: this.line, lineStart: this.lineStart };
  }

  fail(code: TouchstoneErrorCode, message: string, line = this.line): TouchstoneError {
    return new TouchstoneError(code, line, message);
  }

  private skipBlanks(): void {
    while (this.bytes[this.at] === SPACE || this.bytes[this.at] === TAB) this.at += 1;
  }

  private skipTo(comment: boolean): void {
    const bytes = this.bytes;
    while (bytes[this.at] !== NEWLINE && bytes[this.at] !== RETURN) {
      if (comment && bytes[this.at] === COMMENT) return;
      this.at += 1;
    }
  }

  private noteFortran(count: number): void {
    for (let k = 0; k < count; k += 1) this.notes.add("fortran-exponent", this.line);
    this.numbers.fortranExponents = 0;
  }

  private skipSeparator(separatorAt: number): number {
    let at = separatorAt + 1;
    while (this.bytes[at] === SPACE || this.bytes[at] === TAB) at += 1;
    const byte = this.bytes[at];
    if (byte !== NEWLINE && byte !== RETURN && byte !== COMMENT) throw this.separatorWithin(separatorAt);
    this.notes.add("trailing-separator", this.line);
    return at;
  }

  private takeComment(): void {
    const start = this.at + 1;
    this.skipTo(false);
    const end = this.at - start > MAX_COMMENT_BYTES ? this.wholeCharacters(start + MAX_COMMENT_BYTES) : this.at;
    if (this.comments.length >= MAX_COMMENTS) {
      this.notes.add("comments-cut", this.line);
      return;
    }
    if (end < this.at) this.notes.add("comments-cut", this.line);
    const text = this.decode(this.bytes.subarray(start, end));
    if (text !== "") this.comments.push(text);
  }

  /** The last place not after `end` that is not within a UTF-8 character. */
  private wholeCharacters(end: number): number {
    let at = end;
    while (at > end - 3 && ((this.bytes[at] as number) & 0xc0) === 0x80) at -= 1;
    return at;
  }

  private decode(bytes: Uint8Array): string {
    let text: string;
    try {
      text = this.utf8.decode(bytes);
    } catch {
      this.notes.add("latin-1", this.line);
      text = this.latin1.decode(bytes);
    }
    return text.replace(/\p{Cc}/gu, " ").trim();
  }

  private word(at: number): string {
    let end = at;
    const ends = (byte: number) =>
      byte === SPACE || byte === TAB || byte === NEWLINE || byte === RETURN || byte === COMMENT;
    while (!ends(this.bytes[end] as number) && end - at < QUOTED_BYTES) end += 1;
    return this.latin1.decode(this.bytes.subarray(at, end));
  }

  private errorAt(at: number, code: TouchstoneErrorCode, message: string): TouchstoneError {
    return new TouchstoneError(code, this.line, message, at - this.lineStart + 1);
  }

  private separatorWithin(at: number): TouchstoneError {
    const next = this.bytes[at + 1] as number;
    if (this.bytes[at] === COMMA && next >= 48 && next <= 57) {
      return this.errorAt(
        at,
        "decimal-comma",
        "A comma within a row of numbers. Write decimals with a point and put blanks between numbers.",
      );
    }
    return this.errorAt(at, "bad-number", "A comma or semicolon between numbers. Put blanks between them.");
  }

  private badNumber(at: number, reason: number): TouchstoneError {
    const word = this.word(at);
    if (reason === OUT_OF_RANGE) {
      return this.errorAt(
        at,
        "not-finite",
        `"${word}" is larger than any number a computer keeps. Export the point again.`,
      );
    }
    if (word.includes("\0")) {
      return this.errorAt(at, "not-text", "A zero byte: this is no text file. Export it as Touchstone.");
    }
    if (/^[+-]?(nan|inf|1\.#|#)/i.test(word)) {
      return this.errorAt(at, "not-finite", `"${word}" is not a finite number. Measure or export the point again.`);
    }
    if (/^[+-]?0x/i.test(word)) {
      return this.errorAt(at, "bad-number", `"${word}" is hexadecimal. Write decimal numbers.`);
    }
    return this.errorAt(at, "bad-number", `"${word}" is not a number. Write decimal numbers with blanks between them.`);
  }
}

export interface LinePosition {
  readonly at: number;
  readonly line: number;
  readonly lineStart: number;
}
