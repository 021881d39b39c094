// All quotes of an RFQ side by side, from stored roll-ups: verdict, worst margin, cost at a quantity, lead time, exceptions.
import { Op, type Transaction } from "sequelize";
import {
  Decision,
  Invitation,
  Quote,
  QuoteDeclaration,
  QuotePrice,
  QuoteVersion,
  RfqQuantity,
  Supplier,
  type QuoteLineResult,
  type Rfq,
} from "~/db/models";
import type { LineVerdict } from "~/emails/index";
import { compare, compareCost, type ComparedCost } from "~/commerce/index";
import type { ComparisonQuery, ComparisonSort } from "~/forms/comparison";
import type { Requirement, SpecificationLine, Verdict } from "~/rf/index";
import type { Person } from "./person.server";
import { lineVerdict, readScores, worstCell, type QuoteScore } from "./quote-scores.server";
import { findRfq } from "./rfq-head.server";
import { readFirstScoring, readRescoring, type Rescoring } from "./scoring-progress.server";
import { readLines } from "./specification-lines.server";

/** The line that decides a quote's rank, with the reported point. */
export interface WorstLine {
  readonly lineNumber: string;
  readonly kind: Requirement["kind"];
  readonly verdict: Verdict;
  /** In the core's unit of the line; the interval is the margin's. */
  readonly margin: number;
  readonly marginInterval: readonly [number, number];
  readonly creditedMargin: number | null;
  /** Hz. */
  readonly frequency: number;
  readonly unit: string;
  /** °C. */
  readonly celsius: number;
}

export interface ComparedQuote {
  readonly publicId: string;
  readonly supplierName: string;
  readonly version: number;
  readonly submittedAt: string;
  readonly outcome: "awarded" | "regretted" | null;
  /** Null until the version is scored. */
  readonly verdict: LineVerdict | null;
  /** Of the first scoring; "failed": the worker gave it up, and no figures come of waiting. */
  readonly scoring: "done" | "pending" | "failed";
  readonly conforming: boolean;
  readonly units: number;
  readonly unitsOverRange: number;
  readonly temperatures: number;
  /** Null where no line has a margin. */
  readonly worst: WorstLine | null;
  /** Measured lines, in parts of full credit. */
  readonly margins: readonly { readonly lineNumber: string; readonly credited: number; readonly verdict: Verdict }[];
  readonly currency: string;
  /** At the compared quantity; null where there is no price for it. */
  readonly cost: ComparedCost | null;
  readonly nre: string;
  readonly leadFirstDays: number | null;
  readonly leadVolumeDays: number;
  readonly exceptions: number;
  /** ISO 8601 date. */
  readonly validUntil: string;
  /** While its figures wait for those of the RFQ's revision and the core that runs; else null. */
  readonly rescoring: Rescoring | null;
}

/** A supplier that was asked and whose quote is not among those compared. */
export interface SilentSupplier {
  readonly company: string;
  readonly state: "sent" | "accepted" | "declined" | "withdrawn";
}

export interface Comparison {
  readonly quantity: number;
  /** The RFQ's breaks, ascending. */
  readonly quantities: readonly number[];
  readonly conforming: readonly ComparedQuote[];
  readonly nonconforming: readonly ComparedQuote[];
  readonly unscored: readonly ComparedQuote[];
  readonly silent: readonly SilentSupplier[];
  /** Versions of the evaluation behind the figures. */
  readonly coreVersions: readonly string[];
  /** Of the live decision. */
  readonly decision: "none" | "recommended" | "approved";
}

/** The comparison of an RFQ's quotes, or null where the person does not see the RFQ. */
export async function readComparison(
  person: Person,
  rfqPublicId: string,
  query: ComparisonQuery,
): Promise<Comparison | null> {
  const rfq = person.organisationKind === "buyer" ? await findRfq(person, rfqPublicId) : null;
  if (!rfq) return null;
  const quantities = await readQuantities(person, rfq);
  const quantity = quantities.find((asked) => asked === query.quantity) ?? rfq.quantity;
  const { quotes, coreVersions } = await readComparedQuotes(person, rfq, quantity);
  const sorted = sortQuotes(quotes, query.sort, query.direction);
  const scored = sorted.filter(({ verdict }) => verdict !== null);
  return {
    quantity,
    quantities,
    conforming: scored.filter(({ conforming }) => conforming),
    nonconforming: scored.filter(({ conforming }) => !conforming),
    unscored: sorted.filter(({ verdict }) => verdict === null),
    silent: await readSilentSuppliers(person, rfq),
    coreVersions,
    decision: await readDecisionState(person, rfq),
  };
}

async function readDecisionState(person: Person, rfq: Rfq): Promise<Comparison["decision"]> {
  const decisions = await Decision.findAll({ where: { rfqId: rfq.id }, attributes: ["state"], actor: person });
  return decisions.map(({ state }) => state).find((state) => state !== "returned") ?? "none";
}

async function readQuantities(person: Person, rfq: Rfq): Promise<number[]> {
  const rows = await RfqQuantity.findAll({ where: { rfqId: rfq.id }, actor: person });
  return [...new Set([...rows.map(({ quantity }) => quantity), rfq.quantity])].sort((a, b) => a - b);
}

/** Every submitted quote of an RFQ with its figures at a quantity, by supplier. */
export async function readComparedQuotes(
  person: Person,
  rfq: Rfq,
  quantity: number,
  transaction?: Transaction,
): Promise<{ readonly quotes: ComparedQuote[]; readonly coreVersions: string[] }> {
  const scope = { actor: person, transaction };
  const quotes = await Quote.findAll({ where: { rfqId: rfq.id, state: "submitted" }, ...scope });
  const versionIds = quotes.flatMap(({ currentVersionId }) => currentVersionId ?? []);
  const where = { versionId: { [Op.in]: versionIds } };
  const versions = await QuoteVersion.findAll({ where: { id: { [Op.in]: versionIds } }, ...scope });
  const [prices, exceptions, names, scores] = await Promise.all([
    QuotePrice.findAll({ where, order: [["quantity", "ASC"]], ...scope }),
    QuoteDeclaration.findAll({ where: { ...where, answer: "exception" }, ...scope }),
    readInvitedNames(person, rfq, transaction),
    readScores(person, versions, transaction),
  ]);
  const unscored = versionIds.filter((id) => !scores.has(id));
  const [lines, rescoring, firstScoring] = await Promise.all([
    readScoredLines(person, scores.values(), transaction),
    readRescoring(scores.values(), transaction),
    readFirstScoring(unscored, rfq.revisionId, transaction),
  ]);
  const compared = quotes.flatMap((quote): ComparedQuote[] => {
    const version = versions.find(({ id }) => id === quote.currentVersionId);
    if (!version) return [];
    const score = scores.get(version.id);
    const { nre, minimumQuantity: minimum, orderMultiple: multiple } = version;
    const breaks = prices.filter(({ versionId }) => versionId === version.id);
    return [
      {
        publicId: quote.publicId,
        supplierName: names.get(quote.invitationId) ?? "",
        version: version.number,
        submittedAt: version.submittedAt.toISOString(),
        outcome: quote.outcome,
        scoring: score ? "done" : firstScoring(version.id).state,
        ...scoreFigures(score, lines.get(score?.summary.revisionId ?? 0) ?? []),
        currency: version.currency,
        cost: compareCost({ prices: breaks, asked: quantity, minimum, multiple, nre }),
        nre,
        leadFirstDays: version.leadFirstDays,
        leadVolumeDays: version.leadVolumeDays,
        exceptions: exceptions.filter(({ versionId }) => versionId === version.id).length,
        validUntil: version.validUntil,
        rescoring: rescoring.get(version.id) ?? null,
      },
    ];
  });
  const coreVersions = [...new Set([...scores.values()].map(({ summary }) => summary.coreVersion))];
  return { quotes: sortQuotes(compared, "supplier", "ascending"), coreVersions };
}

/** The lines of each revision there are scores of, by its id: two of them while quotes are scored again for another one. */
async function readScoredLines(
  person: Person,
  scores: Iterable<QuoteScore>,
  transaction?: Transaction,
): Promise<Map<number, SpecificationLine[]>> {
  const revisionIds = [...new Set([...scores].map(({ summary }) => summary.revisionId))];
  const lines = await Promise.all(revisionIds.map((id) => readLines(person, id, transaction)));
  return new Map(revisionIds.map((id, k) => [id, lines[k] ?? []]));
}

function scoreFigures(score: QuoteScore | undefined, lines: readonly SpecificationLine[]) {
  if (!score)
    return {
      verdict: null,
      conforming: false,
      units: 0,
      unitsOverRange: 0,
      temperatures: 0,
      worst: null,
      margins: [],
    };
  const { verdict, conforming, units, unitsOverRange, temperatures } = score.summary;
  return {
    verdict: lineVerdict(verdict),
    conforming,
    units,
    unitsOverRange,
    temperatures,
    worst: worstLine(score, lines),
    margins: lines.flatMap(({ lineKey, lineNumber, definition }) => {
      const result = definition.kind === "declared" ? undefined : score.lines.get(lineKey);
      const shown = result && measuredVerdict(lineVerdict(result.verdict));
      return shown ? [{ lineNumber, credited: result.creditedMargin ?? endless(result), verdict: shown }] : [];
    }),
  };
}

/** A margin without end has no parts of full credit, and is the least there is all the same. */
const endless = (result: QuoteLineResult): number => (worstCell(result)?.result.margin === -Infinity ? -Infinity : NaN);

const measuredVerdict = (verdict: LineVerdict): Verdict | null =>
  verdict === "declared" || verdict === "exception" ? null : verdict;

function worstLine(score: QuoteScore, lines: readonly SpecificationLine[]): WorstLine | null {
  const line = lines.find(({ lineKey }) => lineKey === score.summary.worstLineKey);
  const result = line && score.lines.get(line.lineKey);
  const cell = result && worstCell(result);
  const verdict = result && measuredVerdict(lineVerdict(result.verdict));
  if (!cell || !verdict || line.definition.kind === "declared") return null;
  const { margin, marginInterval, frequency } = cell.result;
  return {
    lineNumber: line.lineNumber,
    kind: line.definition.kind,
    verdict,
    margin,
    marginInterval,
    creditedMargin: result.creditedMargin,
    frequency,
    unit: cell.unit,
    celsius: cell.temperature,
  };
}

/** The directory's names by invitation. */
async function readInvitedNames(person: Person, rfq: Rfq, transaction?: Transaction): Promise<Map<number, string>> {
  const invitations = await Invitation.findAll({ where: { rfqId: rfq.id }, actor: person, transaction });
  const suppliers = await Supplier.findAll({
    where: { id: { [Op.in]: invitations.map(({ supplierId }) => supplierId) } },
    actor: person,
    transaction,
  });
  const names = new Map(suppliers.map(({ id, name }) => [id, name]));
  return new Map(invitations.map(({ id, supplierId }) => [id, names.get(supplierId) ?? ""]));
}

async function readSilentSuppliers(person: Person, rfq: Rfq): Promise<SilentSupplier[]> {
  const [invitations, quotes, names] = await Promise.all([
    Invitation.findAll({ where: { rfqId: rfq.id }, actor: person }),
    Quote.findAll({ where: { rfqId: rfq.id }, actor: person }),
    readInvitedNames(person, rfq),
  ]);
  const states = new Map(quotes.map(({ invitationId, state }) => [invitationId, state]));
  return invitations
    .flatMap(({ id, state }): SilentSupplier[] => {
      const company = names.get(id) ?? "";
      if (states.get(id) === "submitted") return [];
      if (states.get(id) === "withdrawn") return [{ company, state: "withdrawn" }];
      return state === "draft" || state === "revoked" ? [] : [{ company, state }];
    })
    .sort((a, b) => a.company.localeCompare(b.company, "en"));
}

const ORDER: Record<ComparisonSort, (a: ComparedQuote, b: ComparedQuote) => number> = {
  supplier: (a, b) => a.supplierName.localeCompare(b.supplierName, "en"),
  margin: (a, b) => (a.worst?.creditedMargin ?? 0) - (b.worst?.creditedMargin ?? 0),
  cost: (a, b) => (a.cost && b.cost ? compare(a.cost.total, b.cost.total) : 0),
  lead: (a, b) => a.leadVolumeDays - b.leadVolumeDays,
};

/** Quotes in an order; those without the figure last in either direction, of equals by supplier. */
export function sortQuotes<Q extends ComparedQuote>(
  quotes: readonly Q[],
  sort: ComparisonSort,
  direction: "ascending" | "descending",
): Q[] {
  const sign = direction === "ascending" ? 1 : -1;
  const lacks = ({ cost, worst }: Q) =>
    Number(sort === "cost" ? !cost : sort === "margin" && (worst?.creditedMargin ?? null) === null);
  return [...quotes].sort(
    (a, b) =>
      lacks(a) - lacks(b) || sign * ORDER[sort](a, b) || ORDER.supplier(a, b) || (a.publicId < b.publicId ? -1 : 1),
  );
}
