// An uploaded file's bytes in the database: chunks of 1 MiB, deflated at level 1, checked against size and SHA-256 on reading.
import { promisify } from "node:util";
import { deflate, inflate } from "node:zlib";
import type { Transaction } from "sequelize";
import { FileChunk, StoredFile } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import { sha256 } from "./identifiers.server";

const CHUNK_BYTES = 1024 * 1024;
const deflateBytes = promisify<Uint8Array, { level: number }, Buffer>(deflate);
const inflateBytes = promisify<Uint8Array, { maxOutputLength: number }, Buffer>(inflate);

/** Deflates bytes chunk by chunk; done before the transaction that stores them, so that no lock is held meanwhile. */
export async function packChunks(bytes: Uint8Array): Promise<Buffer[]> {
  const chunks: Buffer[] = [];
  for (let from = 0; from === 0 || from < bytes.length; from += CHUNK_BYTES)
    chunks.push(await deflateBytes(bytes.subarray(from, from + CHUNK_BYTES), { level: 1 }));
  return chunks;
}

/** Stores packed chunks in the transaction that records the file. */
export async function storeChunks(fileId: number, chunks: readonly Buffer[], transaction: Transaction): Promise<void> {
  for (const [ordinal, bytes] of chunks.entries()) await FileChunk.create({ fileId, ordinal, bytes }, { transaction });
}

/** The bytes as uploaded. Throws if the actor does not see the file, or if what is stored is not what was uploaded. */
export async function readFileBytes(actor: QueryActor, fileId: number): Promise<Buffer> {
  const file = await StoredFile.findByPk(fileId, { actor, rejectOnEmpty: true });
  const chunks = await FileChunk.findAll({ where: { fileId }, order: [["ordinal", "ASC"]], actor });
  const parts = await Promise.all(chunks.map(({ bytes }) => inflateBytes(bytes, { maxOutputLength: CHUNK_BYTES })));
  const bytes = Buffer.concat(parts);
  if (bytes.length !== file.size || !sha256(bytes).equals(file.sha256))
    throw new Error(`file ${file.publicId} is damaged`);
  return bytes;
}
