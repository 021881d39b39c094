// Changes to the measured sweeps of a quote: unit and temperature named, a file taken out. What was submitted stays as it was.
import type { Transaction } from "sequelize";
import { FileChunk, MeasurementResult, MeasurementRow, Quote, StoredFile } from "~/db/models";
import { copyFileChunks } from "~/db/queries/file-chunks";
import { SYSTEM } from "~/db/scoping";
import type { FormValues } from "~/forms/fields";
import { invalid, ok, type FieldErrors, type Result } from "~/forms/form";
import { parseSweepLabels, type SweepLabelInput } from "~/forms/measurement";
import { newPublicId } from "./identifiers.server";
import type { Person } from "./person.server";
import { changeQuote, findQuote, recordQuoteEvent, type LockedQuote } from "./quotes.server";

const REMOVED = "This file was removed meanwhile.";

/**
 * Names unit and temperature of a sweep. One that a submitted version rests on is replaced by a copy with the new names, so
 * that the version keeps what it said; the answer gives the id it has from now on. Null where the person does not see it.
 */
export function labelMeasurement(
  person: Person,
  publicId: string,
  labels: SweepLabelInput,
): Promise<Result<{ publicId: string }> | null> {
  return changeMeasurement(person, publicId, async (row, { quote, now }, transaction) => {
    if (row.serial === labels.serial && row.temperature === labels.temperature) return ok({ publicId: row.publicId });
    const named = row.sharedAt === null ? row : await replaceShared(row, now, transaction);
    await named.update({ ...labels }, { transaction });
    await quote.update({ savedAt: now }, { transaction });
    const detail = {
      measurement: named.publicId,
      from: { serial: row.serial, temperature: row.temperature },
      ...labels,
    };
    await recordQuoteEvent(person, now, quote, "file labelled", detail, transaction);
    return ok({ publicId: named.publicId });
  });
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
