// A submitted version is scored from its bytes: figures against those computed outside the project, mails once, whatever happens to the worker.
import { expect, test } from "vitest";
import {
  AuditEvent,
  Job,
  MeasurementResult,
  MeasurementRow,
  OutboxEmail,
  QuoteLineResult,
  QuoteSummary,
  QuoteVersion,
} from "~/db/models";
import { leaseJob, lockDueJob } from "~/db/queries/jobs";
import { SYSTEM } from "~/db/scoping";
import { renderMail, type MailEvent } from "~/emails/index";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { runNextScoring } from "~/services/jobs.server";
import { submitQuote } from "~/services/quote-submission.server";
import { parseTouchstone, readCell, type TwoPort } from "~/rf/index";
import { readScoringProgress } from "~/services/scoring-progress.server";
import { scoreVersion } from "~/services/scoring.server";
import { inTransaction } from "~/services/transaction.server";
import { buildOrganisation, buildPerson } from "../support/factories";
import { useDatabase } from "../support/database";
import { journeyKey } from "../support/journey";
import {
  buildJourneyQuote,
  journeyFiles,
  supplierFigures,
  uploadFiles,
  type JourneyQuote,
} from "../support/supplier-journey";

useDatabase();

async function submitted(supplier: string, folder: string): Promise<JourneyQuote> {
  const found = await buildJourneyQuote(supplier);
  await uploadFiles(found.person, found.quote, journeyFiles(folder));
  const outcome = await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
  expect(outcome).toMatchObject({ ok: true, value: { version: 1 } });
  return found;
}

const SUPPLIERS = [
  ["Halden Resonator Works", "halden-resonator-works"],
  ["Kestrel Cavity Filters", "kestrel-cavity-filters"],
  ["Orme Microwave", "orme-microwave"],
] as const;

// Figures of tests/reference/journey/expected.json, by numpy from the same files; 1e-6 dB allows for its nine digits.
test.each(SUPPLIERS)("every line of %s comes out as numpy computed it from the same files", async (name, folder) => {
  const { person } = await submitted(name, folder);
  expect(await runNextScoring(scoreVersion)).toBe(true);
  const expected = supplierFigures(name);
  const rows = await QuoteLineResult.findAll({ actor: person });
  const byKey = new Map(rows.map((row) => [row.lineKey, row]));
  for (const line of expected.lines) {
    const row = byKey.get(journeyKey(line.id));
    expect(row, line.id).toMatchObject({ verdict: line.verdict, unit: line.worst.unit });
    expect(Number(row?.temperature), line.id).toBe(line.worst.temperature);
    expect(row?.frequency, line.id).toBe(line.worst.frequency);
    expect(Math.abs((row?.value ?? NaN) - line.worst.value), line.id).toBeLessThan(1e-6);
    expect(Math.abs((row?.margin ?? NaN) - line.worst.margin), line.id).toBeLessThan(1e-6);
    expect(Math.abs((row?.creditedMargin ?? NaN) - line.creditedMargin), line.id).toBeLessThan(1e-5);
  }
  expect(byKey.get(journeyKey("6.1"))).toMatchObject({ verdict: "declared", reason: "25 W", cells: [] });
  expect(await QuoteSummary.findOne({ actor: person })).toMatchObject({
    verdict: expected.verdict,
    conforming: expected.verdict === "pass",
    worstLineKey: journeyKey(expected.worstLine),
    units: expected.units.length,
    unitsOverRange: expected.unitsOverRange.length,
  });
});

test("both sides are mailed the results once, the one failing corner among them", async () => {
  const { person, engineer, quote, rfq } = await submitted("Kestrel Cavity Filters", "kestrel-cavity-filters");
  const failing = await MeasurementResult.findAll({ where: { verdict: "fail" }, actor: person });
  expect(failing).toHaveLength(1);
  const corner = failing[0]?.results.find(({ id }) => id === journeyKey("2.1"));
  // tests/reference/journey/README.md: 1.322 dB at 1.980 GHz, between the samples 1979.52 and 1980.02 MHz.
  expect(corner).toMatchObject({ verdict: "fail", frequency: 1.98e9, assumed: true });
  const version = await QuoteVersion.findOne({ actor: person, rejectOnEmpty: true });
  await scoreVersion(version.id);
  await scoreVersion(version.id);
  const mails = await OutboxEmail.findAll({ order: [["id", "ASC"]] });
  expect(mails.map(({ template, recipient }) => [template, recipient])).toEqual([
    ["quote-received-supplier", person.email],
    ["quote-received-buyer", engineer.email],
  ]);
  const drawn = await Promise.all(
    mails.map(({ template, props }) => renderMail({ template, props } as unknown as MailEvent)),
  );
  for (const { text } of drawn) {
    expect(text).toContain("Insertion loss, max 1.2 dB");
    expect(text).toContain("1.32 dB (KCF-0207, 70 °C) at 1.9800 GHz, margin −0.12 dB: fail");
    expect(text).toContain("fail; does not comply under simple acceptance");
  }
  expect(drawn[0]?.text).toContain(`/supplier/quotes/${quote.publicId}/results`);
  expect(drawn[1]?.text).toContain(`/quotes/${quote.publicId}`);
  expect(await AuditEvent.count({ where: { action: "scored", rfqId: rfq.id }, actor: engineer })).toBe(1);
  expect(await QuoteSummary.count({ actor: engineer })).toBe(1);
});

test("a worker that dies in the middle leaves the job to the next once its lease has lapsed", async () => {
  const { person, quote } = await submitted("Orme Microwave", "orme-microwave");
  await inTransaction(async (transaction) => {
    const job = await lockDueJob("score", transaction);
    await leaseJob({ id: job?.id ?? 0, leaseToken: "dead" }, 30, transaction);
  });
  expect(await runNextScoring(scoreVersion)).toBe(false);
  expect(await readScoringProgress(person, quote.publicId)).toMatchObject({ state: "pending" });
  await Job.update({ leasedUntil: new Date("2026-11-02T08:00:00Z") }, { where: { leaseToken: "dead" } });
  expect(await runNextScoring(scoreVersion)).toBe(true);
  const job = await Job.findOne({ rejectOnEmpty: true });
  expect(job).toMatchObject({ state: "done", attempts: 2, done: 1, total: 1 });
  expect(await readScoringProgress(person, quote.publicId)).toEqual({
    state: "done",
    done: 1,
    total: 1,
    verdict: "not-covered",
  });
});

test("two workers at once score a version each once, and leave one result", async () => {
  const { person } = await submitted("Orme Microwave", "orme-microwave");
  const version = await QuoteVersion.findOne({ actor: person, rejectOnEmpty: true });
  await Promise.all([scoreVersion(version.id), scoreVersion(version.id), scoreVersion(version.id)]);
  expect(await QuoteSummary.count({ actor: person })).toBe(1);
  expect(await QuoteLineResult.count({ actor: person })).toBe(12);
  expect(await OutboxEmail.count()).toBe(2);
});

test("a fault puts the job off, and after six attempts it is given up; nothing of its words is kept", async () => {
  const { person, quote } = await submitted("Orme Microwave", "orme-microwave");
  for (let attempt = 1; attempt <= 6; attempt += 1) {
    await Job.update({ runAt: new Date("2026-11-02T08:00:00Z") }, { where: { kind: "score" } });
    expect(await runNextScoring(() => Promise.reject(new TypeError("secret words")))).toBe(true);
  }
  const job = await Job.findOne({ rejectOnEmpty: true });
  expect(job).toMatchObject({ state: "failed", attempts: 6, lastError: "TypeError", leaseToken: null });
  expect(await readScoringProgress(person, quote.publicId)).toMatchObject({ state: "failed" });
});

test("an exception nobody accepted keeps a passing quote from conforming, and the mail says so", async () => {
  const found = await buildJourneyQuote("Halden Resonator Works");
  const values = {
    ...found.quote.draft.values,
    "declarations.line62.answer": "exception",
    "declarations.line62.text": "N female at port 2",
  };
  await found.quote.update({ draft: { values } });
  await uploadFiles(found.person, found.quote, journeyFiles("halden-resonator-works"));
  await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
  await runNextScoring(scoreVersion);
  expect(await QuoteSummary.findOne({ actor: found.person })).toMatchObject({ verdict: "pass", conforming: false });
  const mail = await OutboxEmail.findOne({ where: { template: "quote-received-buyer" }, rejectOnEmpty: true });
  expect(mail.props).toMatchObject({ outcome: "pass; does not comply under simple acceptance; exception to 6.2" });
});

test("data of a similar part never passes, and does not count over temperature", async () => {
  const found = await buildJourneyQuote("Halden Resonator Works");
  await found.quote.update({ draft: { values: { ...found.quote.draft.values, basis: "similar" } } });
  await uploadFiles(found.person, found.quote, journeyFiles("halden-resonator-works"));
  await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
  await runNextScoring(scoreVersion);
  const rows = await QuoteLineResult.findAll({ actor: found.person });
  const measured = rows.filter(({ verdict }) => verdict !== "declared");
  expect(new Set(measured.map(({ verdict }) => verdict))).toEqual(new Set(["not-covered"]));
});

test("progress is nobody's but the supplier's and, once submitted, the buyer's", async () => {
  const unsent = await buildJourneyQuote("Kestrel Cavity Filters");
  expect(await readScoringProgress(unsent.person, unsent.quote.publicId)).toMatchObject({ state: "none" });
  expect(await readScoringProgress(unsent.engineer, unsent.quote.publicId)).toBeNull();
  const { engineer, quote } = await submitted("Orme Microwave", "orme-microwave");
  expect(await readScoringProgress(engineer, quote.publicId)).toMatchObject({ state: "pending" });
  for (const kind of ["buyer", "supplier"] as const) {
    const stranger = await buildPerson(await buildOrganisation(kind));
    expect(await readScoringProgress(stranger, quote.publicId)).toBeNull();
  }
  expect(await Job.count()).toBe(1);
  expect(await QuoteVersion.count({ actor: SYSTEM })).toBe(1);
});

test("a job whose worker died at every attempt is given up, and the next one is done", async () => {
  const { person, quote } = await submitted("Orme Microwave", "orme-microwave");
  const long = new Date("2026-11-02T08:00:00Z");
  await Job.update({ attempts: 6, leaseToken: "dead", leasedUntil: long }, { where: { kind: "score" } });
  const worked: number[] = [];
  const work = (id: number) => Promise.resolve(void worked.push(id));
  expect(await runNextScoring(work)).toBe(true);
  expect(worked).toEqual([]);
  expect(await Job.findOne({ rejectOnEmpty: true })).toMatchObject({ state: "failed", attempts: 6, leaseToken: null });
  expect(await readScoringProgress(person, quote.publicId)).toMatchObject({ state: "failed" });
  expect(await runNextScoring(work)).toBe(false);
});

test("the buyer's mail names the supplier as its directory does, whatever that calls itself", async () => {
  const { organisation } = await submitted("Orme Microwave", "orme-microwave");
  await organisation.update({ name: "Halden Resonator Works" });
  await runNextScoring(scoreVersion);
  const mail = await OutboxEmail.findOne({ where: { template: "quote-received-buyer" }, rejectOnEmpty: true });
  expect(mail.props).toMatchObject({ supplierName: "Orme Microwave" });
});

test("the same data under two serials counts as one unit, whatever the comments", async () => {
  const found = await buildJourneyQuote("Halden Resonator Works");
  const [first] = journeyFiles("halden-resonator-works") as [ReturnType<typeof journeyFiles>[number]];
  const copy = Buffer.concat([Buffer.from("! another comment\n"), first.bytes]);
  await uploadFiles(found.person, found.quote, [first, { name: "A-99_25C.s2p", bytes: copy }]);
  for (const row of await MeasurementRow.findAll({ actor: found.person }))
    await row.update({ serial: `A-${row.id}`, temperature: "25.0" });
  await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
  await runNextScoring(scoreVersion);
  const summary = await QuoteSummary.findOne({ actor: found.person });
  expect(summary).toMatchObject({ units: 1 });
  expect(summary?.notes.map(({ code }) => code)).toContain("identical-data");
});

test("with a stated drift each range line has a predicted cell at an end that was not measured, either sign counting", async () => {
  const found = await buildJourneyQuote("Halden Resonator Works");
  const files = journeyFiles("halden-resonator-works").filter(({ name }) => name.includes("25C"));
  await uploadFiles(found.person, found.quote, files);
  await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
  const version = await QuoteVersion.findOne({ actor: SYSTEM, rejectOnEmpty: true });
  const drift = { ppmPerKelvin: 40, either: true, lossPerKelvin: 0.0039 };
  await QuoteVersion.update({ drift }, { where: { id: version.id }, actor: SYSTEM });
  await runNextScoring(scoreVersion);
  const row = await QuoteLineResult.findOne({ where: { lineKey: journeyKey("2.1") }, actor: found.person });
  const cells = (row?.cells ?? []).map(readCell);
  const places = cells.map(
    ({ unit, temperature, predicted }) => `${unit} ${temperature} ${predicted ? "predicted" : "measured"}`,
  );
  expect(places).toEqual([
    ...["HR2-0411", "HR2-0412", "HR2-0415"].map((unit) => `${unit} 25 measured`),
    ...["HR2-0411", "HR2-0412", "HR2-0415"].flatMap((unit) => [`${unit} -30 predicted`, `${unit} 70 predicted`]),
  ]);
  // The trace moved by 1 ± 40e-6 · 45 K, its loss times √(1 + 0.0039 · 45 K): the formulas of the temperature outlook by hand.
  const hot = cells.find(({ unit, temperature }) => unit === "HR2-0411" && temperature === 70)?.result.value ?? NaN;
  const network = parseTouchstone(files[0]?.bytes ?? "");
  const losses = [1, -1].flatMap((sign) => {
    const loss = (hz: number) => lossAt(network, hz / (1 + sign * 40e-6 * 45));
    return [1.92e9, 1.98e9].map(loss);
  });
  const worst = Math.max(...losses) * Math.sqrt(1 + 0.0039 * 45);
  expect(Math.abs(hot - worst)).toBeLessThan(1e-9);
  expect(row?.verdict).toBe("not-covered");
});

test("an older version that is scored late keeps its notes to itself: those of the current one stand", async () => {
  const found = await buildJourneyQuote("Orme Microwave");
  await uploadFiles(found.person, found.quote, journeyFiles("orme-microwave"));
  const submitWith = async (noiseFloor: string) => {
    await found.quote.reload({ actor: SYSTEM });
    await found.quote.update({ draft: { values: { ...found.quote.draft.values, "setup.noiseFloor": noiseFloor } } });
    expect(await submitQuote(found.person, found.quote.publicId, newIdempotencyKey())).toMatchObject({ ok: true });
  };
  await submitWith("20 dB");
  await submitWith("60 dB");
  const [older, current] = await QuoteVersion.findAll({ order: [["number", "ASC"]], actor: SYSTEM });
  await scoreVersion(current?.id ?? 0);
  await scoreVersion(older?.id ?? 0);
  const words = JSON.stringify((await MeasurementRow.findAll({ actor: SYSTEM })).map(({ notes }) => notes));
  expect(words).toContain("60.00 dB");
  expect(words).not.toContain("20.00 dB");
});

/** dB, linear between samples. */
function lossAt({ frequency, s21 }: TwoPort, hz: number): number {
  const next = frequency.findIndex((sample) => sample >= hz);
  const loss = (k: number) => -20 * Math.log10(Math.hypot(s21.re[k] ?? NaN, s21.im[k] ?? NaN));
  const [from = NaN, to = NaN] = [frequency[next - 1], frequency[next]];
  return loss(next - 1) + ((hz - from) / (to - from)) * (loss(next) - loss(next - 1));
}
