// The words of a comparison: worst margin, lead time, cost, who has not quoted.
import type { ComparedCost } from "~/commerce/index";
import type { Requirement } from "~/rf/index";
import { marginWithInterval } from "./compliance-words";
import { formatDate, formatFrequency, formatMoney, formatNumber } from "./format";
import type { RescoringView } from "./quote-scoring-words";
import { requirementUnit } from "./requirement-words";
import type { ShownVerdict } from "./verdict-mark";

/** One quote's figures, as `readComparison` answers them. */
export interface ComparedQuoteView {
  readonly publicId: string;
  readonly supplierName: string;
  readonly version: number;
  readonly outcome: "awarded" | "regretted" | null;
  readonly verdict: ShownVerdict | null;
  readonly conforming: boolean;
  readonly units: number;
  readonly temperatures: number;
  readonly worst: WorstLineView | null;
  readonly margins: readonly {
    readonly lineNumber: string;
    readonly credited: number;
    readonly verdict: Exclude<ShownVerdict, "declared" | "exception">;
  }[];
  readonly currency: string;
  readonly cost: ComparedCost | null;
  readonly leadVolumeDays: number;
  readonly exceptions: number;
  readonly validUntil: string;
  readonly rescoring: RescoringView | null;
  /** Of the first scoring. */
  readonly scoring: "done" | "pending" | "failed";
}

export interface WorstLineView {
  readonly lineNumber: string;
  readonly kind: Requirement["kind"];
  readonly verdict: Exclude<ShownVerdict, "declared" | "exception">;
  readonly margin: number;
  readonly marginInterval: readonly [number, number];
  readonly frequency: number;
}

export interface SilentSupplierView {
  readonly company: string;
  readonly state: "sent" | "accepted" | "declined" | "withdrawn";
}

/** "+2.31 ± 0.11 dB" */
export function worstMarginWords({ kind, margin, marginInterval: [low, high] }: WorstLineView): string {
  const { unit, scale } = requirementUnit(kind);
  return marginWithInterval({ unit, margin: margin * scale, marginInterval: [low * scale, high * scale] });
}

/** "line 3.3 at 2.0050 GHz" */
export const worstPlaceWords = ({ lineNumber, frequency }: WorstLineView): string =>
  `line ${lineNumber}${Number.isFinite(frequency) ? ` at ${formatFrequency(frequency)}` : ""}`;

/** "121.00 each, NRE 4,000.00"; names the bought quantity where it is not the compared one. */
export function costWords(cost: ComparedCost, quantity: number): string {
  const bought = cost.boughtQuantity === quantity ? "" : `${formatNumber(cost.boughtQuantity, 0)} pieces, `;
  return `${bought}${formatMoney(cost.unitPrice)} each, NRE ${formatMoney(cost.nre)}`;
}

/** "12", "8.6": weeks of calendar days. */
export const weeks = (days: number): string => formatNumber(days / 7, days % 7 === 0 ? 0 : 1);

/** "84 days, 12 weeks" */
export const leadWords = (days: number): string => {
  const count = weeks(days);
  return `${days} ${days === 1 ? "day" : "days"}, ${count} ${count === "1" ? "week" : "weeks"}`;
};

export const SILENT_WORDS: Record<SilentSupplierView["state"], string> = {
  sent: "invited, not answered",
  accepted: "invitation accepted, no quote",
  declined: "declined",
  withdrawn: "quote withdrawn",
};

/** "31 Dec 2026": a date as it is stored, in no zone. */
export const dateWords = (date: string): string => formatDate(`${date}T00:00:00Z`, "UTC");

/** "2 units, 3 temperatures" */
export const dataWords = ({ units, temperatures }: Pick<ComparedQuoteView, "units" | "temperatures">): string =>
  `${units} ${units === 1 ? "unit" : "units"}, ${temperatures} ${temperatures === 1 ? "temperature" : "temperatures"}`;
