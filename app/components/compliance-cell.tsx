// The details of one cell: value and interval against the wall of the limit, and what they mean.
import type { ReactNode } from "react";
import { DecisionStrip } from "~/charts/decision-strip";
import { valueWithInterval } from "~/charts/words";
import type { Cell } from "~/rf/index";
import {
  celsiusWords,
  decidedElsewhere,
  isConditional,
  limitSense,
  marginWithInterval,
  shownResult,
  VERDICT_SENTENCES,
  type ComplianceLine,
} from "./compliance-words";
import { formatFrequency, formatLevel } from "./format";
import { Section } from "./page";
import { describeDefinition } from "./requirement-words";
import { Verdict } from "./verdict-mark";

interface CellDetailsProps {
  line: ComplianceLine;
  cell: Cell;
  lowestTestFrequency: number | null;
  className?: string;
}

export function ComplianceCell({ line, cell, lowestTestFrequency, className = "" }: CellDetailsProps) {
  const title = `Line ${line.lineNumber}, unit ${cell.unit}, ${celsiusWords(cell.temperature)}`;
  const { result } = cell;
  return (
    <Section id="cell" title={title} className={className}>
      <div className="border border-edge bg-leaf px-4 py-4">
        <Strip line={line} cell={cell} label={title} />
        <dl className="mt-3 grid grid-cols-[auto_minmax(0,1fr)] gap-x-5 gap-y-1.5 text-13">
          {rows(line, cell, lowestTestFrequency).map(([label, value]) => (
            <Fact key={label} label={label}>
              {value}
            </Fact>
          ))}
          <Fact label="Verdict">
            <Verdict verdict={result.verdict} />
          </Fact>
        </dl>
        <p className="mt-3 text-13">{VERDICT_SENTENCES[result.verdict]}</p>
        {result.reason === undefined ? null : (
          <p className={`mt-1.5 text-13 ${isConditional(result.verdict) ? "font-semibold" : ""}`}>{result.reason}</p>
        )}
        {line.verdict !== result.verdict && line.verdict === "not-covered" ? (
          <p className="mt-1.5 text-13">
            The line as a whole is not covered{line.reason === null ? "." : `: ${line.reason}`}
          </p>
        ) : null}
        {caveats(cell).map((sentence) => (
          <p key={sentence} className="mt-1.5 text-12 text-quiet">
            {sentence}
          </p>
        ))}
      </div>
    </Section>
  );
}

function Fact({ label, children }: { label: string; children: ReactNode }) {
  return (
    <>
      <dt className="text-quiet">{label}</dt>
      <dd className="tabular-nums">{children}</dd>
    </>
  );
}

/** None for a centre frequency, whose limit is a distance and not a level, and where no value was reached. */
function Strip({ line, cell, label }: { line: ComplianceLine; cell: Cell; label: string }) {
  const shown = shownResult(line.definition, cell);
  if (line.definition.kind === "centre-frequency" || !Number.isFinite(shown.value)) return null;
  return (
    <DecisionStrip {...shown} sense={limitSense(shown, line.definition)} verdict={cell.result.verdict} label={label} />
  );
}

function rows(line: ComplianceLine, cell: Cell, lowestTestFrequency: number | null): [string, ReactNode][] {
  const { result } = cell;
  const shown = shownResult(line.definition, cell);
  const words = describeDefinition(line.definition, lowestTestFrequency ?? undefined);
  const hasPlace = Number.isFinite(result.frequency);
  const place = hasPlace ? ` at ${formatFrequency(result.frequency)}` : "";
  const bound = result.bound === undefined ? "" : `${result.bound === "at-least" ? "at least" : "at most"} `;
  const found: [string, ReactNode][] = [
    ["Requirement", words.requirement],
    ["Value", Number.isNaN(shown.value) ? "nothing was reached" : `${bound}${valueWithInterval(shown)}${place}`],
    ["Limit", `${words.limit}${words.band === "" ? "" : `, ${words.band}`}`],
  ];
  if (isSloped(line) && Number.isFinite(shown.limit))
    found.push(["Limit there", `${formatLevel(shown.limit)} ${shown.unit}`]);
  if (!Number.isNaN(shown.margin)) found.push(["Margin", marginWithInterval(shown)]);
  const deciding = decidedElsewhere(result);
  if (deciding !== null) found.push(["Decided at", formatFrequency(deciding)]);
  return found;
}

/** A limit given by points has a level of its own at the reported frequency. */
function isSloped({ definition }: ComplianceLine): boolean {
  const limits: unknown[] = ["min" in definition && definition.min, "max" in definition && definition.max];
  return limits.some((limit) => typeof limit === "object");
}

function caveats(cell: Cell): string[] {
  return [
    ...(cell.scored ? [] : ["Shown, not scored: the temperature lies outside what this line is asked at."]),
    ...(cell.predicted ? ["Predicted from ambient data and the stated drift, not measured."] : []),
    ...(cell.result.assumed ? ["The interval rests on the RFQ's assumed setup where the supplier states none."] : []),
  ];
}
