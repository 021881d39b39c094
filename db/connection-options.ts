// How every connection to MariaDB is set: exact decimals, UTC, strict mode, bounded waits.
import type { Options } from "sequelize";

/** DECIMAL stays an exact string and no integer leaves the safe range. */
export const connectionOptions: Options = {
  dialect: "mariadb",
  logging: false,
  timezone: "+00:00",
  define: { underscored: true, timestamps: false, charset: "utf8mb4" },
  dialectOptions: {
    supportBigNumbers: false,
    decimalAsNumber: false,
    bigIntAsNumber: true,
    insertIdAsNumber: true,
    checkNumberRange: true,
    logParam: false,
    connectTimeout: 5_000,
    initSql: [
      "SET sql_mode = 'STRICT_TRANS_TABLES,ERROR_FOR_DIVISION_BY_ZERO,NO_ENGINE_SUBSTITUTION'",
      "SET innodb_lock_wait_timeout = 10",
      "SET max_statement_time = 30",
    ],
  },
};
