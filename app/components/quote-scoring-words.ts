// The words for figures that wait to be scored again.

/** What the server answers of a score that is not of the RFQ's revision and the core that runs. */
export interface RescoringView {
  readonly coreVersion: string;
  readonly letter: string;
  readonly state: "pending" | "failed";
  readonly done: number;
  readonly total: number;
}

/** "core 0.1.0 against revision A" */
export const scoredByWords = ({ coreVersion, letter }: Pick<RescoringView, "coreVersion" | "letter">): string =>
  `core ${coreVersion} against revision ${letter}`;

/** "being scored again: 12 of 30 files" */
export function rescoringWords({ state, done, total }: Pick<RescoringView, "state" | "done" | "total">): string {
  if (state === "failed") return "scoring them again did not succeed, and the fault has been recorded";
  return total === 0 ? "waiting to be scored again" : `being scored again: ${done} of ${total} files`;
}

/** "Core 0.1.0 against revision A, core 0.1.0 against revision B": each once. */
export const allScoredByWords = (views: readonly RescoringView[]): string =>
  [...new Set(views.map(scoredByWords))].join(", ");
