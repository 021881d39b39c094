// The requirements of a revision in their groups, alone or with what a quote reached on each line.
import { Fragment } from "react";
import { LINE_GROUPS } from "~/rf/line-numbers";
import { complies } from "~/rf/verdict";
import { Cell, GroupRow, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { Margin } from "./figure";
import { formatFrequency, formatLevel, formatNumber } from "./format";
import type { RequirementLine } from "./requirement-words";
import { VerdictMark, verdictTint, type ShownVerdict } from "./verdict-mark";

/** What was reached on a line; figures in `unit`, as `requirementUnit` gives it. */
export interface LineResult {
  readonly verdict: ShownVerdict;
  /** Positive complies; null or NaN where nothing was reached. */
  readonly margin?: number | null;
  readonly value?: number | null;
  /** Hz, where the worst value lies. */
  readonly frequency?: number | null;
  /** @default "dB" */
  readonly unit?: string;
  /** What the value fails against, so that it never reads as its limit. */
  readonly limit?: number | null;
}

interface RequirementTableProps {
  /** From `requirementLines`. */
  lines: readonly RequirementLine[];
  /** By line key. Columns appear for what the results have: margin and verdict, and the worst value where one is given. */
  results?: Readonly<Record<string, LineResult>>;
  /** Tints the margins that do not comply. */
  decisionRule?: "simple" | "guarded";
  /** The line whose wall is selected. */
  selectedKey?: string;
  /** @default "Requirements" */
  label?: string;
}

/** On phones the margin stands under the limit and the worst value is left to the line's own page. */
export function RequirementTable(props: RequirementTableProps) {
  const { lines, results, label = "Requirements" } = props;
  const hasValues = results !== undefined && Object.values(results).some((result) => isFigure(result.value));
  const columns = 3 + (hasValues ? 1 : 0) + (results ? 2 : 0);
  const groups = LINE_GROUPS.map((group) => ({
    ...group,
    lines: lines.filter(({ lineNumber }) => Number.parseInt(lineNumber, 10) === group.number),
  }));
  return (
    <Table label={label} rows="two-line">
      <thead>
        <tr>
          <HeadCell className="w-11">Line</HeadCell>
          <HeadCell>Requirement</HeadCell>
          <HeadCell figure>
            Limit
            {results ? <span className="tablet:hidden">, margin</span> : null}
          </HeadCell>
          {hasValues ? (
            <HeadCell figure className="max-tablet:hidden">
              Worst value
            </HeadCell>
          ) : null}
          {results ? (
            <>
              <HeadCell figure className="max-tablet:hidden">
                Margin
              </HeadCell>
              <HeadCell className="w-7">
                <span className="sr-only">Verdict</span>
              </HeadCell>
            </>
          ) : null}
        </tr>
      </thead>
      <tbody>
        {groups.map((group) =>
          group.lines.length === 0 ? null : (
            <Fragment key={group.number}>
              <GroupRow number={group.number} columns={columns}>
                {group.title}
              </GroupRow>
              {group.lines.map((line) => (
                <LineRow key={line.lineKey} {...props} line={line} hasValues={hasValues} />
              ))}
            </Fragment>
          ),
        )}
      </tbody>
    </Table>
  );
}

type LineRowProps = RequirementTableProps & { line: RequirementLine; hasValues: boolean };

function LineRow({ line, results, decisionRule, selectedKey, hasValues }: LineRowProps) {
  const result = results?.[line.lineKey];
  return (
    <Row selected={line.lineKey === selectedKey}>
      <RowHead>{line.lineNumber}</RowHead>
      <Cell className="py-1.5">
        {line.band === "" ? line.requirement : <TwoLines upper={line.requirement} lower={line.band} />}
      </Cell>
      <Cell className="py-1.5 text-right">
        {line.limit}
        {result ? (
          <span className="block tablet:hidden">
            <ResultMargin result={result} />
          </span>
        ) : null}
      </Cell>
      {hasValues ? <WorstCell result={result} /> : null}
      {results ? (
        <>
          <Cell figure className={`max-tablet:hidden ${tint(result, decisionRule)}`}>
            {result ? <ResultMargin result={result} /> : null}
          </Cell>
          <Cell className={`w-7 text-right ${tint(result, decisionRule)}`}>
            {result ? <VerdictMark verdict={result.verdict} /> : null}
          </Cell>
        </>
      ) : null}
    </Row>
  );
}

const isFigure = (value: number | null | undefined): value is number =>
  value !== null && value !== undefined && !Number.isNaN(value);

function tint(result: LineResult | undefined, decisionRule: "simple" | "guarded" | undefined): string {
  if (!result || !decisionRule || result.verdict === "declared" || result.verdict === "exception") return "";
  return verdictTint(result.verdict, complies(result.verdict, decisionRule));
}

function ResultMargin({ result }: { result: LineResult }) {
  const { verdict, margin, unit = "dB" } = result;
  if (verdict === "declared" || verdict === "exception") return <span className="text-quiet">{verdict}</span>;
  if (!isFigure(margin)) return <span className="text-quiet">{verdict === "not-covered" ? "not covered" : "–"}</span>;
  return <Margin value={margin} unit={unit} verdict={verdict} />;
}

function WorstCell({ result }: { result: LineResult | undefined }) {
  if (!isFigure(result?.value)) return <Cell figure className="max-tablet:hidden" />;
  const { value, frequency, unit = "dB", limit, verdict } = result;
  const fails = verdict === "fail" || verdict === "conditional-fail";
  const figure = isFigure(limit) && fails ? formatLevel(value, { failingAgainst: limit }) : formatNumber(value, 2);
  const place = isFigure(frequency) && Number.isFinite(frequency) ? `at ${formatFrequency(frequency)}` : "";
  return (
    <Cell figure className="max-tablet:hidden">
      <TwoLines upper={`${figure} ${unit}`} lower={place} />
    </Cell>
  );
}
