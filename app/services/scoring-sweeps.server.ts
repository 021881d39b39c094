// What measured sweeps are scored against, and the packed results of one sweep by itself.
import type { Transaction } from "sequelize";
import { MeasurementResult, SpecificationRevision, type MeasurementRow, type Rfq } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import { mergeSetup } from "~/rf/assumed-setup";
import {
  CORE_VERSION,
  evaluateLot,
  measuredRequirements,
  storeResult,
  worstVerdict,
  type LotOptions,
  type Requirement,
  type Setup,
  type SpecificationLine,
  type StoredResult,
  type TwoPort,
  type Verdict,
} from "~/rf/index";
import { sha256 } from "./identifiers.server";
import { canonicalJson } from "./specification-release.server";
import { readLines } from "./specification-lines.server";

/** A revision as the evaluation takes it. */
export interface ScoringFrame {
  readonly revisionId: number;
  /** Measured and declared, in their order. */
  readonly lines: readonly SpecificationLine[];
  readonly requirements: readonly Requirement[];
  /** Ohm, port 1 and port 2. */
  readonly impedance: readonly [number, number];
  /** °C. */
  readonly ambient: number;
  /** °C, lower end first; absent where none is given. */
  readonly range?: readonly [number, number];
  /** Hz. */
  readonly lowestTestFrequency?: number;
}

/** Throws where the actor does not see the revision. */
export async function readScoringFrame(actor: QueryActor, revisionId: number): Promise<ScoringFrame> {
  const [revision, lines] = await Promise.all([
    SpecificationRevision.findByPk(revisionId, { actor, rejectOnEmpty: true }),
    readLines(actor, revisionId),
  ]);
  const { temperatureFrom: from, temperatureTo: to, lowestTestFrequency } = revision;
  return {
    revisionId,
    lines,
    requirements: measuredRequirements(lines),
    impedance: [revision.impedance1, revision.impedance2],
    ambient: revision.ambient,
    ...(from === null || to === null ? {} : { range: [from, to] as const }),
    ...(lowestTestFrequency === null ? {} : { lowestTestFrequency }),
  };
}

/** Options of the evaluation that the revision and the RFQ set. */
export function lotOptions(frame: ScoringFrame, rfq: Pick<Rfq, "assumedSetup" | "unitsOverRange">): LotOptions {
  return {
    impedance: frame.impedance,
    ambient: frame.ambient,
    assumedSetup: rfq.assumedSetup,
    unitsOverRange: rfq.unitsOverRange,
    ...(frame.range === undefined ? {} : { range: frame.range }),
    ...(frame.lowestTestFrequency === undefined ? {} : { lowestTestFrequency: frame.lowestTestFrequency }),
  };
}

/** The setup a sweep is scored with: what was stated of it, completed by what the RFQ assumes. */
export const setupInUse = (stated: Setup | null, assumed: Setup): Setup => mergeSetup(stated ?? {}, assumed).setup;

/** Names a setup in the key of stored results: 32 hexadecimal digits. */
export const setupHash = (setup: Setup): string => sha256(canonicalJson(setup)).toString("hex").slice(0, 32);

export interface SweepScore {
  /** One per measured line, `id` being the line key; whatever the temperature, and before any roll-up over units. */
  readonly results: readonly StoredResult[];
  readonly verdict: Verdict;
}

/** Scores one sweep alone. Throws RangeError for a malformed requirement or setup. */
export function scoreSweep(
  network: TwoPort,
  frame: ScoringFrame,
  stated: Setup | null,
  assumedSetup: Setup,
): SweepScore {
  const { impedance, lowestTestFrequency, ambient } = frame;
  const sweeps = [{ id: "", network, setup: stated ?? {} }];
  const rows = evaluateLot([{ unit: "", temperature: ambient, sweeps }], frame.requirements, {
    impedance,
    assumedSetup,
    ...(lowestTestFrequency === undefined ? {} : { lowestTestFrequency }),
  });
  const results = rows.flatMap(({ cells }) => cells.map(({ result }) => result));
  return { results: results.map(storeResult), verdict: worstVerdict(results.map(({ verdict }) => verdict)) };
}

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
