// What would settle each conditional verdict: a reading, a noise floor or a match, beside the figures it is about.
import { Link } from "react-router";
import { valueWithInterval } from "~/charts/words";
import {
  cellAt,
  cellSearch,
  celsiusWords,
  decidedElsewhere,
  isConditional,
  shownResult,
  type ComplianceLine,
} from "./compliance-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { formatFrequency } from "./format";
import { Section } from "./page";
import { describeDefinition } from "./requirement-words";
import { Verdict } from "./verdict-mark";

interface SettlingProps {
  lines: readonly ComplianceLine[];
  rule: "simple" | "guarded";
  lowestTestFrequency: number | null;
}

/** The reported cell of each line whose verdict is conditional; nothing where there is none. */
export function ComplianceSettling({ lines, rule, lowestTestFrequency }: SettlingProps) {
  const open = lines.flatMap((line) => {
    const cell =
      isConditional(line.verdict) && line.unit !== null && line.temperature !== null
        ? cellAt(line, line.unit, line.temperature)
        : undefined;
    return cell ? [{ line, cell }] : [];
  });
  if (open.length === 0) return null;
  return (
    <Section title="What would settle the conditional verdicts" note={RULES[rule]}>
      <Table label="What would settle the conditional verdicts" rows="two-line" stacks>
        <thead>
          <tr>
            <HeadCell>Line</HeadCell>
            <HeadCell>Requirement</HeadCell>
            <HeadCell>Reading</HeadCell>
            <HeadCell>Verdict</HeadCell>
            <HeadCell>Settled by</HeadCell>
          </tr>
        </thead>
        <tbody>
          {open.map(({ line, cell }) => {
            const words = describeDefinition(line.definition, lowestTestFrequency ?? undefined);
            const deciding = decidedElsewhere(cell.result) ?? cell.result.frequency;
            const place = Number.isFinite(deciding) ? ` at ${formatFrequency(deciding)}` : "";
            return (
              <Row key={line.lineKey}>
                <RowHead>{line.lineNumber}</RowHead>
                <Cell className="py-1.5 max-tablet:order-2 max-tablet:col-span-2">
                  <TwoLines
                    upper={words.requirement}
                    lower={`${words.limit}${words.band === "" ? "" : `, ${words.band}`}`}
                  />
                </Cell>
                <Cell className="py-1.5 tabular-nums max-tablet:order-3 max-tablet:col-span-2">
                  <TwoLines
                    upper={`${valueWithInterval(shownResult(line.definition, cell))}${place}`}
                    lower={
                      <Link to={cellSearch(line.lineNumber, cell.unit, cell.temperature)} preventScrollReset replace>
                        unit {cell.unit}, {celsiusWords(cell.temperature)}
                        {cell.predicted ? ", predicted" : ""}
                      </Link>
                    }
                  />
                </Cell>
                <Cell className="whitespace-nowrap max-tablet:order-1">
                  <Verdict verdict={cell.result.verdict} />
                </Cell>
                <Cell className="max-w-96 py-1.5 max-tablet:order-4 max-tablet:col-span-2">{settledBy(cell)}</Cell>
              </Row>
            );
          })}
        </tbody>
      </Table>
    </Section>
  );
}

const RULES: Record<SettlingProps["rule"], string> = {
  simple: "Under simple acceptance a conditional pass complies, a conditional fail does not.",
  guarded: "Under guarded acceptance neither complies.",
};

/** A capped verdict has nothing to settle by a better reading: it takes a measurement of the part. */
function settledBy({ predicted, result: { reason } }: { predicted: boolean; result: { reason?: string } }): string {
  if (predicted) return "It takes a measurement at this temperature to settle it.";
  return reason ?? "It takes a measurement of the quoted part to settle it.";
}
