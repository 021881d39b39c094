// Signing in and forgotten passwords: nothing tells which addresses exist, a link works once, a reset ends every session.
import { expect, test, vi } from "vitest";
import { AuditEvent, OneTimeToken, OutboxEmail, Session, User } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { hashPassword } from "~/services/passwords.server";
import {
  beginPasswordReset,
  passwordResetIsOpen,
  requestPasswordReset,
  resetPassword,
} from "~/services/password-reset.server";
import { readSession, startSession } from "~/services/sessions.server";
import { signIn } from "~/services/sign-in.server";
import { useDatabase } from "../support/database";
import { buildOrganisation, buildPerson } from "../support/factories";

useDatabase();

const PASSWORD = "a filter for every band";

function form(fields: Record<string, string>): FormData {
  const data = new FormData();
  for (const [name, value] of Object.entries(fields)) data.set(name, value);
  return data;
}

const signInRequest = (email: string, password: string) =>
  new Request("http://127.0.0.1/sign-in", { method: "POST", body: form({ email, password }) });

async function person() {
  const organisation = await buildOrganisation("buyer");
  return buildPerson(organisation, "engineer", { passwordHash: await hashPassword(PASSWORD) });
}

/** The token in the link of the newest reset mail. */
async function mailedToken(): Promise<string> {
  const mail = await OutboxEmail.findOne({ where: { template: "password-reset" }, order: [["id", "DESC"]] });
  const { link } = mail?.props as { link: string };
  return link.split("/").at(-1) ?? "";
}

const newPassword = form({ password: "seven cavities in a row", passwordAgain: "seven cavities in a row" });

test("the right password signs in, letter for letter, and the wrong one gets the words an unknown address gets", async () => {
  const { email, userId } = await person();
  const right = await signIn(signInRequest(email, PASSWORD));
  expect(right.ok && right.value.userId).toBe(userId);
  const wrong = await signIn(signInRequest(email, PASSWORD.slice(0, -1)));
  const unknown = await signIn(signInRequest("nobody@example.test", PASSWORD));
  expect(wrong.ok).toBe(false);
  expect(!wrong.ok && wrong.errors).toEqual(!unknown.ok && unknown.errors);
  expect(await AuditEvent.count({ where: { action: "sign-in refused" }, actor: SYSTEM })).toBe(2);
});

test("a disabled person is refused, and an open session of theirs ends at once", async () => {
  const { email, userId } = await person();
  const request = new Request("http://127.0.0.1/");
  const cookie = (await startSession(userId, request)).split(";")[0] ?? "";
  const withCookie = new Request("http://127.0.0.1/", { headers: { Cookie: cookie } });
  expect((await readSession(withCookie, "r"))?.userId).toBe(userId);
  await User.update({ disabledAt: new Date() }, { where: { id: userId }, actor: SYSTEM });
  expect(await readSession(withCookie, "r")).toBeNull();
  expect((await signIn(signInRequest(email, PASSWORD))).ok).toBe(false);
});

test("a tampered session cookie is nobody's", async () => {
  const { userId } = await person();
  const cookie = (await startSession(userId, new Request("http://127.0.0.1/"))).split(";")[0] ?? "";
  const tampered = cookie.slice(0, -3) + (cookie.endsWith("AAA") ? "BBB" : "AAA");
  expect(await readSession(new Request("http://127.0.0.1/", { headers: { Cookie: tampered } }), "r")).toBeNull();
});

test("asking for a link mails an account's owner, and an unknown address nothing", async () => {
  const { email } = await person();
  await requestPasswordReset("nobody@example.test");
  expect(await OutboxEmail.count()).toBe(0);
  await requestPasswordReset(email);
  expect((await OutboxEmail.findAll()).map((mail) => mail.recipient)).toEqual([email]);
});

test("a link sets the password once, ends all sessions, and only its hash is stored", async () => {
  const { email, userId } = await person();
  await startSession(userId, new Request("http://127.0.0.1/"));
  await requestPasswordReset(email);
  const token = await mailedToken();
  const stored = await OneTimeToken.findAll();
  expect(stored.map((row) => row.tokenHash.toString("base64url"))).not.toContain(token);
  expect(await passwordResetIsOpen(token)).toBe(true);
  expect((await resetPassword(token, newPassword)).ok).toBe(true);
  expect(await Session.count({ where: { userId, revokedAt: null } })).toBe(0);
  expect((await signIn(signInRequest(email, "seven cavities in a row"))).ok).toBe(true);
  expect((await signIn(signInRequest(email, PASSWORD))).ok).toBe(false);
  expect(await passwordResetIsOpen(token)).toBe(false);
  expect((await resetPassword(token, newPassword)).ok).toBe(false);
});

test("a sign-in that a reset overtook, its password checked before and its session begun after, opens none", async () => {
  const { email, userId } = await person();
  const checked = await signIn(signInRequest(email, PASSWORD));
  const checkedHash = checked.ok ? checked.value.checkedHash : "";
  const begin = () => startSession(userId, new Request("http://127.0.0.1/"), "127.0.0.1", checkedHash);
  await begin();
  await requestPasswordReset(email);
  expect((await resetPassword(await mailedToken(), newPassword)).ok).toBe(true);
  await expect(begin()).rejects.toMatchObject({ init: { status: 409 } });
  expect(await Session.count({ where: { userId, revokedAt: null } })).toBe(0);
});

test("of twenty redemptions at once exactly one succeeds", async () => {
  const { email } = await person();
  await requestPasswordReset(email);
  const token = await mailedToken();
  const outcomes = await Promise.all(Array.from({ length: 20 }, () => resetPassword(token, newPassword)));
  expect(outcomes.filter((outcome) => outcome.ok)).toHaveLength(1);
  expect(await AuditEvent.count({ where: { action: "password reset" }, actor: SYSTEM })).toBe(1);
});

test("a new link ends the older one, and an altered one never worked", async () => {
  const { email } = await person();
  await requestPasswordReset(email);
  const first = await mailedToken();
  await requestPasswordReset(email);
  const second = await mailedToken();
  expect(second).not.toBe(first);
  expect(await passwordResetIsOpen(first)).toBe(false);
  expect(await passwordResetIsOpen(second.slice(0, -1) + (second.endsWith("A") ? "B" : "A"))).toBe(false);
  expect(await passwordResetIsOpen(second)).toBe(true);
});

test("links asked for at once are all answered, and one of them stays good", async () => {
  const { email, userId } = await person();
  await Promise.all(Array.from({ length: 12 }, () => requestPasswordReset(email)));
  expect(await OutboxEmail.count({ where: { template: "password-reset" } })).toBe(12);
  expect(await OneTimeToken.count({ where: { userId, revokedAt: null } })).toBe(1);
  expect(await passwordResetIsOpen(await mailedToken())).toBe(true);
});

test("the page that asks for a link answers before anything is looked up", async () => {
  const { email } = await person();
  beginPasswordReset(email);
  expect(await OutboxEmail.count()).toBe(0);
  await vi.waitFor(async () => expect(await OutboxEmail.count()).toBe(1), 5_000);
});

test("a password that names the person's company is refused and the link stays open", async () => {
  const organisation = await buildOrganisation("buyer", { name: "Northgate Radio" });
  const { email } = await buildPerson(organisation);
  await requestPasswordReset(email);
  const token = await mailedToken();
  const weak = form({ password: "northgateradio2026", passwordAgain: "northgateradio2026" });
  expect((await resetPassword(token, weak)).ok).toBe(false);
  expect(await passwordResetIsOpen(token)).toBe(true);
});
