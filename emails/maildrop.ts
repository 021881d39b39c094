// Mails of the local sink on disk: one .eml file a delivery, the newest kept.
import { randomBytes } from "node:crypto";
import { mkdir, open, readdir, readFile, rename, rm, writeFile } from "node:fs/promises";
import path from "node:path";

export interface DroppedMail {
  /** File name without ending: unique, and ascending in order of arrival. */
  readonly id: string;
  readonly recipient: string;
}

const ENDING = ".eml";
const HEADER_BYTES = 512;
const DELIVERED_TO = /^Delivered-To: (\S+)\r\n/;

/** A folder of mails; one process writes it. */
export class Maildrop {
  private arrivals = 0;

  constructor(
    private readonly folder: string,
    /** How many mails are kept; older ones go. */
    private readonly capacity: number,
  ) {}

  async prepare(): Promise<void> {
    await mkdir(this.folder, { recursive: true, mode: 0o700 });
  }

  /** Stores one copy, whole or not at all; the recipient of the envelope stands in its first line. */
  async store(recipient: string, message: Buffer): Promise<void> {
    const header = Buffer.from(`Delivered-To: ${recipient}\r\n`);
    const file = path.join(this.folder, this.nextId());
    await writeFile(`${file}.part`, Buffer.concat([header, message]), { mode: 0o600 });
    await rename(`${file}.part`, file + ENDING);
    await this.removeOldest();
  }

  /** Mails in order of arrival. */
  async list(): Promise<DroppedMail[]> {
    const mails = await Promise.all((await this.ids()).map((id) => this.readRecipient(id)));
    return mails.filter((mail) => mail !== undefined);
  }

  /** The bytes of one mail; undefined if it has gone since it was listed. */
  async read(id: string): Promise<Buffer | undefined> {
    return unlessGone(readFile(path.join(this.folder, id + ENDING)));
  }

  private nextId(): string {
    const time = new Date().toISOString().replace(/\D/g, "");
    this.arrivals += 1;
    return `${time}-${String(this.arrivals).padStart(8, "0")}-${randomBytes(4).toString("hex")}`;
  }

  private async ids(): Promise<string[]> {
    const names = await readdir(this.folder);
    const ids = names.filter((name) => name.endsWith(ENDING)).map((name) => name.slice(0, -ENDING.length));
    return ids.sort();
  }

  private async readRecipient(id: string): Promise<DroppedMail | undefined> {
    const file = await unlessGone(open(path.join(this.folder, id + ENDING)));
    if (file === undefined) return undefined;
    try {
      const { buffer, bytesRead } = await file.read(Buffer.alloc(HEADER_BYTES), 0, HEADER_BYTES, 0);
      const recipient = DELIVERED_TO.exec(buffer.toString("utf8", 0, bytesRead))?.[1] ?? "";
      return { id, recipient };
    } finally {
      await file.close();
    }
  }

  private async removeOldest(): Promise<void> {
    const ids = await this.ids();
    const surplus = ids.slice(0, Math.max(0, ids.length - this.capacity));
    await Promise.all(surplus.map((id) => rm(path.join(this.folder, id + ENDING), { force: true })));
  }
}

async function unlessGone<T>(result: Promise<T>): Promise<T | undefined> {
  try {
    return await result;
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "ENOENT") return undefined;
    throw error;
  }
}
