// Scoring loop of the worker: scores submitted versions one after another.
import { setTimeout as sleep } from "node:timers/promises";
import { runNextScoring } from "~/services/jobs.server";
import { log } from "~/services/log.server";
import { scoreVersion } from "~/services/scoring.server";

export interface ScoringLoopOptions {
  /** Ends the loop after the job under way. */
  readonly signal: AbortSignal;
  /** @default 300 */
  readonly pollMilliseconds?: number;
}

/** Runs until the signal fires; a fault is logged, and its job is tried again later. */
export async function runScoringLoop({ signal, pollMilliseconds = 300 }: ScoringLoopOptions): Promise<void> {
  while (!signal.aborted) {
    if (!(await scoreNext())) await sleep(pollMilliseconds, undefined, { signal }).catch(() => undefined);
  }
}

async function scoreNext(): Promise<boolean> {
  try {
    return await runNextScoring(scoreVersion, (error) => log.error({ err: error }, "scoring failed"));
  } catch (error) {
    log.error({ err: error }, "scoring queue out of reach");
    return false;
  }
}
