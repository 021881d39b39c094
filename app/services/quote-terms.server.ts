// The form of a quote's terms and declarations: what was typed so far, what the RFQ asks, and what is wrong with it now.
import { Organisation, RfqQuantity, type Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import type { QueryActor } from "~/db/scoping";
import type { FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { isDataField } from "~/forms/setup";
import { statedSetup } from "~/forms/quote-setup";
import { parseQuoteTerms, type QuoteTermsContext } from "~/forms/quote-terms";
import { zonedTimeToText } from "~/forms/zoned-time";
import { isMeasured, type SpecificationLine } from "~/rf/line-definition";
import type { Setup } from "~/rf/index";
import type { Transaction } from "sequelize";
import type { Person } from "./person.server";
import { findQuote } from "./quotes.server";
import { readLines } from "./specification-lines.server";

export interface QuoteTermsForm {
  readonly values: FormValues;
  readonly lockVersion: number;
  /** Quantities a unit price is asked for, ascending. */
  readonly breaks: readonly number[];
  readonly quantity: number;
  readonly currency: string;
  readonly assumedSetup: Setup;
  /** What the draft states of the setup now, as far as it is in order. */
  readonly statedSetup: Setup;
  /** The declared lines in their order. */
  readonly declared: readonly DeclaredLine[];
  readonly buyerName: string;
}

export interface DeclaredLine {
  readonly lineKey: string;
  readonly lineNumber: string;
  readonly name: string;
  readonly limit: string;
}

/** Null where the person does not see the quote. */
export async function readQuoteTerms(person: Person, quotePublicId: string): Promise<QuoteTermsForm | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const { quote, rfq } = found;
  const [breaks, lines, buyer] = await Promise.all([
    readBreaks(person, rfq),
    readLines(person, rfq.revisionId),
    Organisation.findByPk(rfq.buyerOrganisationId, { actor: person, rejectOnEmpty: true }),
  ]);
  return {
    values: { ...quote.draft.values },
    lockVersion: quote.lockVersion,
    breaks,
    quantity: rfq.quantity,
    currency: rfq.currency,
    assumedSetup: rfq.assumedSetup,
    statedSetup: statedSetup({ ...quote.draft.values }),
    declared: declaredLines(lines),
    buyerName: buyer.name,
  };
}

const readBreaks = async (actor: QueryActor, { id: rfqId }: Rfq, transaction?: Transaction): Promise<number[]> => {
  const rows = await RfqQuantity.findAll({ where: { rfqId }, order: [["quantity", "ASC"]], actor, transaction });
  return rows.map(({ quantity }) => quantity);
};

const declaredLines = (lines: readonly SpecificationLine[]): DeclaredLine[] =>
  lines.flatMap(({ lineKey, lineNumber, definition }) =>
    isMeasured(definition) ? [] : [{ lineKey, lineNumber, name: definition.name, limit: definition.limit }],
  );

/** What the RFQ sets for the terms; the day is that of its zone. */
export async function termsContext(
  actor: QueryActor,
  rfq: Rfq,
  now: Date,
  transaction?: Transaction,
): Promise<QuoteTermsContext> {
  const breaks = await readBreaks(actor, rfq, transaction);
  const lines = await readLines(actor, rfq.revisionId, transaction);
  return {
    breaks,
    currency: rfq.currency,
    declaredLineKeys: declaredLines(lines).map(({ lineKey }) => lineKey),
    today: zonedTimeToText(now, rfq.dueZone).date,
  };
}

/** The sheets of a quote whose fields its draft keeps. */
export type DraftSheet = "data" | "terms" | "declarations";

/** The sheet a field of the draft is typed on. */
function sheetOf(field: string): DraftSheet {
  if (isDataField(field)) return "data";
  return field.startsWith("declarations.") ? "declarations" : "terms";
}

/** What keeps a sheet from being submitted as it stands; null where the person does not see the quote. */
export async function checkSheet(
  person: Person,
  quotePublicId: string,
  sheet: DraftSheet,
): Promise<FieldErrors | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const context = await termsContext(person, found.rfq, await databaseNow());
  const parsed = parseQuoteTerms({ ...found.quote.draft.values }, context);
  if (parsed.ok) return {};
  const wanted = Object.entries(parsed.errors).filter(([name]) => sheetOf(name) === sheet);
  return Object.fromEntries(wanted);
}

/** Errors of what was typed, without those of fields still blank: those are told on the review. */
export function typedErrors(errors: FieldErrors, values: FormValues): FieldErrors {
  const paired = (name: string) =>
    name === "place" || name === "incoterms" || name === "drift.ppmPerKelvin" || name.endsWith(".text");
  const typed = Object.entries(errors).filter(([name]) => paired(name) || (values[name] ?? "").trim() !== "");
  return Object.fromEntries(typed);
}
