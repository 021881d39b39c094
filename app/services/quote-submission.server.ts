// Submitting a quote: what is still missing, and the one transaction that freezes a version while the RFQ is held.
import { Op, type Transaction } from "sequelize";
import {
  MeasurementRow,
  QuoteDeclaration,
  QuotePrice,
  QuoteVersion,
  StoredFile,
  VersionMeasurement,
  type Quote,
} from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM, type QueryActor } from "~/db/scoping";
import { formatInstant } from "~/emails/format";
import { invalid, ok, type FieldErrors, type Result } from "~/forms/form";
import { parseQuoteTerms, type QuoteTerms } from "~/forms/quote-terms";
import { quoteRefusal } from "~/workflow/quote";
import { rfqState } from "~/workflow/rfq";
import { recordEvent } from "./audit.server";
import { once } from "./idempotency.server";
import { sha256 } from "./identifiers.server";
import { queueScoring } from "./jobs.server";
import type { Person } from "./person.server";
import { findQuote, lockQuote, type LockedQuote } from "./quotes.server";
import { canonicalJson } from "./specification-release.server";
import { termsContext } from "./quote-terms.server";

/** Reference of a receipt: the first 64 bits of the version's content hash, in groups of four. */
export const receiptOf = (contentHash: Buffer): string =>
  (contentHash.toString("hex").slice(0, 16).toUpperCase().match(/.{4}/g) ?? []).join("-");

type Submitted = Result<{ readonly version: number; readonly receipt: string }>;

const CHANGED_SINCE =
  "This quote was changed since you opened this page. Load the page again, and submit once you have read what it says now.";

/**
 * Submits the quote as it is saved. The database's clock decides, read when the RFQ's row is held: at or after the due
 * millisecond it is refused. Null where the person does not see the quote.
 *
 * @param seen when what was reviewed had been saved, ISO 8601: what a colleague changed since is not submitted unread
 */
export async function submitQuote(
  person: Person,
  quotePublicId: string,
  idempotencyKey: string,
  seen?: string,
): Promise<Submitted | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const isFinal = (outcome: Submitted | null) => outcome?.ok === true;
  return once<Submitted | null>(person, idempotencyKey, ["submit", quotePublicId], isFinal, async (transaction) => {
    const locked = await lockQuote(found, "UPDATE", transaction);
    if (!locked) return null;
    const refusal = submissionRefusal(locked);
    if (refusal) return invalid({ form: [refusal] });
    if (seen !== undefined && seen !== locked.quote.savedAt.toISOString()) return invalid({ form: [CHANGED_SINCE] });
    const content = await readContent(SYSTEM, locked, transaction);
    if (!content.ok) return content;
    return ok(await freeze(person, locked, content.value, transaction));
  });
}

/** Why a quote cannot be submitted at `now`; null where it can, if it is complete. */
export function submissionRefusal({ rfq, quote, now }: LockedQuote): string | null {
  const state = rfqState(rfq, now);
  const refusal = quoteRefusal("submit", quote.state, state);
  if (refusal === null || state !== "closed") return refusal;
  const closedAt = rfq.closedAt ?? rfq.dueAt;
  return `The RFQ closed at ${formatInstant(closedAt.toISOString(), rfq.dueZone)}. This submission was not taken.`;
}

interface Content {
  readonly terms: QuoteTerms;
  readonly measurements: readonly MeasurementRow[];
  readonly files: ReadonlyMap<number, StoredFile>;
}

async function readContent(
  actor: QueryActor,
  { rfq, quote, now }: LockedQuote,
  transaction?: Transaction,
): Promise<Result<Content>> {
  const context = await termsContext(actor, rfq, now, transaction);
  const parsed = parseQuoteTerms({ ...quote.draft.values }, context);
  const measurements = await MeasurementRow.findAll({
    where: { quoteId: quote.id, removedAt: null },
    order: [["id", "ASC"]],
    actor,
    transaction,
  });
  const where = { id: { [Op.in]: measurements.map(({ fileId }) => fileId) } };
  const files = new Map((await StoredFile.findAll({ where, actor, transaction })).map((file) => [file.id, file]));
  const data = dataErrors(measurements, files);
  if (parsed.ok && data.length === 0) return ok({ terms: parsed.value, measurements, files });
  return invalid({ ...(parsed.ok ? {} : parsed.errors), ...(data.length > 0 ? { data } : {}) });
}

function dataErrors(measurements: readonly MeasurementRow[], files: ReadonlyMap<number, StoredFile>): string[] {
  if (measurements.length === 0) return ["Upload at least one measured file."];
  const nameOf = ({ fileId }: MeasurementRow) => files.get(fileId)?.name ?? "";
  const naming = (rows: readonly MeasurementRow[]) => {
    const names = rows.slice(0, 3).map(nameOf).join(", ");
    return rows.length > 3 ? `${names} and ${rows.length - 3} more` : names;
  };
  const nameless = measurements.filter(({ serial }) => serial === null);
  const open = measurements.filter(({ temperature }) => temperature === null);
  return [
    ...(nameless.length > 0 ? [`Enter the unit of ${naming(nameless)}.`] : []),
    ...(open.length > 0 ? [`Enter the temperature of ${naming(open)}.`] : []),
  ];
}

async function freeze(person: Person, { rfq, quote, now }: LockedQuote, content: Content, transaction: Transaction) {
  const { terms, measurements } = content;
  const tenants = {
    buyerOrganisationId: quote.buyerOrganisationId,
    supplierOrganisationId: quote.supplierOrganisationId,
  };
  const number = 1 + (await QuoteVersion.count({ where: { quoteId: quote.id }, actor: SYSTEM, transaction }));
  const contentHash = hashOf(quote, number, rfq.revisionId, content);
  const { prices, declarations, ...columns } = terms;
  const version = await QuoteVersion.create(
    {
      ...columns,
      ...tenants,
      quoteId: quote.id,
      rfqId: rfq.id,
      revisionId: rfq.revisionId,
      number,
      submittedAt: now,
      submittedBy: person.userId,
      submitterName: person.name,
      contentHash,
      createdAt: now,
    },
    { transaction },
  );
  const of = { ...tenants, versionId: version.id };
  await QuotePrice.bulkCreate(
    prices.map((price) => ({ ...of, ...price })),
    { transaction },
  );
  await QuoteDeclaration.bulkCreate(
    declarations.map((answer) => ({ ...of, ...answer })),
    { transaction },
  );
  await VersionMeasurement.bulkCreate(
    measurements.map(({ id: measurementId }) => ({ ...of, measurementId })),
    {
      transaction,
    },
  );
  await share(content, now, transaction);
  await quote.update(
    {
      state: "submitted",
      currentVersionId: version.id,
      basis: terms.basis,
      sharedAt: quote.sharedAt ?? now,
      savedAt: now,
      lockVersion: quote.lockVersion + 1,
    },
    { transaction },
  );
  await queueScoring(version.id, now, transaction);
  const about = { ...tenants, rfqId: rfq.id, quoteId: quote.id };
  const detail = { version: number, files: measurements.length, contentHash: contentHash.toString("hex") };
  await recordEvent(person, now, { subject: "quote", action: "submitted", ...about, detail }, transaction);
  return { version: number, receipt: receiptOf(contentHash) };
}

/** From now on the buyer sees these files too. */
async function share({ measurements, files }: Content, now: Date, transaction: Transaction): Promise<void> {
  const of = { actor: SYSTEM, transaction } as const;
  const measurementIds = measurements.map(({ id }) => id);
  await MeasurementRow.update({ sharedAt: now }, { where: { id: measurementIds, sharedAt: null }, ...of });
  await StoredFile.update({ sharedAt: now }, { where: { id: [...files.keys()], sharedAt: null }, ...of });
}

/** SHA-256 over all that was submitted, the bytes of the files by their own hashes. */
function hashOf(quote: Quote, number: number, revisionId: number, { terms, measurements, files }: Content): Buffer {
  const data = measurements.map(({ fileId, serial, temperature, setup }) => {
    const file = files.get(fileId);
    return { name: file?.name, sha256: file?.sha256.toString("hex"), serial, temperature, setup };
  });
  return sha256(canonicalJson({ quote: quote.publicId, number, revisionId, terms, data }));
}

export interface QuoteReview {
  /** The terms as they would be submitted; null while something in them is wrong or missing. */
  readonly terms: QuoteTerms | null;
  /** What keeps the quote from being submitted: fields by name, the files under `data`. */
  readonly errors: FieldErrors;
}

/** What a submission would say now, or null where the person does not see the quote. */
export async function reviewQuote(person: Person, quotePublicId: string): Promise<QuoteReview | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  const now = await databaseNow();
  const content = await readContent(person, { ...found, now });
  if (content.ok) return { terms: content.value.terms, errors: {} };
  const parsed = parseQuoteTerms({ ...found.quote.draft.values }, await termsContext(person, found.rfq, now));
  return { terms: parsed.ok ? parsed.value : null, errors: content.errors };
}
