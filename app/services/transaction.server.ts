// The only place transactions start: tried again where the database asks for it.
import { setTimeout as delay } from "node:timers/promises";
import { BaseError, Transaction } from "sequelize";
import { sequelize } from "~/db/connection.server";

/** Deadlock, lock wait timeout, and a row changed since the snapshot (innodb_snapshot_isolation). */
const TRY_AGAIN = new Set([1213, 1205, 1020]);

export function databaseErrorNumber(error: unknown): number | undefined {
  const original: unknown = error instanceof BaseError && "original" in error ? error.original : error;
  if (typeof original !== "object" || original === null || !("errno" in original)) return undefined;
  return typeof original.errno === "number" ? original.errno : undefined;
}

const MOST_TRIES = 4;
const LONGEST_WAIT_MS = 60;

/**
 * Runs `work` in a transaction and commits what it did, or nothing. Work may run several times, so it changes nothing but the
 * database. READ COMMITTED: every use case locks the row it decides by and reads again, so each statement is to see what is
 * committed, and gaps between rows are nobody's to lock.
 */
export async function inTransaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await sequelize.transaction({ isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED }, work);
    } catch (error) {
      if (tries === MOST_TRIES || !TRY_AGAIN.has(databaseErrorNumber(error) ?? 0)) throw error;
      await delay(Math.random() * LONGEST_WAIT_MS * tries);
    }
  }
}
