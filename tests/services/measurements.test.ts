// Uploaded files of a quote: stored and scored whole, or refused whole; labelled, removed, and seen by nobody else.
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import {
  AuditEvent,
  FileChunk,
  Invitation,
  MeasurementResult,
  MeasurementRow,
  StoredFile,
  VersionMeasurement,
} from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { readFileBytes } from "~/services/file-bytes.server";
import { downloadHeaders, openFile } from "~/services/file-download.server";
import { newIdempotencyKey, sha256 } from "~/services/identifiers.server";
import {
  labelMeasurement,
  labelMeasurements,
  placeMeasurements,
  removeMeasurement,
} from "~/services/measurement-changes.server";
import { listMeasurements } from "~/services/measurement-list.server";
import { addMeasurement } from "~/services/measurements.server";
import { submitQuote } from "~/services/quote-submission.server";
import { buildOrganisation, buildPerson } from "../support/factories";
import { useDatabase } from "../support/database";
import {
  addSupplier,
  buildJourneyQuote,
  journeyFiles,
  supplierFigures,
  uploadFiles,
  type NamedBytes,
} from "../support/supplier-journey";

useDatabase();

const [orme] = journeyFiles("orme-microwave") as [NamedBytes];
const kestrel = journeyFiles("kestrel-cavity-filters");
const fixture = (name: string) => ({ name, bytes: readFileSync(`tests/fixtures/${name}`) });

async function storedRows(): Promise<number> {
  const counts = [StoredFile, MeasurementRow, MeasurementResult, FileChunk].map((model) =>
    (model as typeof StoredFile).count({ actor: SYSTEM }),
  );
  return (await Promise.all(counts)).reduce((sum, count) => sum + count, 0);
}

test("a file is stored in chunks with its hash, its unit and temperature read, and scored at once", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  expect(await addMeasurement(person, quote.publicId, orme)).toMatchObject({ ok: true });
  const list = await listMeasurements(person, quote.publicId);
  expect(list?.entries).toHaveLength(1);
  expect(list?.entries[0]).toMatchObject({
    fileName: "OM-0031_25C.s2p",
    serial: "OM-0031",
    temperature: "25.0",
    points: 2001,
    sweep: [1.7e9, 2.2e9],
  });
  expect(list?.asked).toEqual({
    units: 1,
    unitsAsked: 3,
    overRange: { units: 0, asked: 1 },
    withoutSerial: 0,
    withoutTemperature: 0,
  });
  const file = await StoredFile.findOne({ actor: person, rejectOnEmpty: true });
  expect(file.sha256.equals(sha256(orme.bytes))).toBe(true);
  expect((await readFileBytes(person, file.id)).equals(orme.bytes)).toBe(true);
  const chunk = await FileChunk.findOne({ actor: person, rejectOnEmpty: true });
  expect(chunk.bytes.length).toBeLessThan(orme.bytes.length);
});

test("the list shows each file's worst line as numpy computed it, the corner between two samples among them", async () => {
  const { person, quote } = await buildJourneyQuote("Kestrel Cavity Filters");
  await uploadFiles(person, quote, kestrel.slice(-3));
  const list = await listMeasurements(person, quote.publicId);
  const hot = list?.entries.find(({ temperature }) => temperature === "70.0");
  const expected = supplierFigures("Kestrel Cavity Filters").files.find(
    ({ unit, temperature }) => unit === "KCF-0207" && temperature === 70,
  );
  const loss = expected?.results.find(({ id }) => id === "2.1");
  expect(hot).toMatchObject({ serial: "KCF-0207", verdict: "fail", worst: { lineNumber: "2.1", frequency: 1.98e9 } });
  expect(Math.abs((hot?.worst?.margin ?? NaN) - (loss?.margin ?? NaN))).toBeLessThan(1e-6);
  expect(list?.entries.map(({ temperature }) => temperature)).toEqual(["-30.0", "25.0", "70.0"]);
  expect(list?.asked.overRange).toEqual({ units: 1, asked: 1 });
});

test.each([
  ["not-touchstone.s2p", /not Touchstone/],
  ["three-port.s3p", /3-port/],
  ["three-port-renamed.s2p", /3-port/],
  ["empty.s2p", /empty/],
  ["decimal-comma.s2p", /^Line 3, column \d+: A comma/],
])("%s is refused with its place and nothing of it is stored", async (name, words) => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  const outcome = await addMeasurement(person, quote.publicId, fixture(name));
  expect(outcome).toMatchObject({ ok: false, errors: { file: [expect.stringMatching(words)] } });
  expect(await storedRows()).toBe(0);
  expect(await AuditEvent.count({ actor: SYSTEM })).toBe(0);
});

test("the same bytes are taken once in a quote, by the name they came under first; another supplier may send them too", async () => {
  const { person, quote, rfq } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  const again = await addMeasurement(person, quote.publicId, { ...orme, name: "copy.s2p" });
  expect(again).toMatchObject({ ok: false, errors: { file: [expect.stringContaining("OM-0031_25C.s2p")] } });
  const other = await addSupplier(rfq, "Halden Resonator Works");
  await uploadFiles(other.person, other.quote, [orme]);
  expect(await StoredFile.count({ actor: SYSTEM })).toBe(2);
});

test("the same file sent twice at the same moment is stored once", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  const outcomes = await Promise.all([1, 2, 3].map(() => addMeasurement(person, quote.publicId, orme)));
  expect(outcomes.filter((outcome) => outcome?.ok)).toHaveLength(1);
  expect(await StoredFile.count({ actor: SYSTEM })).toBe(1);
});

test("nothing is taken from the due millisecond on, nor after the invitation was revoked, nor from anybody else", async () => {
  const { person, quote, rfq, engineer, invitation } = await buildJourneyQuote("Orme Microwave");
  const strangers = await Promise.all(
    (["buyer", "supplier"] as const).map(async (kind) => buildPerson(await buildOrganisation(kind))),
  );
  for (const stranger of [engineer, ...strangers])
    expect(await addMeasurement(stranger, quote.publicId, orme)).toBeNull();
  await rfq.update({ dueAt: await databaseNow() });
  expect(await addMeasurement(person, quote.publicId, orme)).toMatchObject({
    ok: false,
    errors: { form: [expect.stringContaining("closed")] },
  });
  await rfq.update({ dueAt: new Date(Date.now() + 60_000) });
  await Invitation.update({ state: "revoked" }, { where: { id: invitation.id }, actor: SYSTEM });
  expect(await addMeasurement(person, quote.publicId, orme)).toBeNull();
  expect(await storedRows()).toBe(0);
});

test("files of too many points together are refused, and nothing of the last is stored", async () => {
  const { person, quote } = await buildJourneyQuote("Kestrel Cavity Filters");
  await uploadFiles(person, quote, kestrel.slice(0, 1));
  await MeasurementRow.update({ points: 4_999_000 }, { where: { quoteId: quote.id }, actor: SYSTEM });
  const before = await storedRows();
  const refused = await addMeasurement(person, quote.publicId, orme); // 2,001 points
  expect(refused).toMatchObject({ ok: false, errors: { file: [expect.stringMatching(/5,000,000 points/)] } });
  expect(await storedRows()).toBe(before);
});

test("unit and temperature are changed in place, kept to a tenth, and left open again by a blank", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  const { publicId } = await MeasurementRow.findOne({ actor: person, rejectOnEmpty: true });
  expect(await labelMeasurement(person, publicId, { serial: "X1", temperature: "-12.5" })).toEqual({
    ok: true,
    value: { publicId },
  });
  const [entry] = (await listMeasurements(person, quote.publicId))?.entries ?? [];
  expect(entry).toMatchObject({ publicId, serial: "X1", temperature: "-12.5" });
  const posted = { [`serial.${publicId}`]: "X2", [`temperature.${publicId}`]: "warm" };
  expect(await labelMeasurements(person, quote.publicId, posted)).toMatchObject({
    ok: false,
    errors: { [`temperature.${publicId}`]: [expect.any(String)] },
  });
  await labelMeasurement(person, publicId, { serial: null, temperature: null });
  expect((await listMeasurements(person, quote.publicId))?.asked).toMatchObject({
    withoutSerial: 1,
    withoutTemperature: 1,
  });
  const stranger = await buildPerson(await buildOrganisation("supplier"));
  expect(await labelMeasurement(stranger, publicId, { serial: "X3", temperature: null })).toBeNull();
  expect(await removeMeasurement(stranger, publicId)).toBeNull();
});

test("several files are placed at once, each keeping what is left open, and the answer says where they were", async () => {
  const { person, quote } = await buildJourneyQuote("Kestrel Cavity Filters");
  await uploadFiles(person, quote, kestrel.slice(0, 3));
  const rows = await MeasurementRow.findAll({ order: [["id", "ASC"]], actor: person });
  const measurements = rows.map(({ publicId }) => publicId);
  expect(await placeMeasurements(person, quote.publicId, { measurements, serial: "KCF-0300" })).toEqual({
    ok: true,
    value: rows.map(({ publicId, serial, temperature }) => ({ publicId, from: { serial, temperature } })),
  });
  const list = await listMeasurements(person, quote.publicId);
  expect(list?.entries.map(({ serial, temperature }) => [serial, temperature])).toEqual([
    ["KCF-0300", "-30.0"],
    ["KCF-0300", "25.0"],
    ["KCF-0300", "70.0"],
  ]);
  expect(list?.evidence.rows[0]).toMatchObject({ unit: "KCF-0300", overRange: true });
  expect(await AuditEvent.count({ where: { action: "file labelled" }, actor: person })).toBe(3);
});

test("a placing that names a file of another quote, or one removed meanwhile, moves none", async () => {
  const { person, quote, rfq } = await buildJourneyQuote("Kestrel Cavity Filters");
  await uploadFiles(person, quote, kestrel.slice(0, 2));
  const other = await addSupplier(rfq, "Halden Resonator Works");
  await uploadFiles(other.person, other.quote, [orme]);
  const own = (await MeasurementRow.findAll({ actor: person })).map(({ publicId }) => publicId);
  const foreign = (await MeasurementRow.findAll({ actor: other.person })).map(({ publicId }) => publicId);
  const placing = { measurements: [...own, ...foreign], serial: "X1", temperature: "25.0" };
  expect(await placeMeasurements(person, quote.publicId, placing)).toMatchObject({
    ok: false,
    errors: { form: [expect.any(String)] },
  });
  expect(await placeMeasurements(other.person, quote.publicId, placing)).toBeNull();
  expect(await MeasurementRow.count({ where: { serial: "X1" }, actor: SYSTEM })).toBe(0);
});

test("the list tells points and steps of a sweep", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  const [entry] = (await listMeasurements(person, quote.publicId))?.entries ?? [];
  // 1.7 to 2.2 GHz in 2,001 points: 500 MHz / 2,000.
  expect(entry?.step?.map((step) => Math.round(step))).toEqual([250_000, 250_000]);
  await MeasurementRow.update({ steps: null }, { where: {}, actor: SYSTEM });
  expect((await listMeasurements(person, quote.publicId))?.entries[0]?.step).toBeNull();
});

test("a removed file that was never submitted is gone with its bytes, and may be sent again", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  const { publicId } = await MeasurementRow.findOne({ actor: person, rejectOnEmpty: true });
  expect(await removeMeasurement(person, publicId)).toEqual({ ok: true, value: null });
  expect(await storedRows()).toBe(0);
  expect(await removeMeasurement(person, publicId)).toBeNull();
  await uploadFiles(person, quote, [orme]);
});

test("what a submitted version rests on stays as it was when a file is named anew or removed", async () => {
  const { person, quote, engineer } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  const submitted = await MeasurementRow.findOne({ actor: person, rejectOnEmpty: true });
  expect(await submitQuote(person, quote.publicId, newIdempotencyKey())).toMatchObject({ ok: true });
  const named = await labelMeasurement(person, submitted.publicId, { serial: "OM-9999", temperature: "70.0" });
  expect(named).toMatchObject({ ok: true });
  await submitted.reload({ actor: SYSTEM } as never);
  expect(submitted).toMatchObject({ serial: "OM-0031", temperature: "25.0" });
  const [entry] = (await listMeasurements(person, quote.publicId))?.entries ?? [];
  expect(entry).toMatchObject({ serial: "OM-9999", temperature: "70.0" });
  expect(entry?.verdict).not.toBeNull();
  // The buyer sees what was submitted and not the copy it was replaced by.
  expect((await MeasurementRow.findAll({ actor: engineer })).map(({ serial }) => serial)).toEqual(["OM-0031"]);
  expect(await VersionMeasurement.findAll({ actor: engineer })).toMatchObject([{ measurementId: submitted.id }]);
  const copy = await StoredFile.findOne({ where: { sharedAt: null }, actor: person, rejectOnEmpty: true });
  expect((await readFileBytes(person, copy.id)).equals(orme.bytes)).toBe(true);
});

test("the bytes come back as they went in, to the supplier and, once submitted, to the buyer", async () => {
  const { person, quote, engineer } = await buildJourneyQuote("Orme Microwave");
  const large = { name: "two chunks.s2p", bytes: Buffer.concat([orme.bytes, Buffer.alloc(1_100_000, "! comment\n")]) };
  await uploadFiles(person, quote, [large]);
  const { publicId } = await StoredFile.findOne({ actor: person, rejectOnEmpty: true });
  expect(await FileChunk.count({ actor: person })).toBeGreaterThan(1);
  expect(await openFile(engineer, publicId)).toBeNull();
  const own = await openFile(person, publicId);
  expect(Buffer.from(await new Response(own?.body).arrayBuffer()).equals(large.bytes)).toBe(true);
  expect(await submitQuote(person, quote.publicId, newIdempotencyKey())).toMatchObject({ ok: true });
  expect(await openFile(engineer, publicId)).toMatchObject({ name: "two chunks.s2p", size: large.bytes.length });
  for (const kind of ["buyer", "supplier"] as const)
    expect(await openFile(await buildPerson(await buildOrganisation(kind)), publicId)).toBeNull();
});

test("a damaged file breaks off instead of ending well", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  const file = await StoredFile.findOne({ actor: person, rejectOnEmpty: true });
  await StoredFile.update({ sha256: Buffer.alloc(32) }, { where: { id: file.id }, actor: SYSTEM });
  const opened = await openFile(person, file.publicId);
  await expect(new Response(opened?.body).arrayBuffer()).rejects.toThrow(/damaged/);
  await expect(readFileBytes(person, file.id)).rejects.toThrow(/damaged/);
});

test("a download's name can neither end the header nor run in the page", () => {
  const headers = downloadHeaders({ name: 'a"b\\ü;\r\nX: 1.s2p', size: 3 });
  expect(headers.get("Content-Disposition")).toBe(
    `attachment; filename="a_b__;__X: 1.s2p"; filename*=UTF-8''a%22b%5C%C3%BC%3B%0D%0AX%3A%201.s2p`,
  );
  expect(headers.get("Content-Type")).toBe("application/octet-stream");
  expect(headers.get("Content-Security-Policy")).toContain("sandbox");
});

test("before a submission the buyer's history tells nothing of the quote", async () => {
  const { person, quote, engineer } = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(person, quote, [orme]);
  expect(await AuditEvent.count({ actor: engineer })).toBe(0);
  expect(await AuditEvent.findAll({ actor: person })).toMatchObject([{ action: "file uploaded", quoteId: quote.id }]);
});
