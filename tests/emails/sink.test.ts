// Proves the local sink over its two protocols: what is taken by SMTP is read by POP3, and by a POP3 client not our own.
import { execFile, spawn } from "node:child_process";
import { mkdtemp, readdir, rm } from "node:fs/promises";
import { connect } from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { text } from "node:stream/consumers";
import { promisify } from "node:util";
import nodemailer from "nodemailer";
import { afterAll, beforeAll, beforeEach, expect, test } from "vitest";
import { reservePort } from "../../db/free-port";
import { Maildrop } from "~/emails/maildrop";
import { readMailbox } from "~/emails/mailbox";
import { startSink, type Sink } from "~/emails/sink";

let folder: string;
let sink: Sink;

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), "sink-"));
  sink = await startSink({ smtpPort: 0, popPort: 0, folder });
});
beforeEach(async () => {
  for (const name of await readdir(folder)) await rm(path.join(folder, name));
});
afterAll(async () => {
  await sink.close();
  await rm(folder, { recursive: true });
});

async function send(to: string | string[], subject: string, body = "Text"): Promise<void> {
  const transport = nodemailer.createTransport({ host: "127.0.0.1", port: sink.smtpPort });
  await transport.sendMail({ from: "rfq@tenderband.example", to, subject, text: body });
}

/** The server's words for a list of commands sent at once. */
async function pop3(...commands: string[]): Promise<string> {
  const socket = connect(sink.popPort, "127.0.0.1");
  socket.write([...commands, "QUIT", ""].join("\r\n"));
  return text(socket);
}

test("each recipient of the envelope finds its own copy, newest first, and * finds all", async () => {
  await send(["a@tolvane.example", "B@Corva.example"], "first");
  await send("a@tolvane.example", "second");
  const subjects = async (address?: string) =>
    (await readMailbox({ port: sink.popPort, address })).map((mail) => mail.subject);
  expect(await subjects("a@tolvane.example")).toEqual(["second", "first"]);
  expect(await subjects("b@corva.example")).toEqual(["first"]);
  expect(await subjects("nobody@corva.example")).toEqual([]);
  expect(await subjects()).toEqual(["second", "first", "first"]);
  expect((await readMailbox({ port: sink.popPort, newest: 1 })).map((mail) => mail.subject)).toEqual(["second"]);
});

test("lines that begin with dots, long lines and letters beyond ASCII come back as they were sent", async () => {
  const body = `.\n..\n...x\n${"long ".repeat(400)}\nΩ \u2212 ü\n.`;
  await send("a@tolvane.example", "Ω, dots", body);
  const [mail] = await readMailbox({ port: sink.popPort });
  expect(mail).toMatchObject({ subject: "Ω, dots", html: "" });
  expect(mail?.text.trimEnd()).toBe(body);
});

test("the commands of RFC 1939 answer in their form, and nothing can be deleted", async () => {
  await send("a@tolvane.example", "one");
  const answers = await pop3(
    "USER a@tolvane.example",
    "PASS x",
    "STAT",
    "LIST 1",
    "DELE 1",
    "RSET",
    "NOOP",
    "LIST 2",
    "APOP",
  );
  const lines = answers.split("\r\n");
  expect(lines[3]).toMatch(/^\+OK 1 \d+$/);
  expect(lines[4]).toBe(lines[3]?.replace("+OK 1", "+OK 1"));
  expect(lines.slice(5)).toEqual([
    "-ERR this mailbox is read-only",
    "+OK",
    "+OK",
    "-ERR no such message",
    "-ERR unknown command",
    "+OK bye",
    "",
  ]);
  expect(await readdir(folder)).toHaveLength(1);
});

test("nothing is shown before USER and PASS", async () => {
  await send("a@tolvane.example", "one");
  expect(await pop3("STAT", "RETR 1", "PASS x")).toBe(
    `+OK mail sink ready\r\n${"-ERR USER and PASS first\r\n".repeat(3)}+OK bye\r\n`,
  );
});

test("Python's poplib, a client not of this project, reads count, sizes, ids, a mail and its top", async () => {
  await send("a@tolvane.example", "first", ".dotted\nsecond line\nthird line");
  await send("a@tolvane.example", "second");
  const script = `
import json, poplib, sys
box = poplib.POP3("127.0.0.1", int(sys.argv[1]))
box.user("*"); box.pass_("x")
count, size = box.stat()
sizes = [int(line.split()[1]) for line in box.list()[1]]
ids = [line.split()[1].decode() for line in box.uidl()[1]]
lines, top = box.retr(1)[1], box.top(1, 1)[1]
box.quit()
print(json.dumps(dict(count=count, size=size, sizes=sizes, ids=ids, body=[l.decode() for l in lines[lines.index(b"") + 1:]],
  octets=sum(len(l) + 2 for l in lines), top=[l.decode() for l in top[top.index(b"") + 1:]])))`;
  const { stdout } = await promisify(execFile)("python3", ["-c", script, String(sink.popPort)]);
  const seen = JSON.parse(stdout) as { sizes: number[]; ids: string[]; octets: number };
  expect(seen).toMatchObject({ count: 2, body: [".dotted", "second line", "third line"], top: [".dotted"] });
  expect(seen.sizes[0]).toBe(seen.octets);
  expect(seen).toHaveProperty(
    "size",
    seen.sizes.reduce((sum, size) => sum + size),
  );
  expect(seen.ids.map((id) => `${id}.eml`)).toEqual((await readdir(folder)).sort());
});

test("only the newest mails are kept, and no part of one is left behind", async () => {
  const drop = path.join(folder, "bounded");
  const maildrop = new Maildrop(drop, 3);
  await maildrop.prepare();
  for (const number of [1, 2, 3, 4, 5])
    await maildrop.store("a@tolvane.example", Buffer.from(`Subject: ${number}\r\n\r\n`));
  const kept = await Promise.all((await maildrop.list()).map(({ id }) => maildrop.read(id)));
  expect(kept.map((mail) => /Subject: (\d)/.exec(mail?.toString() ?? "")?.[1])).toEqual(["3", "4", "5"]);
  expect(await readdir(drop)).toHaveLength(3);
  await rm(drop, { recursive: true });
});

test("a mail over the limit is refused and not kept", async () => {
  await expect(send("a@tolvane.example", "large", "x".repeat(11 * 1024 * 1024))).rejects.toMatchObject({
    responseCode: 552,
  });
  expect(await readdir(folder)).toEqual([]);
});

test("a taken port is an error, and the other port is free again", async () => {
  const reserved = await reservePort();
  await reserved.release();
  const options = { smtpPort: reserved.port, popPort: sink.popPort, folder };
  await expect(startSink(options)).rejects.toMatchObject({ code: "EADDRINUSE" });
  const second = await startSink({ ...options, popPort: 0 });
  await second.close();
});

test("as a program it says where it listens, keeps its mails from run to run, and ends on a signal", async () => {
  await send("a@tolvane.example", "kept");
  for (const signal of ["SIGTERM", "SIGINT"] as const) {
    const parameters = ["--smtp-port", "0", "--pop-port", "0", "--folder", folder];
    const program = spawn(process.execPath, ["--import", "tsx", "emails/sink.ts", ...parameters]);
    const exit = new Promise((resolve) => program.once("exit", resolve));
    const [line] = await once(program.stdout);
    const port = Number(/POP3 on 127\.0\.0\.1:(\d+)/.exec(line)?.[1]);
    expect((await readMailbox({ port })).map((mail) => mail.subject)).toEqual(["kept"]);
    const idle = connect(port, "127.0.0.1").on("error", () => undefined);
    program.kill(signal);
    expect(await exit).toBe(0);
    idle.destroy();
  }
});

test("as a program with a taken port it says so and ends with 1", async () => {
  const parameters = ["--smtp-port", String(sink.smtpPort), "--pop-port", "0", "--folder", folder];
  const program = spawn(process.execPath, ["--import", "tsx", "emails/sink.ts", ...parameters]);
  const exit = new Promise((resolve) => program.once("exit", resolve));
  expect(await text(program.stderr)).toMatch(/^Mail sink: .*EADDRINUSE.*\n$/);
  expect(await exit).toBe(1);
});

function once(stream: NodeJS.ReadableStream): Promise<[string]> {
  return new Promise((resolve) => stream.once("data", (chunk: Buffer) => resolve([chunk.toString()])));
}
