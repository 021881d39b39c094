// Proves the dispatch of mail on the real database and the real sink: nothing lost, nothing doubled, whatever fails between them.
import { spawn } from "node:child_process";
import { randomUUID } from "node:crypto";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { QueryTypes } from "sequelize";
import { SMTPServer } from "smtp-server";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { sequelize } from "~/db/connection.server";
import { OutboxEmail } from "~/db/models";
import type { MailEvent } from "~/emails/index";
import { readMailbox } from "~/emails/mailbox";
import { createSender, type OutgoingMail } from "~/emails/sender";
import { startSink, type Sink } from "~/emails/sink";
import { dispatchMail, runMailLoop } from "~/jobs/mail.server";
import { samples } from "../emails/samples";
import { useDatabase } from "../support/database";

useDatabase();

let folder: string;
let sink: Sink;

beforeEach(async () => {
  folder = await mkdtemp(path.join(tmpdir(), "mail-"));
  sink = await startSink({ smtpPort: 0, popPort: 0, folder });
});
afterEach(async () => {
  await sink.close();
  await rm(folder, { recursive: true });
});

const from = { name: "Tenderband", address: "rfq@tenderband.example" };
const send = (mail: OutgoingMail) => createSender({ smtpUrl: `smtp://127.0.0.1:${sink.smtpPort}`, from }).send(mail);
const restartSink = async () => {
  sink = await startSink({ smtpPort: sink.smtpPort, popPort: sink.popPort, folder });
};
const delivered = async () =>
  (await readMailbox({ port: sink.popPort, newest: 500 })).map((mail) => mail.messageId).sort();

function sampleOf(template: MailEvent["template"]): MailEvent {
  const found = samples.find((event) => event.template === template);
  if (found === undefined) throw new Error(`no sample of ${template}`);
  return found;
}

async function queue(
  template: MailEvent["template"] = "regret",
  values: Partial<OutboxEmail> = {},
): Promise<OutboxEmail> {
  const past = new Date(Date.now() - 5000);
  const key = randomUUID();
  return OutboxEmail.create({
    ...{ eventKey: key, recipient: "m.ostby@tolvane.example", messageId: `<${key}@tenderband.example>` },
    ...{ template, props: sampleOf(template).props, nextAt: past, createdAt: past, ...values },
  });
}

/** The row as it stands, and in how many seconds it is due by the database's clock. */
async function state(row: OutboxEmail) {
  const fresh = await OutboxEmail.findByPk(row.id, { rejectOnEmpty: true });
  const [due] = await sequelize.query<{ seconds: number }>(
    "SELECT TIMESTAMPDIFF(SECOND, UTC_TIMESTAMP(3), next_at) AS seconds FROM outbox_emails WHERE id = ?",
    { type: QueryTypes.SELECT, replacements: [row.id] },
  );
  return Object.assign(fresh, { dueInSeconds: due?.seconds ?? NaN });
}

async function makeDue(): Promise<void> {
  await sequelize.query("UPDATE outbox_emails SET next_at = UTC_TIMESTAMP(3) - INTERVAL 1 SECOND", {
    type: QueryTypes.UPDATE,
  });
}

async function lapseLeases(): Promise<void> {
  await sequelize.query("UPDATE outbox_emails SET leased_until = UTC_TIMESTAMP(3) - INTERVAL 1 SECOND", {
    type: QueryTypes.UPDATE,
  });
}

function refusal(responseCode: number, command: string, code = "EENVELOPE"): Error {
  return Object.assign(new Error("550 <m.ostby@tolvane.example> says no"), { responseCode, command, code });
}

test("a due mail arrives once, under its Message-ID, and its row says when", async () => {
  const row = await queue("quote-received-buyer", { recipientName: "R. Amsel" });
  expect(await dispatchMail({ send })).toEqual({ sent: 1, failed: 0 });
  expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 0 });
  const [mail] = await readMailbox({ port: sink.popPort, address: row.recipient });
  expect(mail).toMatchObject({
    messageId: row.messageId,
    subject: "RFQ-2026-0117: quote from Tolvane Filters, version 2",
  });
  expect(mail?.links).toEqual(["https://tenderband.example/quotes/b7Qm2xV9kLp4Zt6c"]);
  const after = await state(row);
  expect(after).toMatchObject({ state: "sent", attempts: 1, leasedUntil: null, leaseToken: null, lastError: null });
  expect(Math.abs((after.sentAt?.getTime() ?? 0) - Date.now())).toBeLessThan(10_000);
  expect(await delivered()).toHaveLength(1);
});

test("a single-use link is not kept once it was sent; what else the mail said is", async () => {
  const invitation = await queue("invitation");
  const reset = await queue("password-reset");
  const regret = await queue("regret");
  await dispatchMail({ send });
  const links = (await readMailbox({ port: sink.popPort })).flatMap((mail) => mail.links);
  const asked = [sampleOf("invitation"), sampleOf("password-reset"), sampleOf("regret")].map(({ props }) => props.link);
  expect(links.sort()).toEqual(asked.sort());
  expect((await state(invitation)).props).toEqual({ ...sampleOf("invitation").props, link: "" });
  expect((await state(reset)).props).toEqual({ ...sampleOf("password-reset").props, link: "" });
  expect((await state(regret)).props).toEqual(sampleOf("regret").props);
});

test("mails that are not due, under another's lease, sent or given up are left alone", async () => {
  const later = new Date(Date.now() + 3_600_000);
  await queue("regret", { nextAt: later });
  await queue("regret", { leasedUntil: later, leaseToken: "0123456789abcdef" });
  await queue("regret", { state: "sent" });
  await queue("regret", { state: "failed" });
  expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 0 });
  expect(await delivered()).toEqual([]);
});

test("the oldest due mails go first, and no more than asked", async () => {
  const rows = [await queue("regret", { nextAt: new Date(Date.now() - 1000) }), await queue(), await queue()];
  expect(await dispatchMail({ send, limit: 2 })).toEqual({ sent: 2, failed: 0 });
  expect(await Promise.all(rows.map(async (row) => (await state(row)).state))).toEqual(["pending", "sent", "sent"]);
});

test("with the server down mails wait, and all arrive once when it is back", async () => {
  const rows = [await queue(), await queue(), await queue()];
  await sink.close();
  expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 1 }); // no use in trying the others now
  const [first, second] = await Promise.all(rows.map(state));
  expect(first).toMatchObject({ state: "pending", attempts: 1, lastError: "ESOCKET CONN", leaseToken: null });
  expect(first?.dueInSeconds).toBeGreaterThanOrEqual(8);
  expect(first?.dueInSeconds).toBeLessThanOrEqual(10);
  expect(second).toMatchObject({ state: "pending", attempts: 0 });
  await restartSink();
  await makeDue();
  expect(await dispatchMail({ send })).toEqual({ sent: 3, failed: 0 });
  expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 0 });
  expect(await delivered()).toEqual(rows.map((row) => row.messageId).sort());
});

test("an outage however long gives up no mail and puts none off by more than 5 minutes", async () => {
  const row = await queue();
  await sink.close();
  for (let round = 1; round <= 25; round += 1) {
    await makeDue();
    expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 1 });
    const { state: stands, dueInSeconds } = await state(row);
    expect(stands).toBe("pending");
    expect(dueInSeconds).toBeLessThanOrEqual(Math.min(300, 5 * 2 ** round));
    expect(dueInSeconds).toBeGreaterThanOrEqual(Math.min(300, 5 * 2 ** round) - 2);
  }
  await restartSink();
  await makeDue();
  expect(await dispatchMail({ send })).toEqual({ sent: 1, failed: 0 });
});

test("a mail the server refuses for now is tried 20 times, ever later up to an hour, then given up", async () => {
  const row = await queue();
  const refuse = () => Promise.reject(refusal(451, "DATA", "EMESSAGE"));
  for (let round = 1; round <= 20; round += 1) {
    await makeDue();
    expect(await dispatchMail({ send: refuse })).toEqual({ sent: 0, failed: 1 });
    const after = await state(row);
    expect(after).toMatchObject({
      attempts: round,
      state: round === 20 ? "failed" : "pending",
      lastError: "EMESSAGE DATA 451",
    });
    expect(after.dueInSeconds).toBeGreaterThanOrEqual(Math.min(3600, 5 * 2 ** round) - 2);
    expect(after.dueInSeconds).toBeLessThanOrEqual(Math.min(3600, 5 * 2 ** round));
  }
  await makeDue();
  expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 0 });
});

test("a recipient the server says it has not is given up at once, in words without the address", async () => {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ["AUTH", "STARTTLS"],
    onRcptTo: ({ address }, _session, callback) =>
      callback(address.startsWith("gone") ? Object.assign(new Error("no such user"), { responseCode: 550 }) : null),
  });
  await new Promise<void>((resolve) => void server.listen(0, "127.0.0.1", resolve));
  const bound = server.server.address();
  const port = typeof bound === "object" ? bound?.port : bound;
  const sender = createSender({ smtpUrl: `smtp://127.0.0.1:${port}`, from });
  const gone = await queue("regret", { recipient: "gone@tolvane.example" });
  const link = await queue("invitation", { recipient: "gone-too@tolvane.example" });
  const there = await queue("regret");
  expect(await dispatchMail({ send: (mail) => sender.send(mail) })).toEqual({ sent: 1, failed: 2 });
  // Nobody will get this link: nor does the row keep it.
  expect(await state(link)).toMatchObject({ state: "failed", props: { link: "" } });
  expect(await state(gone)).toMatchObject({ state: "failed", attempts: 1, lastError: "EENVELOPE RCPT TO 550" });
  expect(await state(there)).toMatchObject({ state: "sent" });
  await new Promise<void>((resolve) => server.close(() => resolve()));
});

test("a mail that cannot be rendered, or whose address is a list, holds up no other", async () => {
  const broken = await queue("regret", { props: { rfqNumber: "RFQ-2026-0117" } });
  const list = await queue("regret", { recipient: "a@tolvane.example, b@other.test" });
  const good = await queue();
  expect(await dispatchMail({ send })).toEqual({ sent: 1, failed: 2 });
  expect((await state(broken)).lastError).toBe(
    "not in order: props.rfqTitle, props.buyerName, props.version, props.results, props.link",
  );
  expect((await state(list)).lastError).toBe("not in order: address");
  expect(await delivered()).toEqual([good.messageId]);
});

test("a dispatcher killed with a mail in hand: another sends it once the lease has lapsed, under the same Message-ID", async () => {
  const row = await queue();
  const child = spawn(process.execPath, ["--import", "tsx", "tests/jobs/stuck-dispatcher.ts"], { env: process.env });
  const claimed = await new Promise((resolve) =>
    child.stdout.once("data", (chunk: Buffer) => resolve(chunk.toString().trim())),
  );
  expect(claimed).toBe(row.messageId);
  const gone = new Promise((resolve) => child.once("exit", resolve));
  child.kill("SIGKILL");
  await gone;
  expect(await dispatchMail({ send })).toEqual({ sent: 0, failed: 0 });
  const leasedSeconds = ((await state(row)).leasedUntil?.getTime() ?? 0) - Date.now();
  expect(leasedSeconds).toBeLessThanOrEqual(60_000);
  expect(leasedSeconds).toBeGreaterThan(30_000);
  await lapseLeases();
  expect(await dispatchMail({ send })).toEqual({ sent: 1, failed: 0 });
  expect(await delivered()).toEqual([row.messageId]);
  expect(await state(row)).toMatchObject({ state: "sent", attempts: 2 });
});

test("a dispatcher that lost its lease leaves no mark, whether it sent or failed", async () => {
  for (const finish of [() => undefined, () => Promise.reject(refusal(451, "DATA"))]) {
    const row = await queue();
    let release = () => {};
    const held = new Promise<void>((resolve) => (release = resolve));
    const slow = dispatchMail({ send: () => held.then(finish), limit: 1 });
    await vi.waitFor(async () => expect((await state(row)).attempts).toBe(1), { timeout: 10_000 });
    await lapseLeases();
    expect(await dispatchMail({ send })).toEqual({ sent: 1, failed: 0 });
    const before = (await state(row)).toJSON();
    release();
    await slow;
    expect((await state(row)).toJSON()).toEqual(before);
  }
});

test("a lease is renewed for as long as the server takes", async () => {
  const row = await queue();
  vi.useFakeTimers({ toFake: ["setInterval", "clearInterval"] });
  try {
    let release = () => {};
    const held = new Promise<void>((resolve) => (release = resolve));
    const slow = dispatchMail({ send: () => held, limit: 1 });
    await vi.waitFor(async () => expect((await state(row)).attempts).toBe(1), { timeout: 10_000 });
    await lapseLeases();
    vi.advanceTimersByTime(20_000);
    const lease = async () => ((await state(row)).leasedUntil?.getTime() ?? 0) - Date.now();
    await vi.waitFor(async () => expect(await lease()).toBeGreaterThan(50_000), { timeout: 10_000 });
    release();
    expect(await slow).toEqual({ sent: 1, failed: 0 });
  } finally {
    vi.useRealTimers();
  }
});

test("four dispatchers beside each other double nothing and leave nothing", async () => {
  const rows = await Promise.all(Array.from({ length: 40 }, () => queue("password-changed")));
  const results = await Promise.all([1, 2, 3, 4].map(() => dispatchMail({ send, limit: 40 })));
  expect(results.reduce((sum, { sent }) => sum + sent, 0)).toBe(40);
  expect(results.filter(({ sent }) => sent > 0).length).toBeGreaterThan(1);
  expect(await delivered()).toEqual(rows.map((row) => row.messageId).sort());
});

test("the loop sends what comes in while it runs, lives through an outage, and stops at once", async () => {
  const reports: string[] = [];
  const stop = new AbortController();
  const options = {
    send,
    signal: stop.signal,
    pollMilliseconds: 50,
    report: (text: string) => void reports.push(text),
  };
  const loop = runMailLoop(options);
  const first = await queue();
  await vi.waitFor(async () => expect(await delivered()).toEqual([first.messageId]), { timeout: 10_000 });
  await sink.close();
  await queue();
  await vi.waitFor(() => expect(reports).toEqual(["1 mails could not be sent and will be tried again"]), {
    timeout: 10_000,
  });
  await restartSink();
  await makeDue();
  await vi.waitFor(async () => expect(await delivered()).toHaveLength(2), { timeout: 10_000 });
  const began = Date.now();
  stop.abort();
  await loop;
  expect(Date.now() - began).toBeLessThan(1000);
  await queue();
  await new Promise((resolve) => setTimeout(resolve, 200));
  expect(await delivered()).toHaveLength(2);
});

test("a server that never answers holds the loop's end up by 3 seconds at most", async () => {
  const row = await queue();
  const stop = new AbortController();
  const loop = runMailLoop({ send: () => new Promise(() => {}), signal: stop.signal });
  await vi.waitFor(async () => expect((await state(row)).attempts).toBe(1), { timeout: 10_000 });
  const began = Date.now();
  stop.abort();
  await loop;
  expect(Date.now() - began).toBeLessThan(5000);
});
