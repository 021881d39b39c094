// Proves what the other database tests lean on: own database, empty at each test, the app's account without excess rights.
import { QueryTypes } from "sequelize";
import { expect, test } from "vitest";
import { sequelize } from "~/db/connection.server";
import { withConnection } from "../../db/mariadb";
import { useDatabase, withScratchDatabase } from "./database";

useDatabase();

const insertOrganisation = `INSERT INTO organisations SET public_id = 'abcdefghijklmnop', kind = 'buyer', name = 'Northmast',
  time_zone = 'UTC', currency = 'EUR', created_at = UTC_TIMESTAMP(3)`;

async function count(table: string): Promise<number> {
  const [row] = await sequelize.query<{ rows: number }>(`SELECT COUNT(*) AS \`rows\` FROM ${table}`, {
    type: QueryTypes.SELECT,
  });
  return row?.rows ?? NaN;
}

for (const round of ["first", "second"]) {
  test(`the ${round} of two tests that add the same row finds the table empty`, async () => {
    expect(await count("organisations")).toBe(0);
    await sequelize.query(insertOrganisation, { type: QueryTypes.INSERT });
    expect(await count("organisations")).toBe(1);
  });
}

test("the app's account can neither change tables nor take back what the audit says", async () => {
  await expect(sequelize.query("DROP TABLE organisations", { type: QueryTypes.RAW })).rejects.toThrow(/command denied/);
  await expect(sequelize.query("DELETE FROM audit_events", { type: QueryTypes.DELETE })).rejects.toThrow(
    /command denied/,
  );
  await expect(sequelize.query("UPDATE audit_events SET action = ''", { type: QueryTypes.UPDATE })).rejects.toThrow(
    /command denied/,
  );
});

test("the server keeps what it has committed and reads clocks in UTC", async () => {
  const [settings] = await sequelize.query(
    `SELECT @@innodb_flush_log_at_trx_commit AS flush, @@innodb_doublewrite AS doublewrite, @@time_zone AS zone,
      @@innodb_snapshot_isolation AS snapshot, @@innodb_lock_wait_timeout AS wait, @@max_allowed_packet AS packet,
      @@character_set_server AS charset, @@sql_mode LIKE '%STRICT_TRANS_TABLES%' AS strict, @@log_bin AS log`,
    { type: QueryTypes.SELECT },
  );
  expect(settings).toEqual({
    flush: 1,
    doublewrite: 1,
    zone: "+00:00",
    snapshot: 1,
    wait: 10,
    packet: 64 * 1024 * 1024,
    charset: "utf8mb4",
    strict: 1,
    log: 0,
  });
});

test("a scratch database is empty and gone afterwards", async () => {
  const address = await withScratchDatabase(async (url) => {
    const tables: unknown[] = await withConnection(url, (connection) => connection.query("SHOW TABLES"));
    expect(tables).toEqual([]);
    return url;
  });
  await expect(withConnection(address, (connection) => connection.query("SELECT 1"))).rejects.toThrow(
    /Unknown database/,
  );
});
