// Reads the local sink's mailbox over POP3: for the page of development and for tests.
import { connect, type Socket } from "node:net";
import { simpleParser, type AddressObject, type ParsedMail } from "mailparser";

export interface MailboxOptions {
  readonly port: number;
  /** Whose mails; without it, all. */
  readonly address?: string;
  /** @default "127.0.0.1" */
  readonly host?: string;
  /** How many of the newest are fetched. @default 100 */
  readonly newest?: number;
}

export interface StoredMail {
  readonly id: string;
  readonly to: string;
  readonly from: string;
  readonly subject: string;
  readonly text: string;
  /** "" for a mail without an HTML part. It is somebody's markup: show it in a sandbox only. */
  readonly html: string;
  readonly date: Date;
  /** With its angle brackets. */
  readonly messageId: string;
  /** Addresses of http and https in the HTML part's links, else in the text part. */
  readonly links: readonly string[];
}

const IDLE_MILLISECONDS = 10_000;

/** Mails, newest first. @throws Error if the server is not there, falls silent for 10 s, or refuses a command */
export async function readMailbox(options: MailboxOptions): Promise<StoredMail[]> {
  const client = new Pop3Client(connect({ port: options.port, host: options.host ?? "127.0.0.1" }));
  try {
    await client.greeting();
    await client.command(`USER ${options.address ?? "*"}`);
    await client.command("PASS none");
    const listed = await client.commandWithLines("UIDL");
    const entries = listed.split("\r\n").filter((line) => line !== "");
    const mails: StoredMail[] = [];
    for (const entry of entries.reverse().slice(0, options.newest ?? 100)) {
      const [number = "", id = ""] = entry.split(" ");
      mails.push(await parseMail(id, await client.commandWithLines(`RETR ${number}`)));
    }
    await client.command("QUIT");
    return mails;
  } finally {
    client.close();
  }
}

async function parseMail(id: string, source: string): Promise<StoredMail> {
  const mail = await simpleParser(Buffer.from(source, "latin1"), { skipImageLinks: true });
  const html = mail.html || "";
  return {
    id,
    to: addressText(mail.to),
    from: addressText(mail.from),
    subject: mail.subject ?? "",
    text: mail.text ?? "",
    html,
    date: mail.date ?? new Date(0),
    messageId: mail.messageId ?? "",
    links: findLinks(html, mail.text ?? ""),
  };
}

function addressText(addresses: ParsedMail["to"]): string {
  const list: AddressObject[] = addresses === undefined ? [] : [addresses].flat();
  return list.flatMap(({ value }) => value.map(({ address }) => address ?? "")).join(", ");
}

function findLinks(html: string, text: string): string[] {
  const inHtml = [...html.matchAll(/<a\s[^>]*?href="(https?:[^"]*)"/g)].map((match) => decodeEntities(match[1] ?? ""));
  const found = inHtml.length > 0 ? inHtml : [...text.matchAll(/https?:\/\/[^\s<>"]+/g)].map(([link]) => link);
  return [...new Set(found)];
}

function decodeEntities(attribute: string): string {
  const characters: Readonly<Record<string, string>> = { amp: "&", lt: "<", gt: ">", quot: '"', "#39": "'" };
  return attribute.replace(/&(amp|lt|gt|quot|#39);/g, (entity, name: string) => characters[name] ?? entity);
}

/** One POP3 connection, one command at a time; text is kept as latin1, a byte a character. */
class Pop3Client {
  private received = "";
  private failure: Error | undefined;
  private wake: () => void = () => undefined;

  constructor(private readonly socket: Socket) {
    socket.setEncoding("latin1");
    socket.setTimeout(IDLE_MILLISECONDS, () => socket.destroy(new Error("the POP3 server does not answer")));
    socket.on("data", (chunk: string) => {
      this.received += chunk;
      this.wake();
    });
    socket.on("error", (error) => (this.failure ??= error));
    socket.on("close", () => {
      this.failure ??= new Error("the POP3 server closed the connection");
      this.wake();
    });
  }

  async greeting(): Promise<void> {
    await this.statusLine("greeting");
  }

  async command(line: string): Promise<void> {
    if (/[\r\n]/.test(line)) throw new Error("a POP3 command is one line");
    this.socket.write(`${line}\r\n`, "latin1");
    await this.statusLine(line.split(" ", 1)[0] ?? "");
  }

  /** The lines after the status line, each ended by CRLF, without dot-stuffing. */
  async commandWithLines(line: string): Promise<string> {
    await this.command(line);
    if (this.received.startsWith(".\r\n")) {
      this.received = this.received.slice(3);
      return "";
    }
    const lines = await this.until("\r\n.\r\n");
    return `${lines}\r\n`.replace(/(^|\r\n)\.\./g, "$1.");
  }

  close(): void {
    this.socket.destroy();
  }

  private async statusLine(command: string): Promise<void> {
    const status = await this.until("\r\n");
    if (!status.startsWith("+OK")) throw new Error(`POP3 ${command}: ${status}`);
  }

  private async until(end: string): Promise<string> {
    let from = 0;
    for (;;) {
      const at = this.received.indexOf(end, from);
      if (at >= 0) {
        const text = this.received.slice(0, at);
        this.received = this.received.slice(at + end.length);
        return text;
      }
      if (this.failure !== undefined) throw this.failure;
      from = Math.max(0, this.received.length - end.length);
      await new Promise<void>((resolve) => (this.wake = resolve));
    }
  }
}
