// The programs that `npm start` runs beside the database, each with a log file, and what a killed start left of them.
import { mkdir, open, readFile, rename, rm, stat } from "node:fs/promises";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { startChild, type Child } from "~/db/child-process";
import { identify, isAlive, type ProcessIdentity } from "~/db/lock";
import { readStateFile, writeStateFile } from "./state-file";

const LARGEST_LOG_BYTES = 20 * 1024 * 1024;
const LEFTOVERS_END_WITHIN_MS = 5_000;

export interface ProgramOptions {
  /** The start's folder: logs go to `logs/`, process numbers to `programs.json`. */
  folder: string;
  /** File name of the log, and key among the process numbers. */
  name: string;
  environment: NodeJS.ProcessEnv;
  /** Output to the terminal rather than to the log. @default false */
  visible?: boolean;
}

/** Starts a TypeScript program of this project. */
export async function startProgram(file: string, parameters: string[], options: ProgramOptions): Promise<Child> {
  const { folder, name, environment, visible = false } = options;
  const command = ["--import", "tsx", file, ...parameters];
  const log = await openLog(logFileOf(folder, name));
  try {
    const output = visible ? undefined : ([log.fd, log.fd] satisfies [number, number]);
    const child = startChild(process.execPath, command, { env: environment, output });
    await remember(folder, name, await identify(child.pid));
    return child;
  } finally {
    await log.close();
  }
}

export function logFileOf(folder: string, name: string): string {
  return path.join(folder, "logs", `${name}.log`);
}

/** The last lines of a program's log. */
export async function logTail(folder: string, name: string): Promise<string> {
  const text = await readFile(logFileOf(folder, name), "utf8").catch(() => "");
  return text.trimEnd().split("\n").slice(-20).join("\n");
}

/** Ends what an earlier start could not end because it was killed: its programs hold ports that are needed now. */
export async function endLeftovers(folder: string, say: (line: string) => void): Promise<void> {
  const file = path.join(folder, "programs.json");
  const programs = Object.entries(await readStateFile(file));
  await Promise.all(programs.map(([name, value]) => endLeftover(name, value, say)));
  await rm(file, { force: true });
}

async function endLeftover(name: string, value: unknown, say: (line: string) => void): Promise<void> {
  if (!isIdentity(value) || !(await isAlive(value))) return;
  say(`ending the ${name} that an earlier run left (process ${value.pid})`);
  signalGroup(value.pid, "SIGTERM");
  const deadline = Date.now() + LEFTOVERS_END_WITHIN_MS;
  while (await isAlive(value)) {
    await delay(50);
    if (Date.now() > deadline) signalGroup(value.pid, "SIGKILL");
  }
}

function signalGroup(leaderPid: number, signal: NodeJS.Signals): void {
  try {
    process.kill(-leaderPid, signal);
  } catch {
    // The group has ended meanwhile.
  }
}

let writing: Promise<void> = Promise.resolve();

/** One after the other: programs are started side by side and share the file. */
function remember(folder: string, name: string, identity: ProcessIdentity): Promise<void> {
  const file = path.join(folder, "programs.json");
  writing = writing.then(async () => writeStateFile(file, { ...(await readStateFile(file)), [name]: identity }));
  return writing;
}

function isIdentity(value: unknown): value is ProcessIdentity {
  if (typeof value !== "object" || value === null || !("pid" in value) || !("startedAt" in value)) return false;
  return typeof value.pid === "number" && value.pid > 1 && typeof value.startedAt === "string";
}

/** Opens a log for adding to it; one that has grown large makes room first. */
async function openLog(file: string) {
  await mkdir(path.dirname(file), { recursive: true });
  const size = await stat(file).then(
    (entry) => entry.size,
    () => 0,
  );
  if (size > LARGEST_LOG_BYTES) await rename(file, `${file}.old`);
  return open(file, "a", 0o600);
}
