// Running numbers per buyer: the next one, taken inside the transaction that uses it.
import { QueryTypes, type Transaction } from "sequelize";
import { sequelize } from "../connection.server";

/** Takes the next number of a buyer's series. The row stays locked until the transaction ends, so no number is given twice. */
export async function takeNumber(
  buyerOrganisationId: number,
  series: string,
  transaction: Transaction,
): Promise<number> {
  await sequelize.query(
    "INSERT INTO number_series (buyer_organisation_id, series, last) VALUES (?, ?, 1) ON DUPLICATE KEY UPDATE last = last + 1",
    { type: QueryTypes.INSERT, replacements: [buyerOrganisationId, series], transaction },
  );
  const rows = await sequelize.query<{ last: number }>(
    "SELECT last FROM number_series WHERE buyer_organisation_id = ? AND series = ?",
    {
      type: QueryTypes.SELECT,
      replacements: [buyerOrganisationId, series],
      transaction,
    },
  );
  const last = rows[0]?.last;
  if (last === undefined) throw new Error(`no number in series ${series}`);
  return last;
}
