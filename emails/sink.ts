// The local mail sink: takes every mail over SMTP, shows it over POP3, sends nothing on. A program, and a function for tests.
import type { Server } from "node:net";
import { buffer } from "node:stream/consumers";
import { fileURLToPath } from "node:url";
import { parseArgs } from "node:util";
import { SMTPServer } from "smtp-server";
import { Maildrop } from "./maildrop";
import { createPop3Server } from "./pop3-server";

export interface SinkOptions {
  /** 0 takes a free one. */
  readonly smtpPort: number;
  readonly popPort: number;
  /** Where the .eml files are kept; made if missing. */
  readonly folder: string;
  /** @default "127.0.0.1" */
  readonly host?: string;
}

export interface Sink {
  readonly smtpPort: number;
  readonly popPort: number;
  close(): Promise<void>;
}

const KEPT_MAILS = 500;
const LARGEST_MAIL_BYTES = 10 * 1024 * 1024;

/** @throws the listening error (EADDRINUSE …) if a port cannot be had; nothing is left listening then */
export async function startSink({ smtpPort, popPort, folder, host = "127.0.0.1" }: SinkOptions): Promise<Sink> {
  const maildrop = new Maildrop(folder, KEPT_MAILS);
  await maildrop.prepare();
  const smtp = createSmtpServer(maildrop);
  const pop = createPop3Server(maildrop);
  const closePop = trackConnections(pop);
  const closeSmtp = () => new Promise<void>((resolve) => smtp.close(() => resolve()));
  const boundSmtpPort = await listen(smtp.server, smtpPort, host);
  try {
    const boundPopPort = await listen(pop, popPort, host);
    const close = async () => {
      await Promise.all([closeSmtp(), closePop()]);
    };
    return { smtpPort: boundSmtpPort, popPort: boundPopPort, close };
  } catch (error) {
    await closeSmtp();
    throw error;
  }
}

function createSmtpServer(maildrop: Maildrop): SMTPServer {
  const server = new SMTPServer({
    disabledCommands: ["AUTH", "STARTTLS"],
    disableReverseLookup: true,
    size: LARGEST_MAIL_BYTES,
    closeTimeout: 1000,
    onData(stream, session, callback) {
      const recipients = session.envelope.rcptTo.map(({ address }) => address);
      buffer(stream)
        .then(async (message) => {
          if (stream.sizeExceeded) throw Object.assign(new Error("Message too large"), { responseCode: 552 });
          for (const recipient of recipients) await maildrop.store(recipient, message);
        })
        .then(() => callback(), callback);
    },
  });
  server.on("error", () => undefined); // a client that went away concerns nobody else
  return server;
}

function listen(server: Server, port: number, host: string): Promise<number> {
  return new Promise((resolve, reject) => {
    server.once("error", reject);
    server.listen(port, host, () => {
      server.off("error", reject);
      const address = server.address();
      resolve(typeof address === "object" && address !== null ? address.port : port);
    });
  });
}

/** Returns what closes the server and the connections still open to it. */
function trackConnections(server: Server): () => Promise<void> {
  const sockets = new Set<{ destroy(): unknown }>();
  server.on("connection", (socket) => {
    sockets.add(socket);
    socket.on("close", () => sockets.delete(socket));
  });
  return () =>
    new Promise((resolve) => {
      server.close(() => resolve());
      for (const socket of sockets) socket.destroy();
    });
}

function readArguments(): SinkOptions {
  const { values } = parseArgs({
    options: { "smtp-port": { type: "string" }, "pop-port": { type: "string" }, folder: { type: "string" } },
  });
  const smtpPort = Number(values["smtp-port"]);
  const popPort = Number(values["pop-port"]);
  if (!Number.isInteger(smtpPort) || !Number.isInteger(popPort) || values.folder === undefined) {
    throw new Error("usage: sink.ts --smtp-port N --pop-port N --folder DIR");
  }
  return { smtpPort, popPort, folder: values.folder };
}

async function run(): Promise<void> {
  const sink = await startSink(readArguments());
  console.log(`Mail sink: SMTP on 127.0.0.1:${sink.smtpPort}, POP3 on 127.0.0.1:${sink.popPort}`);
  const stop = () => void sink.close().then(() => process.exit(0));
  process.once("SIGTERM", stop);
  process.once("SIGINT", stop);
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  run().catch((error: unknown) => {
    console.error(`Mail sink: ${error instanceof Error ? error.message : String(error)}`);
    process.exit(1);
  });
}
