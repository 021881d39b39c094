// How much margin earns full credit, per kind of line, so that margins in different units can be set side by side.

/** What of a line decides its full credit: the kind, and where that is a share of it the limit or the tolerance. */
export interface CreditedLine {
  readonly kind: string;
  /** In the line's unit; needed for delay (10 % of it), centre (tolerance, 50 %) and bandwidth (1 %). */
  readonly limit?: number;
}

const FIXED_DB: Readonly<Record<string, number>> = {
  "insertion-loss": 0.2,
  ripple: 0.1,
  rejection: 3,
  "reverse-isolation": 3,
  "return-loss": 2,
};
const SHARE_OF_LIMIT: Readonly<Record<string, number>> = {
  "group-delay": 0.1,
  "group-delay-variation": 0.1,
  "phase-linearity": 0.1,
  "shape-factor": 0.1,
  "centre-frequency": 0.5,
  bandwidth: 0.01,
};

/**
 * Margin that earns full credit, in the line's own unit (proposed values; reverse isolation is taken as rejection is, phase
 * linearity and shape factor as delay is). Throws RangeError for a kind without one.
 */
export function fullCredit({ kind, limit }: CreditedLine): number {
  const fixed = FIXED_DB[kind];
  if (fixed !== undefined) return fixed;
  const share = SHARE_OF_LIMIT[kind];
  if (share === undefined || limit === undefined || !(Math.abs(limit) > 0))
    throw new RangeError(`no full credit for ${kind}`);
  return share * Math.abs(limit);
}

/** Margin in parts of full credit; not capped, so that margins beyond it still differ. */
export const creditedMargin = (margin: number, line: CreditedLine): number => margin / fullCredit(line);

/** The same, null where a limit of nothing earns no credit: there is no share of it. */
export function creditedMarginOrNull(margin: number, line: CreditedLine): number | null {
  try {
    return creditedMargin(margin, line);
  } catch (error) {
    if (error instanceof RangeError) return null;
    throw error;
  }
}

/** Places lines of one verdict, least first: the credited margin, infinite where the margin is; +Infinity without one or without credit. */
export function creditOrder(margin: number, line: CreditedLine): number {
  if (!Number.isFinite(margin)) return margin === -Infinity ? -Infinity : Infinity;
  return creditedMarginOrNull(margin, line) ?? Infinity;
}
