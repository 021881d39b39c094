// The worker process killed with SIGKILL in the middle of scoring several quotes again: the next one goes on where it was.
import { spawn, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import { setTimeout as delay } from "node:timers/promises";
import { expect, onTestFinished, test } from "vitest";
import { AuditEvent, Job, MeasurementResult, OutboxEmail, QuoteLineResult, QuoteSummary } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { CORE_VERSION } from "~/rf/index";
import { rescoreKey } from "~/services/jobs.server";
import { readScoringProgress } from "~/services/scoring-progress.server";
import { useDatabase } from "../support/database";
import { addOldScore, buildOldScore, kestrelFiles, OLD_CORE } from "../support/rescoring";

useDatabase();

const LEASE_SECONDS = 2;
const FILES = 6;

interface Worker {
  readonly process: ChildProcess;
  /** Measurements it says it scored, in their order. */
  readonly scored: () => number[];
}

function startWorker(): Worker {
  const environment = { SCORING_LEASE_SECONDS: String(LEASE_SECONDS), LOG_LEVEL: "debug" };
  const child = spawn(process.execPath, ["--import", "tsx", "app/worker.ts"], {
    env: { ...process.env, ...environment },
    stdio: ["ignore", "pipe", "inherit"],
  });
  onTestFinished(() => void child.kill("SIGKILL"));
  let printed = "";
  child.stdout.on("data", (chunk: Buffer) => (printed += chunk.toString()));
  const scored = () =>
    printed
      .split("\n")
      .filter((line) => line.includes('"sweep scored"'))
      .map((line) => (JSON.parse(line) as { measurementId: number }).measurementId);
  return { process: child, scored };
}

async function end({ process: child }: Worker, signal: "SIGKILL" | "SIGTERM"): Promise<void> {
  const exited = once(child, "exit");
  child.kill(signal);
  await exited;
}

const newScores = () => QuoteSummary.findAll({ where: { coreVersion: CORE_VERSION }, actor: SYSTEM });
const newSweeps = () => MeasurementResult.findAll({ where: { coreVersion: CORE_VERSION }, actor: SYSTEM });

/** Asks until the answer satisfies. Throws after a minute. */
async function until<T>(ask: () => Promise<T>, satisfies: (answer: T) => boolean, pause = 10): Promise<T> {
  const deadline = Date.now() + 60_000;
  for (;;) {
    const answer = await ask();
    if (satisfies(answer)) return answer;
    if (Date.now() > deadline) throw new Error(`not within a minute: ${JSON.stringify(answer)}`);
    await delay(pause);
  }
}

/** Of a closed RFQ: the drafts of an open one would be scored beside them, and the same sweeps by two jobs. */
async function buildStaleQuotes() {
  const files = kestrelFiles().slice(0, FILES);
  const first = await buildOldScore("Kestrel Cavity Filters", files);
  const second = await addOldScore(first.rfq, "Halden Resonator Works", files);
  const third = await addOldScore(first.rfq, "Orme Microwave", files);
  await first.rfq.update({ status: "closed" });
  return [first, second, third] as const;
}

test(
  "a worker killed while it scores several quotes again: the next one evaluates no sweep twice, mails nobody, and leaves one result each",
  { timeout: 180_000 },
  async () => {
    const quotes = await buildStaleQuotes();
    const mails = await OutboxEmail.count();
    expect(mails).toBe(2 * quotes.length);
    expect((await QuoteSummary.findAll({ actor: SYSTEM })).map(({ coreVersion }) => coreVersion)).toEqual(
      quotes.map(() => OLD_CORE),
    );

    const first = startWorker();
    const sweepsNow = async () => ({ scores: (await newScores()).length, sweeps: (await newSweeps()).length });
    const isInTheMiddle = ({ scores, sweeps }: Awaited<ReturnType<typeof sweepsNow>>) =>
      scores === 1 && sweeps >= FILES + 2 && sweeps < 2 * FILES - 1;
    await until(sweepsNow, isInTheMiddle, 2);
    await end(first, "SIGKILL");
    const half = await newSweeps();
    expect(half.length).toBeGreaterThan(FILES);
    expect(half.length).toBeLessThan(2 * FILES);
    expect(await newScores()).toHaveLength(1);
    const cut = quotes[1];
    const progress = () => readScoringProgress(cut.person, cut.quote.publicId);
    const atTheKill = (await progress())?.done ?? 0;
    expect(atTheKill).toBeGreaterThan(0);
    expect(await progress()).toMatchObject({ state: "pending", total: FILES });

    const second = startWorker();
    const told: number[] = [atTheKill];
    const ask = async () => {
      told.push((await progress())?.done ?? NaN);
      return newScores();
    };
    await until(ask, (scores) => scores.length === quotes.length);
    await until(
      () => Job.count({ where: { state: "pending" } }),
      (pending) => pending === 0,
    );
    await end(second, "SIGTERM");

    const ids = (rows: readonly { versionId: number }[]) =>
      rows.map(({ versionId }) => versionId).sort((a, b) => a - b);
    expect(ids(await newScores())).toEqual(quotes.map(({ version }) => version.id));
    const lines = await QuoteLineResult.findAll({ where: { coreVersion: CORE_VERSION }, actor: SYSTEM });
    expect(lines).toHaveLength(quotes.length * 12);
    expect(told).toEqual([...told].sort((a, b) => a - b));
    expect(told.every((done) => done <= FILES)).toBe(true);

    const all = await newSweeps();
    expect(all).toHaveLength(quotes.length * FILES);
    const scoredAfter = second.scored();
    expect(new Set(scoredAfter).size).toBe(scoredAfter.length);
    const doneBefore = half.map(({ measurementId }) => measurementId);
    expect(scoredAfter.filter((id) => doneBefore.includes(id))).toEqual([]);
    expect(scoredAfter).toHaveLength(all.length - half.length);
    for (const { measurementId, createdAt } of half)
      expect(all.find((row) => row.measurementId === measurementId)?.createdAt).toEqual(createdAt);

    expect(await OutboxEmail.count()).toBe(mails);
    expect(await AuditEvent.count({ where: { action: "rescored" }, actor: SYSTEM })).toBe(quotes.length);
    const key = rescoreKey({
      versionId: cut.version.id,
      revisionId: cut.version.revisionId,
      coreVersion: CORE_VERSION,
    });
    expect(await Job.findOne({ where: { kind: "rescore", key } })).toMatchObject({
      state: "done",
      attempts: 2,
      done: FILES,
      total: FILES,
    });
  },
);
