// The progress of scoring, asked for while it runs; when it is done the page reads its results.
import { useEffect } from "react";
import { href, useFetcher, useRevalidator } from "react-router";
import { Section } from "./page";

interface Progress {
  readonly state: string;
  readonly done: number;
  readonly total: number;
}

/** ms between questions. */
const ASK_AGAIN = 1_000;

export function ComplianceProgress({ quoteId }: { quoteId: string }) {
  const { load, data, state } = useFetcher<Progress>();
  const { revalidate } = useRevalidator();
  const address = href("/api/v1/quotes/:quoteId/progress", { quoteId });
  useEffect(() => {
    if (state !== "idle") return;
    const timer = setTimeout(() => void load(address), data === undefined ? 0 : ASK_AGAIN);
    return () => clearTimeout(timer);
  }, [state, data, load, address]);
  const isDone = data?.state === "done";
  useEffect(() => {
    if (isDone) void revalidate();
  }, [isDone, data, revalidate]);
  return (
    <Section title="Scoring" note="Each line is scored on every file. The results appear here when it is done.">
      <progress
        className="block h-2 w-full max-w-120 appearance-none border-0 bg-rule [&::-moz-progress-bar]:bg-signal [&::-webkit-progress-bar]:bg-rule [&::-webkit-progress-value]:bg-signal"
        aria-label="Files scored"
        max={data && data.total > 0 ? data.total : 1}
        value={data?.done ?? 0}
      />
      <p className="mt-2 text-13 tabular-nums" role="status">
        {progressWords(data)}
      </p>
    </Section>
  );
}

function progressWords(progress: Progress | undefined): string {
  if (progress?.state === "failed") return "Scoring did not finish. It is tried again by itself.";
  if (!progress || progress.total === 0) return "Waiting for its turn.";
  return `${progress.done} of ${progress.total} files scored.`;
}
