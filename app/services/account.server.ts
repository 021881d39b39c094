// A person's own account: the sessions that are open, and ending them.
import { Op } from "sequelize";
import { Session } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { recordEvent } from "./audit.server";
import type { Person } from "./person.server";
import { IDLE_MS } from "./sessions.server";
import { inTransaction } from "./transaction.server";

/** Open sessions of the person, newest first. */
export async function readOpenSessions(person: Person) {
  const now = await databaseNow();
  const rows = await Session.findAll({
    where: {
      userId: person.userId,
      revokedAt: null,
      expiresAt: { [Op.gt]: now },
      lastSeenAt: { [Op.gte]: new Date(now.getTime() - IDLE_MS) },
    },
    order: [["lastSeenAt", "DESC"]],
  });
  return rows.map((row) => ({
    key: row.tokenHash.toString("hex").slice(0, 12),
    begun: row.createdAt.toISOString(),
    lastSeen: row.lastSeenAt.toISOString(),
    browser: row.userAgent ?? "unknown",
    ip: row.ip ?? "unknown",
  }));
}

/** Ends every session of the person, this one too. */
export async function endAllSessions(person: Person): Promise<void> {
  await inTransaction(async (transaction) => {
    const now = await databaseNow(transaction);
    const open = { userId: person.userId, revokedAt: null };
    const [ended] = await Session.update({ revokedAt: now }, { where: open, transaction });
    await recordEvent(person, now, { subject: "session", action: "all ended", detail: { ended } }, transaction);
  });
}
