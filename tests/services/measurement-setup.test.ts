// Setups of single sweeps and of the quote: stored, replaced where submitted, scored with, frozen, and seen by nobody else.
import { expect, test } from "vitest";
import { AuditEvent, Job, MeasurementResult, MeasurementRow, QuoteVersion, StoredFile } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { setupInUse } from "~/rf/score-sweep";
import { newIdempotencyKey, sha256 } from "~/services/identifiers.server";
import { setMeasurementSetup } from "~/services/measurement-changes.server";
import { listMeasurements } from "~/services/measurement-list.server";
import { reviewQuote, submitQuote } from "~/services/quote-submission.server";
import { readQuoteTerms } from "~/services/quote-terms-view.server";
import { saveSheet } from "~/services/quote-sheets.server";
import { saveDraft } from "~/services/quotes.server";
import { canonicalJson } from "~/services/specification-release.server";
import { scoreDraft } from "~/services/scoring-drafts.server";
import { setupHash } from "~/services/scoring-sweeps.server";
import { buildOrganisation, buildPerson } from "../support/factories";
import { useDatabase } from "../support/database";
import {
  buildJourneyQuote,
  journeyFiles,
  uploadFiles,
  type JourneyQuote,
  type NamedBytes,
} from "../support/supplier-journey";

useDatabase();

const [orme] = journeyFiles("orme-microwave") as [NamedBytes];
const kestrel = journeyFiles("kestrel-cavity-filters");
const quiet = { noiseFloor: 112, noiseFloorKind: "peak" } as const;

async function quoteWithFiles(files: readonly NamedBytes[] = [orme]) {
  const found = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(found.person, found.quote, files);
  return found;
}

const onlyRow = () => MeasurementRow.findOne({ where: { removedAt: null }, actor: SYSTEM, rejectOnEmpty: true });
const list = async ({ person, quote }: Pick<JourneyQuote, "person" | "quote">) => {
  const found = await listMeasurements(person, quote.publicId);
  if (!found) throw new Error("the list is not there");
  return found;
};
const draftJob = () => Job.findOne({ where: { kind: "draft-score" } });

test("a sweep's own setup is stored with a history entry, and the draft's sweeps are queued to be scored with it", async () => {
  const found = await quoteWithFiles();
  const { publicId } = await onlyRow();
  expect(await draftJob()).toBeNull();
  expect(await setMeasurementSetup(found.person, publicId, { setup: quiet, scope: "sweep" })).toEqual({
    ok: true,
    value: { changed: 1 },
  });
  expect((await onlyRow()).setup).toEqual(quiet);
  expect(await draftJob()).toMatchObject({ state: "pending", key: String(found.quote.id) });
  const events = await AuditEvent.findAll({ where: { action: "file setup changed" }, actor: found.person });
  expect(events).toMatchObject([{ detail: { measurement: publicId, from: null, to: quiet } }]);
  expect(await AuditEvent.count({ where: { action: "file setup changed" }, actor: found.engineer })).toBe(0);
  const again = await setMeasurementSetup(found.person, publicId, { setup: quiet, scope: "sweep" });
  expect(again).toEqual({ ok: true, value: { changed: 0 } });
  expect(await AuditEvent.count({ where: { action: "file setup changed" }, actor: SYSTEM })).toBe(1);
});

test("until it is scored with the setup in use a sweep has no verdict; then it has the one of that setup, field by field", async () => {
  const found = await quoteWithFiles();
  const before = (await list(found)).entries[0];
  expect(before?.verdict).not.toBeNull();
  await saveDraft(found.person, found.quote.publicId, { "setup.transmission": "0.02 dB" }, found.quote.lockVersion);
  const { publicId, id } = await onlyRow();
  await setMeasurementSetup(found.person, publicId, { setup: quiet, scope: "sweep" });
  expect(await list(found)).toMatchObject({
    scoring: "pending",
    entries: [{ verdict: null, worst: null, setup: quiet }],
  });
  await scoreDraft(found.quote.id);
  const after = await list(found);
  expect(after.scoring).toBe("done");
  expect(after.entries[0]?.verdict).not.toBeNull();
  const inUse = setupInUse({ transmission: 0.02, ...quiet }, found.rfq.assumedSetup);
  const scored = await MeasurementResult.findAll({ where: { measurementId: id }, actor: found.person });
  expect(scored.map((result) => result.setupHash)).toContain(setupHash(inUse));
  // Taken away again, the result with the quote's setup alone is wanted.
  await setMeasurementSetup(found.person, publicId, { setup: null, scope: "sweep" });
  expect((await onlyRow()).setup).toBeNull();
  expect((await list(found)).entries[0]).toMatchObject({ setup: null, verdict: null });
});

test("a setup counts for all of a unit or of a range where that is chosen, and for no sweep without a unit", async () => {
  const found = await quoteWithFiles(kestrel.slice(0, 4)); // three of one unit, one of the next
  const rows = await MeasurementRow.findAll({ order: [["id", "ASC"]], actor: found.person });
  const [first, , , other] = rows as [MeasurementRow, MeasurementRow, MeasurementRow, MeasurementRow];
  expect(await setMeasurementSetup(found.person, first.publicId, { setup: quiet, scope: "unit" })).toMatchObject({
    value: { changed: 3 },
  });
  const setups = async () =>
    (await MeasurementRow.findAll({ order: [["id", "ASC"]], actor: SYSTEM })).map(({ setup }) => setup);
  expect(await setups()).toEqual([quiet, quiet, quiet, null]);
  await MeasurementRow.update({ serial: null }, { where: { id: [first.id, other.id] }, actor: SYSTEM });
  await setMeasurementSetup(found.person, first.publicId, { setup: null, scope: "unit" });
  expect(await setups()).toEqual([null, quiet, quiet, null]);
  const wide = { directivity: 40 };
  await MeasurementRow.update({ frequencyTo: 3e9 }, { where: { id: other.id }, actor: SYSTEM });
  await setMeasurementSetup(found.person, first.publicId, { setup: wide, scope: "range" });
  expect(await setups()).toEqual([wide, wide, wide, null]);
});

test("a submitted version keeps the setup it was submitted with; the draft goes on with a copy", async () => {
  const found = await quoteWithFiles();
  const submitted = await onlyRow();
  await setMeasurementSetup(found.person, submitted.publicId, { setup: quiet, scope: "sweep" });
  expect(await submitQuote(found.person, found.quote.publicId, newIdempotencyKey())).toMatchObject({ ok: true });
  const louder = { ...quiet, noiseFloor: 95 };
  await setMeasurementSetup(found.person, submitted.publicId, { setup: louder, scope: "sweep" });
  const copy = await onlyRow();
  expect(copy.publicId).not.toBe(submitted.publicId);
  expect(copy.setup).toEqual(louder);
  const frozen = await MeasurementRow.findByPk(submitted.id, { actor: found.engineer, rejectOnEmpty: true });
  expect(frozen.setup).toEqual(quiet);
  expect(await MeasurementRow.count({ actor: found.engineer })).toBe(1);
  const terms = await readQuoteTerms(found.engineer, found.quote.publicId);
  expect(terms?.sweepSetups).toEqual([{ fileName: "OM-0031_25C.s2p", setup: quiet }]);
});

test("a sweep's setup is nobody's to change but its supplier's", async () => {
  const found = await quoteWithFiles();
  const { publicId } = await onlyRow();
  const stranger = await buildPerson(await buildOrganisation("supplier"));
  for (const person of [stranger, found.engineer])
    expect(await setMeasurementSetup(person, publicId, { setup: quiet, scope: "sweep" })).toBeNull();
  expect((await onlyRow()).setup).toBeNull();
  expect(await draftJob()).toBeNull();
});

test("the draft keeps instrument and drift as typed; scoring is queued only where the setup says something else", async () => {
  const found = await quoteWithFiles();
  const { person, quote } = found;
  const save = async (values: Record<string, string>) => {
    await quote.reload({ actor: SYSTEM } as never);
    expect(await saveDraft(person, quote.publicId, values, quote.lockVersion)).toMatchObject({ ok: true });
    await quote.reload({ actor: SYSTEM } as never);
  };
  const typed = {
    "instrument.analyser": "Two-port analyser",
    "drift.ppmPerKelvin": "±2 ppm",
    "setup.transmission": "",
  };
  await save(typed);
  expect(quote.draft.values).toMatchObject(typed);
  await save({ "setup.transmission": "no figure" });
  expect(await draftJob()).toBeNull();
  await save({ "setup.transmission": "0.05" });
  expect(await draftJob()).toMatchObject({ state: "pending" });
  await Job.update({ state: "done" }, { where: { kind: "draft-score" } });
  await save({ "setup.transmission": "0.050 dB", nre: "1" });
  expect(await draftJob()).toMatchObject({ state: "done" });
});

test("the Data sheet tells what is wrong on it, and nothing of the other sheets", async () => {
  const { person, quote } = await quoteWithFiles();
  const form = new FormData();
  form.set("lockVersion", String(quote.lockVersion));
  form.set("drift.ppmPerKelvin", "2 MHz");
  form.set("setup.directivity", "-40");
  form.set("basis", "measured");
  expect(await saveSheet(person, quote.publicId, "data", form)).toMatchObject({
    saved: true,
    errors: { "drift.ppmPerKelvin": [expect.any(String)], "setup.directivity": [expect.any(String)] },
  });
  const review = await reviewQuote(person, quote.publicId);
  expect(Object.keys(review?.errors ?? {}).sort()).toEqual(["drift.ppmPerKelvin", "setup.directivity"]);
});

test("a submission freezes setup, instrument and drift, its hash holds them, and the buyer reads them", async () => {
  const found = await quoteWithFiles();
  const { person, quote } = found;
  const typed = {
    "setup.directivity": "42",
    "instrument.analyser": "Two-port analyser",
    "instrument.calibration": "SOLT",
    "instrument.calibratedOn": "2026-11-01",
    "drift.ppmPerKelvin": "±2 ppm/K",
    "drift.lossPerKelvin": "0.39 %",
  };
  const stated = {
    setup: { directivity: 42 },
    instrument: { analyser: "Two-port analyser", calibration: "SOLT", calibratedOn: "2026-11-01" },
    drift: { ppmPerKelvin: 2, either: true, lossPerKelvin: 0.0039 },
  };
  await saveDraft(person, quote.publicId, typed, quote.lockVersion);
  const terms = (await reviewQuote(person, quote.publicId))?.terms;
  expect(terms).toMatchObject(stated);
  expect(await submitQuote(person, quote.publicId, newIdempotencyKey())).toMatchObject({ ok: true });
  const version = await QuoteVersion.findOne({ actor: found.engineer, rejectOnEmpty: true });
  expect(version).toMatchObject(stated);
  const { name, sha256: bytes } = await StoredFile.findOne({ actor: person, rejectOnEmpty: true });
  const { serial, temperature, setup } = await onlyRow();
  const data = [{ name, sha256: bytes.toString("hex"), serial, temperature, setup }];
  const whole = { quote: quote.publicId, number: 1, revisionId: found.revision.id, terms, data };
  expect(version.contentHash.equals(sha256(canonicalJson(whole)))).toBe(true);
  expect(await readQuoteTerms(found.engineer, quote.publicId)).toMatchObject({
    ...stated,
    basis: "measured",
    sweepSetups: [],
  });
});
