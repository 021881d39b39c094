// The stored roll-ups of submitted versions: what comparison, results and decisions read of the scoring.
import { Op, type Transaction } from "sequelize";
import { Quote, QuoteLineResult, QuoteSummary, Rfq, type QuoteVersion } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import type { LineVerdict } from "~/emails/index";
import { CORE_VERSION, readCell, type Cell } from "~/rf/index";
import { isRescored } from "~/workflow/rescoring";

/** Which of a version's summaries stands. */
export interface ScoreHead {
  readonly summary: QuoteSummary;
  /** The figures are of another core or another revision than `wanted`, and stand until the version is scored again. */
  readonly isStale: boolean;
  readonly wanted: { readonly revisionId: number; readonly coreVersion: string };
}

export interface QuoteScore extends ScoreHead {
  /** By line key; declared lines too. Of the summary's revision, which need not be the RFQ's while `isStale`. */
  readonly lines: ReadonlyMap<string, QuoteLineResult>;
}

type ScoredVersion = Pick<QuoteVersion, "id" | "quoteId" | "rfqId" | "revisionId">;

/**
 * The score of each version by its id: that of the RFQ's revision by this core, else the newest there is; a version whose first
 * scoring has not finished is absent.
 */
export async function readScores(
  actor: QueryActor,
  versions: readonly ScoredVersion[],
  transaction?: Transaction,
  coreVersion: string = CORE_VERSION,
): Promise<Map<number, QuoteScore>> {
  const heads = await readScoreHeads(actor, versions, transaction, coreVersion);
  const lines = await readLineResults(
    actor,
    heads.map(({ summary }) => summary),
    transaction,
  );
  return new Map(heads.map((head) => [head.summary.versionId, { ...head, lines: lines(head.summary) }]));
}

/** The same without the lines, whose cells are many: for what is asked every second. */
export async function readScoreHeads(
  actor: QueryActor,
  versions: readonly ScoredVersion[],
  transaction?: Transaction,
  coreVersion: string = CORE_VERSION,
): Promise<ScoreHead[]> {
  if (versions.length === 0) return [];
  const scope: { actor: QueryActor; transaction: Transaction | undefined } = { actor, transaction };
  const within = (ids: readonly number[]) => ({ [Op.in]: [...new Set(ids)] });
  const [summaries, quotes, rfqs] = await Promise.all([
    QuoteSummary.findAll({
      where: { versionId: within(versions.map(({ id }) => id)) },
      order: [["createdAt", "ASC"]],
      ...scope,
    }),
    Quote.findAll({ where: { id: within(versions.map(({ quoteId }) => quoteId)) }, ...scope }),
    Rfq.findAll({ where: { id: within(versions.map(({ rfqId }) => rfqId)) }, ...scope }),
  ]);
  return versions.flatMap((version) => {
    const rfq = rfqs.find(({ id }) => id === version.rfqId);
    const quote = quotes.find(({ id }) => id === version.quoteId);
    const wanted = { revisionId: rfq?.revisionId ?? version.revisionId, coreVersion };
    const own = summaries.filter(({ versionId }) => versionId === version.id);
    const current = own.find((row) => row.revisionId === wanted.revisionId && row.coreVersion === coreVersion);
    const summary = current ?? own.at(-1);
    const isStale = !current && !!rfq && !!quote && isRescored(version.id, quote, rfq);
    return summary ? [{ summary, isStale, wanted }] : [];
  });
}

async function readLineResults(actor: QueryActor, summaries: readonly QuoteSummary[], transaction?: Transaction) {
  const keys = summaries.map(({ versionId, revisionId, coreVersion }) => ({ versionId, revisionId, coreVersion }));
  const rows = keys.length === 0 ? [] : await QuoteLineResult.findAll({ where: { [Op.or]: keys }, actor, transaction });
  return ({ versionId }: QuoteSummary) =>
    new Map(rows.filter((row) => row.versionId === versionId).map((row) => [row.lineKey, row]));
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

/** The revision that the figures shown of a version speak of: after an amendment it need not be the one it was submitted to. */
export async function scoredRevision(actor: QueryActor, version: ScoredVersion): Promise<number> {
  const [head] = await readScoreHeads(actor, [version]);
  return head?.summary.revisionId ?? version.revisionId;
}
