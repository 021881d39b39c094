// One sweep against a specification: results, verdict and notes. The server and the supplier's browser both run this.
import { mergeSetup } from "./assumed-setup.ts";
import { checkNetwork } from "./check-network.ts";
import type { LotOptions, Note, Requirement, Setup, TwoPort, Verdict } from "./contract.ts";
import { evaluateLot } from "./lot.ts";
import type { StatedDrift } from "./stated-measurement.ts";
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

export interface SweepStanding {
  /** The results to judge the sweep by: those of the lines it covers, of all where it covers none. */
  readonly results: readonly StoredResult[];
  /** The worst of these. */
  readonly verdict: Verdict;
  readonly linesCovered: number;
  readonly lines: number;
}

/** How a sweep stands by itself: a fine sweep of the passband is no worse for what the wide one beside it shows. */
export function standingOfSweep(results: readonly StoredResult[]): SweepStanding {
  const covered = results.filter(({ verdict }) => verdict !== "not-covered");
  const judged = covered.length > 0 ? covered : results;
  const verdict = worstVerdict(judged.map((result) => result.verdict));
  return { results: judged, verdict, linesCovered: covered.length, lines: results.length };
}

/** What is stated of a sweep: its own fields, and the quote's where it has none. A figure's kind stands beside it in both. */
export const statedOf = (quote: Setup, sweep: Setup | null): Setup => ({ ...quote, ...sweep });

/** The setup a sweep is scored with: what was stated of it, completed by what the RFQ assumes. */
export const setupInUse = (stated: Setup | null, assumed: Setup): Setup => mergeSetup(stated ?? {}, assumed).setup;

/** What the reader repaired or doubts, and what the data does not show of the frame's requirements. */
export function sweepNotes(network: TwoPort, frame: EvaluationFrame, setup: Setup): Note[] {
  const { requirements, impedance, lowestTestFrequency } = frame;
  const from = lowestTestFrequency === undefined ? {} : { lowestTestFrequency };
  return [...network.notes, ...checkNetwork(network, { requirements, impedance, setup, ...from })];
}

/** Options of a lot's evaluation that the frame, the RFQ and the quote set. @param drift as the supplier states it */
export function lotOptionsOf(
  frame: EvaluationFrame,
  rfq: { readonly assumedSetup: Setup; readonly unitsOverRange: number },
  drift: StatedDrift | null = null,
): LotOptions {
  return {
    impedance: frame.impedance,
    ambient: frame.ambient,
    assumedSetup: rfq.assumedSetup,
    unitsOverRange: rfq.unitsOverRange,
    ...(frame.range === undefined ? {} : { range: frame.range }),
    ...(frame.lowestTestFrequency === undefined ? {} : { lowestTestFrequency: frame.lowestTestFrequency }),
    ...(drift === null ? {} : driftOptions(drift)),
  };
}

const driftOptions = ({ ppmPerKelvin, either, lossPerKelvin }: StatedDrift): LotOptions => ({
  ppmPerKelvin,
  ...(either === undefined ? {} : { driftEither: either }),
  ...(lossPerKelvin === undefined ? {} : { lossPerKelvin }),
});
