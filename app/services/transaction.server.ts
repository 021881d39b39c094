// The only place transactions start: one retry where the database asks for one.
import { BaseError, type Transaction } from "sequelize";
import { sequelize } from "~/db/connection.server";

/** Deadlock, lock wait timeout, and a row changed since the snapshot (innodb_snapshot_isolation). */
const TRY_AGAIN = new Set([1213, 1205, 1020]);

export function databaseErrorNumber(error: unknown): number | undefined {
  const original: unknown = error instanceof BaseError && "original" in error ? error.original : error;
  if (typeof original !== "object" || original === null || !("errno" in original)) return undefined;
  return typeof original.errno === "number" ? original.errno : undefined;
}

/** Runs `work` in a transaction and commits what it did, or nothing. Work may run twice, so it changes nothing but the database. */
export async function inTransaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  try {
    return await sequelize.transaction(work);
  } catch (error) {
    if (!TRY_AGAIN.has(databaseErrorNumber(error) ?? 0)) throw error;
    return sequelize.transaction(work);
  }
}
