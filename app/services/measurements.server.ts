// An uploaded file becomes a measured sweep of a quote: read, checked, scored and stored at once, or refused whole.
import type { Transaction } from "sequelize";
import { MeasurementRow, StoredFile, type Quote } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { invalid, ok, type Result } from "~/forms/form";
import { statedSetup } from "~/forms/quote-setup";
import { parseTouchstone, TouchstoneError, type Note, type Setup, type TwoPort } from "~/rf/index";
import { stepProfile } from "~/rf/step-profile";
import { scoreSweep, setupInUse, sweepNotes, type SweepScore } from "~/rf/score-sweep";
import { readSweepLabels } from "~/rf/sweep-labels";
import { refusalSentence } from "~/rf/touchstone-refusal";
import { quoteRefusal } from "~/workflow/quote";
import { rfqState } from "~/workflow/rfq";
import { packChunks, storeChunks } from "./file-bytes.server";
import { newPublicId, sha256 } from "./identifiers.server";
import { queueDraftScoring } from "./jobs.server";
import type { Person } from "./person.server";
import { changeFoundQuote, findQuote, recordQuoteEvent, type FoundQuote } from "./quotes.server";
import { readScoringFrame, setupHash, storeSweepScore, type ScoringFrame } from "./scoring-sweeps.server";
import { MOST_FILE_BYTES, MOST_FILES, TOO_LARGE } from "./uploads.server";

/** Of all files of a quote together, 200 sweeps of 25,000: a quote is scored as a whole, in memory. */
export const MOST_POINTS = 5_000_000;
const TOO_MANY_POINTS =
  "The files of a quote hold at most 5,000,000 points together. Save the sweep with fewer points.";

export interface UploadedFile {
  readonly name: string;
  readonly bytes: Uint8Array;
}

/**
 * Stores a Touchstone file with its measurement and results: all of it or nothing. What is wrong with the file is under the
 * key `file`, with its line. Null where the person does not see the quote.
 */
export async function addMeasurement(
  person: Person,
  quotePublicId: string,
  file: UploadedFile,
): Promise<Result<{ publicId: string }> | null> {
  const found = await findQuote(person, quotePublicId);
  if (!found) return null;
  if (file.bytes.length > MOST_FILE_BYTES) return invalid({ file: [TOO_LARGE] });
  const [now, frame] = await Promise.all([databaseNow(), readScoringFrame(person, found.rfq)]);
  const refusal = quoteRefusal("edit", found.quote.state, rfqState(found.rfq, now));
  if (refusal) return invalid({ form: [refusal] });
  const packing = packChunks(file.bytes); // deflated in the thread pool while this thread reads the numbers
  packing.catch(() => undefined);
  const network = readNetwork(file);
  if ("refusal" in network) return invalid({ file: [network.refusal] });
  const { assumedSetup } = found.rfq;
  const stated = statedSetup({ ...found.quote.draft.values });
  const setup = setupInUse(stated, assumedSetup);
  const sweep: PreparedSweep = {
    file,
    sha256: sha256(file.bytes),
    network,
    notes: sweepNotes(network, frame, setup),
    setup,
    score: scoreSweep(network, frame, stated, assumedSetup),
    frame,
    chunks: await packing,
  };
  return storeSweep(person, found, sweep);
}

interface PreparedSweep {
  readonly file: UploadedFile;
  readonly sha256: Buffer;
  readonly network: TwoPort;
  readonly notes: Note[];
  /** What it was scored with: what the draft states, completed by what the RFQ assumes. */
  readonly setup: Setup;
  readonly score: SweepScore;
  readonly frame: ScoringFrame;
  readonly chunks: readonly Buffer[];
}

function readNetwork({ bytes, name }: UploadedFile): TwoPort | { readonly refusal: string } {
  try {
    return parseTouchstone(bytes, name);
  } catch (error) {
    if (!(error instanceof TouchstoneError)) throw error;
    return { refusal: refusalSentence(error) };
  }
}

function storeSweep(
  person: Person,
  found: FoundQuote,
  sweep: PreparedSweep,
): Promise<Result<{ publicId: string }> | null> {
  return changeFoundQuote(found, async (locked, transaction) => {
    const { now } = locked;
    const { id: quoteId } = locked.quote;
    const where = { quoteId, removedAt: null };
    const kept = await MeasurementRow.findAll({ where, attributes: ["points"], actor: SYSTEM, transaction });
    if (kept.length >= MOST_FILES) return invalid({ file: [`A quote holds at most ${MOST_FILES} files.`] });
    const points = kept.reduce((sum, row) => sum + row.points, sweep.network.frequency.length);
    if (points > MOST_POINTS) return invalid({ file: [TOO_MANY_POINTS] });
    const same = await sameBytes(quoteId, sweep.sha256, transaction);
    if (same) return invalid({ file: [`These bytes are in this quote already, as ${same}.`] });
    const measurement = await createRows(locked.quote, sweep, now, transaction);
    await storeSweepScore(measurement, sweep.frame, sweep.setup, sweep.score, now, transaction);
    // The setup was stated otherwise while the file was read: the worker scores it with what is stated now.
    const inUse = setupInUse(statedSetup({ ...locked.quote.draft.values }), locked.rfq.assumedSetup);
    if (setupHash(inUse) !== setupHash(sweep.setup)) await queueDraftScoring(quoteId, now, transaction);
    await locked.quote.update({ savedAt: now }, { transaction });
    const detail = { file: sweep.file.name, sha256: sweep.sha256.toString("hex"), points: measurement.points };
    await recordQuoteEvent(person, now, locked.quote, "file uploaded", detail, transaction);
    return ok({ publicId: measurement.publicId });
  });
}

/** The name of a file of the quote with these bytes; one that was taken out again does not count. */
async function sameBytes(quoteId: number, hash: Buffer, transaction: Transaction): Promise<string | undefined> {
  const system = { actor: SYSTEM, transaction } as const;
  const files = await StoredFile.findAll({ where: { quoteId, sha256: hash }, attributes: ["id", "name"], ...system });
  if (files.length === 0) return undefined;
  const where = { fileId: files.map(({ id }) => id), removedAt: null };
  const kept = await MeasurementRow.findOne({ where, attributes: ["fileId"], ...system });
  return files.find(({ id }) => id === kept?.fileId)?.name;
}

async function createRows(quote: Quote, sweep: PreparedSweep, now: Date, transaction: Transaction) {
  const { id: quoteId, buyerOrganisationId, supplierOrganisationId } = quote;
  const owner = { publicId: newPublicId(), buyerOrganisationId, supplierOrganisationId, quoteId, createdAt: now };
  const { file, network } = sweep;
  const stored = await StoredFile.create(
    { ...owner, name: file.name, mediaType: "application/octet-stream", size: file.bytes.length, sha256: sweep.sha256 },
    { transaction },
  );
  await storeChunks(stored.id, sweep.chunks, transaction);
  const { serial, temperature } = readSweepLabels(file.name, network.comments);
  const points = network.frequency.length;
  return MeasurementRow.create(
    {
      ...owner,
      publicId: newPublicId(),
      fileId: stored.id,
      serial,
      temperature: temperature === null ? null : temperature.toFixed(1),
      points,
      frequencyFrom: network.frequency[0] ?? 0,
      frequencyTo: network.frequency[points - 1] ?? 0,
      impedance1: network.referenceImpedance[0],
      impedance2: network.referenceImpedance[1],
      steps: stepProfile(network.frequency),
      notes: sweep.notes,
    },
    { transaction },
  );
}
