// Which quotes can be recommended and awarded: conforming, priced, scored, still valid.
import { zonedTimeToText } from "~/forms/zoned-time";
import type { ComparedQuote } from "./comparison.server";

/** Why a quote cannot be recommended; null where it can. */
export function recommendationRefusal(
  quote: Pick<ComparedQuote, "verdict" | "scoring" | "conforming" | "cost" | "validUntil" | "rescoring">,
  quantity: number,
  now: Date,
  zone: string,
): string | null {
  if (quote.scoring === "failed") return "Scoring this quote did not succeed; the fault has been recorded.";
  if (quote.verdict === null) return "This quote is still being scored. Wait until its results are there.";
  if (quote.rescoring?.state === "pending")
    return "This quote is being scored again. Wait until its new results are there.";
  if (quote.rescoring?.isOtherRevision)
    return `This quote could not be scored against the revision this RFQ asks: its figures are of revision ${quote.rescoring.letter}.`;
  if (!quote.conforming) return "This quote does not conform. Only a conforming quote can be recommended.";
  if (!quote.cost) return `This quote has no price for ${quantity} pieces.`;
  return validityRefusal(quote.validUntil, now, zone);
}

/** A quote is valid through its last day in the RFQ's zone. */
export function validityRefusal(validUntil: string, now: Date, zone: string): string | null {
  if (zonedTimeToText(now, zone).date <= validUntil) return null;
  return `This quote was valid until ${validUntil}. The supplier has to confirm it before it can be awarded.`;
}
