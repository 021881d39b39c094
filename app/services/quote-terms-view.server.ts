// The terms and the files of a submitted quote, as its buyer reads them.
import { Op } from "sequelize";
import { QuoteDeclaration, QuotePrice, StoredFile } from "~/db/models";
import { compareCost, type ComparedCost } from "~/commerce/index";
import type { Person } from "./person.server";
import { readVersionSweeps } from "./quote-results.server";
import { readLines } from "./specification-lines.server";
import { findSubmittedQuote } from "./submitted-quotes.server";

export interface QuoteTerms {
  readonly currency: string;
  /** Decimal text. */
  readonly prices: readonly { readonly quantity: number; readonly unitPrice: string }[];
  readonly nre: string;
  readonly askedQuantity: number;
  /** At the asked quantity; null where there is no price for it. */
  readonly cost: ComparedCost | null;
  readonly leadFirstDays: number | null;
  readonly leadVolumeDays: number;
  readonly minimumQuantity: number | null;
  readonly orderMultiple: number | null;
  /** ISO 8601 date. */
  readonly validUntil: string;
  readonly incoterms: string | null;
  readonly place: string | null;
  readonly paymentTerms: string | null;
  readonly remarks: string | null;
  /** SHA-256 of the submission, hexadecimal. */
  readonly contentHash: string;
  readonly declarations: readonly DeclaredLine[];
}

export interface DeclaredLine {
  readonly lineNumber: string;
  readonly requirement: string;
  readonly limit: string;
  /** Null where the supplier left it open. */
  readonly answer: "comply" | "exception" | null;
  readonly text: string | null;
}

/** The terms of a quote's current version, or null where the person does not see it. */
export async function readQuoteTerms(person: Person, quotePublicId: string): Promise<QuoteTerms | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const { version, rfq } = found;
  const where = { versionId: version.id };
  const [priceRows, declarationRows, lines] = await Promise.all([
    QuotePrice.findAll({ where, order: [["quantity", "ASC"]], actor: person }),
    QuoteDeclaration.findAll({ where, actor: person }),
    readLines(person, version.revisionId),
  ]);
  const prices = priceRows.map(({ quantity, unitPrice }) => ({ quantity, unitPrice }));
  const { nre, minimumQuantity: minimum, orderMultiple: multiple } = version;
  return {
    currency: version.currency,
    prices,
    nre,
    askedQuantity: rfq.quantity,
    cost: compareCost({ prices, asked: rfq.quantity, minimum, multiple, nre }),
    leadFirstDays: version.leadFirstDays,
    leadVolumeDays: version.leadVolumeDays,
    minimumQuantity: minimum,
    orderMultiple: multiple,
    validUntil: version.validUntil,
    incoterms: version.incoterms,
    place: version.place,
    paymentTerms: version.paymentTerms,
    remarks: version.remarks,
    contentHash: version.contentHash.toString("hex"),
    declarations: lines.flatMap(({ lineKey, lineNumber, definition }) => {
      if (definition.kind !== "declared") return [];
      const row = declarationRows.find((candidate) => candidate.lineKey === lineKey);
      const { name: requirement, limit } = definition;
      return [{ lineNumber, requirement, limit, answer: row?.answer ?? null, text: row?.text ?? null }];
    }),
  };
}

export interface QuoteFile {
  readonly publicId: string;
  readonly name: string;
  /** Bytes. */
  readonly size: number;
  /** Hexadecimal. */
  readonly sha256: string;
  /** The sweep in it; null for a file that is none. */
  readonly sweep: {
    readonly unit: string;
    readonly celsius: number;
    readonly points: number;
    /** Hz. */
    readonly range: readonly [number, number];
  } | null;
}

/** The files of a quote's current version, or null where the person does not see it. */
export async function readQuoteFiles(person: Person, quotePublicId: string): Promise<QuoteFile[] | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const sweeps = await readVersionSweeps(person, found.version.id);
  const files = await StoredFile.findAll({
    where: { id: { [Op.in]: sweeps.map(({ fileId }) => fileId) } },
    actor: person,
  });
  return sweeps.flatMap((sweep): QuoteFile[] => {
    const file = files.find(({ id }) => id === sweep.fileId);
    if (!file) return [];
    const { points, frequencyFrom, frequencyTo } = sweep;
    return [
      {
        publicId: file.publicId,
        name: file.name,
        size: file.size,
        sha256: file.sha256.toString("hex"),
        sweep: {
          unit: sweep.serial ?? "",
          celsius: Number(sweep.temperature),
          points,
          range: [frequencyFrom, frequencyTo],
        },
      },
    ];
  });
}
