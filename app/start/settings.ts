// What a start runs and with which environment: what the caller gave, and what is made and kept for the rest.
import { randomBytes } from "node:crypto";
import path from "node:path";
import { ConfigurationError, readConfig, type Config } from "../config.server";
import { reservePort, type ReservedPort } from "~/db/free-port";
import { readAccounts, serverAddresses } from "~/db/mariadb";
import { readStateFile, writeStateFile } from "./state-file";

export const DATABASE_NAME = "tenderband";

export interface StartSettings {
  config: Config;
  /** For every child process. */
  environment: NodeJS.ProcessEnv;
  /** The MariaDB to run here; absent if DATABASE_URL was given. */
  mariadb?: { folder: string; port: ReservedPort };
  /** The mail sink to run here; absent if SMTP_URL was given. */
  sink?: { folder: string; smtp: ReservedPort; pop: ReservedPort };
}

/**
 * Completes the caller's environment. Ports are those of the last start where they are free, so that an open mailbox or
 * database client keeps working.
 *
 * @throws ConfigurationError with one line for each fault
 */
export async function readSettings(
  given: NodeJS.ProcessEnv,
  folder: string,
  development: boolean,
): Promise<StartSettings> {
  const port = given.PORT || "5180";
  const own: Record<string, string> = {
    NODE_ENV: development ? "development" : "production",
    PORT: port,
    APP_URL: given.APP_URL || `http://127.0.0.1:${port}`,
    UPLOAD_FOLDER: given.UPLOAD_FOLDER || path.join(folder, "uploads"),
    SESSION_SECRET: given.SESSION_SECRET || (await keptSecret(given, folder)),
  };
  const stateFile = path.join(folder, "state.json");
  const state = await readStateFile(stateFile);
  const settings: Pick<StartSettings, "mariadb" | "sink"> = {};
  if (!given.DATABASE_URL) {
    settings.mariadb = { folder: path.join(folder, "mariadb"), port: await reservePort(keptPort(state.mariadbPort)) };
    const addresses = serverAddresses(settings.mariadb.port.port, await readAccounts(settings.mariadb.folder));
    own.DATABASE_URL = addresses.url(DATABASE_NAME);
    own.DATABASE_OWNER_URL = addresses.ownerUrl(DATABASE_NAME);
    state.mariadbPort = settings.mariadb.port.port;
  }
  if (!given.SMTP_URL) {
    const smtp = await reservePort(keptPort(state.smtpPort));
    const pop = await reservePort(keptPort(state.popPort));
    settings.sink = { folder: path.join(folder, "mail"), smtp, pop };
    own.SMTP_URL = `smtp://127.0.0.1:${smtp.port}`;
    own.MAIL_POP_PORT = String(pop.port);
    Object.assign(state, { smtpPort: smtp.port, popPort: pop.port });
  }
  const environment = { ...given, ...own };
  const config = readConfig(environment);
  await writeStateFile(stateFile, state);
  return { ...settings, config, environment };
}

/** A secret made here protects nothing but a demo: with a real database or mail server the operator must give one. */
async function keptSecret(given: NodeJS.ProcessEnv, folder: string): Promise<string> {
  const service = ["DATABASE_URL", "SMTP_URL"].find((name) => given[name]);
  if (service)
    throw new ConfigurationError(`Configuration: SESSION_SECRET is not set; with ${service} it is required.`);
  const file = path.join(folder, "secrets.json");
  const secrets = await readStateFile(file);
  if (typeof secrets.sessionSecret === "string") return secrets.sessionSecret;
  const sessionSecret = randomBytes(32).toString("base64url");
  await writeStateFile(file, { ...secrets, sessionSecret });
  return sessionSecret;
}

function keptPort(value: unknown): number | undefined {
  return typeof value === "number" && Number.isInteger(value) && value > 0 && value < 65_536 ? value : undefined;
}
