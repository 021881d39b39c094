// Scoring in the worker: one loop does what is queued, one after another; the other looks for what the core or a revision left behind.
import { setTimeout as sleep } from "node:timers/promises";
import { CORE_VERSION } from "~/rf/index";
import { runNextJob, type JobHandlers } from "~/services/jobs.server";
import { log } from "~/services/log.server";
import { queueStaleScoring } from "~/services/rescoring.server";
import { scoreDraft } from "~/services/scoring-drafts.server";
import { rescoreVersion, scoreVersion } from "~/services/scoring.server";

export interface ScoringLoopOptions {
  /** Ends the loop after the job under way. */
  readonly signal: AbortSignal;
  /** @default 300 of what is queued, 60,000 of what is stale */
  readonly pollMilliseconds?: number;
}

/** What this worker does of each kind. A job queued for another core is for none: that core's worker finds what it needs itself. */
export const scoringWork = (coreVersion: string = CORE_VERSION): JobHandlers => ({
  score: ({ versionId }, report) => scoreVersion(versionId, report, coreVersion),
  "draft-score": ({ quoteId }, report) => scoreDraft(quoteId, report, coreVersion),
  rescore: async (payload, report) => {
    if (payload.coreVersion === coreVersion) await rescoreVersion(payload, report, coreVersion);
  },
});

/** Runs until the signal fires; a fault is logged, and its job is tried again later. */
export async function runScoringLoop({ signal, pollMilliseconds = 300 }: ScoringLoopOptions): Promise<void> {
  while (!signal.aborted) {
    if (!(await scoreNext())) await sleep(pollMilliseconds, undefined, { signal }).catch(() => undefined);
  }
}

async function scoreNext(): Promise<boolean> {
  try {
    return await runNextJob(scoringWork(), (error) => log.error({ err: error }, "scoring failed"));
  } catch (error) {
    log.error({ err: error }, "scoring queue out of reach");
    return false;
  }
}

/** Queues at start, and each minute, what is to be scored again; until the signal fires. */
export async function runRescoringLoop({ signal, pollMilliseconds = 60_000 }: ScoringLoopOptions): Promise<void> {
  while (!signal.aborted) {
    try {
      const { versions, drafts } = await queueStaleScoring();
      if (versions + drafts > 0) log.info({ versions, drafts }, "queued to be scored again");
    } catch (error) {
      log.error({ err: error }, "looking for stale results failed");
    }
    await sleep(pollMilliseconds, undefined, { signal }).catch(() => undefined);
  }
}
