// One sweep against a specification: results, verdict and notes. The server and the supplier's browser both run this.
import { mergeSetup } from "./assumed-setup.ts";
import { checkNetwork } from "./check-network.ts";
import type { LotOptions, Note, Requirement, Setup, TwoPort, Verdict } from "./contract.ts";
import { evaluateLot } from "./lot.ts";
import { storeResult, type StoredResult } from "./stored-result.ts";
import { worstVerdict } from "./verdict.ts";

/** What the evaluation takes of a revision and of the RFQ's measurement plan. Plain data: it can be posted to a worker. */
export interface EvaluationFrame {
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

export interface SweepScore {
  /** One per measured line, `id` being the line key; whatever the temperature, and before any roll-up over units. */
  readonly results: readonly StoredResult[];
  readonly verdict: Verdict;
}

/** Scores one sweep alone. Throws RangeError for a malformed requirement or setup. */
export function scoreSweep(
  network: TwoPort,
  frame: EvaluationFrame,
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

/** The setup a sweep is scored with: what was stated of it, completed by what the RFQ assumes. */
export const setupInUse = (stated: Setup | null, assumed: Setup): Setup => mergeSetup(stated ?? {}, assumed).setup;

/** What the reader repaired or doubts, and what the data does not show of the frame's requirements. */
export const sweepNotes = (network: TwoPort, { requirements, impedance }: EvaluationFrame, setup: Setup): Note[] => [
  ...network.notes,
  ...checkNetwork(network, { requirements, impedance, setup }),
];

/** Options of a lot's evaluation that the frame and the RFQ set. */
export function lotOptionsOf(
  frame: EvaluationFrame,
  rfq: { readonly assumedSetup: Setup; readonly unitsOverRange: number },
): LotOptions {
  return {
    impedance: frame.impedance,
    ambient: frame.ambient,
    assumedSetup: rfq.assumedSetup,
    unitsOverRange: rfq.unitsOverRange,
    ...(frame.range === undefined ? {} : { range: frame.range }),
    ...(frame.lowestTestFrequency === undefined ? {} : { lowestTestFrequency: frame.lowestTestFrequency }),
  };
}
