// A person's own sessions: those that are open and no others, and ending them all.
import { expect, test } from "vitest";
import { AuditEvent, Session } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { endAllSessions, readOpenSessions } from "~/services/account.server";
import { IDLE_MS, readSession, startSession } from "~/services/sessions.server";
import { useDatabase } from "../support/database";
import { buildOrganisation, buildPerson } from "../support/factories";

useDatabase();

const build = async () => buildPerson(await buildOrganisation("buyer"));

async function begin(userId: number): Promise<Request> {
  const cookie = (await startSession(userId, new Request("http://127.0.0.1/"), "127.0.0.1")).split(";")[0] ?? "";
  return new Request("http://127.0.0.1/", { headers: { Cookie: cookie } });
}

test("a session left idle too long is over, and not listed as open", async () => {
  const person = await build();
  const request = await begin(person.userId);
  expect(await readOpenSessions(person)).toHaveLength(1);
  await Session.update({ lastSeenAt: new Date(Date.now() - IDLE_MS - 60_000) }, { where: { userId: person.userId } });
  expect(await readSession(request, "r")).toBeNull();
  expect(await readOpenSessions(person)).toEqual([]);
});

test("ending all sessions ends one's own and nobody else's, and is recorded", async () => {
  const [person, other] = [await build(), await build()];
  const [request, others] = [await begin(person.userId), await begin(other.userId)];
  await endAllSessions(person);
  expect(await readSession(request, "r")).toBeNull();
  expect((await readSession(others, "r"))?.userId).toBe(other.userId);
  expect(await AuditEvent.count({ where: { subject: "session", action: "all ended" }, actor: SYSTEM })).toBe(1);
});
