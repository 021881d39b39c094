// The database of a start: running, migrated and, if it is the embedded one and empty, filled with the demo.
import path from "node:path";
import type { ReservedPort } from "~/db/free-port";
import { createDatabase, dropDatabase, grantApplicationUser, startMariadb, withConnection } from "~/db/mariadb";
import { migrate } from "~/db/migrate";
import { keepRunning, type Kept } from "./keep-running";
import { DATABASE_NAME } from "./settings";
import { readStateFile, writeStateFile } from "./state-file";

type Say = (line: string) => void;

/** Starts the MariaDB of this folder and keeps it running. */
export async function runMariadb(mariadb: { folder: string; port: ReservedPort }, say: Say): Promise<Kept> {
  const { folder, port } = mariadb;
  await port.release();
  say(`starting MariaDB on 127.0.0.1:${port.port}`);
  return keepRunning("MariaDB", () => startMariadb({ folder, port: port.port, log: say }), say);
}

/** Migrates a database given from outside. */
export async function migrateExternal(ownerUrl: string, say: Say): Promise<void> {
  reportMigrations(await migrate(ownerUrl), say);
}

/**
 * Creates, migrates and fills the embedded database. A demo that a killed start left half-filled is made anew; a database
 * with rows of its own is left alone.
 *
 * @param folder the start's folder, whose `demo.json` tells how far the demo got
 */
export async function prepareEmbedded(ownerUrl: string, folder: string, say: Say): Promise<void> {
  const stateFile = path.join(folder, "demo.json");
  const { demo } = await readStateFile(stateFile);
  const server = ownerUrl.slice(0, ownerUrl.lastIndexOf("/") + 1);
  if (demo === "filling") await dropDatabase(server, DATABASE_NAME);
  await createDatabase(server, DATABASE_NAME);
  reportMigrations(await migrate(ownerUrl), say);
  await grantApplicationUser(server, DATABASE_NAME);
  if (!(await isEmpty(ownerUrl))) return;
  say("filling the demo");
  await writeStateFile(stateFile, { demo: "filling" });
  await fillDemo();
  await writeStateFile(stateFile, { demo: "filled" });
}

async function fillDemo(): Promise<void> {
  const { seedDemo } = await import("~/db/seeds/demo");
  const { sequelize } = await import("~/db/connection.server");
  try {
    await seedDemo();
  } finally {
    await sequelize.close();
  }
}

async function isEmpty(ownerUrl: string): Promise<boolean> {
  const rows: unknown[] = await withConnection(ownerUrl, (connection) =>
    connection.query("SELECT 1 FROM organisations LIMIT 1"),
  );
  return rows.length === 0;
}

function reportMigrations(names: string[], say: Say): void {
  if (names.length > 0) say(`migrated: ${names.join(", ")}`);
}
