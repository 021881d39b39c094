// The results of a supplier's own submitted quote, line by line.
import { QuoteVersion, type QuoteLineResult } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { readNumber, type SpecificationLine, type StoredNumber } from "~/rf/index";
import type { Person } from "./person.server";
import { readScores, type QuoteScore } from "./quote-scores.server";
import { receiptOf } from "./quote-submission.server";
import { findQuote } from "./quotes.server";
import { worstResult } from "./result-lines.server";
import { readRescoring, type Rescoring } from "./scoring-progress.server";
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
  /** While these results wait for those of the RFQ's revision and the core that runs; else null. */
  readonly rescoring: Rescoring | null;
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
  const score = (await readScores(person, [version])).get(versionId);
  const summary = score?.summary ?? null;
  const rescoring = score ? (await readRescoring([score])).get(versionId) : undefined;
  const lines = score ? await readScoredLines(score) : [];
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
    rescoring: rescoring ?? null,
    lines,
  };
}

/** The lines of the revision its own results are of, which need not be the RFQ's any more: the one a supplier sees by itself. */
async function readScoredLines({ summary, lines: rows }: QuoteScore): Promise<SupplierResultLine[]> {
  const lines = await readLines(SYSTEM, summary.revisionId);
  return lines.flatMap((line) => {
    const row = rows.get(line.lineKey);
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
