// Builds the pages if their sources have changed, each build in a folder of its own, so that a server goes on serving the one it began with.
import { createHash } from "node:crypto";
import { existsSync } from "node:fs";
import { mkdir, open, readdir, readFile, rm, stat, writeFile } from "node:fs/promises";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { startChild } from "~/db/child-process";
import { takeLock, type Lock } from "~/db/lock";

const FOLDERS = ["app", "db", "emails", "public"];
const FILES = ["package.json", "package-lock.json", "tsconfig.json", "vite.config.ts", "react-router.config.ts"];
/** Not part of any page: large, and read by the demo alone. */
const LEFT_OUT = path.join("db", "seeds", "demo-data");

/** Builds that are kept: those of the last sources, for servers that still run. */
const KEPT_BUILDS = 4;
const BUILD_NAME = /^[0-9a-f]{16}$/;
/** Written last: a build that was cut off has none. */
const COMPLETE = "complete";

export interface BuildOptions {
  /** Takes what the build prints. */
  logFile: string;
  say: (line: string) => void;
}

/**
 * The folder of the build of the sources as they are, for `BUILD_FOLDER`.
 *
 * @throws Error with the log's last lines if the build fails
 */
export async function buildIfStale({ logFile, say }: BuildOptions): Promise<string> {
  await mkdir("build", { recursive: true });
  const lock = await waitForLock(path.join("build", "build.lock"), say);
  try {
    const folder = path.join("build", (await sourcesHash()).slice(0, 16));
    if (existsSync(path.join(folder, COMPLETE))) return folder;
    say(`building the pages (log: ${logFile})`);
    await rm(folder, { recursive: true, force: true });
    await build(folder, logFile);
    await writeFile(path.join(folder, COMPLETE), "");
    await removeOldBuilds();
    return folder;
  } finally {
    await lock.release();
  }
}

async function removeOldBuilds(): Promise<void> {
  const entries = await readdir("build", { withFileTypes: true });
  const folders = entries.filter((entry) => entry.isDirectory() && BUILD_NAME.test(entry.name));
  const dated = await Promise.all(
    folders.map(async ({ name }) => ({ name, at: (await stat(path.join("build", name))).mtimeMs })),
  );
  const old = dated.sort((a, b) => b.at - a.at).slice(KEPT_BUILDS);
  for (const { name } of old) await rm(path.join("build", name), { recursive: true, force: true });
}

async function build(folder: string, logFile: string): Promise<void> {
  await mkdir(path.dirname(logFile), { recursive: true });
  const log = await open(logFile, "w");
  try {
    const program = path.join("node_modules", "@react-router", "dev", "bin.js");
    const env = { ...process.env, NODE_ENV: "production", BUILD_FOLDER: folder };
    const child = startChild(process.execPath, [program, "build"], { env, output: [log.fd, log.fd] });
    const { code } = await child.exited;
    if (code === 0) return;
  } finally {
    await log.close();
  }
  const lines = (await readFile(logFile, "utf8")).trimEnd().split("\n");
  throw new Error(`the build failed; its log ends:\n${lines.slice(-25).join("\n")}`);
}

async function waitForLock(file: string, say: (line: string) => void): Promise<Lock> {
  for (let told = false; ; told = true) {
    const taken = await takeLock(file);
    if (taken.ok) return taken.lock;
    if (!told) say(`another run is building (process ${taken.holder.pid}); waiting for it`);
    await delay(300);
  }
}

/** SHA-256 over names and contents of everything a page can be made of. */
async function sourcesHash(): Promise<string> {
  const hash = createHash("sha256");
  const inFolders = await Promise.all(FOLDERS.map(filesUnder));
  for (const file of [...FILES, ...inFolders.flat()].sort()) {
    if (existsSync(file))
      hash
        .update(file)
        .update("\0")
        .update(await readFile(file))
        .update("\0");
  }
  return hash.digest("hex");
}

async function filesUnder(folder: string): Promise<string[]> {
  if (!existsSync(folder)) return [];
  const entries = await readdir(folder, { withFileTypes: true, recursive: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => path.join(entry.parentPath, entry.name))
    .filter((file) => !file.startsWith(LEFT_OUT));
}
