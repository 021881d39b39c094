// The compliance matrix: requirements against units and temperatures, each cell a link to its details.
import { Link } from "react-router";
import { complies, isMeasured } from "~/rf/index";
import {
  cellAt,
  cellFigure,
  cellSearch,
  celsiusWords,
  shownResult,
  type ComplianceColumns,
  type ComplianceLine,
} from "./compliance-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { Margin } from "./figure";
import { describeDefinition } from "./requirement-words";
import { Verdict, VerdictMark, verdictColour, verdictTint, verdictWord, type ShownVerdict } from "./verdict-mark";

interface MatrixProps {
  lines: readonly ComplianceLine[];
  units: readonly ComplianceColumns[];
  rule: "simple" | "guarded";
  lowestTestFrequency: number | null;
  selected: { readonly lineKey: string; readonly unit: string; readonly celsius: number } | null;
}

export function ComplianceMatrix(props: MatrixProps) {
  const { lines, units } = props;
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
              <HeadCell key={`${unit} ${celsius}`} figure parted={place === 0} className="top-6 min-w-17 pr-2">
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
          <LineRow key={line.lineKey} line={line} {...props} />
        ))}
      </tbody>
    </Table>
  );
}

function LineRow({ line, units, rule, lowestTestFrequency, selected }: MatrixProps & { line: ComplianceLine }) {
  const words = describeDefinition(line.definition, lowestTestFrequency ?? undefined);
  const columns = units.reduce((count, { temperatures }) => count + temperatures.length, 0);
  return (
    <Row>
      <RowHead className="max-tablet:max-w-36 max-tablet:min-w-36 max-tablet:py-1 max-tablet:pr-2!">
        {line.lineNumber}
        <span className="font-normal tablet:hidden"> {words.requirement}</span>
        <span className="block text-12 font-normal text-quiet tablet:hidden">{words.limit}</span>
      </RowHead>
      <Cell className="max-w-64 min-w-44 py-1 max-tablet:hidden">
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
  isSelected: boolean;
}

function ResultCell({ line, place, parted, rule, isSelected }: ResultCellProps) {
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
        className={`flex h-11 items-center justify-between gap-1.5 pr-2 pl-2 no-underline hover:bg-signal/8 aria-[current]:shadow-none aria-[current]:outline-2 aria-[current]:-outline-offset-2 aria-[current]:outline-signal max-tablet:h-13 ${colour}`}
      >
        <VerdictMark verdict={verdict} size={12} />
        <span>{cellFigure(shown)}</span>
        {cell.scored ? null : <span className="sr-only">not scored</span>}
      </Link>
    </Cell>
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
export function ComplianceLegend() {
  return (
    <ul className="flex flex-wrap items-center gap-x-5 gap-y-1 text-12" aria-label="Marks">
      {SHOWN.map((verdict) => (
        <li key={verdict} className={`inline-flex items-center gap-1.75 ${verdictColour(verdict)}`}>
          <VerdictMark verdict={verdict} size={12} silent />
          {verdictWord(verdict)}
        </li>
      ))}
      <li>tinted: does not comply</li>
    </ul>
  );
}
