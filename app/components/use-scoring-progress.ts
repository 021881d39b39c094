// Asks the server how far scoring is while it runs, and has the page read its results anew when it is done.
import { useEffect, useState } from "react";
import { href, useRevalidator } from "react-router";

/** What the progress address answers. */
export interface ScoringProgressAnswer {
  readonly state: "none" | "pending" | "done" | "failed";
  readonly done: number;
  readonly total: number;
}

/** ms from an answer to the next question. */
const ASK_AGAIN = 1_000;
/** ms once scoring failed: it is tried once more later, and a new release tries again. */
const ASK_AGAIN_AFTER_FAILURE = 15_000;

/** The last answer; undefined before the first. While the server cannot be reached, the last answer stands and the page stays. */
export function useScoringProgress(quoteId: string): ScoringProgressAnswer | undefined {
  const [answer, setAnswer] = useState<ScoringProgressAnswer>();
  const { revalidate } = useRevalidator();
  const address = href("/api/v1/quotes/:quoteId/progress", { quoteId });
  useEffect(() => {
    const stop = new AbortController();
    let timer: ReturnType<typeof setTimeout> | undefined;
    const ask = async () => {
      const heard = await askProgress(address, stop.signal);
      if (stop.signal.aborted) return;
      if (heard === "gone" || heard?.state === "done") void revalidate();
      if (heard !== null && heard !== "gone") setAnswer(heard);
      const isFailed = heard !== null && heard !== "gone" && heard.state === "failed";
      timer = setTimeout(() => void ask(), isFailed ? ASK_AGAIN_AFTER_FAILURE : ASK_AGAIN);
    };
    void ask();
    return () => {
      stop.abort();
      clearTimeout(timer);
    };
  }, [address, revalidate]);
  return answer;
}

/**
 * By `fetch`: a fetcher of the router would put the error page in the place of this one when the network is away for a moment.
 * Null where nothing was heard; "gone" where the server says that the person does not see the quote any more, or has to sign in.
 */
async function askProgress(address: string, signal: AbortSignal): Promise<ScoringProgressAnswer | "gone" | null> {
  try {
    const response = await fetch(address, { signal, cache: "no-store" });
    if (response.redirected || (response.status >= 400 && response.status < 500 && response.status !== 429))
      return "gone";
    return response.ok ? ((await response.json()) as ScoringProgressAnswer) : null;
  } catch {
    return null;
  }
}

/** ms between two readings of a page with several quotes. */
const READ_AGAIN = 2_500;

/** Reads the page's data anew every few seconds while something on it is being scored, the page can be seen and the server answers. */
export function useReloadWhile(isScoring: boolean): void {
  const { revalidate } = useRevalidator();
  useEffect(() => {
    if (!isScoring) return;
    const read = async () => {
      if (document.visibilityState === "visible" && (await isServerThere())) void revalidate();
    };
    const timer = setInterval(() => void read(), READ_AGAIN);
    return () => clearInterval(timer);
  }, [isScoring, revalidate]);
}

/** Asked first: a page that is read anew while the network is away gives way to the error page. */
const isServerThere = (): Promise<boolean> =>
  fetch(href("/health"), { method: "HEAD" }).then(
    ({ ok }) => ok,
    () => false,
  );
