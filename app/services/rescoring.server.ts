// Finds what was scored by another core or against another revision than now, and queues it to be scored again.
import { databaseNow } from "~/db/queries/clock";
import { findStaleDrafts, findStaleVersions } from "~/db/queries/stale-scores";
import { SYSTEM } from "~/db/scoping";
import { CORE_VERSION } from "~/rf/index";
import { queueDraftScoring, queueRescoring } from "./jobs.server";
import { inTransaction } from "./transaction.server";

export interface QueuedCounts {
  readonly versions: number;
  readonly drafts: number;
}

/**
 * Queues the current versions of submitted quotes that have no summary of their RFQ's revision and this core, and drafts with
 * sweeps that have no result of both. Decided and cancelled RFQs keep the figures they ended with. Called again it queues
 * nothing twice.
 */
export async function queueStaleScoring(coreVersion: string = CORE_VERSION): Promise<QueuedCounts> {
  const [versions, drafts, now] = await Promise.all([
    findStaleVersions(SYSTEM, coreVersion),
    findStaleDrafts(SYSTEM, coreVersion),
    databaseNow(),
  ]);
  for (const version of versions) await queueRescoring({ ...version, coreVersion }, now);
  for (const quoteId of drafts)
    await inTransaction((transaction) => queueDraftScoring(quoteId, now, transaction, coreVersion));
  return { versions: versions.length, drafts: drafts.length };
}
