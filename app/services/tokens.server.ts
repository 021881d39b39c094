// Single-use links of mails: 32 random bytes, of which only the SHA-256 is stored; a new one ends the older ones.
import type { Transaction } from "sequelize";
import { OneTimeToken } from "~/db/models";
import { newSecret, sha256 } from "./identifiers.server";

export type TokenSubject =
  | { readonly purpose: "password-reset"; readonly userId: number }
  | { readonly purpose: "invitation"; readonly invitationId: number };

/** Revokes every unused link of the subject. */
export async function revokeTokens(subject: TokenSubject, now: Date, transaction: Transaction): Promise<void> {
  // An update that matches no row would lock the gap where the next token goes, and two of them deadlock.
  const older = await OneTimeToken.findAll({ where: { ...subject, usedAt: null, revokedAt: null }, transaction });
  if (older.length === 0) return;
  const tokenHash = older.map((row) => row.tokenHash);
  await OneTimeToken.update({ revokedAt: now }, { where: { tokenHash, usedAt: null, revokedAt: null }, transaction });
}

/** Makes a link's token and ends the subject's older ones. */
export async function issueToken(
  subject: TokenSubject,
  now: Date,
  expiresAt: Date,
  transaction: Transaction,
): Promise<string> {
  await revokeTokens(subject, now, transaction);
  const token = newSecret();
  await OneTimeToken.create({ tokenHash: sha256(token), ...subject, createdAt: now, expiresAt }, { transaction });
  return token;
}

/** The stored row of a token that can still be used, or null. Uses nothing up. With a transaction the row is locked. */
export async function findToken(
  purpose: TokenSubject["purpose"],
  token: string,
  now: Date,
  transaction?: Transaction,
): Promise<OneTimeToken | null> {
  const row = await OneTimeToken.findByPk(sha256(token), {
    transaction,
    lock: transaction ? transaction.LOCK.UPDATE : undefined,
  });
  if (row?.purpose !== purpose || row.usedAt || row.revokedAt || now >= row.expiresAt) return null;
  return row;
}

/** Uses a token up: true for exactly one caller. */
export async function useToken(row: OneTimeToken, now: Date, transaction: Transaction): Promise<boolean> {
  const [changed] = await OneTimeToken.update(
    { usedAt: now },
    { where: { tokenHash: row.tokenHash, usedAt: null, revokedAt: null }, transaction },
  );
  return changed === 1;
}
