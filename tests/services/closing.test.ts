// The ends of an RFQ without a decision: by its due date, early, cancelled; and the history that tells of them.
import { expect, test } from "vitest";
import { AuditEvent, Rfq } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { cancelRfq, closeDueRfqs, closeRfq } from "~/services/closing.server";
import { readHistory } from "~/services/history.server";
import { listRfqs } from "~/services/rfq-list.server";
import { DEFAULT_RFQ_LIST } from "~/forms/rfq-list";
import { readRfqOverview } from "~/services/rfq-overview.server";
import { buildInvitation, buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";

useDatabase();

const past = () => new Date(Date.now() - 1_000);

async function openRfq(overrides: Parameters<typeof buildRfq>[1] = {}) {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, overrides);
  return { buyer, engineer, rfq };
}

const stored = (rfq: Rfq) => Rfq.findByPk(rfq.id, { actor: SYSTEM, rejectOnEmpty: true });

test("closing by the due date is marked once, as of the due millisecond, with an entry by the system", async () => {
  const { engineer, rfq } = await openRfq({ dueAt: past() });
  const { rfq: ahead } = await buildRfq(engineer);
  const closed = await Promise.all([closeDueRfqs(), closeDueRfqs(), closeDueRfqs()]);
  expect(closed.reduce((sum, count) => sum + count, 0)).toBe(1);
  expect(await stored(rfq)).toMatchObject({ status: "closed", closedAt: rfq.dueAt });
  expect((await stored(ahead)).status).toBe("open");
  const history = await readHistory(engineer, rfq.publicId, 1);
  expect(history?.events).toMatchObject([{ actorName: null, subject: "rfq", action: "closed" }]);
});

test("closing early is by hand, once, and cannot be undone", async () => {
  const { engineer, rfq } = await openRfq();
  const answers = await Promise.all([closeRfq(engineer, rfq.publicId), closeRfq(engineer, rfq.publicId)]);
  expect(answers.filter((answer) => answer?.ok)).toHaveLength(1);
  const row = await stored(rfq);
  expect(row.status).toBe("closed");
  expect(row.closedAt?.getTime()).toBeLessThan(row.dueAt.getTime());
  const event = await AuditEvent.findOne({ where: { action: "closed" }, actor: engineer });
  expect(event).toMatchObject({ actorUserId: engineer.userId, detail: { early: true } });
});

test("one past its due date is closed already: closing early is refused", async () => {
  const { engineer, rfq } = await openRfq({ dueAt: past() });
  expect(await closeRfq(engineer, rfq.publicId)).toMatchObject({ ok: false });
  expect((await stored(rfq)).status).toBe("open");
});

test("cancelling keeps its reason, works on an open and a closed RFQ, and on no other", async () => {
  const { engineer, rfq } = await openRfq();
  expect(await cancelRfq(engineer, rfq.publicId, "The project was stopped.")).toMatchObject({ ok: true });
  expect((await readRfqOverview(engineer, rfq.publicId))?.cancelReason).toBe("The project was stopped.");
  expect(await cancelRfq(engineer, rfq.publicId, "Again.")).toMatchObject({ ok: false });
  const { rfq: due } = await buildRfq(engineer, { dueAt: past() });
  expect(await cancelRfq(engineer, due.publicId, "The project was stopped.")).toMatchObject({ ok: true });
  expect(await stored(due)).toMatchObject({ status: "cancelled", closedAt: due.dueAt });
  const { rfq: unopened } = await buildRfq(engineer, { status: "draft", openedAt: null });
  expect(await cancelRfq(engineer, unopened.publicId, "Not needed.")).toMatchObject({ ok: false });
});

test("another buyer closes and cancels nothing", async () => {
  const { rfq } = await openRfq();
  const stranger = await buildPerson(await buildOrganisation("buyer"), "admin");
  expect(await closeRfq(stranger, rfq.publicId)).toBeNull();
  expect(await cancelRfq(stranger, rfq.publicId, "Not theirs.")).toBeNull();
  expect((await stored(rfq)).status).toBe("open");
});

test("engineers read the history of their own RFQs, purchasing and administrators of all, other buyers of none", async () => {
  const { buyer, engineer, rfq } = await openRfq();
  await closeRfq(engineer, rfq.publicId);
  const colleague = await buildPerson(buyer, "engineer");
  expect(await readHistory(colleague, rfq.publicId, 1)).toMatchObject({ isReadable: false, events: [], total: 0 });
  for (const role of ["purchasing", "admin"] as const) {
    const history = await readHistory(await buildPerson(buyer, role), rfq.publicId, 1);
    expect(history).toMatchObject({
      isReadable: true,
      total: 1,
      events: [{ actorName: engineer.name, company: null }],
    });
  }
  const stranger = await buildPerson(await buildOrganisation("buyer"), "admin");
  expect(await readHistory(stranger, rfq.publicId, 1)).toBeNull();
});

test("a supplier's act stands in the buyer's history under the directory's name, fifty entries a page", async () => {
  const { buyer, engineer, rfq } = await openRfq();
  const kestrel = await buildOrganisation("supplier");
  const member = await buildPerson(kestrel);
  await buildInvitation(rfq, kestrel);
  const entry = { buyerOrganisationId: buyer.id, rfqId: rfq.id, subject: "quote", action: "submitted" };
  await AuditEvent.bulkCreate(
    Array.from({ length: 51 }, () => ({
      ...entry,
      at: new Date(),
      actorUserId: member.userId,
      actorName: member.name,
      actorOrganisationId: kestrel.id,
    })),
  );
  const first = await readHistory(engineer, rfq.publicId, 1);
  expect(first).toMatchObject({ total: 51, pages: 2 });
  expect(first?.events).toHaveLength(50);
  expect(first?.events[0]).toMatchObject({ actorName: member.name, company: kestrel.name });
  expect((await readHistory(engineer, rfq.publicId, 2))?.events).toHaveLength(1);
});

test("the list counts each state by the clock, filters by it, sorts and pages", async () => {
  const { engineer } = await openRfq({ title: "B", dueAt: past() });
  await buildRfq(engineer, { title: "A" });
  await buildRfq(engineer, { title: "C", status: "draft", openedAt: null });
  const stranger = await buildPerson(await buildOrganisation("buyer"));
  await buildRfq(stranger, { title: "Foreign" });
  const all = await listRfqs(engineer, { ...DEFAULT_RFQ_LIST, sort: "title", direction: "ascending" });
  expect(all.entries.map(({ title, state }) => [title, state])).toEqual([
    ["A", "open"],
    ["B", "closed"],
    ["C", "draft"],
  ]);
  expect(all.counts).toEqual({ draft: 1, open: 1, closed: 1, decided: 0, cancelled: 0 });
  const closed = await listRfqs(engineer, { ...DEFAULT_RFQ_LIST, state: "closed" });
  expect(closed).toMatchObject({ total: 1, pages: 1, entries: [{ title: "B" }] });
  const open = await listRfqs(engineer, { ...DEFAULT_RFQ_LIST, state: "open" });
  expect(open.entries.map(({ title }) => title)).toEqual(["A"]);
  expect((await listRfqs(engineer, { ...DEFAULT_RFQ_LIST, page: 2 })).entries).toEqual([]);
});
