// Points and limits of a measurement as its figures take them, and the words that stand under these.
import type { Panel, WorstPoint } from "~/charts/types";
import { isMeasured, verdictRank, type Requirement } from "~/rf/index";
import { celsiusWords, shownResult, type ComplianceLine } from "./compliance-words";
import type { CurvesPlace, PlacedLine } from "./curves-chosen";
import { describeDefinition, numberedRequirements } from "./requirement-words";

export const placeWords = ({ unit, celsius }: CurvesPlace): string => `Unit ${unit}, ${celsiusWords(celsius)}`;

const PANELS: Partial<Record<Requirement["kind"], Panel>> = {
  "insertion-loss": "transmission",
  rejection: "transmission",
  "reverse-isolation": "transmission",
  "return-loss": "match",
};

/** The reported point of a line at a measurement; its figures are in the line's unit. */
export function reportedPoint({ line, cell }: PlacedLine): WorstPoint {
  const { definition } = line;
  const shown = shownResult(definition, cell);
  const panel = isMeasured(definition) ? PANELS[definition.kind] : undefined;
  return {
    lineNumber: line.lineNumber,
    verdict: cell.result.verdict,
    frequency: cell.result.frequency,
    value: shown.value,
    margin: shown.margin,
    unit: shown.unit,
    interval: shown.interval,
    limit: shown.limit,
    limitText: describeDefinition(definition).limit,
    ...(panel ? { panel } : {}),
  };
}

/** The selected line's point first, then those of the lines that do not simply pass, the worst verdict first. */
export function reportedPoints(lines: readonly PlacedLine[], selected: PlacedLine | undefined): WorstPoint[] {
  const rank = ({ cell }: PlacedLine) => verdictRank(cell.result.verdict);
  const others = lines
    .filter(({ line, cell }) => line !== selected?.line && cell.scored && cell.result.verdict !== "pass")
    .sort((one, other) => rank(one) - rank(other));
  return [...(selected ? [selected] : []), ...others].map(reportedPoint);
}

/** What is asked at this measurement: a line for ambient alone is no limit at another temperature. */
export const scoredLines = (lines: readonly PlacedLine[]): ComplianceLine[] =>
  lines.filter(({ cell }) => cell.scored).map(({ line }) => line);

/** "Lines 2.1 and 5.1 are asked at ambient alone and not drawn here."; empty where all are drawn. */
export function unscoredWords(lines: readonly PlacedLine[]): string {
  const left = lines.filter(({ cell }) => !cell.scored).map(({ line }) => line.lineNumber);
  if (left.length === 0) return "";
  return `${left.length === 1 ? "Line" : "Lines"} ${left.join(", ")} ${left.length === 1 ? "is" : "are"} not asked at this temperature and not drawn`;
}

/** The requirements asked at this measurement, with the numbers their walls carry. */
export const scoredRequirements = (lines: readonly PlacedLine[]) => numberedRequirements(scoredLines(lines));
