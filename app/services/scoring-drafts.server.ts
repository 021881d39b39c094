// Scores the sweeps of a quote that is being prepared, each by itself, with the setup its draft states now.
import type { Transaction } from "sequelize";
import { MeasurementRow, Quote, Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { statedSetup } from "~/forms/quote-setup";
import { CORE_VERSION, type Setup } from "~/rf/index";
import { setupInUse, statedOf } from "~/rf/score-sweep";
import { quoteRefusal } from "~/workflow/quote";
import { rfqState } from "~/workflow/rfq";
import type { Report } from "./jobs.server";
import {
  readScoringFrame,
  scoreEachSweep,
  setupHash,
  type ScoredSweep,
  type SweepScoring,
} from "./scoring-sweeps.server";
import { canonicalJson } from "./specification-release.server";
import { inTransaction } from "./transaction.server";

/** Nothing comes of it where the quote cannot be worked on any more. What is stored already is not evaluated again. */
export async function scoreDraft(
  quoteId: number,
  report: Report = () => Promise.resolve(),
  coreVersion: string = CORE_VERSION,
): Promise<void> {
  const system = { actor: SYSTEM, rejectOnEmpty: true } as const;
  const quote = await Quote.findByPk(quoteId, system);
  const [rfq, now] = await Promise.all([Rfq.findByPk(quote.rfqId, system), databaseNow()]);
  if (quoteRefusal("edit", quote.state, rfqState(rfq, now)) !== null) return;
  const [frame, sweeps] = await Promise.all([
    readScoringFrame(SYSTEM, rfq),
    MeasurementRow.findAll({
      where: { quoteId, removedAt: null },
      attributes: ["id"],
      order: [["id", "ASC"]],
      actor: SYSTEM,
    }),
  ]);
  const ids = sweeps.map(({ id }) => id);
  const stated = statedSetup({ ...quote.draft.values });
  const scoring = { frame, stated, assumedSetup: rfq.assumedSetup, coreVersion };
  for await (const sweep of scoreEachSweep(ids, scoring, report))
    if (canonicalJson(sweep.notes) !== canonicalJson(sweep.measurement.notes))
      await inTransaction((transaction) => storeNotes(sweep, scoring, transaction));
}

/**
 * The notes of a sweep follow the draft as it is now: what became another setup meanwhile has a scoring of its own queued. What a
 * draft says changes nothing of a sweep that was submitted; whoever submits or changes it holds the quote.
 */
async function storeNotes(
  { measurement: { id, quoteId, setup }, notes }: ScoredSweep,
  { stated, assumedSetup }: SweepScoring,
  transaction: Transaction,
): Promise<void> {
  const system = { actor: SYSTEM, transaction } as const;
  const { draft } = await Quote.findByPk(quoteId, { ...system, rejectOnEmpty: true, lock: transaction.LOCK.SHARE });
  const row = await MeasurementRow.findByPk(id, system);
  if (row?.sharedAt !== null) return;
  const hashOf = (quote: Setup, own: Setup | null) => setupHash(setupInUse(statedOf(quote, own), assumedSetup));
  if (hashOf(statedSetup({ ...draft.values }), row.setup) === hashOf(stated, setup))
    await row.update({ notes }, { transaction });
}
