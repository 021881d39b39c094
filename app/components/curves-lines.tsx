// The lines at the measurement looked at, each with value and margin there; a press looks at the curves for it.
import { Link } from "react-router";
import { complies } from "~/rf/index";
import { curvesSearch, type CurvesQuery } from "~/forms/curves";
import { cellFigure, shownResult } from "./compliance-words";
import type { PlacedLine } from "./curves-chosen";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { Figure, Margin } from "./figure";
import { describeDefinition } from "./requirement-words";
import { VerdictMark, verdictTint, verdictWord } from "./verdict-mark";

interface LinesProps {
  lines: readonly PlacedLine[];
  selectedKey: string | undefined;
  query: CurvesQuery;
  rule: "simple" | "guarded";
}

export function CurvesLines({ lines, selectedKey, query, rule }: LinesProps) {
  return (
    <Table label="Lines of this measurement" rows="two-line">
      <thead>
        <tr>
          <HeadCell className="w-10">Line</HeadCell>
          <HeadCell>Requirement</HeadCell>
          <HeadCell figure>Value</HeadCell>
          <HeadCell figure>Margin</HeadCell>
        </tr>
      </thead>
      <tbody>
        {lines.map(({ line, cell }) => {
          const shown = shownResult(line.definition, cell);
          const words = describeDefinition(line.definition);
          const { verdict } = cell.result;
          const isSelected = line.lineKey === selectedKey;
          return (
            <Row key={line.lineKey} selected={isSelected}>
              <RowHead>
                <Link
                  to={curvesSearch({ ...query, line: line.lineNumber })}
                  preventScrollReset
                  aria-current={isSelected ? "true" : undefined}
                  className="block py-2.5"
                >
                  {line.lineNumber}
                </Link>
              </RowHead>
              <Cell>
                <TwoLines upper={words.requirement} lower={words.limit} />
              </Cell>
              <Cell figure>{cellFigure(shown)}</Cell>
              <Cell figure className={verdictTint(verdict, !cell.scored || complies(verdict, rule))}>
                <span className="inline-flex items-center gap-1.5 pr-1">
                  {cell.scored ? <VerdictMark verdict={verdict} size={12} silent /> : null}
                  <span className="sr-only">{cell.scored ? verdictWord(verdict) : "not scored here"}</span>
                  {Number.isNaN(shown.margin) ? (
                    <Figure value="–" />
                  ) : (
                    <Margin value={shown.margin} unit={shown.unit} verdict={cell.scored ? verdict : "pass"} />
                  )}
                </span>
              </Cell>
            </Row>
          );
        })}
      </tbody>
    </Table>
  );
}
