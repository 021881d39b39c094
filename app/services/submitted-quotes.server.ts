// A submitted quote as its buyer sees it, and what the title block of its sheets says.
import { Invitation, Quote, QuoteVersion, Rfq, Specification, SpecificationRevision, Supplier } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import type { LineVerdict } from "~/emails/index";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import type { QuoteState } from "~/workflow/quote";
import { rfqState, type RfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";
import { lineVerdict, readScores, type QuoteScore } from "./quote-scores.server";
import { readRescoring, type Rescoring } from "./scoring-progress.server";

export interface SubmittedQuote {
  readonly quote: Quote;
  readonly version: QuoteVersion;
  readonly rfq: Rfq;
}

/** The quote with its current version, or null where the person does not see it. */
export async function findSubmittedQuote(person: Person, publicId: string): Promise<SubmittedQuote | null> {
  if (person.organisationKind !== "buyer") return null;
  const quote = await Quote.findOne({ where: { publicId }, actor: person });
  if (!quote || quote.currentVersionId === null) return null;
  const [version, rfq] = await Promise.all([
    QuoteVersion.findByPk(quote.currentVersionId, { actor: person }),
    Rfq.findByPk(quote.rfqId, { actor: person }),
  ]);
  return version && rfq ? { quote, version, rfq } : null;
}

export interface SubmittedQuoteHead {
  readonly publicId: string;
  readonly supplierName: string;
  readonly state: QuoteState;
  readonly outcome: "awarded" | "regretted" | null;
  readonly rfq: {
    readonly publicId: string;
    readonly number: string;
    readonly title: string;
    readonly state: RfqState;
  };
  /** The revision the figures are scored against; until there are any, the one the version was submitted to. */
  readonly specification: { readonly publicId: string; readonly number: string; readonly letter: string };
  readonly version: number;
  readonly submitterName: string;
  /** ISO 8601, UTC. */
  readonly submittedAt: string;
  readonly dueZone: string;
  readonly basis: "measured" | "similar" | "simulated";
  readonly decisionRule: "simple" | "guarded";
  /** Expanded uncertainty (k = 2) of |S21|, dB; null where neither the supplier nor the RFQ names one. */
  readonly transmission: { readonly uncertainty: number; readonly assumed: boolean } | null;
  /** Null until the version is scored. */
  readonly verdict: LineVerdict | null;
  readonly conforming: boolean | null;
  /** Of the evaluation; null until the version is scored. */
  readonly coreVersion: string | null;
  /** While the figures shown wait for those of the RFQ's revision and the core that runs; else null. */
  readonly rescoring: Rescoring | null;
}

/** The head of a quote's sheets, or null where the person does not see it. */
export async function readSubmittedHead(person: Person, publicId: string): Promise<SubmittedQuoteHead | null> {
  const found = await findSubmittedQuote(person, publicId);
  return found && headOf(person, found, (await readScores(person, [found.version])).get(found.version.id));
}

/** The head of a quote that was found and scored already. */
export async function headOf(
  person: Person,
  { quote, version, rfq }: SubmittedQuote,
  score: QuoteScore | undefined,
): Promise<SubmittedQuoteHead> {
  const [invitation, specification, revision, rescoring, now] = await Promise.all([
    Invitation.findByPk(quote.invitationId, { actor: person, rejectOnEmpty: true }),
    Specification.findByPk(rfq.specificationId, { actor: person, rejectOnEmpty: true }),
    SpecificationRevision.findByPk(score?.summary.revisionId ?? version.revisionId, {
      actor: person,
      rejectOnEmpty: true,
    }),
    readRescoring(score ? [score] : []),
    databaseNow(),
  ]);
  const supplier = await Supplier.findByPk(invitation.supplierId, { actor: person, rejectOnEmpty: true });
  return {
    publicId: quote.publicId,
    supplierName: supplier.name,
    state: quote.state,
    outcome: quote.outcome,
    rfq: {
      publicId: rfq.publicId,
      number: rfqNumber(rfq.year, rfq.number),
      title: rfq.title,
      state: rfqState(rfq, now),
    },
    specification: {
      publicId: specification.publicId,
      number: specificationNumber(specification.number),
      letter: revision.letter,
    },
    version: version.number,
    submitterName: version.submitterName,
    submittedAt: version.submittedAt.toISOString(),
    dueZone: rfq.dueZone,
    basis: version.basis,
    decisionRule: rfq.decisionRule,
    transmission: transmissionOf(version, rfq),
    verdict: score ? lineVerdict(score.summary.verdict) : null,
    conforming: score ? score.summary.conforming : null,
    coreVersion: score?.summary.coreVersion ?? null,
    rescoring: rescoring.get(version.id) ?? null,
  };
}

function transmissionOf(version: QuoteVersion, rfq: Rfq): SubmittedQuoteHead["transmission"] {
  const stated = version.setup.transmission;
  const uncertainty = stated ?? rfq.assumedSetup.transmission;
  return uncertainty === undefined ? null : { uncertainty, assumed: stated === undefined };
}
