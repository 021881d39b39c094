// The schema: migrations run up, down and up again, and the models say what the tables are.
import { QueryTypes, type Model, type ModelStatic } from "sequelize";
import { expect, test } from "vitest";
import * as models from "~/db/models";
import { migrator } from "~/db/umzug";
import { Organisation } from "~/db/models";
import { sequelize } from "~/db/connection.server";
import { useDatabase, withScratchDatabase } from "../support/database";
import { buildOrganisation, buildPerson, buildRfq } from "../support/factories";

useDatabase();

test("every migration runs up, down and up again", async () => {
  await withScratchDatabase(async (url) => {
    const { umzug, close } = migrator(url);
    try {
      const names = (await umzug.up()).map(({ name }) => name);
      expect(names.length).toBeGreaterThan(4);
      await umzug.down({ to: 0 });
      expect(await umzug.executed()).toEqual([]);
      expect((await umzug.up()).map(({ name }) => name)).toEqual(names);
    } finally {
      await close();
    }
  });
});

test("each model names the columns of its table, no more and no fewer, with the same nullability", async () => {
  for (const model of Object.values(models) as ModelStatic<Model>[]) {
    const columns = await sequelize.query<{ name: string; nullable: string; extra: string }>(
      "SELECT column_name AS name, is_nullable AS nullable, extra AS extra FROM information_schema.columns WHERE table_schema = DATABASE() AND table_name = ?",
      { type: QueryTypes.SELECT, replacements: [model.tableName] },
    );
    const table = columns
      .filter(({ extra }) => !/GENERATED/i.test(extra))
      .map(({ name, nullable }) => `${name} ${nullable}`);
    const attributes = Object.values(model.getAttributes()).map(
      (a) => `${a.field ?? ""} ${a.allowNull === true ? "YES" : "NO"}`,
    );
    expect(attributes.sort(), model.tableName).toEqual(table.sort());
  }
});

test("a decimal comes back as the exact text it was stored as, and a date with its milliseconds", async () => {
  const buyer = await buildOrganisation("buyer", { createdAt: new Date("2026-11-02T08:00:00.999Z") });
  const person = await buildPerson(buyer);
  const { rfq } = await buildRfq(person);
  expect(rfq.assumedSetup.transmission).toBe(0.1);
  const rows = await sequelize.query<{ value: string }>("SELECT CAST(12345678901234.5678 AS DECIMAL(18,4)) AS value", {
    type: QueryTypes.SELECT,
  });
  expect(rows[0]?.value).toBe("12345678901234.5678");
  const read = await Organisation.findByPk(buyer.id, { actor: person, rejectOnEmpty: true });
  expect(read.createdAt.toISOString()).toBe("2026-11-02T08:00:00.999Z");
});

test("the app's account can add to the audit trail and cannot change or remove an entry", async () => {
  await sequelize.query("INSERT INTO audit_events (at, subject, action) VALUES (UTC_TIMESTAMP(3), 'test', 'added')", {
    type: QueryTypes.INSERT,
  });
  await expect(sequelize.query("UPDATE audit_events SET action = 'x'", { type: QueryTypes.UPDATE })).rejects.toThrow(
    /denied/,
  );
  await expect(sequelize.query("DELETE FROM audit_events", { type: QueryTypes.DELETE })).rejects.toThrow(/denied/);
});
