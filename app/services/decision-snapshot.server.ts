// What a decision rests on, kept with it: quotes, figures, cost arithmetic and file hashes, so that it can be redone a year later.
import { Op, type Transaction } from "sequelize";
import {
  Quote,
  QuotePrice,
  QuoteVersion,
  Specification,
  SpecificationRevision,
  StoredFile,
  MeasurementRow,
  VersionMeasurement,
  type Rfq,
} from "~/db/models";
import type { ComparedCost } from "~/commerce/index";
import { storeNumber, type StoredNumber } from "~/rf/index";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import type { ComparedQuote } from "./comparison.server";
import { sha256 } from "./identifiers.server";
import type { Person } from "./person.server";
import { canonicalJson } from "./specification-release.server";

/** One compared quote as it stood. Hashes are hexadecimal SHA-256, amounts decimal text. */
export interface SnapshotQuote {
  readonly quote: string;
  readonly supplier: string;
  readonly version: number;
  readonly contentHash: string;
  readonly submittedAt: string;
  readonly basis: string;
  readonly verdict: string | null;
  readonly conforming: boolean;
  readonly worst: {
    readonly line: string;
    /** In the core's unit of the line. */
    readonly margin: StoredNumber;
    readonly creditedMargin: number | null;
    /** Hz. */
    readonly frequency: StoredNumber;
    readonly unit: string;
    readonly celsius: number;
  } | null;
  readonly prices: readonly { readonly quantity: number; readonly unitPrice: string }[];
  readonly minimumQuantity: number | null;
  readonly orderMultiple: number | null;
  readonly cost: ComparedCost | null;
  readonly leadVolumeDays: number;
  readonly exceptions: number;
  readonly validUntil: string;
  readonly files: readonly { readonly name: string; readonly size: number; readonly sha256: string }[];
}

export interface DecisionSnapshot {
  readonly format: 1;
  readonly takenAt: string;
  readonly rfq: {
    readonly number: string;
    readonly title: string;
    readonly specification: string;
    readonly specificationHash: string | null;
    readonly quantity: number;
    readonly currency: string;
    readonly decisionRule: "simple" | "guarded";
    readonly dueAt: string;
  };
  readonly coreVersions: readonly string[];
  /** The quote recommended, among `quotes`. */
  readonly recommended: string;
  readonly quotes: readonly SnapshotQuote[];
}

/** SHA-256 of a snapshot, by its keys in order: it can be computed again from what is stored. */
export const snapshotHash = (snapshot: object): Buffer => sha256(canonicalJson(snapshot));

interface Compared {
  readonly quotes: readonly ComparedQuote[];
  readonly coreVersions: readonly string[];
}

/** Takes the snapshot inside the transaction of the recommendation. */
export async function takeSnapshot(
  person: Person,
  rfq: Rfq,
  { quotes: compared, coreVersions }: Compared,
  recommended: string,
  now: Date,
  transaction: Transaction,
): Promise<DecisionSnapshot> {
  const scope = { actor: person, transaction };
  const [specification, revision, quotes] = await Promise.all([
    Specification.findByPk(rfq.specificationId, { ...scope, rejectOnEmpty: true }),
    SpecificationRevision.findByPk(rfq.revisionId, { ...scope, rejectOnEmpty: true }),
    Quote.findAll({ where: { rfqId: rfq.id, state: "submitted" }, ...scope }),
  ]);
  const versions = await readVersionRecords(person, quotes, transaction);
  return {
    format: 1,
    takenAt: now.toISOString(),
    rfq: {
      number: rfqNumber(rfq.year, rfq.number),
      title: rfq.title,
      specification: `${specificationNumber(specification.number)} ${revision.letter}`,
      specificationHash: revision.contentHash?.toString("hex") ?? null,
      quantity: rfq.quantity,
      currency: rfq.currency,
      decisionRule: rfq.decisionRule,
      dueAt: rfq.dueAt.toISOString(),
    },
    coreVersions: [...coreVersions],
    recommended,
    quotes: compared.flatMap((quote) => {
      const row = quotes.find(({ publicId }) => publicId === quote.publicId);
      const record = versions.get(row?.currentVersionId ?? 0);
      return record ? [snapshotQuote(quote, record)] : [];
    }),
  };
}

interface VersionRecord {
  readonly version: QuoteVersion;
  readonly prices: readonly QuotePrice[];
  readonly files: readonly StoredFile[];
}

async function readVersionRecords(
  person: Person,
  quotes: readonly Quote[],
  transaction: Transaction,
): Promise<Map<number, VersionRecord>> {
  const scope = { actor: person, transaction };
  const ids = quotes.flatMap(({ currentVersionId }) => currentVersionId ?? []);
  const where = { versionId: { [Op.in]: ids } };
  const [versions, prices, links] = await Promise.all([
    QuoteVersion.findAll({ where: { id: { [Op.in]: ids } }, ...scope }),
    QuotePrice.findAll({ where, order: [["quantity", "ASC"]], ...scope }),
    VersionMeasurement.findAll({ where, ...scope }),
  ]);
  const sweeps = await MeasurementRow.findAll({
    where: { id: { [Op.in]: links.map(({ measurementId }) => measurementId) } },
    ...scope,
  });
  const files = await StoredFile.findAll({
    where: { id: { [Op.in]: sweeps.map(({ fileId }) => fileId) } },
    order: [["name", "ASC"]],
    ...scope,
  });
  const versionOf = new Map(links.map(({ measurementId, versionId }) => [measurementId, versionId]));
  const fileVersion = new Map(sweeps.map(({ id, fileId }) => [fileId, versionOf.get(id)]));
  return new Map(
    versions.map((version) => [
      version.id,
      {
        version,
        prices: prices.filter(({ versionId }) => versionId === version.id),
        files: files.filter(({ id }) => fileVersion.get(id) === version.id),
      },
    ]),
  );
}

function snapshotQuote(quote: ComparedQuote, { version, prices, files }: VersionRecord): SnapshotQuote {
  const { worst } = quote;
  return {
    quote: quote.publicId,
    supplier: quote.supplierName,
    version: quote.version,
    contentHash: version.contentHash.toString("hex"),
    submittedAt: quote.submittedAt,
    basis: version.basis,
    verdict: quote.verdict,
    conforming: quote.conforming,
    worst: worst && {
      line: worst.lineNumber,
      margin: storeNumber(worst.margin),
      creditedMargin: worst.creditedMargin,
      frequency: storeNumber(worst.frequency),
      unit: worst.unit,
      celsius: worst.celsius,
    },
    prices: prices.map(({ quantity, unitPrice }) => ({ quantity, unitPrice })),
    minimumQuantity: version.minimumQuantity,
    orderMultiple: version.orderMultiple,
    cost: quote.cost,
    leadVolumeDays: quote.leadVolumeDays,
    exceptions: quote.exceptions,
    validUntil: quote.validUntil,
    files: files.map(({ name, size, sha256: hash }) => ({ name, size, sha256: hash.toString("hex") })),
  };
}
