// The sweeps of a quote that is being prepared follow its setup: scored again in the worker, once, and never to the harm of what was submitted.
import { beforeEach, expect, test } from "vitest";
import { Job, MeasurementResult, MeasurementRow } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { CORE_VERSION, parseTouchstone, type Setup } from "~/rf/index";
import { scoreSweep, setupInUse, statedOf } from "~/rf/score-sweep";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { queueDraftScoring, runNextJob, runNextScoring } from "~/services/jobs.server";
import { removeMeasurement } from "~/services/measurement-changes.server";
import { submitQuote } from "~/services/quote-submission.server";
import { queueStaleScoring } from "~/services/rescoring.server";
import { scoreDraft } from "~/services/scoring-drafts.server";
import { scoreVersion } from "~/services/scoring.server";
import { readScoringFrame, setupHash } from "~/services/scoring-sweeps.server";
import { inTransaction } from "~/services/transaction.server";
import { useDatabase } from "../support/database";
import { kestrelFiles, OLD_CORE, ormeFiles, runAllJobs, runJob } from "../support/rescoring";
import { buildJourneyQuote, uploadFiles, type JourneyQuote } from "../support/supplier-journey";

useDatabase();

const LONG = 120_000;
const STATED: Setup = { transmission: 0.3, sourceMatch: 40 };
let found: JourneyQuote;

beforeEach(async () => {
  found = await buildJourneyQuote("Orme Microwave");
});

const state = (setup: Record<string, string>) =>
  found.quote.update({ draft: { values: { ...found.quote.draft.values, ...setup } } });
const queue = () => inTransaction((transaction) => queueDraftScoring(found.quote.id, new Date(), transaction));
const results = (where: { measurementId?: number } = {}) =>
  MeasurementResult.findAll({ where, order: [["createdAt", "ASC"]], actor: SYSTEM });
const theSweep = () => MeasurementRow.findOne({ where: { removedAt: null }, actor: SYSTEM, rejectOnEmpty: true });

test(
  "a sweep is scored with its own setup over the quote's over the assumed one, field by field",
  { timeout: LONG },
  async () => {
    await uploadFiles(found.person, found.quote, ormeFiles());
    await state({ "setup.transmission": "0.3 dB", "setup.sourceMatch": "40 dB" });
    const own: Setup = { transmission: 0.05 };
    await (await theSweep()).update({ setup: own });
    await queue();
    await runAllJobs();
    const setup = setupInUse(statedOf(STATED, own), found.rfq.assumedSetup);
    expect(setup).toEqual({ ...found.rfq.assumedSetup, sourceMatch: 40, transmission: 0.05 });
    const stored = (await results()).find((row) => row.setupHash === setupHash(setup));
    const [file] = ormeFiles();
    const frame = await readScoringFrame(SYSTEM, found.rfq);
    const network = parseTouchstone(file?.bytes ?? "", file?.name);
    const fresh = scoreSweep(network, frame, { sourceMatch: 40, transmission: 0.05 }, found.rfq.assumedSetup);
    expect(stored?.results).toEqual(fresh.results);
    expect(stored?.verdict).toBe(fresh.verdict);
  },
);

test(
  "a quote has one job of its draft, and what it scored already is not scored again",
  { timeout: LONG },
  async () => {
    await uploadFiles(found.person, found.quote, ormeFiles());
    await state({ "setup.transmission": "0.3" });
    await queue();
    await queue();
    expect(await Job.count({ where: { kind: "draft-score" } })).toBe(1);
    await runAllJobs();
    const first = await results();
    expect(first).toHaveLength(2); // as uploaded, and with what is stated
    await queue();
    expect(await runJob()).toBe(true);
    expect(await runJob()).toBe(false);
    expect((await results()).map(({ createdAt }) => createdAt)).toEqual(first.map(({ createdAt }) => createdAt));
  },
);

test("a setup that changes while the draft is being scored has it scored once more", { timeout: LONG }, async () => {
  await uploadFiles(found.person, found.quote, ormeFiles());
  await state({ "setup.transmission": "0.3" });
  await queue();
  await runNextJob({
    "draft-score": async ({ quoteId }, report) => {
      await scoreDraft(quoteId, report);
      await state({ "setup.transmission": "0.4" });
      await queue();
    },
  });
  expect(await Job.findOne({ rejectOnEmpty: true })).toMatchObject({ state: "pending", attempts: 0, done: 0 });
  await runAllJobs();
  const hashes = (await results()).map((row) => row.setupHash);
  for (const transmission of [0.3, 0.4])
    expect(hashes).toContain(setupHash(setupInUse({ transmission }, found.rfq.assumedSetup)));
  expect(await Job.findOne({ rejectOnEmpty: true })).toMatchObject({ state: "done" });
});

test("a file taken out while it is being scored leaves nothing behind, and no fault", { timeout: LONG }, async () => {
  await uploadFiles(found.person, found.quote, kestrelFiles().slice(0, 3));
  const [first, second, third] = await MeasurementRow.findAll({ order: [["id", "ASC"]], actor: SYSTEM });
  await state({ "setup.transmission": "0.3" });
  await scoreDraft(found.quote.id, async (done) => {
    if (done !== 1) return;
    await removeMeasurement(found.person, first?.publicId ?? "");
    await removeMeasurement(found.person, second?.publicId ?? ""); // not read yet
  });
  expect(await results({ measurementId: first?.id ?? 0 })).toEqual([]);
  expect(await results({ measurementId: second?.id ?? 0 })).toEqual([]);
  expect(await results({ measurementId: third?.id ?? 0 })).toHaveLength(2);
});

test(
  "a draft scored with the setup of before, while it is submitted with another one, leaves the notes of what was submitted",
  { timeout: LONG },
  async () => {
    await uploadFiles(found.person, found.quote, kestrelFiles().slice(0, 2));
    const notes = async () =>
      (await MeasurementRow.findAll({ order: [["id", "ASC"]], actor: SYSTEM })).map((row) => row.notes);
    // A floor of 20 dB is noted on nearly every sample, one of 110 dB on few.
    await state({ "setup.noiseFloor": "20 dB" });
    let submitted: unknown;
    await scoreDraft(found.quote.id, async (done) => {
      if (done !== 1) return;
      await state({ "setup.noiseFloor": "110 dB" });
      await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
      while (await runNextScoring(scoreVersion));
      submitted = await notes();
    });
    expect(await notes()).toEqual(submitted);
    expect(JSON.stringify(submitted)).toContain("110.00 dB");
  },
);

test(
  "notes of a setup that was changed meanwhile are not stored over those of the new one",
  { timeout: LONG },
  async () => {
    await uploadFiles(found.person, found.quote, ormeFiles());
    await state({ "setup.noiseFloor": "20 dB" });
    await scoreDraft(found.quote.id, async (done) => {
      if (done !== 1) return;
      await state({ "setup.noiseFloor": "60 dB" });
      await scoreDraft(found.quote.id);
    });
    const words = JSON.stringify((await theSweep()).notes);
    expect(words).toContain("60.00 dB");
    expect(words).not.toContain("20.00 dB");
  },
);

test("drafts of an older core are found once while their RFQ is open, and not after", { timeout: LONG }, async () => {
  await uploadFiles(found.person, found.quote, ormeFiles());
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
  await MeasurementResult.update({ coreVersion: OLD_CORE }, { where: {}, actor: SYSTEM });
  await found.rfq.update({ dueAt: new Date(Date.now() - 60_000) });
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
  await found.rfq.update({ dueAt: new Date(Date.now() + 600_000) });
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 1 });
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
  await Job.update({ state: "failed" }, { where: {} });
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
  expect(await queueStaleScoring("9.9.9")).toEqual({ versions: 0, drafts: 1 });
  await queue();
  await runAllJobs();
  expect((await results()).map(({ coreVersion }) => coreVersion)).toEqual([OLD_CORE, CORE_VERSION]);
});

test("what a draft says does not touch the notes of sweeps that were submitted", { timeout: LONG }, async () => {
  await uploadFiles(found.person, found.quote, ormeFiles());
  await submitQuote(found.person, found.quote.publicId, newIdempotencyKey());
  await runAllJobs();
  const sweep = await theSweep();
  const notes = [{ code: "few-samples", severity: "doubtful", message: "as submitted" }] as const;
  await sweep.update({ notes: [...notes] });
  await state({ "setup.transmission": "0.3" });
  await queue();
  await runAllJobs();
  expect((await theSweep()).notes).toEqual(notes);
  await sweep.update({ sharedAt: null });
  await queue();
  await runAllJobs();
  expect((await theSweep()).notes).not.toEqual(notes);
});
