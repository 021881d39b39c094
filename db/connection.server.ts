// The app's connection to MariaDB, with the scoping hook on every model.
import { Sequelize } from "sequelize";
import { config } from "../app/config.server";
import { connectionOptions } from "./connection-options";
import { installScoping } from "./scoping";

export const sequelize = new Sequelize(config().databaseUrl, {
  ...connectionOptions,
  pool: { max: config().databasePool, min: 0, acquire: 5_000, idle: 30_000 },
});

installScoping(sequelize);
