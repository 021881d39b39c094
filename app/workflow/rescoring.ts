// Whose figures are kept up with the core and with the revision their RFQ asks.
import type { QuoteState } from "./quote.ts";
import type { RfqState } from "./rfq.ts";

const KEPT_UP: readonly RfqState[] = ["open", "closed"];

/**
 * Whether a version is scored again when the core or the RFQ's revision changes. The figures of a decided or cancelled RFQ are
 * its record and stay; those of a withdrawn quote and of an older version are history.
 */
export const isRescored = (
  versionId: number,
  quote: { readonly state: QuoteState; readonly currentVersionId: number | null },
  rfq: { readonly status: RfqState },
): boolean => quote.state === "submitted" && quote.currentVersionId === versionId && KEPT_UP.includes(rfq.status);
