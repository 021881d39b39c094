// Turns what was handed in (bytes or text, any of the usual encodings) into UTF-8 bytes that end with a line end.

import { TouchstoneError } from "./touchstone-error.ts";
import type { ReaderNotes } from "./touchstone-notes.ts";

export const MAX_FILE_BYTES = 64 * 1024 * 1024;

const NEWLINE = 10;
const RETURN = 13;

/**
 * The file's bytes in UTF-8, with a line end appended if there is none: scanning loops stop there without looking at the
 * length. Comments may hold bytes that are not UTF-8.
 *
 * @throws TouchstoneError too-large, empty-file
 */
export function readSource(input: Uint8Array | string, notes: ReaderNotes): Uint8Array {
  if (input.length > MAX_FILE_BYTES) throw tooLarge();
  if (typeof input === "string") return encode(input, notes);
  const encoding = utf16Encoding(input);
  if (encoding) {
    notes.add("utf-16", 1);
    return encode(new TextDecoder(encoding).decode(input));
  }
  const marked = input[0] === 0xef && input[1] === 0xbb && input[2] === 0xbf;
  if (marked) notes.add("byte-order-mark", 1);
  return terminated(marked ? input.subarray(3) : input);
}

function utf16Encoding(input: Uint8Array): "utf-16le" | "utf-16be" | undefined {
  const [first, second] = input;
  if (first === undefined || second === undefined) return undefined;
  if (first === 0xff && second === 0xfe) return "utf-16le";
  if (first === 0xfe && second === 0xff) return "utf-16be";
  // Without a mark: every Touchstone file starts with an ASCII character, whose other half is zero.
  if (first !== 0 && second === 0) return "utf-16le";
  if (first === 0 && second !== 0) return "utf-16be";
  return undefined;
}

function encode(text: string, notes?: ReaderNotes): Uint8Array {
  const marked = text.charCodeAt(0) === 0xfeff;
  if (marked) notes?.add("byte-order-mark", 1);
  const bytes = new TextEncoder().encode(marked ? text.slice(1) : text);
  if (bytes.length > MAX_FILE_BYTES) throw tooLarge();
  return terminated(bytes);
}

function terminated(content: Uint8Array): Uint8Array {
  if (content.length === 0) throw new TouchstoneError("empty-file", 1, "The file is empty. Export it again.");
  const last = content[content.length - 1];
  if (last === NEWLINE || last === RETURN) return content;
  const bytes = new Uint8Array(content.length + 1);
  bytes.set(content);
  bytes[content.length] = NEWLINE;
  return bytes;
}

const tooLarge = () =>
  new TouchstoneError("too-large", 1, "The file is larger than 64 MiB. Export fewer points or a two-port file.");
