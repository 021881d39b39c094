// The roll-up of one line over all units and temperatures.
import type { Cell, LotOptions, Requirement, Result, Row, Verdict } from "./contract.ts";
import { coversRange, scopeOf } from "./lot-temperature.ts";
import { verdictRank, worstVerdict } from "./verdict.ts";

/** A cell as shown, and the verdict it had before a cap. */
export interface ScoredCell {
  readonly cell: Cell;
  readonly own: Verdict;
}

/** Whether the data is that of the offered part: data of a similar part or of a simulation is not. */
export function isMeasuredBasis({ basis = "measured" }: LotOptions): boolean {
  return basis === "measured";
}

/** Predicted, simulated and similar-part results never exceed a conditional pass. */
export function capped(result: Result): Result {
  return result.verdict === "pass" ? { ...result, verdict: "conditional-pass" } : result;
}

/**
 * The line's verdict: the worst of its scored cells, and not covered where too little was measured, a fail excepted.
 * A prediction can make a line worse by what it predicts, never by being a prediction: a supplier who states a drift
 * stands no worse than one who does not.
 *
 * @param aliases units that count as another one, because their data is the same
 */
export function rollUp(
  requirement: Requirement,
  scored: readonly ScoredCell[],
  options: LotOptions,
  aliases: ReadonlyMap<string, string> = new Map(),
): Row {
  const cells = scored.map(({ cell }) => cell);
  const shortage = shortageOf(requirement, cells, options, aliases);
  const verdicts = scored
    .filter(({ cell }) => cell.scored)
    .map(({ cell, own }) => (cell.predicted && isMeasuredBasis(options) ? own : cell.result.verdict));
  const verdict = worstVerdict(shortage === undefined ? verdicts : [...verdicts, "not-covered"]);
  const worst = worstCell(cells);
  const reason = verdict === "not-covered" ? (shortage ?? cells[worst]?.result.reason) : cells[worst]?.result.reason;
  return { requirementId: requirement.id, cells, verdict, worst, ...(reason === undefined ? {} : { reason }) };
}

/** Index of the scored cell with the worst verdict, of equals the one with the least margin; -1 if none is scored. */
function worstCell(cells: readonly Cell[]): number {
  return cells.reduce((worst, cell, index) => {
    if (!cell.scored) return worst;
    const known = cells[worst];
    if (known === undefined) return index;
    const difference = verdictRank(cell.result.verdict) - verdictRank(known.result.verdict);
    return difference < 0 || (difference === 0 && cell.result.margin < known.result.margin) ? index : worst;
  }, -1);
}

/** Why too little was measured for the line, if so. */
function shortageOf(
  requirement: Requirement,
  cells: readonly Cell[],
  options: LotOptions,
  aliases: ReadonlyMap<string, string>,
): string | undefined {
  const measured = cells.filter(({ predicted, scored }) => scored && !predicted);
  if (scopeOf(requirement, options) === "ambient") {
    return measured.length === 0 ? "There is no measurement at ambient temperature." : undefined;
  }
  if (options.range === undefined) return "The specification gives no temperature range.";
  if (!isMeasuredBasis(options)) return `Data of a ${basisName(options)} does not count over temperature.`;
  const unitOf = (cell: Cell) => aliases.get(cell.unit) ?? cell.unit;
  const units = [...new Set(cells.filter(({ predicted }) => !predicted).map(unitOf))];
  const covering = units.filter((unit) =>
    coversRange(
      measured.filter((cell) => unitOf(cell) === unit).map(({ temperature }) => temperature),
      options,
    ),
  );
  const needed = options.unitsOverRange ?? 1;
  if (covering.length >= needed) return undefined;
  return `${covering.length} of ${units.length} units over temperature, ${needed} needed.`;
}

function basisName({ basis }: LotOptions): string {
  return basis === "simulated" ? "simulation" : "similar part";
}
