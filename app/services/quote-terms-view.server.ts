// The terms, the measurement setup and the files of a submitted quote, as its buyer reads them.
import { Op } from "sequelize";
import { QuoteDeclaration, QuotePrice, StoredFile } from "~/db/models";
import { compareCost, type ComparedCost } from "~/commerce/index";
import type { Setup } from "~/rf/contract";
import type { Instrument, StatedDrift } from "~/rf/stated-measurement";
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
  readonly basis: "measured" | "similar" | "simulated";
  /** What the supplier states of all sweeps; the rest is assumed. */
  readonly setup: Setup;
  readonly assumedSetup: Setup;
  readonly instrument: Instrument;
  readonly drift: StatedDrift | null;
  /** Sweeps with figures of their own, in the order of the files. */
  readonly sweepSetups: readonly { readonly fileName: string; readonly setup: Setup }[];
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
  const [priceRows, declarationRows, lines, sweepSetups] = await Promise.all([
    QuotePrice.findAll({ where, order: [["quantity", "ASC"]], actor: person }),
    QuoteDeclaration.findAll({ where, actor: person }),
    readLines(person, version.revisionId),
    readSweepSetups(person, version.id),
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
    basis: version.basis,
    setup: version.setup,
    assumedSetup: rfq.assumedSetup,
    instrument: version.instrument,
    drift: version.drift,
    sweepSetups,
    declarations: lines.flatMap(({ lineKey, lineNumber, definition }) => {
      if (definition.kind !== "declared") return [];
      const row = declarationRows.find((candidate) => candidate.lineKey === lineKey);
      const { name: requirement, limit } = definition;
      return [{ lineNumber, requirement, limit, answer: row?.answer ?? null, text: row?.text ?? null }];
    }),
  };
}

async function readSweepSetups(person: Person, versionId: number): Promise<QuoteTerms["sweepSetups"]> {
  const sweeps = (await readVersionSweeps(person, versionId)).filter(({ setup }) => setup !== null);
  const files = await readFiles(person, sweeps);
  return sweeps.map(({ fileId, setup }) => ({ fileName: files.get(fileId)?.name ?? "", setup: setup ?? {} }));
}

async function readFiles(
  person: Person,
  sweeps: readonly { readonly fileId: number }[],
): Promise<ReadonlyMap<number, StoredFile>> {
  const where = { id: { [Op.in]: sweeps.map(({ fileId }) => fileId) } };
  return new Map((await StoredFile.findAll({ where, actor: person })).map((file) => [file.id, file]));
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
  const files = await readFiles(person, sweeps);
  return sweeps.flatMap((sweep): QuoteFile[] => {
    const file = files.get(sweep.fileId);
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
