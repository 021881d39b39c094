// The lines of a revision, as stored and as the evaluation takes them.
import type { Transaction } from "sequelize";
import { RequirementRow } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import type { SpecificationLine } from "~/rf/line-definition";

/** Lines in their order. Empty where the actor does not see the revision. */
export async function readLines(
  actor: QueryActor,
  revisionId: number,
  transaction?: Transaction,
): Promise<SpecificationLine[]> {
  const rows = await RequirementRow.findAll({ where: { revisionId }, order: [["ordinal", "ASC"]], actor, transaction });
  return rows.map(({ lineKey, lineNumber, definition }) => ({ lineKey, lineNumber, definition }));
}
