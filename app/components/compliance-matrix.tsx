// The compliance matrix: requirements against units and temperatures, each cell a link to its details.
import { Link } from "react-router";
import { complies, isMeasured, type Cell as ScoredCell } from "~/rf/index";
import {
  cellAt,
  cellFigure,
  cellInterval,
  cellSearch,
  celsiusWords,
  decidedElsewhere,
  shownResult,
  type ComplianceColumns,
  type ComplianceLine,
  type ShownResult,
} from "./compliance-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { Margin } from "./figure";
import { formatFrequency } from "./format";
import { describeDefinition } from "./requirement-words";
import { Verdict, VerdictMark, verdictColour, verdictTint, verdictWord, type ShownVerdict } from "./verdict-mark";

interface MatrixProps {
  lines: readonly ComplianceLine[];
  units: readonly ComplianceColumns[];
  rule: "simple" | "guarded";
  lowestTestFrequency: number | null;
  selected: { readonly lineKey: string; readonly unit: string; readonly celsius: number } | null;
}

/** More columns than this leave no room for intervals: they stand in the details of a cell, and in its name. */
const MOST_ROOMY = 9;

const countColumns = (units: readonly ComplianceColumns[]): number =>
  units.reduce((count, { temperatures }) => count + temperatures.length, 0);

export function ComplianceMatrix(props: MatrixProps) {
  const { lines, units } = props;
  const isDense = countColumns(units) > MOST_ROOMY;
  return (
    <Table label="Compliance matrix" rows="two-line" scroll="inside">
      <thead>
        <tr>
          <td className="sticky top-0 left-0 z-3 h-6 border-b-0 bg-sheet" />
          <td colSpan={2} className="h-6 border-b-0 max-tablet:hidden" />
          {units.map(({ unit, temperatures }) => (
            <HeadCell
              key={unit}
              scope="colgroup"
              colSpan={temperatures.length}
              parted
              className="h-6 border-b-0 pb-0 font-semibold text-ink"
            >
              Unit {unit}
            </HeadCell>
          ))}
          <td className="h-6 border-b-0 data-table-parted" />
        </tr>
        <tr>
          <HeadCell className="top-6 w-11 max-tablet:w-36">
            Line<span className="tablet:hidden">, limit</span>
          </HeadCell>
          <HeadCell className="top-6 max-tablet:hidden">Requirement</HeadCell>
          <HeadCell className="top-6 max-tablet:hidden">Limit</HeadCell>
          {units.flatMap(({ unit, temperatures }) =>
            temperatures.map(({ celsius, predicted }, place) => (
              <HeadCell
                key={`${unit} ${celsius}`}
                figure
                parted={place === 0}
                className={`top-6 pr-2 ${isDense ? "min-w-13 pl-0!" : "min-w-17"}`}
              >
                {celsiusWords(celsius)}
                {predicted ? <span className="block">predicted</span> : null}
              </HeadCell>
            )),
          )}
          <HeadCell parted className="top-6">
            Worst margin
          </HeadCell>
        </tr>
      </thead>
      <tbody>
        {lines.map((line) => (
          <LineRow key={line.lineKey} line={line} isDense={isDense} {...props} />
        ))}
      </tbody>
    </Table>
  );
}

interface LineRowProps extends MatrixProps {
  line: ComplianceLine;
  isDense: boolean;
}

function LineRow({ line, units, rule, lowestTestFrequency, selected, isDense }: LineRowProps) {
  const words = describeDefinition(line.definition, lowestTestFrequency ?? undefined);
  const columns = countColumns(units);
  return (
    <Row>
      <RowHead className="max-tablet:max-w-36 max-tablet:min-w-36 max-tablet:py-1 max-tablet:pr-2!">
        {line.lineNumber}
        <span className="font-normal tablet:hidden"> {words.requirement}</span>
        <span className="block text-12 font-normal text-quiet tablet:hidden">{words.limit}</span>
      </RowHead>
      <Cell className={`max-w-64 py-1 max-tablet:hidden ${isDense ? "min-w-36" : "min-w-44"}`}>
        {words.band === "" ? words.requirement : <TwoLines upper={words.requirement} lower={words.band} />}
      </Cell>
      <Cell className="whitespace-nowrap max-tablet:hidden">{words.limit}</Cell>
      {isMeasured(line.definition) ? (
        units.flatMap(({ unit, temperatures }) =>
          temperatures.map(({ celsius }, place) => (
            <ResultCell
              key={`${unit} ${celsius}`}
              line={line}
              place={{ unit, celsius }}
              parted={place === 0}
              rule={rule}
              isDense={isDense}
              isSelected={selected?.lineKey === line.lineKey && selected.unit === unit && selected.celsius === celsius}
            />
          )),
        )
      ) : (
        <Cell parted colSpan={Math.max(1, columns)} className="max-w-0">
          <DeclaredWords line={line} />
        </Cell>
      )}
      <WorstCell line={line} rule={rule} />
    </Row>
  );
}

interface ResultCellProps {
  line: ComplianceLine;
  place: { readonly unit: string; readonly celsius: number };
  parted: boolean;
  rule: "simple" | "guarded";
  isDense: boolean;
  isSelected: boolean;
}

function ResultCell({ line, place, parted, rule, isDense, isSelected }: ResultCellProps) {
  const cell = cellAt(line, place.unit, place.celsius);
  if (!cell) return <Cell parted={parted} />;
  const { verdict } = cell.result;
  const shown = shownResult(line.definition, cell);
  const tint = cell.scored ? verdictTint(verdict, complies(verdict, rule)) : "";
  const colour = cell.scored
    ? verdict === "pass"
      ? "text-ink"
      : `font-semibold ${verdictColour(verdict)}`
    : "text-quiet";
  return (
    <Cell figure parted={parted} className={`p-0! ${tint}`}>
      <Link
        to={cellSearch(line.lineNumber, place.unit, place.celsius)}
        preventScrollReset
        replace
        aria-current={isSelected ? "true" : undefined}
        className={`flex min-h-11 flex-col justify-center ${isDense ? "px-1" : "px-2"} py-1 leading-4 no-underline hover:bg-signal/8 aria-[current]:shadow-none aria-[current]:outline-2 aria-[current]:-outline-offset-2 aria-[current]:outline-signal max-tablet:min-h-13 ${colour} ${cell.predicted ? "border border-dashed border-edge" : ""}`}
      >
        <CellFigures cell={cell} shown={shown} isDense={isDense} />
      </Link>
    </Cell>
  );
}

interface CellFiguresProps {
  cell: ScoredCell;
  shown: ShownResult;
  isDense: boolean;
}

/** The value over its interval, and where it was decided if that is elsewhere. */
function CellFigures({ cell: { result, scored, predicted }, shown, isDense }: CellFiguresProps) {
  const interval = cellInterval(shown, result.assumed === true);
  const deciding = decidedElsewhere(result);
  const bound = result.bound === undefined ? "" : result.bound === "at-least" ? "at least " : "at most ";
  return (
    <>
      <span className="flex items-center justify-between gap-1.5">
        <VerdictMark verdict={result.verdict} size={12} />
        <span>
          {bound}
          {cellFigure(shown)}
        </span>
      </span>
      {interval === null ? null : (
        <span className={isDense ? "sr-only" : "text-12 font-normal text-quiet"}>{interval}</span>
      )}
      {deciding === null ? null : (
        <span className="text-12 font-normal text-quiet">
          decided at <span className="block">{formatFrequency(deciding)}</span>
        </span>
      )}
      {scored ? null : <span className="sr-only">not scored</span>}
      {predicted ? <span className="sr-only">predicted</span> : null}
    </>
  );
}

function DeclaredWords({ line }: { line: ComplianceLine }) {
  const text = line.declaration?.text ?? line.reason;
  const words: Partial<Record<ShownVerdict, string>> = {
    declared: `complies, declared by the supplier${text === null ? "" : `: ${text}`}`,
    exception: `exception${text === null ? "" : `: ${text}`}; not accepted`,
  };
  return (
    <span
      className={`flex items-center gap-2 max-tablet:sticky max-tablet:left-38 max-tablet:max-w-48 ${line.verdict === "declared" ? "" : verdictColour(line.verdict)}`}
    >
      <VerdictMark verdict={line.verdict} size={12} silent />
      <span className="min-w-0">{words[line.verdict] ?? "not answered"}</span>
    </span>
  );
}

function WorstCell({ line, rule }: { line: ComplianceLine; rule: "simple" | "guarded" }) {
  const { verdict } = line;
  const worst = line.unit === null || line.temperature === null ? undefined : cellAt(line, line.unit, line.temperature);
  const isDeclared = verdict === "declared" || verdict === "exception";
  const tint = isDeclared ? "" : verdictTint(verdict, complies(verdict, rule));
  if (!worst || Number.isNaN(worst.result.margin) || isDeclared)
    return (
      <Cell parted className={`whitespace-nowrap ${tint}`}>
        <Verdict verdict={verdict} />
      </Cell>
    );
  const { margin, unit } = shownResult(line.definition, worst);
  return (
    <Cell parted className={`whitespace-nowrap ${tint}`}>
      <span className="inline-flex items-center gap-2">
        <VerdictMark verdict={verdict} />
        <Margin value={margin} unit={unit} verdict={verdict} />
      </span>
    </Cell>
  );
}

const SHOWN: readonly ShownVerdict[] = [
  "pass",
  "conditional-pass",
  "conditional-fail",
  "fail",
  "not-covered",
  "declared",
];

/** The marks of the matrix with their words. */
export function ComplianceLegend({ units }: Pick<MatrixProps, "units">) {
  const hasPredicted = units.some(({ temperatures }) => temperatures.some(({ predicted }) => predicted));
  return (
    <ul className="flex flex-wrap items-center gap-x-5 gap-y-1 text-12" aria-label="Marks">
      {SHOWN.map((verdict) => (
        <li key={verdict} className={`inline-flex items-center gap-1.75 ${verdictColour(verdict)}`}>
          <VerdictMark verdict={verdict} size={12} silent />
          {verdictWord(verdict)}
        </li>
      ))}
      <li>tinted: does not comply</li>
      {countColumns(units) > MOST_ROOMY ? null : <li>( ): from the assumed setup</li>}
      {hasPredicted ? <li className="border border-dashed border-edge px-1.5">predicted</li> : null}
    </ul>
  );
}
