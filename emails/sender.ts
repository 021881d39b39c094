// The sender: one mail to one checked address over SMTP.
import nodemailer from "nodemailer";
import { z } from "zod";
import { singleLine } from "./format";

/** One plain address: no list, group, quoting, comment or line break, 254 characters at most (RFC 5321, 4.5.3.1.3 less its brackets). */
export const PlainAddress = z.email().max(254);

const MessageId = z.string().regex(/^[\w.+-]+@([\w.-]+|\[[\w.:]+\])$/);

export interface Correspondent {
  readonly name?: string | null;
  readonly address: string;
}

export interface OutgoingMail {
  readonly to: Correspondent;
  /** The outbox row's own, with or without angle brackets: a second delivery of the same mail can be told by it. */
  readonly messageId: string;
  readonly subject: string;
  readonly html: string;
  readonly text: string;
}

export interface SenderOptions {
  /** smtp://[user:password@]host[:port], or smtps:// for TLS from the first byte. */
  readonly smtpUrl: string;
  readonly from: Correspondent;
  /** Refuse to go on without STARTTLS on smtp://. @default true, but for a server on this machine */
  readonly requireTls?: boolean;
}

export interface Sender {
  /** Resolves once the server has taken the mail. Rejects with nodemailer's error, or a ZodError for an address that is not plain. */
  send(mail: OutgoingMail): Promise<void>;
  close(): void;
}

const LOOPBACK: readonly string[] = ["127.0.0.1", "[::1]", "localhost"];
const MILLISECONDS_A_SECOND = 1000;

/** @throws Error if the URL or the sender's address cannot be used */
export function createSender(options: SenderOptions): Sender {
  const server = readSmtpUrl(options.smtpUrl);
  const from = checkedCorrespondent(options.from);
  const transport = nodemailer.createTransport({
    host: server.host,
    port: server.port,
    secure: server.secure,
    ...(server.user !== "" && { auth: { user: server.user, pass: server.password } }),
    requireTLS: !server.secure && (options.requireTls ?? !server.loopback),
    connectionTimeout: 10 * MILLISECONDS_A_SECOND,
    greetingTimeout: 40 * MILLISECONDS_A_SECOND, // some servers greet late on purpose
    socketTimeout: 40 * MILLISECONDS_A_SECOND,
    disableFileAccess: true,
    disableUrlAccess: true,
  });
  return {
    async send(mail) {
      const to = checkedCorrespondent(mail.to);
      await transport.sendMail({
        from,
        to,
        envelope: { from: from.address, to: [to.address] },
        messageId: `<${MessageId.parse(mail.messageId.replace(/^<(.*)>$/, "$1"))}>`,
        subject: singleLine(mail.subject),
        html: mail.html,
        text: mail.text,
        headers: { "Auto-Submitted": "auto-generated" }, // RFC 3834: nobody's out-of-office answers it
        disableFileAccess: true,
        disableUrlAccess: true,
      });
    },
    close: () => transport.close(),
  };
}

function checkedCorrespondent({ name, address }: Correspondent): { name: string; address: string } {
  return { name: singleLine(name ?? ""), address: PlainAddress.parse(address) };
}

function readSmtpUrl(smtpUrl: string) {
  if (!URL.canParse(smtpUrl)) throw new Error("SMTP_URL is not a URL such as smtp://mail.example.com:587");
  const url = new URL(smtpUrl);
  const secure = url.protocol === "smtps:";
  if (!secure && url.protocol !== "smtp:") throw new Error("SMTP_URL must start with smtp:// or smtps://");
  if (url.hostname === "") throw new Error("SMTP_URL names no host");
  const loopback = LOOPBACK.includes(url.hostname);
  return {
    secure,
    loopback,
    host: url.hostname.replace(/^\[(.*)\]$/, "$1"),
    port: url.port === "" ? (secure ? 465 : 587) : Number(url.port),
    user: decodeURIComponent(url.username),
    password: decodeURIComponent(url.password),
  };
}
