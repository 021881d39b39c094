// A supplier's own results line by line: the worst value with its place, unit and temperature, margin and verdict.
import { Fragment } from "react";
import { LINE_GROUPS } from "~/rf/line-numbers";
import { isMeasured, type SpecificationLine } from "~/rf/line-definition";
import { complies } from "~/rf/verdict";
import type { Verdict as MeasuredVerdict } from "~/rf/index";
import { Cell, GroupRow, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { formatFrequency, formatLevel, formatMargin, formatNumber } from "./format";
import { describeDefinition, requirementUnit } from "./requirement-words";
import { Verdict, VerdictMark, verdictColour, verdictTint, type ShownVerdict } from "./verdict-mark";

/** A line of `readSupplierResults`. */
export interface QuoteResultLine {
  readonly line: SpecificationLine;
  readonly verdict: string;
  readonly value: number | null;
  readonly margin: number | null;
  readonly limit: number | null;
  readonly frequency: number | null;
  readonly unit: string | null;
  readonly temperature: string | null;
  readonly reason: string | null;
  readonly assumed: boolean;
}

interface QuoteResultTableProps {
  lines: readonly QuoteResultLine[];
  decisionRule: "simple" | "guarded";
}

const COLUMNS = 7;

/** Whether every measured line rests on the setup the RFQ assumes. */
export const allAssumed = (lines: readonly QuoteResultLine[]): boolean =>
  lines.every(({ line, assumed }) => assumed || !isMeasured(line.definition));

export function QuoteResultTable({ lines, decisionRule }: QuoteResultTableProps) {
  const groups = LINE_GROUPS.map((group) => ({
    ...group,
    lines: lines.filter(({ line }) => Number.parseInt(line.lineNumber, 10) === group.number),
  }));
  return (
    <Table label="Results by line" rows="two-line">
      <thead>
        <tr>
          <HeadCell className="w-11">Line</HeadCell>
          <HeadCell>Requirement</HeadCell>
          <HeadCell figure className="max-tablet:hidden">
            Limit
          </HeadCell>
          <HeadCell figure>
            Worst value<span className="tablet:hidden">, margin</span>
          </HeadCell>
          <HeadCell className="pl-6 max-tablet:hidden">Unit, temperature</HeadCell>
          <HeadCell figure className="max-tablet:hidden">
            Margin
          </HeadCell>
          <HeadCell>
            <span className="max-tablet:sr-only">Verdict</span>
          </HeadCell>
        </tr>
      </thead>
      <tbody>
        {groups.map((group) =>
          group.lines.length === 0 ? null : (
            <Fragment key={group.number}>
              <GroupRow number={group.number} columns={COLUMNS}>
                {group.title}
              </GroupRow>
              {group.lines.map((result) => (
                <ResultRow
                  key={result.line.lineKey}
                  result={result}
                  decisionRule={decisionRule}
                  saysAssumed={!allAssumed(lines)}
                />
              ))}
            </Fragment>
          ),
        )}
      </tbody>
    </Table>
  );
}

interface ResultRowProps {
  result: QuoteResultLine;
  decisionRule: "simple" | "guarded";
  /** Where every line rests on the assumed setup it is said once, over the table. */
  saysAssumed: boolean;
}

function ResultRow({ result, decisionRule, saysAssumed }: ResultRowProps) {
  const { line, reason } = result;
  const verdict = result.verdict as ShownVerdict;
  const words = describeDefinition(line.definition);
  const isDeclared = !isMeasured(line.definition);
  const lower = [words.band, result.assumed && saysAssumed ? "setup assumed" : ""].filter(Boolean).join(", ");
  const tint = isDeclared ? "" : verdictTint(verdict, complies(verdict as MeasuredVerdict, decisionRule));
  return (
    <Row>
      <RowHead>{line.lineNumber}</RowHead>
      <Cell className="py-1.5">
        {lower === "" ? words.requirement : <TwoLines upper={words.requirement} lower={lower} />}
        <span className="block text-12 tablet:hidden">{words.limit}</span>
        {verdict === "not-covered" && reason !== null ? (
          <span className="block max-w-100 text-12 text-bare">{reason}</span>
        ) : null}
      </Cell>
      <Cell figure className="max-tablet:hidden">
        {words.limit}
      </Cell>
      {isDeclared ? <Declared reason={reason} /> : <Figures result={result} verdict={verdict} tint={tint} />}
      <Cell className={`${tint} whitespace-nowrap max-tablet:w-7`}>
        <span className="max-tablet:hidden">
          <Verdict verdict={verdict} />
        </span>
        <span className="tablet:hidden">
          <VerdictMark verdict={verdict} />
        </span>
      </Cell>
    </Row>
  );
}

/** What was offered, in the columns of the figures. */
function Declared({ reason }: { reason: string | null }) {
  return (
    <>
      <Cell colSpan={3} className="pl-6 text-quiet max-tablet:hidden">
        {reason ?? ""}
      </Cell>
      <Cell className="text-quiet tablet:hidden">{reason ?? ""}</Cell>
    </>
  );
}

function Figures({ result, verdict, tint }: { result: QuoteResultLine; verdict: ShownVerdict; tint: string }) {
  const { value, margin, limit, frequency, unit, temperature, line } = result;
  if (!isMeasured(line.definition)) return null;
  const { unit: symbol, scale } = requirementUnit(line.definition.kind);
  const fails = verdict === "fail" || verdict === "conditional-fail";
  const against = fails && limit !== null ? { failingAgainst: limit * scale } : {};
  const place = frequency === null ? "" : `at ${formatFrequency(frequency)}`;
  const colour = verdict === "pass" ? "" : `font-semibold ${verdictColour(verdict)}`;
  const shownMargin =
    margin === null ? "–" : <span className={colour}>{`${formatMargin(margin * scale)} ${symbol}`}</span>;
  return (
    <>
      <Cell figure className="py-1.5">
        {value === null ? "–" : <TwoLines upper={`${formatLevel(value * scale, against)} ${symbol}`} lower={place} />}
        <span className="block tablet:hidden">{shownMargin}</span>
      </Cell>
      <Cell className="py-1.5 pl-6 max-tablet:hidden">
        {unit === null || temperature === null ? "–" : <TwoLines upper={unit} lower={celsius(Number(temperature))} />}
      </Cell>
      <Cell figure className={`max-tablet:hidden ${tint}`}>
        {shownMargin}
      </Cell>
    </>
  );
}

const celsius = (value: number): string => `${formatNumber(value, Number.isInteger(value) ? 0 : 1)} °C`;
