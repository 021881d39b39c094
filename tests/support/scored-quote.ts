// Submitted quotes for tests: with figures written by hand, or measured with the demo's files and scored by the product.
import { readdir, readFile } from "node:fs/promises";
import path from "node:path";
import {
  MeasurementRow,
  QuoteDeclaration,
  QuoteLineResult,
  QuotePrice,
  QuoteSummary,
  QuoteVersion,
  StoredFile,
  VersionMeasurement,
  type Quote,
  type Rfq,
} from "~/db/models";
import { sequelize } from "~/db/connection.server";
import {
  checkNetwork,
  CORE_VERSION,
  parseTouchstone,
  storeCell,
  type Result,
  type SpecificationLine,
  type Verdict,
} from "~/rf/index";
import { packChunks, storeChunks } from "~/services/file-bytes.server";
import { newPublicId, sha256 } from "~/services/identifiers.server";
import { scoreVersion } from "~/services/scoring.server";
import { buildInvitation, buildOrganisation, buildPerson, buildQuote, buildRfq } from "./factories";
import { JOURNEY_LINES, JOURNEY_SETUP } from "./journey";

const at = new Date("2026-11-10T09:00:00.000Z");

export interface QuoteTermsForTest {
  readonly name?: string;
  readonly prices?: Readonly<Record<number, string>>;
  readonly nre?: string;
  readonly leadVolumeDays?: number;
  readonly minimumQuantity?: number | null;
  readonly orderMultiple?: number | null;
  readonly validUntil?: string;
  /** Line keys an exception is taken to; the other declared lines comply. */
  readonly exceptions?: readonly string[];
}

/** A submitted quote of a supplier of its own, not scored. */
export async function buildSubmittedQuote(
  rfq: Rfq,
  lines: readonly SpecificationLine[],
  {
    name = "Supplier",
    prices = { 100: "140", 500: "121", 1000: "110" },
    nre = "4000",
    leadVolumeDays = 84,
    minimumQuantity = null,
    orderMultiple = null,
    validUntil = "2099-12-31",
    exceptions = [],
  }: QuoteTermsForTest = {},
) {
  const organisation = await buildOrganisation("supplier", { name });
  const person = await buildPerson(organisation);
  const { invitation } = await buildInvitation(rfq, organisation, person.email);
  const quote = await buildQuote(invitation, organisation.id);
  const tenants = { buyerOrganisationId: rfq.buyerOrganisationId, supplierOrganisationId: organisation.id };
  const version = await QuoteVersion.create({
    ...tenants,
    quoteId: quote.id,
    rfqId: rfq.id,
    revisionId: rfq.revisionId,
    number: 1,
    submittedAt: at,
    submittedBy: person.userId,
    submitterName: person.name,
    basis: "measured",
    currency: rfq.currency,
    nre,
    leadVolumeDays,
    minimumQuantity,
    orderMultiple,
    validUntil,
    setup: {},
    contentHash: sha256(name),
    createdAt: at,
  });
  for (const [quantity, unitPrice] of Object.entries(prices))
    await QuotePrice.create({ ...tenants, versionId: version.id, quantity: Number(quantity), unitPrice });
  for (const { lineKey, definition } of lines)
    if (definition.kind === "declared")
      await QuoteDeclaration.create({
        ...tenants,
        versionId: version.id,
        lineKey,
        ...(exceptions.includes(lineKey)
          ? { answer: "exception" as const, text: "SMA male at port 2" }
          : { answer: "comply" as const }),
      });
  await quote.update({ state: "submitted", currentVersionId: version.id, sharedAt: at });
  return { organisation, person, invitation, quote, version };
}

export interface LineForTest {
  readonly margin: number;
  readonly credited: number;
  readonly verdict: Verdict;
}

/** Stores a score as scoring would, from figures by line key, other measured lines left out; declared ones comply. The first line given decides. */
export async function storeScore(
  version: QuoteVersion,
  lines: readonly SpecificationLine[],
  figures: Readonly<Record<string, LineForTest>>,
  conforming: boolean,
): Promise<void> {
  const { id: versionId, revisionId, buyerOrganisationId, supplierOrganisationId } = version;
  const own = { versionId, revisionId, buyerOrganisationId, supplierOrganisationId, coreVersion: CORE_VERSION };
  for (const { lineKey, definition } of lines) {
    const figure = figures[lineKey];
    if (!figure) {
      if (definition.kind === "declared")
        await QuoteLineResult.create({ ...own, lineKey, verdict: "declared", cells: [] });
      continue;
    }
    const { verdict, margin, credited } = figure;
    const place = { unit: "U-1", temperature: 70, sweepId: "sweep", predicted: false, scored: true };
    await QuoteLineResult.create({
      ...own,
      lineKey,
      verdict,
      margin,
      creditedMargin: credited,
      value: 1,
      frequency: 1.98e9,
      unit: "U-1",
      temperature: "70.0",
      cells: [storeCell({ ...place, result: resultOf(lineKey, figure) })],
    });
  }
  const [worstLineKey = null, worst] = Object.entries(figures)[0] ?? [];
  await QuoteSummary.create({
    ...own,
    verdict: worst?.verdict ?? "not-covered",
    conforming,
    worstLineKey,
    worstMargin: worst?.margin ?? null,
    worstCreditedMargin: worst?.credited ?? null,
    units: 3,
    unitsOverRange: 3,
    temperatures: 3,
    createdAt: at,
  });
}

const resultOf = (id: string, { verdict, margin }: LineForTest): Result => ({
  id,
  verdict,
  value: 1,
  frequency: 1.98e9,
  limit: 1 + margin,
  margin,
  interval: [0.9, 1.1],
  marginInterval: [margin - 0.1, margin + 0.1],
  decidingFrequency: 1.98e9,
});

/** Attaches the demo's files of a supplier (a folder of `db/seeds/demo-data`) to a submitted version and scores it. */
export async function measureAndScore(quote: Quote, version: QuoteVersion, folder: string): Promise<void> {
  const data = path.join("db/seeds/demo-data", folder);
  const { buyerOrganisationId, supplierOrganisationId } = version;
  const tenants = { buyerOrganisationId, supplierOrganisationId };
  for (const name of (await readdir(data)).filter((file) => file.endsWith(".s2p")).sort()) {
    const bytes = await readFile(path.join(data, name));
    const network = parseTouchstone(bytes, name);
    const [serial = "", temperature = ""] = name.replace(/C\.s2p$/, "").split("_");
    const chunks = await packChunks(bytes);
    const shared = { ...tenants, quoteId: quote.id, sharedAt: at, createdAt: at };
    const file = await sequelize.transaction(async (transaction) => {
      const stored = await StoredFile.create(
        {
          ...shared,
          publicId: newPublicId(),
          name,
          mediaType: "application/octet-stream",
          size: bytes.length,
          sha256: sha256(bytes),
        },
        { transaction },
      );
      await storeChunks(stored.id, chunks, transaction);
      return stored;
    });
    const measurement = await MeasurementRow.create({
      ...shared,
      publicId: newPublicId(),
      fileId: file.id,
      serial,
      temperature,
      points: network.frequency.length,
      frequencyFrom: network.frequency[0] ?? NaN,
      frequencyTo: network.frequency[network.frequency.length - 1] ?? NaN,
      impedance1: network.referenceImpedance[0],
      impedance2: network.referenceImpedance[1],
      notes: [...network.notes, ...checkNetwork(network)],
    });
    await VersionMeasurement.create({ ...tenants, versionId: version.id, measurementId: measurement.id });
  }
  await scoreVersion(version.id);
}

/** Kestrel's nine files of the demo, submitted and scored on the scenario's specification. */
export async function buildKestrelQuote() {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, { assumedSetup: JOURNEY_SETUP }, JOURNEY_LINES);
  const submitted = await buildSubmittedQuote(rfq, JOURNEY_LINES, { name: "Kestrel Cavity Filters" });
  await measureAndScore(submitted.quote, submitted.version, "kestrel-cavity-filters");
  return { engineer, rfq, ...submitted };
}
