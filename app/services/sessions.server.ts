// Sessions in the database: the cookie holds a random token, the row its SHA-256, so that ending one ends it at once.
import { createCookie, data, type Cookie } from "react-router";
import { config } from "~/config.server";
import { Organisation, Session, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { newSecret, sha256 } from "./identifiers.server";
import type { Person } from "./person.server";
import { inTransaction } from "./transaction.server";

/** Without use for longer than this a session has ended. */
export const IDLE_MS = 12 * 60 * 60 * 1000;
const ABSOLUTE_MS = 7 * 24 * 60 * 60 * 1000;
/** last_seen_at is written at most this often. */
const TOUCH_MS = 60 * 1000;

let cookie: Cookie | undefined;

function sessionCookie(): Cookie {
  const secure = config().appUrl.startsWith("https://");
  cookie ??= createCookie(secure ? "__Host-tenderband" : "tenderband", {
    httpOnly: true,
    secure,
    sameSite: "lax",
    path: "/",
    secrets: config().sessionSecrets,
    maxAge: ABSOLUTE_MS / 1000,
  });
  return cookie;
}

async function tokenHash(request: Request): Promise<Buffer | null> {
  const token: unknown = await sessionCookie().parse(request.headers.get("Cookie"));
  return typeof token === "string" && token.length > 0 ? sha256(token) : null;
}

/**
 * Starts a session with a token of its own and returns the Set-Cookie header.
 * @param checkedHash hash the password was checked against: throws 409 if a reset, which ended all sessions, came in between
 */
export async function startSession(
  userId: number,
  request: Request,
  ip?: string,
  checkedHash?: string,
): Promise<string> {
  const token = newSecret();
  await inTransaction(async (transaction) => {
    const lock = transaction.LOCK.UPDATE;
    const user = await User.findByPk(userId, { actor: SYSTEM, transaction, lock, rejectOnEmpty: true });
    if (checkedHash !== undefined && user.passwordHash !== checkedHash)
      throw data("The password was changed meanwhile", { status: 409 });
    const now = await databaseNow(transaction);
    await Session.create(
      {
        tokenHash: sha256(token),
        userId,
        createdAt: now,
        lastSeenAt: now,
        expiresAt: new Date(now.getTime() + ABSOLUTE_MS),
        userAgent: request.headers.get("User-Agent")?.slice(0, 255) ?? null,
        ip: ip ?? null,
      },
      { transaction },
    );
  });
  return sessionCookie().serialize(token);
}

/** The person signed in by this request's cookie, or null. */
export async function readSession(request: Request, requestId: string, ip?: string): Promise<Person | null> {
  const hash = await tokenHash(request);
  if (!hash) return null;
  const session = await Session.findByPk(hash);
  if (!session || session.revokedAt) return null;
  const now = await databaseNow();
  if (now >= session.expiresAt || now.getTime() - session.lastSeenAt.getTime() > IDLE_MS) return null;
  const user = await User.findByPk(session.userId, { actor: SYSTEM });
  if (!user || user.disabledAt) return null;
  const organisation = await Organisation.findByPk(user.organisationId, { actor: SYSTEM, rejectOnEmpty: true });
  if (now.getTime() - session.lastSeenAt.getTime() > TOUCH_MS)
    await Session.update({ lastSeenAt: now }, { where: { tokenHash: hash } });
  return {
    userId: user.id,
    publicId: user.publicId,
    organisationId: user.organisationId,
    organisationKind: user.organisationKind,
    organisationName: organisation.name,
    role: user.role,
    name: user.name,
    email: user.email,
    timeZone: user.timeZone,
    requestId,
    ip,
  };
}

/** Ends the session of this request and returns the header that clears its cookie. */
export async function endSession(request: Request): Promise<string> {
  const hash = await tokenHash(request);
  if (hash) await Session.update({ revokedAt: await databaseNow() }, { where: { tokenHash: hash, revokedAt: null } });
  return sessionCookie().serialize("", { maxAge: 0 });
}
