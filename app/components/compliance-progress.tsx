// Where a submitted quote has no results yet: how far its scoring is, asked for while it runs.
import { Section } from "./page";
import { ScoringBar } from "./quote-scoring-progress";
import { useScoringProgress, type ScoringProgressAnswer } from "./use-scoring-progress";

export function ComplianceProgress({ quoteId }: { quoteId: string }) {
  const progress = useScoringProgress(quoteId);
  const { done = 0, total = 0 } = progress ?? {};
  return (
    <Section title="Scoring" note="Each line is scored on every file. The results appear here when it is done.">
      <ScoringBar done={done} total={total} className="h-2 max-w-120" />
      <p className="mt-2 text-13 tabular-nums" role="status">
        {progressWords(progress)}
      </p>
    </Section>
  );
}

function progressWords(progress: ScoringProgressAnswer | undefined): string {
  if (progress?.state === "failed") return "Scoring did not succeed; the fault has been recorded.";
  if (!progress || progress.total === 0) return "Waiting for its turn.";
  return `${progress.done} of ${progress.total} files scored.`;
}
