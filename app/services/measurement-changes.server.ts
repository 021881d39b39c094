// Changes to the measured sweeps of a quote: unit and temperature named, a setup of its own, a file taken out. What was submitted stays.
import type { Transaction } from "sequelize";
import { FileChunk, MeasurementResult, MeasurementRow, Quote, StoredFile } from "~/db/models";
import { copyFileChunks } from "~/db/queries/file-chunks";
import { SYSTEM } from "~/db/scoping";
import type { FormValues } from "~/forms/fields";
import { invalid, ok, type FieldErrors, type Result } from "~/forms/form";
import { parseSweepLabels, type Placement, type SweepLabelInput, type SweepSetupInput } from "~/forms/measurement";
import { newPublicId } from "./identifiers.server";
import { queueDraftScoring } from "./jobs.server";
import type { Person } from "./person.server";
import { changeQuote, findQuote, recordQuoteEvent, type LockedQuote } from "./quotes.server";
import { canonicalJson } from "./specification-release.server";

const REMOVED = "This file was removed meanwhile.";
const SOME_REMOVED = "Some of these files were removed meanwhile. Load the page again.";

/**
 * Names unit and temperature of a sweep. One that a submitted version rests on is replaced by a copy with the new names, so
 * that the version keeps what it said; the answer gives the id it has from now on. Null where the person does not see it.
 */
export function labelMeasurement(
  person: Person,
  publicId: string,
  labels: SweepLabelInput,
): Promise<Result<{ publicId: string }> | null> {
  return changeMeasurement(person, publicId, async (row, locked, transaction) => {
    const named = await nameSweep(person, row, labels, locked, transaction);
    await locked.quote.update({ savedAt: locked.now }, { transaction });
    return ok({ publicId: named.publicId });
  });
}

async function nameSweep(
  person: Person,
  row: MeasurementRow,
  labels: SweepLabelInput,
  { quote, now }: LockedQuote,
  transaction: Transaction,
): Promise<MeasurementRow> {
  const from = { serial: row.serial, temperature: row.temperature };
  if (from.serial === labels.serial && from.temperature === labels.temperature) return row;
  const named = row.sharedAt === null ? row : await replaceShared(row, now, transaction);
  await named.update({ ...labels }, { transaction });
  const detail = { measurement: named.publicId, from, ...labels };
  await recordQuoteEvent(person, now, quote, "file labelled", detail, transaction);
  return named;
}

/** A sweep as it was before it was placed, under the id it has from now on. */
export interface PlacedSweep {
  readonly publicId: string;
  readonly from: SweepLabelInput;
}

/**
 * Puts sweeps of a quote under one unit, one temperature, or both, all of them or none; the answer says where each was, so that it
 * can be put back. Null where the person does not see the quote.
 */
export function placeMeasurements(
  person: Person,
  quotePublicId: string,
  { measurements, ...place }: Placement,
): Promise<Result<readonly PlacedSweep[]> | null> {
  return changeQuote(person, quotePublicId, async (locked, transaction) => {
    const rows = await MeasurementRow.findAll({
      where: { publicId: [...measurements], quoteId: locked.quote.id, removedAt: null },
      order: [["id", "ASC"]],
      actor: SYSTEM,
      transaction,
    });
    if (rows.length !== measurements.length) return invalid({ form: [SOME_REMOVED] });
    const placed: PlacedSweep[] = [];
    for (const row of rows) {
      const from = { serial: row.serial, temperature: row.temperature };
      const { publicId } = await nameSweep(person, row, { ...from, ...place }, locked, transaction);
      placed.push({ publicId, from });
    }
    await locked.quote.update({ savedAt: locked.now }, { transaction });
    return ok(placed);
  });
}

/**
 * Stores a setup of its own with a sweep, and with the others of its unit or range where `scope` says so; null takes it away. A sweep
 * that a submitted version rests on is replaced by a copy. The draft's sweeps are scored with it from now on. The answer counts the
 * sweeps it changed. Null where the person does not see the sweep.
 */
export function setMeasurementSetup(
  person: Person,
  publicId: string,
  { setup, scope }: SweepSetupInput,
): Promise<Result<{ changed: number }> | null> {
  return changeMeasurement(person, publicId, async (row, { quote, now }, transaction) => {
    const rows = await sweepsInScope(row, scope, transaction);
    const differing = rows.filter((each) => canonicalJson(each.setup) !== canonicalJson(setup));
    if (differing.length === 0) return ok({ changed: 0 });
    for (const each of differing) {
      const { setup: from } = each;
      const kept = each.sharedAt === null ? each : await replaceShared(each, now, transaction);
      await kept.update({ setup }, { transaction });
      const detail = { measurement: kept.publicId, from, to: setup };
      await recordQuoteEvent(person, now, quote, "file setup changed", detail, transaction);
    }
    await quote.update({ savedAt: now }, { transaction });
    await queueDraftScoring(quote.id, now, transaction);
    return ok({ changed: differing.length });
  });
}

/** The sweeps of the quote that a setup counts for: of a unit that is not named, and so of none, only the one. */
async function sweepsInScope(
  row: MeasurementRow,
  scope: SweepSetupInput["scope"],
  transaction: Transaction,
): Promise<MeasurementRow[]> {
  const { serial, frequencyFrom, frequencyTo } = row;
  if (scope === "sweep" || (scope === "unit" && serial === null)) return [row];
  const alike = scope === "unit" ? { serial } : { frequencyFrom, frequencyTo };
  const where = { quoteId: row.quoteId, removedAt: null, ...alike };
  return MeasurementRow.findAll({ where, order: [["id", "ASC"]], actor: SYSTEM, transaction });
}

/** Takes a file out of the quote. Bytes that no submitted version rests on are gone for good. Null where the person does not see it. */
export function removeMeasurement(person: Person, publicId: string): Promise<Result<null> | null> {
  return changeMeasurement(person, publicId, async (row, { quote, now }, transaction) => {
    const file = await StoredFile.findByPk(row.fileId, { actor: SYSTEM, transaction, rejectOnEmpty: true });
    const detail = { file: file.name, sha256: file.sha256.toString("hex") };
    if (row.sharedAt === null) await eraseUnshared(row, transaction);
    else await row.update({ removedAt: now }, { transaction });
    await quote.update({ savedAt: now }, { transaction });
    await recordQuoteEvent(person, now, quote, "file removed", detail, transaction);
    return ok(null);
  });
}

/** Names many at once, from fields `serial.<id>` and `temperature.<id>`; what is in order is kept, the rest told by field. */
export async function labelMeasurements(
  person: Person,
  quotePublicId: string,
  values: FormValues,
): Promise<Result<null> | null> {
  if (!(await findQuote(person, quotePublicId))) return null;
  const errors: FieldErrors = {};
  for (const name of Object.keys(values)) {
    const id = /^serial\.(\w{16})$/.exec(name)?.[1];
    if (id === undefined) continue;
    const labels = parseSweepLabels({ serial: values[name] ?? "", temperature: values[`temperature.${id}`] ?? "" });
    const outcome = labels.ok ? await labelMeasurement(person, id, labels.value) : labels;
    if (!outcome || outcome.ok) continue;
    for (const [field, sentences] of Object.entries(outcome.errors))
      errors[field === "form" ? field : `${field}.${id}`] = sentences;
  }
  return Object.keys(errors).length > 0 ? invalid(errors) : ok(null);
}

async function changeMeasurement<T>(
  person: Person,
  publicId: string,
  work: (row: MeasurementRow, locked: LockedQuote, transaction: Transaction) => Promise<Result<T>>,
): Promise<Result<T> | null> {
  const found = await MeasurementRow.findOne({ where: { publicId, removedAt: null }, actor: person });
  const quote = found && (await Quote.findByPk(found.quoteId, { actor: person }));
  if (!quote) return null;
  return changeQuote(person, quote.publicId, async (locked, transaction) => {
    const row = await MeasurementRow.findByPk(found.id, { actor: SYSTEM, transaction });
    return row && !row.removedAt ? work(row, locked, transaction) : invalid({ form: [REMOVED] });
  });
}

/** A copy of a submitted sweep, with a file of its own and the same results; the original leaves the draft. */
async function replaceShared(row: MeasurementRow, now: Date, transaction: Transaction): Promise<MeasurementRow> {
  const system = { actor: SYSTEM, transaction } as const;
  const file = await StoredFile.findByPk(row.fileId, { ...system, rejectOnEmpty: true });
  const fresh = () => ({ publicId: newPublicId(), sharedAt: null, createdAt: now });
  const { id: _fileId, ...fileColumns } = file.get({ plain: true });
  const fileCopy = await StoredFile.create({ ...fileColumns, ...fresh() }, { transaction });
  await copyFileChunks(SYSTEM, file.id, fileCopy.id, transaction);
  const { id: _id, ...columns } = row.get({ plain: true });
  const copy = await MeasurementRow.create({ ...columns, ...fresh(), fileId: fileCopy.id }, { transaction });
  const results = await MeasurementResult.findAll({ where: { measurementId: row.id }, ...system });
  for (const result of results)
    await MeasurementResult.create({ ...result.get({ plain: true }), measurementId: copy.id }, { transaction });
  await row.update({ removedAt: now }, { transaction });
  return copy;
}

async function eraseUnshared({ id, fileId }: MeasurementRow, transaction: Transaction): Promise<void> {
  const system = { actor: SYSTEM, transaction } as const;
  await MeasurementResult.destroy({ where: { measurementId: id }, ...system });
  await MeasurementRow.destroy({ where: { id }, ...system });
  await FileChunk.destroy({ where: { fileId }, ...system });
  await StoredFile.destroy({ where: { id: fileId }, ...system });
}
