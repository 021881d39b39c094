// Keeps a program running: starts it again when it ends by itself, after a pause that grows while it keeps ending.
import { setTimeout as delay } from "node:timers/promises";

const SHORTEST_PAUSE_MS = 250;
const LONGEST_PAUSE_MS = 10_000;
/** A program that ran this long is well; its next end begins again with the shortest pause. */
const WELL_AFTER_MS = 30_000;

export interface Running {
  /** Settles when the program has ended, for whatever reason. */
  exited: Promise<unknown>;
  /** Ends it, by force after `graceMs`. */
  stop(graceMs: number): Promise<unknown>;
}

export interface Kept {
  /** Ends the program for good. */
  stop(graceMs: number): Promise<void>;
}

/**
 * @param name as people call it in messages
 * @param start starts the program anew
 * @throws what the first start throws; later failures are reported and tried again
 */
export async function keepRunning(
  name: string,
  start: () => Promise<Running>,
  report: (line: string) => void,
): Promise<Kept> {
  const stopping = new AbortController();
  const isStopping = () => stopping.signal.aborted;
  let running = await start();
  const startAgain = async () => {
    try {
      running = await start();
      return true;
    } catch (error) {
      report(`${name} could not be started: ${error instanceof Error ? error.message : String(error)}`);
      return false;
    }
  };
  const watch = async () => {
    let pauseMs = SHORTEST_PAUSE_MS;
    for (;;) {
      const startedAt = Date.now();
      await running.exited;
      if (isStopping()) return;
      report(`${name} ended unexpectedly; starting it again`);
      if (Date.now() - startedAt > WELL_AFTER_MS) pauseMs = SHORTEST_PAUSE_MS;
      do {
        await delay(pauseMs, undefined, { signal: stopping.signal }).catch(() => undefined);
        if (isStopping()) return;
        pauseMs = Math.min(pauseMs * 2, LONGEST_PAUSE_MS);
      } while (!(await startAgain()));
      if (isStopping()) await running.stop(0);
    }
  };
  const watching = watch();
  return {
    stop: async (graceMs) => {
      stopping.abort();
      await running.stop(graceMs);
      await watching;
    },
  };
}
