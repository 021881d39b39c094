// Files checked against a specification: each by itself, and all together as a quote of them would score. Keeps their networks.
import { creditOrder } from "~/commerce/full-credit";
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedLot, CheckedSweep, CheckRefusal } from "./check-messages";
import {
  evaluateLot,
  parseTouchstone,
  readNumber,
  storeCell,
  TouchstoneError,
  verdictRank,
  worstVerdict,
  type LotOptions,
  type Measurement,
  type Row,
  type StoredResult,
  type TwoPort,
} from "~/rf/index";
import { checkLot } from "~/rf/lot-notes";
import { coversRange } from "~/rf/lot-temperature";
import { identicalUnits } from "~/rf/same-data";
import { lotOptionsOf, scoreSweep, setupInUse, standingOfSweep, sweepNotes } from "~/rf/score-sweep";
import { readSweepLabels } from "~/rf/sweep-labels";
import { refusalSentence } from "~/rf/touchstone-refusal";

export type CheckOutcome =
  { readonly ok: true; readonly checked: CheckedSweep } | { readonly ok: false; readonly refusal: CheckRefusal };

interface HeldSweep {
  readonly network: TwoPort;
  readonly serial: string | null;
  readonly temperature: number | null;
}

export class Checker {
  readonly #frame: CheckFrame;
  readonly #held = new Map<number, HeldSweep>();

  constructor(frame: CheckFrame) {
    this.#frame = frame;
  }

  /** Reads a file and scores it by itself with the setup in use; a file that was read is held for the lot. */
  check(id: number, fileName: string, bytes: Uint8Array): CheckOutcome {
    const network = readNetwork(fileName, bytes);
    if ("sentence" in network) return { ok: false, refusal: network };
    const { statedSetup, assumedSetup } = this.#frame;
    const labels = readSweepLabels(fileName, network.comments);
    this.#held.set(id, { network, ...labels });
    const { results, verdict } = scoreSweep(network, this.#frame, statedSetup, assumedSetup);
    const points = network.frequency.length;
    const checked: CheckedSweep = {
      ...labels,
      points,
      sweep: [network.frequency[0] ?? 0, network.frequency[points - 1] ?? 0],
      notes: sweepNotes(network, this.#frame, setupInUse(statedSetup, assumedSetup)),
      results,
      verdict,
      worstLineKey: worstLineOf(this.#frame, standingOfSweep(results).results),
    };
    return { ok: true, checked };
  }

  drop(id: number): void {
    this.#held.delete(id);
  }

  /** Scores the held files of these ids together. Those without unit or temperature cannot be submitted, and are left out. */
  lot(ids: readonly number[]): CheckedLot {
    const placed = ids.flatMap((id) => placedSweep(id, this.#held.get(id)));
    const { requirements, impedance, assumedSetup, statedSetup: setup } = this.#frame;
    const options = lotOptions(this.#frame);
    const measurements = placed.map(({ id, unit, temperature, network }): Measurement => {
      return { unit, temperature, sweeps: [{ id: String(id), network, setup }] };
    });
    const rows = evaluateLot(measurements, requirements, options);
    return {
      ids: placed.map(({ id }) => id),
      lines: rows.map(lineOf),
      verdict: worstVerdict(rows.map(({ verdict }) => verdict)),
      notes: checkLot(measurements, { impedance, assumedSetup }),
      ...countUnits(placed, options),
    };
  }
}

interface PlacedSweep {
  readonly id: number;
  readonly unit: string;
  readonly temperature: number;
  readonly network: TwoPort;
}

function placedSweep(id: number, held: HeldSweep | undefined): PlacedSweep[] {
  if (!held || held.serial === null || held.temperature === null) return [];
  return [{ id, unit: held.serial, temperature: held.temperature, network: held.network }];
}

function countUnits(sweeps: readonly PlacedSweep[], options: LotOptions): Pick<CheckedLot, "units" | "unitsOverRange"> {
  const aliases = identicalUnits(sweeps);
  const temperatures = new Map<string, number[]>();
  for (const { unit, temperature } of sweeps) {
    const counted = aliases.get(unit) ?? unit;
    temperatures.set(counted, [...(temperatures.get(counted) ?? []), temperature]);
  }
  const covering = [...temperatures.values()].filter((taken) => coversRange(taken, options)).length;
  return { units: temperatures.size, unitsOverRange: options.range === undefined ? null : covering };
}

function readNetwork(fileName: string, bytes: Uint8Array): TwoPort | CheckRefusal {
  try {
    return parseTouchstone(bytes, fileName);
  } catch (error) {
    if (!(error instanceof TouchstoneError)) throw error;
    const { code, line, column } = error;
    return { code, line, ...(column === undefined ? {} : { column }), sentence: refusalSentence(error) };
  }
}

const lotOptions = (frame: CheckFrame): LotOptions => ({
  ...lotOptionsOf(frame, frame, frame.statedDrift),
  basis: frame.basis,
});

const lineOf = ({ requirementId, verdict, reason, cells, worst }: Row) => ({
  lineKey: requirementId,
  verdict,
  reason: reason ?? null,
  cells: cells.map(storeCell),
  worst,
});

/** The worst verdict; among equals the least margin in parts of full credit, as lists on the server choose it. */
function worstLineOf({ lines }: CheckFrame, results: readonly StoredResult[]): string | null {
  const kinds = new Map(lines.map(({ lineKey, definition }) => [lineKey, definition.kind]));
  const placed = results.map((result) => ({ ...result, order: orderOf(result, kinds.get(result.id) ?? "") }));
  const worst = placed.reduce<(typeof placed)[number] | null>((known, result) => {
    const difference = known === null ? -1 : verdictRank(result.verdict) - verdictRank(known.verdict);
    return difference < 0 || (difference === 0 && known !== null && result.order < known.order) ? result : known;
  }, null);
  return worst?.id ?? null;
}

function orderOf(result: StoredResult, kind: string): number {
  const limit = readNumber(result.limit);
  return creditOrder(readNumber(result.margin), Number.isFinite(limit) ? { kind, limit } : { kind });
}
