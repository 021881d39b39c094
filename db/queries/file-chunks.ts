// Copies a file's bytes inside the database, for a row that needs a file of its own.
import { QueryTypes, type Transaction } from "sequelize";
import { sequelize } from "../connection.server";
import type { QueryActor } from "../scoping";
import { StoredFile } from "../models";

/** Both files have to be visible to the actor. Throws where one is not. */
export async function copyFileChunks(
  actor: QueryActor,
  fromFileId: number,
  toFileId: number,
  transaction: Transaction,
): Promise<void> {
  for (const id of [fromFileId, toFileId]) await StoredFile.findByPk(id, { actor, transaction, rejectOnEmpty: true });
  await sequelize.query(
    "INSERT INTO file_chunks (file_id, ordinal, bytes) SELECT ?, ordinal, bytes FROM file_chunks WHERE file_id = ?",
    { type: QueryTypes.INSERT, replacements: [toFileId, fromFileId], transaction },
  );
}
