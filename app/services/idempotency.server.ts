// A form counts once, however often it arrives: the key it carries is stored with what was answered.
import { data } from "react-router";
import { UniqueConstraintError, type Transaction } from "sequelize";
import { IdempotencyKey } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { sha256 } from "./identifiers.server";
import type { Person } from "./person.server";
import { inTransaction } from "./transaction.server";

/** What a form answers whose key is missing or belongs to another request: the page is to be loaded again. */
const conflict = () => data("Load the page again", { status: 409 });

const KEY = /^[\w-]{16,64}$/;

class Unfinished<T> extends Error {
  constructor(readonly outcome: T) {
    super("expected outcome that changes nothing");
  }
}

/**
 * Runs `work` in a transaction unless this person's key was seen before, in which case the stored answer comes back and nothing
 * runs. Only an outcome that `isFinal` accepts is kept: a refusal rolls back and may be tried again with the same key.
 * Throws 409 when the key is missing or comes with another request.
 */
export async function once<T>(
  person: Person,
  key: string,
  request: unknown,
  isFinal: (outcome: T) => boolean,
  work: (transaction: Transaction, now: Date) => Promise<T>,
): Promise<T> {
  if (!KEY.test(key)) throw conflict();
  const requestHash = sha256(JSON.stringify(request));
  try {
    return await inTransaction(async (transaction) => {
      const now = await databaseNow(transaction);
      // A second request with this key waits here until the first commits, then meets the unique key.
      await IdempotencyKey.create({ userId: person.userId, key, requestHash, createdAt: now }, { transaction });
      const outcome = await work(transaction, now);
      if (!isFinal(outcome)) throw new Unfinished(outcome);
      const response: object = { outcome };
      await IdempotencyKey.update({ response }, { where: { userId: person.userId, key }, transaction });
      return outcome;
    });
  } catch (error) {
    if (error instanceof Unfinished) return error.outcome as T;
    if (!(error instanceof UniqueConstraintError)) throw error;
    const stored = await IdempotencyKey.findOne({ where: { userId: person.userId, key } });
    if (!stored) throw error;
    if (!requestHash.equals(stored.requestHash)) throw conflict();
    return (stored.response as { outcome: T }).outcome;
  }
}
