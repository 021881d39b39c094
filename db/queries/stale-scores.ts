// What has to be scored again: current versions and drafts without results of the revision their RFQ asks and of the core that runs.
import { QueryTypes } from "sequelize";
import { sequelize } from "../connection.server";
import type { SYSTEM } from "../scoping";

export interface StaleVersion {
  readonly versionId: number;
  /** Of the RFQ, to be scored against. */
  readonly revisionId: number;
}

/**
 * Current versions of submitted quotes, of RFQs that are neither decided nor cancelled, without a summary; left out are those
 * whose first scoring waits and those that wait, or were given up, for the same revision and core.
 */
export function findStaleVersions(_actor: typeof SYSTEM, coreVersion: string): Promise<StaleVersion[]> {
  return sequelize.query<StaleVersion>(
    `SELECT v.id AS versionId, r.revision_id AS revisionId
      FROM rfqs r
      JOIN quotes q ON q.rfq_id = r.id AND q.state = 'submitted'
      JOIN quote_versions v ON v.id = q.current_version_id
      WHERE r.status IN ('open', 'closed')
        AND NOT EXISTS (SELECT 1 FROM quote_summaries s
          WHERE s.version_id = v.id AND s.revision_id = r.revision_id AND s.core_version = :coreVersion)
        AND NOT EXISTS (SELECT 1 FROM jobs j WHERE j.kind = 'score' AND j.\`key\` = CONVERT(v.id USING ascii)
          AND j.state = 'pending')
        AND NOT EXISTS (SELECT 1 FROM jobs j WHERE j.kind = 'rescore' AND j.state <> 'done'
          AND j.\`key\` = CONVERT(CONCAT_WS(':', v.id, r.revision_id, :coreVersion) USING ascii))
      ORDER BY v.id`,
    { type: QueryTypes.SELECT, replacements: { coreVersion } },
  );
}

/** Quotes that can still be worked on with a sweep in them that has no result at all; left out are those that wait, or were given up with this core. */
export async function findStaleDrafts(_actor: typeof SYSTEM, coreVersion: string): Promise<number[]> {
  const rows = await sequelize.query<{ quoteId: number }>(
    `SELECT q.id AS quoteId
      FROM rfqs r
      JOIN quotes q ON q.rfq_id = r.id AND q.state IN ('draft', 'submitted')
      WHERE r.status = 'open' AND r.due_at > UTC_TIMESTAMP(3)
        AND EXISTS (SELECT 1 FROM measurements m WHERE m.quote_id = q.id AND m.removed_at IS NULL
          AND NOT EXISTS (SELECT 1 FROM measurement_results p
            WHERE p.measurement_id = m.id AND p.revision_id = r.revision_id AND p.core_version = :coreVersion))
        AND NOT EXISTS (SELECT 1 FROM jobs j WHERE j.kind = 'draft-score' AND j.\`key\` = CONVERT(q.id USING ascii)
          AND (j.state = 'pending' OR (j.state = 'failed' AND JSON_VALUE(j.payload, '$.coreVersion') = :coreVersion)))
      ORDER BY q.id`,
    { type: QueryTypes.SELECT, replacements: { coreVersion } },
  );
  return rows.map(({ quoteId }) => quoteId);
}
