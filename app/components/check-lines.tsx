// All lines of one checked file: value with its uncertainty, margin, place and verdict.
import { complies } from "~/rf/verdict";
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedSweep } from "~/workers/check-messages";
import { lineFigures } from "./check-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { describeDefinition } from "./requirement-words";
import type { SpecificationLine } from "~/rf/line-definition";
import type { StoredResult } from "~/rf/index";
import { Verdict, VerdictMark, verdictColour, verdictTint } from "./verdict-mark";

interface CheckLinesProps {
  id: string;
  fileName: string;
  checked: CheckedSweep;
  frame: CheckFrame;
}

export function CheckLines({ id, fileName, checked, frame }: CheckLinesProps) {
  return (
    <div id={id} className="pt-2 pb-4 tablet:pl-7">
      <Table label={`Lines of ${fileName}`} rows="two-line">
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
            <HeadCell figure className="max-tablet:hidden">
              Margin
            </HeadCell>
            <HeadCell className="tablet:pl-6">
              <span className="max-tablet:sr-only">Verdict</span>
            </HeadCell>
          </tr>
        </thead>
        <tbody>
          {frame.lines.map((line) => {
            const result = checked.results.find((one) => one.id === line.lineKey);
            return result ? <LineRow key={line.lineKey} line={line} result={result} frame={frame} /> : null;
          })}
        </tbody>
      </Table>
    </div>
  );
}

function LineRow({ line, result, frame }: { line: SpecificationLine; result: StoredResult; frame: CheckFrame }) {
  const { verdict, reason } = result;
  const words = describeDefinition(line.definition, frame.lowestTestFrequency);
  const { value, margin, place } = lineFigures(line, result);
  const tint = verdictTint(verdict, complies(verdict, frame.decisionRule));
  const colour = verdict === "pass" ? "" : `font-semibold ${verdictColour(verdict)}`;
  return (
    <Row>
      <RowHead>{line.lineNumber}</RowHead>
      <Cell className="py-1.5">
        {words.band === "" ? words.requirement : <TwoLines upper={words.requirement} lower={words.band} />}
        <span className="block text-12 tablet:hidden">{words.limit}</span>
        {verdict === "pass" || reason === undefined ? null : (
          <span className={`block max-w-110 text-12 ${verdict === "not-covered" ? "text-bare" : "text-quiet"}`}>
            {reason}
          </span>
        )}
      </Cell>
      <Cell figure className="max-tablet:hidden">
        {words.limit}
      </Cell>
      <Cell figure className="py-1.5">
        <TwoLines upper={value} lower={place} />
        <span className={`block tablet:hidden ${colour}`}>{margin}</span>
      </Cell>
      <Cell figure className="max-tablet:hidden">
        <span className={colour}>{margin}</span>
      </Cell>
      <Cell className={`whitespace-nowrap max-tablet:w-7 tablet:pl-6 ${tint}`}>
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
