// Which quotes can be recommended and awarded: conforming, priced, scored, still valid.
import { zonedTimeToText } from "~/forms/zoned-time";
import type { ComparedQuote } from "./comparison.server";

/** Why a quote cannot be recommended; null where it can. */
export function recommendationRefusal(
  quote: Pick<ComparedQuote, "verdict" | "conforming" | "cost" | "validUntil">,
  quantity: number,
  now: Date,
  zone: string,
): string | null {
  if (quote.verdict === null) return "This quote is still being scored. Wait until its results are there.";
  if (!quote.conforming) return "This quote does not conform. Only a conforming quote can be recommended.";
  if (!quote.cost) return `This quote has no price for ${quantity} pieces.`;
  return validityRefusal(quote.validUntil, now, zone);
}

/** A quote is valid through its last day in the RFQ's zone. */
export function validityRefusal(validUntil: string, now: Date, zone: string): string | null {
  if (zonedTimeToText(now, zone).date <= validUntil) return null;
  return `This quote was valid until ${validUntil}. The supplier has to confirm it before it can be awarded.`;
}
