// An upload of one or many files into a quote: each is stored or refused by itself, and the answer says which.
import { readFile } from "node:fs/promises";
import { addMeasurement } from "./measurements.server";
import type { Person } from "./person.server";
import { findQuote } from "./quotes.server";
import { receiveFiles, type ReceivedFile, type UploadRefusal } from "./uploads.server";

export interface FileOutcome {
  readonly name: string;
  /** A sentence; absent for a file that was stored. */
  readonly error?: string;
}

export type UploadOutcome = { readonly ok: true; readonly value: readonly FileOutcome[] } | UploadRefusal;

const NO_FILE = "Choose a Touchstone file first.";

/** Null where the person does not see the quote; nothing is read then. */
export async function uploadMeasurements(
  person: Person,
  quotePublicId: string,
  request: Request,
): Promise<UploadOutcome | null> {
  if (!(await findQuote(person, quotePublicId))) return null;
  const received = await receiveFiles(request, ({ files }) => storeAll(person, quotePublicId, files));
  if (received.ok && received.value.length === 0) return { ok: false, status: 400, error: NO_FILE };
  return received;
}

async function storeAll(person: Person, quotePublicId: string, files: readonly ReceivedFile[]): Promise<FileOutcome[]> {
  const outcomes: FileOutcome[] = [];
  for (const { path, name } of files) {
    const added = await addMeasurement(person, quotePublicId, { name, bytes: await readFile(path) });
    const errors =
      added === null ? ["This quote is no longer yours to edit."] : added.ok ? [] : Object.values(added.errors);
    outcomes.push(errors.length === 0 ? { name } : { name, error: errors.flat().join(" ") });
  }
  return outcomes;
}
