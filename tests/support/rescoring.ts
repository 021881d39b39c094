// Quotes scored by an earlier core, for tests of scoring them again.
import { readFileSync, readdirSync } from "node:fs";
import path from "node:path";
import { MeasurementResult, QuoteVersion, RequirementRow, SpecificationRevision, type Rfq } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { scoringWork } from "~/jobs/scoring.server";
import { CORE_VERSION, type SpecificationLine } from "~/rf/index";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { runNextJob } from "~/services/jobs.server";
import { submitQuote } from "~/services/quote-submission.server";
import { addSupplier, buildJourneyQuote, journeyFiles, uploadFiles, type NamedBytes } from "./supplier-journey";

/** A core from before the one under test. */
export const OLD_CORE = "0.0.9";

const rethrow = (error: unknown) => {
  throw error;
};

/** Does the next job as the worker does, with a core of the test's choice; false where none is due. A fault is thrown. */
export const runJob = (coreVersion: string = CORE_VERSION): Promise<boolean> =>
  runNextJob(scoringWork(coreVersion), rethrow);

/** Does every job that is due. */
export async function runAllJobs(coreVersion: string = CORE_VERSION): Promise<void> {
  while (await runJob(coreVersion));
}

/** An RFQ with a quote on the scenario's specification, submitted with these files and scored by the old core. */
export async function buildOldScore(name: string, files: readonly NamedBytes[]) {
  const found = await buildJourneyQuote(name);
  return { ...found, version: await submitToOldCore(found, files) };
}

/** One more such quote of the same RFQ. */
export async function addOldScore(rfq: Rfq, name: string, files: readonly NamedBytes[]) {
  const found = await addSupplier(rfq, name);
  return { ...found, version: await submitToOldCore(found, files) };
}

async function submitToOldCore(
  { person, quote }: Awaited<ReturnType<typeof addSupplier>>,
  files: readonly NamedBytes[],
): Promise<QuoteVersion> {
  await uploadFiles(person, quote, files);
  const outcome = await submitQuote(person, quote.publicId, newIdempotencyKey());
  if (!outcome?.ok) throw new Error(JSON.stringify(outcome));
  await runAllJobs(OLD_CORE);
  await MeasurementResult.destroy({ where: { coreVersion: CORE_VERSION }, actor: SYSTEM }); // stored at the upload
  return QuoteVersion.findOne({ where: { quoteId: quote.id }, actor: SYSTEM, rejectOnEmpty: true });
}

export const kestrelFiles = (): NamedBytes[] => journeyFiles("kestrel-cavity-filters");
export const ormeFiles = (): NamedBytes[] => journeyFiles("orme-microwave");

/** A further revision of the RFQ's specification with these lines, which the RFQ asks from now on. */
export async function moveToRevision(rfq: Rfq, letter: string, lines: readonly SpecificationLine[]): Promise<number> {
  const from = await SpecificationRevision.findByPk(rfq.revisionId, { actor: SYSTEM, rejectOnEmpty: true });
  const { id: _, ...columns } = from.get({ plain: true });
  const revision = await SpecificationRevision.create({ ...columns, letter });
  for (const [ordinal, { lineKey, lineNumber, definition }] of lines.entries())
    await RequirementRow.create({
      buyerOrganisationId: rfq.buyerOrganisationId,
      revisionId: revision.id,
      ordinal,
      lineKey,
      lineNumber,
      kind: definition.kind,
      definition,
      createdAt: revision.createdAt,
    });
  await rfq.update({ revisionId: revision.id });
  return revision.id;
}

/** The demo's files of a supplier by unit and temperature, as their names say. */
export const readLotFiles = (folder: string) =>
  readdirSync(path.join("db/seeds/demo-data", folder)).map((name) => {
    const [, unit = "", temperature = ""] = /^(.*)_([-+]?\d+)C\.s2p$/.exec(name) ?? [];
    const bytes = readFileSync(path.join("db/seeds/demo-data", folder, name));
    return { name, unit, temperature: Number(temperature), bytes };
  });
