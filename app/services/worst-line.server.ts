// The line a quote or a file stands worst on: by verdict, among equals by margin in parts of full credit.
import { creditedMarginOrNull, creditOrder } from "~/commerce/full-credit";
import { readNumber, verdictRank, type SpecificationLine, type StoredResult, type Verdict } from "~/rf/index";

export interface LineStanding {
  readonly lineKey: string;
  readonly verdict: Verdict;
  /** In the line's unit; null where nothing was reached or the margin is infinite. */
  readonly margin: number | null;
  /** Margin in parts of full credit; null where there is no margin, or no credit for it. */
  readonly creditedMargin: number | null;
  /** Places lines of one verdict, least first: the credited margin, infinite where the margin is; +Infinity without one. */
  readonly order: number;
}

const finite = (value: number): number | null => (Number.isFinite(value) ? value : null);

/** How a line stands by its worst result. */
export function standingOf(line: SpecificationLine, verdict: Verdict, result: StoredResult | undefined): LineStanding {
  const read = result === undefined ? NaN : readNumber(result.margin);
  const margin = finite(read);
  const limit = result === undefined ? null : finite(readNumber(result.limit));
  const credit = { kind: line.definition.kind, ...(limit === null ? {} : { limit }) };
  return {
    lineKey: line.lineKey,
    verdict,
    margin,
    creditedMargin: margin === null ? null : creditedMarginOrNull(margin, credit),
    order: creditOrder(read, credit),
  };
}

/** The worst verdict; among equals the least credited margin, one without a margin last; undefined for no lines. */
export function worstStanding(standings: readonly LineStanding[]): LineStanding | undefined {
  return standings.reduce<LineStanding | undefined>((worst, standing) => {
    if (worst === undefined) return standing;
    const difference = verdictRank(standing.verdict) - verdictRank(worst.verdict);
    if (difference !== 0) return difference < 0 ? standing : worst;
    return standing.order < worst.order ? standing : worst;
  }, undefined);
}
