// The rows that scoring stores of a version: each line rolled up, and the summary that lists and the comparison read.
import type { QuoteDeclaration, Rfq } from "~/db/models";
import {
  complies,
  storeCell,
  verdictRank,
  worstVerdict,
  type Row,
  type SpecificationLine,
  type TwoPort,
  type Verdict,
} from "~/rf/index";
import { isMeasured } from "~/rf/line-definition";
import { coversRange } from "~/rf/lot-temperature";
import { identicalUnits } from "~/rf/same-data";
import type { ScoringFrame } from "./scoring-sweeps.server";
import { standingOf, worstStanding, type LineStanding } from "./worst-line.server";

export interface LineColumns {
  readonly lineKey: string;
  readonly verdict: Verdict | "declared" | "exception";
  readonly value: number | null;
  readonly margin: number | null;
  readonly creditedMargin: number | null;
  readonly frequency: number | null;
  readonly unit: string | null;
  readonly temperature: string | null;
  readonly cells: ReturnType<typeof storeCell>[];
  readonly reason: string | null;
  /** Of a measured line. */
  readonly standing: LineStanding | null;
}

/** Measured lines, then declared ones. */
export const lineColumns = (
  frame: ScoringFrame,
  rows: readonly Row[],
  declarations: readonly QuoteDeclaration[],
): LineColumns[] => [...measuredLines(frame, rows), ...declaredLines(frame, declarations)];

const finite = (value: number | undefined): number | null =>
  value !== undefined && Number.isFinite(value) ? value : null;

function measuredLines(frame: ScoringFrame, rows: readonly Row[]): LineColumns[] {
  const lines = new Map(frame.lines.map((line) => [line.lineKey, line]));
  return rows.map((row) => {
    const worst = row.cells[row.worst];
    const cells = row.cells.map(storeCell);
    const line = lines.get(row.requirementId) as SpecificationLine;
    const standing = standingOf(line, row.verdict, cells[row.worst]?.result);
    return {
      lineKey: row.requirementId,
      verdict: row.verdict,
      value: finite(worst?.result.value),
      margin: standing.margin,
      creditedMargin: standing.creditedMargin,
      frequency: finite(worst?.result.frequency),
      unit: worst?.unit ?? null,
      temperature: worst === undefined ? null : worst.temperature.toFixed(1),
      cells,
      reason: row.reason ?? null,
      standing,
    };
  });
}

const BARE = {
  value: null,
  margin: null,
  creditedMargin: null,
  frequency: null,
  unit: null,
  temperature: null,
  standing: null,
} as const;

function declaredLines(frame: ScoringFrame, declarations: readonly QuoteDeclaration[]): LineColumns[] {
  const answers = new Map(declarations.map((declaration) => [declaration.lineKey, declaration]));
  return frame.lines
    .filter(({ definition }) => !isMeasured(definition))
    .map(({ lineKey }) => {
      const answer = answers.get(lineKey);
      if (!answer) return { ...BARE, lineKey, verdict: "not-covered", cells: [], reason: "Not answered." };
      const verdict = answer.answer === "exception" ? "exception" : "declared";
      return { ...BARE, lineKey, verdict, cells: [], reason: answer.text };
    });
}

/** A sweep as the summary counts it. */
export interface CountedSweep {
  readonly unit: string;
  /** °C. */
  readonly temperature: number;
  readonly network: TwoPort;
}

/**
 * `verdict`, `worstLineKey` and `worstMargin` speak of the measured lines: the worst verdict, and among lines that have it
 * the least credited margin. `worstCreditedMargin` is the least over all measured lines, which ranking goes by. `conforming`
 * takes the declared lines in too: an exception nobody accepted counts as fail. Units whose data is the same to the bit
 * count as one.
 */
export function summarise(
  { range, ambient }: Pick<ScoringFrame, "range" | "ambient">,
  rule: Rfq["decisionRule"],
  sweeps: readonly CountedSweep[],
  results: readonly LineColumns[],
) {
  const standings = results.flatMap(({ standing }) => standing ?? []);
  const worst = worstStanding(standings);
  const credits = standings.flatMap(({ creditedMargin }) => creditedMargin ?? []);
  const aliases = identicalUnits(sweeps);
  const countedUnit = ({ unit }: CountedSweep) => aliases.get(unit) ?? unit;
  const units = [...new Set(sweeps.map(countedUnit))];
  const covering = units.filter((unit) => {
    const taken = sweeps.filter((sweep) => countedUnit(sweep) === unit).map(({ temperature }) => temperature);
    return range !== undefined && coversRange(taken, { range, ambient });
  });
  const conforming = results.every(
    ({ verdict }) => verdict === "declared" || (isScoredVerdict(verdict) && complies(verdict, rule)),
  );
  return {
    verdict: worstVerdict(standings.map(({ verdict }) => verdict)),
    conforming,
    worstLineKey: worst?.lineKey ?? null,
    worstMargin: worst?.margin ?? null,
    worstCreditedMargin: credits.length === 0 ? null : Math.min(...credits),
    units: units.length,
    unitsOverRange: covering.length,
    temperatures: new Set(sweeps.map(({ temperature }) => temperature)).size,
  };
}

const isScoredVerdict = (verdict: string): verdict is Verdict => verdictRank(verdict as Verdict) >= 0;

export type Summary = ReturnType<typeof summarise>;
