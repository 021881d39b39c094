// The stored roll-ups of submitted versions: what comparison, results and decisions read of the scoring.
import { Op, type Transaction } from "sequelize";
import { QuoteLineResult, QuoteSummary, type QuoteVersion } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import type { LineVerdict } from "~/emails/index";
import { readCell, type Cell } from "~/rf/index";

export interface QuoteScore {
  readonly summary: QuoteSummary;
  /** By line key; declared lines too. */
  readonly lines: ReadonlyMap<string, QuoteLineResult>;
}

type ScoredVersion = Pick<QuoteVersion, "id" | "revisionId">;

/** The latest score of each version against its revision, by version id; a version whose scoring has not finished is absent. */
export async function readScores(
  actor: QueryActor,
  versions: readonly ScoredVersion[],
  transaction?: Transaction,
): Promise<Map<number, QuoteScore>> {
  const where = { versionId: { [Op.in]: versions.map(({ id }) => id) } };
  const [summaries, results] = await Promise.all([
    QuoteSummary.findAll({ where, order: [["createdAt", "ASC"]], actor, transaction }),
    QuoteLineResult.findAll({ where, actor, transaction }),
  ]);
  const scores = new Map<number, QuoteScore>();
  for (const { id, revisionId } of versions) {
    const summary = summaries.findLast((row) => row.versionId === id && row.revisionId === revisionId);
    if (!summary) continue;
    const own = results.filter(
      (row) => row.versionId === id && row.revisionId === revisionId && row.coreVersion === summary.coreVersion,
    );
    scores.set(id, { summary, lines: new Map(own.map((row) => [row.lineKey, row])) });
  }
  return scores;
}

const VERDICTS: readonly LineVerdict[] = [
  "pass",
  "conditional-pass",
  "conditional-fail",
  "fail",
  "not-covered",
  "declared",
  "exception",
];

/** A stored verdict. Throws for a word that is none. */
export function lineVerdict(stored: string): LineVerdict {
  const verdict = VERDICTS.find((known) => known === stored);
  if (verdict === undefined) throw new Error(`“${stored}” is no verdict`);
  return verdict;
}

/** The cell a line's roll-up reports: its worst one; null where nothing was scored. */
export function worstCell({ cells, unit, temperature }: QuoteLineResult): Cell | null {
  const found = cells.find(
    (cell) => cell.unit === unit && temperature !== null && cell.temperature === Number(temperature) && cell.scored,
  );
  return found ? readCell(found) : null;
}
