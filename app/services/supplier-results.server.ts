// The results of a supplier's own submitted quote, line by line.
import { QuoteLineResult, QuoteSummary, QuoteVersion } from "~/db/models";
import { readNumber, type SpecificationLine, type StoredNumber } from "~/rf/index";
import type { Person } from "./person.server";
import { receiptOf } from "./quote-submission.server";
import { findQuote } from "./quotes.server";
import { worstResult } from "./result-lines.server";
import { readLines } from "./specification-lines.server";

export interface SupplierResultLine {
  readonly line: SpecificationLine;
  readonly verdict: string;
  /** In the line's own unit; null where there is none. */
  readonly value: number | null;
  readonly margin: number | null;
  readonly limit: number | null;
  /** Hz. */
  readonly frequency: number | null;
  readonly unit: string | null;
  /** °C, exact decimal text. */
  readonly temperature: string | null;
  /** Why a line is not covered, or what was declared. */
  readonly reason: string | null;
  /** The reading rests on a setup the RFQ assumed. */
  readonly assumed: boolean;
}

export interface SupplierResults {
  readonly version: number;
  readonly submittedAt: string;
  readonly submitterName: string;
  readonly receipt: string;
  readonly basis: "measured" | "similar" | "simulated";
  /** Null while scoring runs. */
  readonly summary: {
    readonly verdict: string;
    readonly conforming: boolean;
    readonly worstLineKey: string | null;
    readonly units: number;
    readonly unitsOverRange: number;
    readonly temperatures: number;
    readonly coreVersion: string;
  } | null;
  readonly lines: readonly SupplierResultLine[];
}

/** Of the last submission; `"none"` before the first; null where the person does not see the quote. */
export async function readSupplierResults(
  person: Person,
  quotePublicId: string,
): Promise<SupplierResults | "none" | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const versionId = found.quote.currentVersionId;
  if (versionId === null) return "none";
  const version = await QuoteVersion.findByPk(versionId, { actor: person, rejectOnEmpty: true });
  const summary = await QuoteSummary.findOne({ where: { versionId }, order: [["createdAt", "DESC"]], actor: person });
  const lines = summary ? await readScoredLines(person, summary) : [];
  return {
    version: version.number,
    submittedAt: version.submittedAt.toISOString(),
    submitterName: version.submitterName,
    receipt: receiptOf(version.contentHash),
    basis: version.basis,
    summary: summary && {
      verdict: summary.verdict,
      conforming: summary.conforming,
      worstLineKey: summary.worstLineKey,
      units: summary.units,
      unitsOverRange: summary.unitsOverRange,
      temperatures: summary.temperatures,
      coreVersion: summary.coreVersion,
    },
    lines,
  };
}

async function readScoredLines(person: Person, summary: QuoteSummary): Promise<SupplierResultLine[]> {
  const { versionId, revisionId, coreVersion } = summary;
  const [lines, rows] = await Promise.all([
    readLines(person, revisionId),
    QuoteLineResult.findAll({ where: { versionId, revisionId, coreVersion }, actor: person }),
  ]);
  const byKey = new Map(rows.map((row) => [row.lineKey, row]));
  return lines.flatMap((line) => {
    const row = byKey.get(line.lineKey);
    return row ? [resultOf(line, row)] : [];
  });
}

function resultOf(line: SpecificationLine, row: QuoteLineResult): SupplierResultLine {
  const worst = worstResult(row);
  const { verdict, unit, temperature, reason } = row;
  return {
    line,
    verdict,
    value: finite(worst?.value),
    margin: finite(worst?.margin),
    limit: finite(worst?.limit),
    frequency: finite(worst?.frequency),
    unit,
    temperature,
    reason,
    assumed: worst?.assumed ?? false,
  };
}

function finite(stored: StoredNumber | undefined): number | null {
  const value = stored === undefined ? NaN : readNumber(stored);
  return Number.isFinite(value) ? value : null;
}
