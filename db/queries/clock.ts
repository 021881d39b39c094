// The database's clock, which decides lateness.
import { QueryTypes, type Transaction } from "sequelize";
import { sequelize } from "../connection.server";

/** Now by the database, to the millisecond, as it stands when the statement runs. */
export async function databaseNow(transaction?: Transaction): Promise<Date> {
  const rows = await sequelize.query<{ milliseconds: string }>(
    "SELECT CAST(ROUND(UNIX_TIMESTAMP(SYSDATE(3)) * 1000) AS CHAR) AS milliseconds",
    { type: QueryTypes.SELECT, transaction },
  );
  const milliseconds = Number(rows[0]?.milliseconds);
  if (!Number.isSafeInteger(milliseconds)) throw new Error("the database did not tell the time");
  return new Date(milliseconds);
}
