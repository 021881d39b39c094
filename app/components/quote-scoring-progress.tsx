// How far scoring is, live: of a version scored for the first time, and of one whose older figures stand until it is scored again.
import { useLocation } from "react-router";
import { Notice } from "./notice";
import { rescoringWords, scoredByWords, type RescoringView } from "./quote-scoring-words";
import { useScoringProgress } from "./use-scoring-progress";

/** Files done, of all. */
export function ScoringBar({ done, total, className = "" }: { done: number; total: number; className?: string }) {
  return (
    <progress
      value={done}
      max={total > 0 ? total : 1}
      aria-label="Files scored"
      className={`block w-full appearance-none border-0 bg-rule [&::-moz-progress-bar]:bg-signal [&::-webkit-progress-bar]:bg-rule [&::-webkit-progress-value]:bg-signal ${className}`}
    />
  );
}

/** Without script the page is read anew by hand. */
function LoadAgain() {
  const { pathname, search } = useLocation();
  return (
    <noscript>
      <a href={`${pathname}${search}`}>Load this page again</a>
    </noscript>
  );
}

/** Where there are no results yet, for the supplier. */
export function ScoringProgress({ quoteId }: { quoteId: string }) {
  const { state = "pending", done = 0, total = 0 } = useScoringProgress(quoteId) ?? {};
  if (state === "failed")
    return (
      <Notice tone="fail" role="status" className="mt-6">
        Scoring did not succeed. Your quote is submitted and safe; the fault has been recorded.
      </Notice>
    );
  return (
    <Notice tone="signal" role="status" className="mt-6">
      <p>{total === 0 ? "Waiting to be scored." : `Scoring: ${done} of ${total} files.`}</p>
      <ScoringBar done={done} total={total} className="mt-1.5 h-1.5 max-w-60" />
      <LoadAgain />
    </Notice>
  );
}

interface RescoringNoticeProps {
  quoteId: string;
  rescoring: RescoringView;
}

/** Beside results that stand until the version is scored again. */
export function RescoringNotice({ quoteId, rescoring }: RescoringNoticeProps) {
  const answer = useScoringProgress(quoteId);
  const { done, total } = answer ?? rescoring;
  const state = answer === undefined ? rescoring.state : answer.state === "failed" ? "failed" : "pending";
  return (
    <Notice tone={state === "failed" ? "fail" : "signal"} role="status" className="mt-6">
      <p className="tabular-nums">
        Figures of {scoredByWords(rescoring)}; {rescoringWords({ state, done, total })}.
      </p>
      {state === "failed" ? null : (
        <>
          <ScoringBar done={done} total={total} className="mt-1.5 h-1.5 max-w-60" />
          <LoadAgain />
        </>
      )}
    </Notice>
  );
}
