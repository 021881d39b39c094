// Locks between processes: a file that names its holder, taken over when the holder is gone.
import { randomBytes } from "node:crypto";
import { link, mkdir, readFile, rename, rm, writeFile } from "node:fs/promises";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";

/** A process that is not mistaken for a later one with the same number. */
export interface ProcessIdentity {
  pid: number;
  /** When the process began, in clock ticks since boot; empty where the system does not tell. */
  startedAt: string;
}

export interface LockHolder extends ProcessIdentity {
  /** What the holder wants others to know, such as its address. */
  note: string;
}

export interface Lock {
  /** Changes what others read about the holder. */
  describe(note: string): Promise<void>;
  release(): Promise<void>;
}

export type LockResult = { ok: true; lock: Lock } | { ok: false; holder: LockHolder };

/** Takes the lock if it is free or its holder is dead; otherwise tells who holds it. Does not wait. */
export async function takeLock(file: string, note = ""): Promise<LockResult> {
  await mkdir(path.dirname(file), { recursive: true });
  for (;;) {
    if (await linkWhole(file, note)) return { ok: true, lock: heldLock(file) };
    const text = await readFile(file, "utf8").catch(() => undefined);
    if (text === undefined) continue; // released meanwhile
    const holder = parseHolder(text);
    if (holder && (await isAlive(holder))) return { ok: false, holder };
    await removeStale(file, text);
  }
}

function heldLock(file: string): Lock {
  return {
    describe: async (note) => {
      const aside = await writeAside(file, note);
      await rename(aside, file);
    },
    release: () => rm(file, { force: true }),
  };
}

/** A link appears with its whole content or not at all, so a lock is never seen without its holder. */
async function linkWhole(file: string, note: string): Promise<boolean> {
  const aside = await writeAside(file, note);
  try {
    await link(aside, file);
    return true;
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "EEXIST") return false;
    throw error;
  } finally {
    await rm(aside, { force: true });
  }
}

async function writeAside(file: string, note: string): Promise<string> {
  const aside = `${file}.${process.pid}.${randomBytes(4).toString("hex")}`;
  const holder: LockHolder = { ...(await identify(process.pid)), note };
  await writeFile(aside, JSON.stringify(holder), { mode: 0o600 });
  return aside;
}

/** Removes a dead holder's lock, one process at a time: otherwise the second would remove what the first took since. */
async function removeStale(file: string, staleText: string): Promise<void> {
  const guard = `${file}.takeover`;
  if (!(await linkWhole(guard, ""))) {
    const holder = parseHolder(await readFile(guard, "utf8").catch(() => ""));
    if (holder && !(await isAlive(holder))) await rm(guard, { force: true });
    await delay(10);
    return;
  }
  try {
    if ((await readFile(file, "utf8").catch(() => undefined)) === staleText) await rm(file, { force: true });
  } finally {
    await rm(guard, { force: true });
  }
}

function parseHolder(text: string): LockHolder | undefined {
  try {
    const { pid, startedAt, note } = JSON.parse(text) as Partial<LockHolder>;
    if (typeof pid !== "number" || typeof startedAt !== "string") return undefined;
    return { pid, startedAt, note: typeof note === "string" ? note : "" };
  } catch {
    return undefined;
  }
}

export async function identify(pid: number): Promise<ProcessIdentity> {
  return { pid, startedAt: (await startOf(pid)) ?? "" };
}

/** True if this very process still runs. */
export async function isAlive({ pid, startedAt }: ProcessIdentity): Promise<boolean> {
  try {
    process.kill(pid, 0);
  } catch (error) {
    if (!(error instanceof Error && "code" in error && error.code === "EPERM")) return false;
  }
  const start = await startOf(pid);
  return start === undefined || start === startedAt;
}

/** Start time of a process, field 22 of its stat line (proc(5)); undefined where there is no such file. */
async function startOf(pid: number): Promise<string | undefined> {
  const stat = await readFile(`/proc/${pid}/stat`, "utf8").catch(() => undefined);
  return stat?.slice(stat.lastIndexOf(")") + 2).split(" ")[19];
}
