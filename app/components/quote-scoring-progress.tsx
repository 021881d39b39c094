// How far the scoring of a submitted quote is: asked of the server until it is done, then the page is read anew.
import { useEffect } from "react";
import { href, useFetcher, useRevalidator } from "react-router";
import { Notice } from "./notice";

/** What the progress address answers. */
export interface ScoringProgressAnswer {
  readonly state: "none" | "pending" | "done" | "failed";
  readonly done: number;
  readonly total: number;
}

const POLL_MILLISECONDS = 600;

export function ScoringProgress({ quoteId }: { quoteId: string }) {
  const { load, data } = useFetcher<ScoringProgressAnswer>();
  const { revalidate } = useRevalidator();
  const address = href("/api/v1/quotes/:quoteId/progress", { quoteId });
  const state = data?.state ?? "pending";
  useEffect(() => {
    if (state !== "pending") return;
    void load(address);
    const timer = setInterval(() => void load(address), POLL_MILLISECONDS);
    return () => clearInterval(timer);
  }, [state, load, address]);
  useEffect(() => {
    if (state === "done") void revalidate();
  }, [state, revalidate]);
  if (state === "failed")
    return (
      <Notice tone="fail" role="status" className="mt-6">
        Scoring did not succeed. Your quote is submitted and safe; the fault has been recorded.
      </Notice>
    );
  const { done = 0, total = 0 } = data ?? {};
  return (
    <Notice tone="signal" role="status" className="mt-6">
      <p>{total === 0 ? "Scoring begins." : `Scoring: ${done} of ${total} files read.`}</p>
      <progress
        value={total === 0 ? 0 : done / total}
        max={1}
        aria-label="Files read"
        className="mt-1.5 block h-1.5 w-60 appearance-none bg-rule [&::-moz-progress-bar]:bg-signal [&::-webkit-progress-bar]:bg-rule [&::-webkit-progress-value]:bg-signal"
      />
      <noscript>
        <a href={href("/supplier/quotes/:quoteId/results", { quoteId })}>Load this page again</a>
      </noscript>
    </Notice>
  );
}
