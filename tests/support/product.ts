// The whole product on ports and in a folder of its own, started as people start it.
import { mkdir, rm } from "node:fs/promises";
import path from "node:path";
import { startChild, type ChildExit } from "../../db/child-process";
import { reservePort } from "../../db/free-port";
import { takeLock } from "../../db/lock";
import { readAccounts, serverAddresses } from "../../db/mariadb";
import { readStateFile } from "../../app/start/state-file";

export interface ProductOptions {
  /** Holds data, mail, logs; under `.tenderband/`. Emptied first unless `keep` is set. */
  folder: string;
  /** The folder's data stays from the last run. @default false */
  keep?: boolean;
  /** Added to the environment. */
  environment?: NodeJS.ProcessEnv;
}

export interface Product {
  appUrl: string;
  /** Port of the mail sink's POP3 mailbox on 127.0.0.1. */
  popPort: number;
  smtpPort: number;
  /** Address of the database by its owner's account. */
  ownerUrl: string;
  /** Number of the process that runs the others. */
  pid: number;
  /** Ends all in order, as Ctrl-C does. */
  stop(): Promise<ChildExit>;
}

/** What a caller may have set for a product of their own and must not reach one under test. */
const CONFIGURATION_NAMES = new Set([
  "DATABASE_URL",
  "DATABASE_OWNER_URL",
  "SMTP_URL",
  "APP_URL",
  "SESSION_SECRET",
  "MAIL_POP_PORT",
  "BUILD_FOLDER",
  "UPLOAD_FOLDER",
  "NODE_ENV",
  "PORT",
  "HOST",
  "LOG_LEVEL",
]);

/** The caller's environment without any configuration of the product. */
export function plainEnvironment(): NodeJS.ProcessEnv {
  return Object.fromEntries(Object.entries(process.env).filter(([name]) => !CONFIGURATION_NAMES.has(name)));
}

/**
 * Starts the built product with the demo in its database and waits until it answers.
 *
 * @throws Error with what it printed, if it ends instead
 */
export async function startProduct({ folder, keep = false, environment = {} }: ProductOptions): Promise<Product> {
  if (!keep) await emptyFolder(folder);
  const reserved = await reservePort();
  const env = { ...plainEnvironment(), PORT: String(reserved.port), TENDERBAND_FOLDER: folder, ...environment };
  await reserved.release();
  const child = startChild(process.execPath, ["--import", "tsx", "app/start.ts"], { env, output: ["pipe", "pipe"] });
  let printed = "";
  const appUrl = await new Promise<string>((resolve, reject) => {
    const read = (chunk: Buffer) => {
      printed += chunk.toString();
      const found = /Tenderband answers at (\S+?)\/?\n/.exec(printed)?.[1];
      if (found) resolve(found);
    };
    child.process.stdout?.on("data", read);
    child.process.stderr?.on("data", read);
    void child.exited.then(() => reject(new Error(`the product ended instead of answering:\n${printed}`)));
  });
  const state = await readStateFile(path.join(folder, "state.json"));
  const accounts = await readAccounts(path.join(folder, "mariadb"));
  return {
    appUrl,
    popPort: Number(state.popPort),
    smtpPort: Number(state.smtpPort),
    ownerUrl: serverAddresses(Number(state.mariadbPort), accounts).ownerUrl("tenderband"),
    pid: child.pid,
    stop: () => child.stop(12_000),
  };
}

async function emptyFolder(folder: string): Promise<void> {
  const taken = await takeLock(path.join(folder, "start.lock"));
  if (!taken.ok) throw new Error(`a product runs in ${folder} already (process ${taken.holder.pid})`);
  await rm(folder, { recursive: true, force: true });
  await mkdir(folder, { recursive: true });
}
