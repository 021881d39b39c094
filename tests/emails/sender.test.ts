// Proves the sender against the real sink: one recipient whatever is typed, fixed Message-ID, no file or address read.
import { mkdtemp, readdir, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";
import { readMailbox } from "~/emails/mailbox";
import { createSender, type OutgoingMail } from "~/emails/sender";
import { startSink, type Sink } from "~/emails/sink";

const from = { name: "Tenderband", address: "rfq@tenderband.example" };
const mail: OutgoingMail = {
  to: { name: "M. Ostby", address: "m.ostby@tolvane.example" },
  messageId: "9c1f0e5a-1@tenderband.example",
  subject: "RFQ-2026-0117: invitation to quote",
  html: '<p>Open <a href="https://tenderband.example/i?a=1&amp;b=2">it</a></p>',
  text: "Open https://tenderband.example/i?a=1&b=2\n.\n..two dots",
};
let folder: string;
let sink: Sink;

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), "sender-"));
  sink = await startSink({ smtpPort: 0, popPort: 0, folder });
});
afterAll(async () => {
  await sink.close();
  await rm(folder, { recursive: true });
});

const sender = () => createSender({ smtpUrl: `smtp://127.0.0.1:${sink.smtpPort}`, from });
const count = async () => (await readdir(folder)).length;

test("a mail arrives with its Message-ID, sender, both parts, and the mark of an automatic mail", async () => {
  await sender().send(mail);
  const [stored] = await readMailbox({ port: sink.popPort, address: mail.to.address });
  expect(stored).toMatchObject({
    to: mail.to.address,
    from: from.address,
    subject: mail.subject,
    messageId: "<9c1f0e5a-1@tenderband.example>",
    html: mail.html,
    links: ["https://tenderband.example/i?a=1&b=2"],
  });
  expect(stored?.text.trimEnd()).toBe(mail.text);
  const source = await readFile(path.join(folder, `${stored?.id}.eml`), "utf8");
  expect(source).toMatch(/^Auto-Submitted: auto-generated\r$/m);
  expect(source).toMatch(/^To: "?M\. Ostby"? <m\.ostby@tolvane\.example>\r$/m);
});

test.each([
  "a@tolvane.example, b@other.test",
  "a@tolvane.example;b@other.test",
  "group: a@tolvane.example, b@other.test;",
  "a@tolvane.example\r\nRCPT TO:<b@other.test>",
  "a@tolvane.example\n",
  '"b@other.test" <a@tolvane.example>',
  '"x y"@tolvane.example',
  "b@other.test(a@tolvane.example)",
  "<a@tolvane.example>",
  "a@tolvane.example>",
  `${"a".repeat(250)}@tolvane.example`,
  "",
])("the address %j is refused and nothing is sent", async (address) => {
  const before = await count();
  await expect(sender().send({ ...mail, to: { address } })).rejects.toThrow();
  expect(await count()).toBe(before);
});

test("line breaks in name and subject make no header and no recipient", async () => {
  const injected = "x\r\nBcc: b@other.test\r\n\r\nbody";
  const before = await count();
  await sender().send({
    ...mail,
    to: { name: `${injected}" <b@other.test>,`, address: "c@tolvane.example" },
    subject: injected,
  });
  expect(await count()).toBe(before + 1);
  expect(await readMailbox({ port: sink.popPort, address: "b@other.test" })).toEqual([]);
  const [stored] = await readMailbox({ port: sink.popPort, address: "c@tolvane.example" });
  expect(stored).toMatchObject({ to: "c@tolvane.example", subject: "x Bcc: b@other.test body" });
});

test("a Message-ID that is none is refused", async () => {
  await expect(sender().send({ ...mail, messageId: "a@b>\r\nBcc: b@other.test" })).rejects.toThrow();
});

test("bodies that name a file or an address are sent as words", async () => {
  const secret = path.join(folder, "secret.txt");
  await writeFile(secret, "not for sending");
  await sender().send({
    ...mail,
    to: { address: "d@tolvane.example" },
    text: secret,
    html: `<img src="file://${secret}">`,
  });
  await rm(secret);
  const [stored] = await readMailbox({ port: sink.popPort, address: "d@tolvane.example" });
  expect(stored?.text.trim()).toBe(secret);
  expect(JSON.stringify(stored)).not.toContain("not for sending");
});

test("a server elsewhere must offer TLS; one on this machine need not", async () => {
  const local = createSender({ smtpUrl: `smtp://127.0.0.1:${sink.smtpPort}`, from, requireTls: true });
  await expect(local.send(mail)).rejects.toMatchObject({ code: "ETLS" });
});

test.each(["", "127.0.0.1:25", "http://127.0.0.1", "smtp://"])(
  "the server address %j is refused in words",
  (smtpUrl) => {
    expect(() => createSender({ smtpUrl, from })).toThrow(/^SMTP_URL/);
  },
);

test("a sender's address that is not plain is refused at once", () => {
  expect(() => createSender({ smtpUrl: "smtp://127.0.0.1", from: { address: "a@b.test, c@d.test" } })).toThrow();
});
