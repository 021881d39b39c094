// Closing loop of the worker: marks RFQs whose due date has passed.
import { setTimeout as sleep } from "node:timers/promises";
import { closeDueRfqs } from "~/services/closing.server";
import { log } from "~/services/log.server";

export interface ClosingLoopOptions {
  /** Ends the loop after the pass under way. */
  readonly signal: AbortSignal;
  /** @default 2000 */
  readonly pollMilliseconds?: number;
}

/** Runs until the signal fires; a fault is logged and the next pass tries again. */
export async function runClosingLoop({ signal, pollMilliseconds = 2_000 }: ClosingLoopOptions): Promise<void> {
  while (!signal.aborted) {
    try {
      const closed = await closeDueRfqs();
      if (closed > 0) log.info({ closed }, "RFQs closed by their due date");
    } catch (error) {
      log.error({ err: error }, "closing failed");
    }
    await sleep(pollMilliseconds, undefined, { signal }).catch(() => undefined);
  }
}
