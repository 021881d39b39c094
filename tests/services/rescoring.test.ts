// Results belong to a core and a revision: what either left behind is found once, scored again from the same bytes, and until then the older figures stand.
import { expect, test } from "vitest";
import {
  AuditEvent,
  Job,
  MeasurementResult,
  MeasurementRow,
  OutboxEmail,
  Quote,
  QuoteLineResult,
  QuoteSummary,
  Rfq,
} from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { DEFAULT_COMPARISON } from "~/forms/comparison";
import { CORE_VERSION, evaluateLot, parseTouchstone, storeCell } from "~/rf/index";
import { readComparison } from "~/services/comparison.server";
import { runNextJob } from "~/services/jobs.server";
import { readQuoteResults } from "~/services/quote-results.server";
import { queueStaleScoring } from "~/services/rescoring.server";
import { readScoringProgress } from "~/services/scoring-progress.server";
import { rescoreVersion } from "~/services/scoring.server";
import { readScoringFrame } from "~/services/scoring-sweeps.server";
import { readSubmittedHead } from "~/services/submitted-quotes.server";
import { readSupplierResults } from "~/services/supplier-results.server";
import { useDatabase } from "../support/database";
import { buildOrganisation, buildPerson, buildRfq, SHORT_LINES } from "../support/factories";
import { JOURNEY_LINES, journeyKey } from "../support/journey";
import {
  buildOldScore,
  kestrelFiles,
  moveToRevision,
  OLD_CORE,
  ormeFiles,
  readLotFiles,
  runAllJobs,
} from "../support/rescoring";
import { buildSubmittedQuote, storeScore } from "../support/scored-quote";
import { supplierFigures } from "../support/supplier-journey";

useDatabase();

const LONG = 120_000;
const passes = { margin: 0.3, credited: 1.5, verdict: "pass" } as const;

test(
  "a quote of an older core is queued once and scored again to the figures of a fresh evaluation; nobody is mailed",
  { timeout: LONG },
  async () => {
    const { version, quote, rfq, person } = await buildOldScore("Kestrel Cavity Filters", kestrelFiles());
    const mails = await OutboxEmail.count();
    expect(await queueStaleScoring()).toEqual({ versions: 1, drafts: 1 });
    expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
    expect(await readScoringProgress(person, quote.publicId)).toEqual({
      state: "pending",
      done: 0,
      total: 0,
      verdict: "fail",
    });
    await runAllJobs();
    expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
    expect(await readScoringProgress(person, quote.publicId)).toMatchObject({ state: "done", verdict: "fail" });

    const where = { versionId: version.id, coreVersion: CORE_VERSION };
    const rows = await QuoteLineResult.findAll({ where, actor: person });
    const sweepIds = new Map(
      (await MeasurementRow.findAll({ where: { quoteId: quote.id }, actor: person })).map((row) => [
        `${row.serial ?? ""} ${Number(row.temperature)}`,
        row.publicId,
      ]),
    );
    const frame = await readScoringFrame(SYSTEM, rfq);
    const lot = readLotFiles("kestrel-cavity-filters").map(({ name, unit, temperature, bytes }) => ({
      unit,
      temperature,
      sweeps: [{ id: sweepIds.get(`${unit} ${temperature}`) ?? "", network: parseTouchstone(bytes, name) }],
    }));
    const fresh = evaluateLot(lot, frame.requirements, {
      assumedSetup: rfq.assumedSetup,
      range: [-30, 70],
      unitsOverRange: 1,
    });
    for (const row of fresh) {
      const stored = rows.find(({ lineKey }) => lineKey === row.requirementId);
      expect(stored?.verdict).toBe(row.verdict);
      const byPlace = (cells: readonly { unit: string; temperature: number }[]) =>
        [...cells].sort((a, b) => a.unit.localeCompare(b.unit) || a.temperature - b.temperature);
      expect(byPlace(stored?.cells ?? [])).toEqual(byPlace(row.cells.map(storeCell)));
    }
    // tests/reference/journey/expected.json, by numpy from the same files.
    for (const { id, worst, verdict } of supplierFigures("Kestrel Cavity Filters").lines) {
      const stored = rows.find(({ lineKey }) => lineKey === journeyKey(id));
      expect(stored?.verdict, id).toBe(verdict);
      expect(Math.abs((stored?.value ?? NaN) - worst.value), id).toBeLessThan(1e-6);
    }
    expect(await OutboxEmail.count()).toBe(mails);
    const events = await AuditEvent.findAll({ where: { action: "rescored" }, actor: person });
    expect(events.map(({ detail }) => detail)).toEqual([
      {
        version: 1,
        verdict: "fail",
        conforming: false,
        coreVersion: CORE_VERSION,
        revision: "A",
        previousVerdict: "fail",
        previousConforming: false,
        previousCoreVersion: OLD_CORE,
        previousRevision: "A",
      },
    ]);
  },
);

test(
  "after the RFQ moved to another revision the older figures stand, with a word, until those against the new one are there",
  { timeout: LONG },
  async () => {
    const found = await buildOldScore("Kestrel Cavity Filters", kestrelFiles());
    const { rfq, quote, person, version, engineer } = found;
    // tests/reference/journey/README.md: 1.322 dB at 1.980 GHz fails 1.2 dB; against 1.5 dB it passes with 0.1 dB of uncertainty,
    // and of the other lines (expected.json) the worst are a conditional pass.
    const relaxed = JOURNEY_LINES.map((line) =>
      line.lineNumber === "2.1" && line.definition.kind === "insertion-loss"
        ? { ...line, definition: { ...line.definition, max: 1.5 } }
        : line,
    );
    const revisionId = await moveToRevision(rfq, "B", relaxed);
    await queueStaleScoring();
    const waiting = { coreVersion: OLD_CORE, letter: "A", state: "pending", done: 0, total: 0 };
    const head = await readSubmittedHead(engineer, quote.publicId);
    expect(head).toMatchObject({ verdict: "fail", coreVersion: OLD_CORE, rescoring: waiting });
    expect(head?.specification.letter).toBe("A");
    const before = await readSupplierResults(person, quote.publicId);
    expect(before).toMatchObject({ summary: { verdict: "fail" }, rescoring: waiting });
    expect(before !== "none" && before?.lines.map(({ line }) => line.lineNumber)).toContain("2.1");
    const stale = await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON);
    expect(stale?.nonconforming).toMatchObject([{ rescoring: waiting, worst: { lineNumber: "2.1" } }]);

    await runAllJobs();
    expect(await readSubmittedHead(engineer, quote.publicId)).toMatchObject({
      verdict: "conditional-pass",
      conforming: true,
      coreVersion: CORE_VERSION,
      rescoring: null,
      specification: { letter: "B" },
    });
    expect(await readSupplierResults(person, quote.publicId)).toMatchObject({
      summary: { verdict: "conditional-pass" },
      rescoring: null,
    });
    const after = await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON);
    expect(after?.conforming).toMatchObject([{ verdict: "conditional-pass", rescoring: null }]);
    expect(after?.coreVersions).toEqual([CORE_VERSION]);
    const shown = (await readQuoteResults(engineer, quote.publicId))?.lines.find(
      ({ lineNumber }) => lineNumber === "2.1",
    );
    expect(shown).toMatchObject({ verdict: "pass" });
    const event = await AuditEvent.findOne({ where: { action: "rescored" }, actor: engineer });
    expect(event?.detail).toMatchObject({
      previousRevision: "A",
      revision: "B",
      previousVerdict: "fail",
      verdict: "conditional-pass",
    });
    const kept = await QuoteSummary.findAll({ where: { versionId: version.id }, actor: engineer });
    expect(kept.map((row) => [row.revisionId, row.coreVersion])).toEqual([
      [version.revisionId, OLD_CORE],
      [revisionId, CORE_VERSION],
    ]);
    expect(await OutboxEmail.count()).toBe(2);
  },
);

test("of all quotes those of open and closed RFQs are found: decided, cancelled and withdrawn ones keep their figures", async () => {
  const engineer = await buildPerson(await buildOrganisation("buyer"));
  const build = async (name: string, status: Rfq["status"], state: Quote["state"] = "submitted") => {
    const { rfq } = await buildRfq(engineer, { status });
    const built = await buildSubmittedQuote(rfq, SHORT_LINES, { name });
    await storeScore(built.version, SHORT_LINES, { lineloss: passes }, true);
    await built.quote.update({ state });
    return built;
  };
  const open = await build("Open", "open");
  const closed = await build("Closed", "closed");
  const decided = await build("Decided", "decided");
  const cancelled = await build("Cancelled", "cancelled");
  const withdrawn = await build("Withdrawn", "open", "withdrawn");
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
  expect(await queueStaleScoring("9.9.9")).toEqual({ versions: 2, drafts: 0 });
  const jobs = await Job.findAll({ where: { kind: "rescore" }, order: [["id", "ASC"]] });
  const keyOf = ({ version }: typeof open) => `${version.id}:${version.revisionId}:9.9.9`;
  expect(jobs.map(({ key }) => key)).toEqual([keyOf(open), keyOf(closed)]);
  expect(await readScoringProgress(engineer, open.quote.publicId, "9.9.9")).toMatchObject({ state: "pending" });
  for (const { quote } of [decided, cancelled, withdrawn])
    expect(await readScoringProgress(engineer, quote.publicId, "9.9.9")).toMatchObject({
      state: "done",
      verdict: "pass",
    });
});

test("a version whose first scoring waits is not queued a second time; one whose first scoring was given up is, and is mailed then", async () => {
  const engineer = await buildPerson(await buildOrganisation("buyer"));
  const { rfq } = await buildRfq(engineer);
  const { version, quote } = await buildSubmittedQuote(rfq, SHORT_LINES);
  const at = new Date("2026-11-10T09:00:00.000Z");
  const job = await Job.create({
    kind: "score",
    key: String(version.id),
    payload: { versionId: version.id },
    runAt: at,
    createdAt: at,
  });
  expect(await queueStaleScoring()).toEqual({ versions: 0, drafts: 0 });
  const told = async () => ({
    progress: (await readScoringProgress(engineer, quote.publicId))?.state,
    compared: (await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON))?.unscored.map(
      ({ scoring }) => scoring,
    ),
  });
  expect(await told()).toEqual({ progress: "pending", compared: ["pending"] });
  await job.update({ state: "failed" });
  expect(await told()).toEqual({ progress: "failed", compared: ["failed"] });
  expect(await queueStaleScoring()).toEqual({ versions: 1, drafts: 0 });
  expect(await told()).toEqual({ progress: "pending", compared: ["pending"] });
  await runAllJobs();
  expect(await QuoteSummary.count({ where: { versionId: version.id }, actor: engineer })).toBe(1);
  expect(await OutboxEmail.count()).toBe(2);
  expect(await AuditEvent.count({ where: { action: "scored" }, actor: engineer })).toBe(1);
  expect(await AuditEvent.count({ where: { action: "rescored" }, actor: engineer })).toBe(0);
});

test(
  "an RFQ decided, or a quote withdrawn, while its version is scored again keeps the figures it had",
  { timeout: LONG },
  async () => {
    const { version, rfq, quote } = await buildOldScore("Orme Microwave", ormeFiles());
    const payload = { versionId: version.id, revisionId: rfq.revisionId };
    const kept = [{ code: "few-samples", severity: "doubtful", message: "by the old core" }] as const;
    await MeasurementRow.update({ notes: [...kept] }, { where: { quoteId: quote.id }, actor: SYSTEM });
    const notes = async () =>
      (await MeasurementRow.findOne({ where: { quoteId: quote.id }, actor: SYSTEM, rejectOnEmpty: true })).notes;
    const summaries = () => QuoteSummary.findAll({ where: { versionId: version.id }, actor: SYSTEM });
    await rescoreVersion(payload, async () => {
      await rfq.update({ status: "decided" });
    });
    expect((await summaries()).map(({ coreVersion }) => coreVersion)).toEqual([OLD_CORE]);
    await rfq.update({ status: "closed" });
    await rescoreVersion({ ...payload, revisionId: rfq.revisionId }, async () => {
      await quote.update({ state: "withdrawn" });
    });
    expect(await summaries()).toHaveLength(1);
    await quote.reload({ actor: SYSTEM });
    await quote.update({ state: "submitted" });
    expect(await notes()).toEqual(kept);
    await rescoreVersion(payload);
    await rescoreVersion(payload);
    expect(await notes()).not.toEqual(kept);
    expect((await summaries()).map(({ coreVersion }) => coreVersion)).toEqual([OLD_CORE, CORE_VERSION]);
    expect(await AuditEvent.count({ where: { action: "rescored" }, actor: SYSTEM })).toBe(1);
  },
);

test(
  "a scoring that breaks off keeps the sweeps it did, and goes on behind them; its progress does not fall back",
  { timeout: LONG },
  async () => {
    const { quote, person } = await buildOldScore("Kestrel Cavity Filters", kestrelFiles().slice(0, 4));
    await queueStaleScoring();
    await Job.update({ state: "done" }, { where: { kind: "draft-score" } });
    const stored = () =>
      MeasurementResult.findAll({
        where: { coreVersion: CORE_VERSION },
        order: [["measurementId", "ASC"]],
        actor: person,
      });
    const done = async () => (await readScoringProgress(person, quote.publicId))?.done;
    const breaking = runNextJob({
      rescore: (payload, report) =>
        rescoreVersion(payload, async (count, total) => {
          await report(count, total);
          if (count === 3) throw new Error("broken off");
        }),
    });
    expect(await breaking).toBe(true);
    const before = await stored();
    expect(before).toHaveLength(3);
    expect(await done()).toBe(3);
    await Job.update({ runAt: new Date("2026-11-02T08:00:00Z") }, { where: { kind: "rescore" } });
    const seen: (number | undefined)[] = [];
    await runNextJob({
      rescore: (payload, report) =>
        rescoreVersion(payload, async (count, total) => {
          await report(count, total);
          seen.push(await done());
        }),
    });
    expect(seen).toEqual([3, 3, 3, 3, 4]);
    const after = await stored();
    expect(after).toHaveLength(4);
    expect(after.slice(0, 3).map(({ createdAt }) => createdAt)).toEqual(before.map(({ createdAt }) => createdAt));
  },
);

test("a job of another core is left to the worker that runs it", async () => {
  const engineer = await buildPerson(await buildOrganisation("buyer"));
  const { rfq } = await buildRfq(engineer);
  const { version } = await buildSubmittedQuote(rfq, SHORT_LINES);
  await storeScore(version, SHORT_LINES, { lineloss: passes }, true);
  await queueStaleScoring("9.9.9");
  await runAllJobs();
  expect(await QuoteSummary.count({ where: { coreVersion: "9.9.9" }, actor: engineer })).toBe(0);
  expect(await queueStaleScoring("9.9.9")).toEqual({ versions: 1, drafts: 0 });
  await runAllJobs("9.9.9");
  expect(await QuoteSummary.count({ where: { coreVersion: "9.9.9" }, actor: engineer })).toBe(1);
});
