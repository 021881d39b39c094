// The migration runner: one list of statements a migration, stored by name without extension.
import path from "node:path";
import { QueryTypes, Sequelize, type QueryInterface } from "sequelize";
import { SequelizeStorage, Umzug, type MigrationParams } from "umzug";
import { connectionOptions } from "./connection-options";

export type Migration = (params: MigrationParams<QueryInterface>) => Promise<void>;

/** A migration that runs SQL statements in order. MariaDB commits each on its own. */
export const statements =
  (...list: readonly string[]): Migration =>
  async ({ context }) => {
    for (const statement of list) await context.sequelize.query(statement, { type: QueryTypes.RAW });
  };

/** A migrator over a connection of its own, which the caller closes. */
export function migrator(url: string) {
  const sequelize = new Sequelize(url, { ...connectionOptions, pool: { max: 1 } });
  const umzug = new Umzug({
    migrations: {
      glob: ["migrations/*.ts", { cwd: import.meta.dirname }],
      // Our own import(): Umzug's cannot load TypeScript under Vitest.
      resolve: ({ path: file, context }) => {
        if (!file) throw new Error("a migration without a file");
        const name = path.basename(file).replace(/\.[jt]s$/, "");
        const load = () => import(file) as Promise<{ up: Migration; down: Migration }>;
        return {
          name,
          up: async () => (await load()).up({ name, path: file, context }),
          down: async () => (await load()).down({ name, path: file, context }),
        };
      },
    },
    context: sequelize.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize, tableName: "migrations" }),
    logger: undefined,
  });
  return { umzug, close: () => sequelize.close() };
}
