// A read-only POP3 server (RFC 1939; CAPA of RFC 2449) over the local sink's mails, for loopback only.
import { createServer, type Server, type Socket } from "node:net";
import type { Maildrop } from "./maildrop";

const LONGEST_COMMAND = 512; // octets; RFC 2449, 4 allows 255
const IDLE_MILLISECONDS = 600_000; // RFC 1939, 3: at least 10 minutes

interface Message {
  readonly id: string;
  /** Octets on the wire before dot-stuffing, every line ended by CRLF. */
  readonly content: string;
}

/** Any user and password are taken: the user's name is the recipient whose mails are shown, `*` shows all. */
export function createPop3Server(maildrop: Maildrop): Server {
  return createServer((socket) => {
    const session = new Session(maildrop);
    socket.setTimeout(IDLE_MILLISECONDS, () => socket.destroy());
    socket.on("error", () => socket.destroy()); // a client that went away concerns nobody else
    socket.write("+OK mail sink ready\r\n");
    serveCommands(socket, session);
  });
}

function serveCommands(socket: Socket, session: Session): void {
  let pending = "";
  let turn = Promise.resolve();
  socket.on("data", (chunk: Buffer) => {
    pending += chunk.toString("latin1");
    const lines = pending.split("\n");
    pending = lines.pop() ?? "";
    if (pending.length > LONGEST_COMMAND) return socket.destroy();
    for (const line of lines) {
      turn = turn.then(async () => {
        if (!socket.writable) return;
        const command = line.replace(/\r$/, "");
        socket.write(await answerOrFault(session, command), "latin1");
        if (session.ended) socket.end();
      });
    }
  });
}

async function answerOrFault(session: Session, command: string): Promise<string> {
  try {
    return `${await session.answer(command)}\r\n`;
  } catch {
    return "-ERR the mailbox cannot be read\r\n";
  }
}

/** One client's session: AUTHORIZATION until PASS, then TRANSACTION on the mails there were at that moment. */
class Session {
  ended = false;
  private user: string | undefined;
  private messages: Message[] | undefined;

  constructor(private readonly maildrop: Maildrop) {}

  async answer(line: string): Promise<string> {
    const [verb = "", ...parameters] = line.trim().split(/ +/);
    const command = verb.toUpperCase();
    if (command === "QUIT") return this.quit();
    if (command === "CAPA") return "+OK capabilities\r\nUSER\r\nUIDL\r\nTOP\r\n.";
    return this.messages === undefined
      ? this.authorize(command, parameters.join(" "))
      : this.transact(command, parameters, this.messages);
  }

  private quit(): string {
    this.ended = true;
    return "+OK bye";
  }

  private async authorize(command: string, parameter: string): Promise<string> {
    if (command === "USER" && parameter !== "") {
      this.user = parameter.toLowerCase();
      return "+OK";
    }
    if (command !== "PASS" || this.user === undefined) return "-ERR USER and PASS first";
    this.messages = await loadMessages(this.maildrop, this.user);
    return `+OK ${this.messages.length} messages`;
  }

  private transact(command: string, parameters: readonly string[], messages: readonly Message[]): string {
    const [which, lineCount] = parameters;
    switch (command) {
      case "NOOP":
      case "RSET":
        return "+OK";
      case "STAT":
        return `+OK ${messages.length} ${messages.reduce((sum, message) => sum + message.content.length, 0)}`;
      case "LIST":
        return listing(messages, which, (message) => String(message.content.length));
      case "UIDL":
        return listing(messages, which, (message) => message.id);
      case "RETR":
        return retrieval(messages, which, undefined);
      case "TOP":
        return lineCount !== undefined && /^\d+$/.test(lineCount)
          ? retrieval(messages, which, Number(lineCount))
          : "-ERR TOP needs a message and a number of lines";
      case "DELE":
        return "-ERR this mailbox is read-only";
      default:
        return "-ERR unknown command";
    }
  }
}

async function loadMessages(maildrop: Maildrop, user: string): Promise<Message[]> {
  const mails = (await maildrop.list()).filter(({ recipient }) => user === "*" || recipient.toLowerCase() === user);
  const messages = await Promise.all(
    mails.map(async ({ id }) => {
      const bytes = await maildrop.read(id);
      return bytes && { id, content: withLineEnds(bytes.toString("latin1")) };
    }),
  );
  return messages.filter((message) => message !== undefined);
}

function withLineEnds(text: string): string {
  const lines = text.replace(/\r?\n/g, "\r\n");
  return lines.endsWith("\r\n") ? lines : `${lines}\r\n`;
}

function find(messages: readonly Message[], which: string | undefined): Message | undefined {
  return which !== undefined && /^\d{1,9}$/.test(which) ? messages[Number(which) - 1] : undefined;
}

function listing(messages: readonly Message[], which: string | undefined, show: (message: Message) => string): string {
  if (which === undefined) {
    return ["+OK", ...messages.map((message, index) => `${index + 1} ${show(message)}`), "."].join("\r\n");
  }
  const message = find(messages, which);
  return message === undefined ? "-ERR no such message" : `+OK ${Number(which)} ${show(message)}`;
}

/** Head and body, or head and so many lines of the body; lines that begin with a dot get another (RFC 1939, 3). */
function retrieval(messages: readonly Message[], which: string | undefined, bodyLines: number | undefined): string {
  const message = find(messages, which);
  if (message === undefined) return "-ERR no such message";
  const content = bodyLines === undefined ? message.content : top(message.content, bodyLines);
  return `+OK ${content.length} octets\r\n${content.replace(/(^|\r\n)\./g, "$1..")}.`;
}

function top(content: string, bodyLines: number): string {
  const headEnd = content.indexOf("\r\n\r\n");
  if (headEnd < 0) return content;
  const body = content
    .slice(headEnd + 4)
    .split("\r\n")
    .slice(0, -1)
    .slice(0, bodyLines);
  return content.slice(0, headEnd + 4) + body.map((line) => `${line}\r\n`).join("");
}
