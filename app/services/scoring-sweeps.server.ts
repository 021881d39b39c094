// What measured sweeps are scored against, and the packed results of one sweep by itself.
import type { Transaction } from "sequelize";
import { MeasurementResult, SpecificationRevision, type MeasurementRow, type Rfq } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import { CORE_VERSION, measuredRequirements, type Setup, type SpecificationLine } from "~/rf/index";
import { withPlannedSteps } from "~/rf/measurement-plan";
import type { EvaluationFrame, SweepScore } from "~/rf/score-sweep";
import { sha256 } from "./identifiers.server";
import { canonicalJson } from "./specification-release.server";
import { readLines } from "./specification-lines.server";

/** A revision as the evaluation takes it, with the steps that the RFQ asks for. */
export interface ScoringFrame extends EvaluationFrame {
  readonly revisionId: number;
  /** Measured and declared, in their order. */
  readonly lines: readonly SpecificationLine[];
}

/** Throws where the actor does not see the revision. */
export async function readScoringFrame(
  actor: QueryActor,
  { revisionId, measurementPlan }: Pick<Rfq, "revisionId" | "measurementPlan">,
): Promise<ScoringFrame> {
  const [revision, lines] = await Promise.all([
    SpecificationRevision.findByPk(revisionId, { actor, rejectOnEmpty: true }),
    readLines(actor, revisionId),
  ]);
  const { temperatureFrom: from, temperatureTo: to, lowestTestFrequency } = revision;
  return {
    revisionId,
    lines,
    requirements: withPlannedSteps(measuredRequirements(lines), measurementPlan),
    impedance: [revision.impedance1, revision.impedance2],
    ambient: revision.ambient,
    ...(from === null || to === null ? {} : { range: [from, to] as const }),
    ...(lowestTestFrequency === null ? {} : { lowestTestFrequency }),
  };
}

/** Names a setup in the key of stored results: 32 hexadecimal digits. */
export const setupHash = (setup: Setup): string => sha256(canonicalJson(setup)).toString("hex").slice(0, 32);

type Owner = Pick<MeasurementRow, "id" | "buyerOrganisationId" | "supplierOrganisationId">;

/** The stored row of a sweep's score. */
export const resultRow = (owner: Owner, frame: ScoringFrame, setup: Setup, score: SweepScore, now: Date) => ({
  buyerOrganisationId: owner.buyerOrganisationId,
  supplierOrganisationId: owner.supplierOrganisationId,
  measurementId: owner.id,
  revisionId: frame.revisionId,
  coreVersion: CORE_VERSION,
  setupHash: setupHash(setup),
  results: [...score.results],
  verdict: score.verdict,
  createdAt: now,
});

export const storeSweepScore = (
  owner: Owner,
  frame: ScoringFrame,
  setup: Setup,
  score: SweepScore,
  now: Date,
  transaction: Transaction,
): Promise<MeasurementResult> => MeasurementResult.create(resultRow(owner, frame, setup, score, now), { transaction });
