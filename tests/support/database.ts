// A migrated, empty database for a test file: one of its own for each worker, on the test run's MariaDB.
import { randomBytes } from "node:crypto";
import { afterAll, beforeAll, beforeEach, inject } from "vitest";
import { createDatabase, dropDatabase, grantApplicationUser, withConnection } from "../../db/mariadb";
import { databaseName } from "./database-name";

/** Remembers which databases were migrated to the end: a run that was killed leaves half-made ones. */
const READY_DATABASE = "tenderband_test_ready";
const WITHIN_MS = 90_000;

export interface UseDatabaseOptions {
  /** Rows stay from test to test of the file. @default false: each test begins with empty tables */
  keepRows?: boolean;
}

/**
 * Gives the test file its worker's database, to be called once at the top of the file. `DATABASE_URL` names it already
 * when the file's modules are imported, so `~/db/connection.server` and all above it can be imported as usual.
 */
export function useDatabase({ keepRows = false }: UseDatabaseOptions = {}): void {
  beforeAll(async () => {
    await prepareDatabase();
    if (keepRows) await truncateAll();
  }, WITHIN_MS);
  if (!keepRows) beforeEach(truncateAll);
  afterAll(async () => {
    const { sequelize } = await import("~/db/connection.server");
    await sequelize.close();
  });
}

/** Removes all rows, by the owner's account: the app's may not remove what is there to stay. */
export async function truncateAll(): Promise<void> {
  const database = databaseName();
  await withConnection(ownerAddress(database), async (connection) => {
    const tables: { name: string }[] = await connection.query(
      "SELECT table_name AS name FROM information_schema.tables WHERE table_schema = ? AND table_type = 'BASE TABLE'",
      [database],
    );
    const names = tables.map(({ name }) => name).filter((name) => name !== "migrations");
    if (names.length === 0) return;
    const probes = names.map((name) => `SELECT '${name}' AS name FROM DUAL WHERE EXISTS (SELECT 1 FROM \`${name}\`)`);
    const filled: { name: string }[] = await connection.query(probes.join(" UNION ALL "));
    await connection.query("SET foreign_key_checks = 0");
    for (const { name } of filled) await connection.query(`TRUNCATE TABLE \`${name}\``);
  });
}

/**
 * Runs `use` with the owner's address of an empty, unmigrated database, which is dropped afterwards: for tests of the
 * migrations and of anything that changes tables.
 */
export async function withScratchDatabase<T>(use: (ownerUrl: string) => Promise<T>): Promise<T> {
  await startServer();
  const database = `tenderband_scratch_${randomBytes(6).toString("hex")}`;
  await createDatabase(ownerAddress(""), database);
  try {
    return await use(ownerAddress(database));
  } finally {
    await dropDatabase(ownerAddress(""), database);
  }
}

async function prepareDatabase(): Promise<void> {
  await startServer();
  const database = databaseName();
  await createDatabase(ownerAddress(""), READY_DATABASE);
  const migrated = await withConnection(ownerAddress(READY_DATABASE), async (connection) => {
    await connection.query("CREATE TABLE IF NOT EXISTS ready (name VARCHAR(64) PRIMARY KEY) CHARACTER SET utf8mb4");
    const rows: unknown[] = await connection.query("SELECT name FROM ready WHERE name = ?", [database]);
    return rows.length > 0;
  });
  if (migrated) return;
  await dropOlderOf(database);
  await createDatabase(ownerAddress(""), database);
  const { migrate } = await import("~/db/migrate");
  await migrate(ownerAddress(database));
  await grantApplicationUser(ownerAddress(""), database);
  await withConnection(ownerAddress(READY_DATABASE), (connection) =>
    connection.query("INSERT INTO ready (name) VALUES (?)", [database]),
  );
}

/** Drops what earlier migrations, or a run that was killed, left for this worker. */
async function dropOlderOf(database: string): Promise<void> {
  const worker = database.slice(database.lastIndexOf("_"));
  const names = await withConnection(ownerAddress(""), async (connection) => {
    const rows: { name: string }[] = await connection.query(
      "SELECT schema_name AS name FROM information_schema.schemata WHERE schema_name LIKE 'tenderband\\_test\\_%'",
    );
    return rows.map(({ name }) => name).filter((name) => name !== READY_DATABASE && name.endsWith(worker));
  });
  for (const name of names) {
    await withConnection(ownerAddress(READY_DATABASE), (connection) =>
      connection.query("DELETE FROM ready WHERE name = ?", [name]),
    );
    await dropDatabase(ownerAddress(""), name);
  }
}

function ownerAddress(database: string): string {
  return `${inject("testServer").ownerUrl}${database}`;
}

async function startServer(): Promise<void> {
  const { startUrl } = inject("testServer");
  if (startUrl === undefined) return;
  const response = await fetch(startUrl);
  if (!response.ok) throw new Error(`the test database did not start: ${await response.text()}`);
}
