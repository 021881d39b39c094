// The evidence grid: units against temperatures, what was asked of each and what came, and beneath it what is missing.
import type { Evidence, EvidenceCell, EvidenceColumn, EvidenceRow, TemperatureRole } from "~/rf/evidence";
import { celsiusWords } from "./compliance-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { VerdictMark } from "./verdict-mark";

interface EvidenceGridProps {
  evidence: Evidence;
  /** Names the table. @default "Evidence asked and delivered" */
  label?: string;
  className?: string;
}

export function EvidenceGrid({ evidence, label = "Evidence asked and delivered", className = "" }: EvidenceGridProps) {
  const { columns, rows, missing } = evidence;
  return (
    <div className={className}>
      <Table label={label} rows="two-line" scroll="inside" className="w-auto">
        <thead>
          <tr>
            <HeadCell className="min-w-44 max-tablet:min-w-32">Unit</HeadCell>
            {columns.map((column) => (
              <HeadCell key={column.celsius} parted className="min-w-40 max-tablet:min-w-28">
                <span className="text-13 font-semibold text-ink tabular-nums">{celsiusWords(column.celsius)}</span>
                <span className="block">{columnWords(column)}</span>
              </HeadCell>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row, place) => (
            <Row key={row.unit ?? `absent ${place}`}>
              <RowHead>
                <UnitWords row={row} place={place + 1} of={rows.length} />
              </RowHead>
              {row.cells.map((cell, at) => (
                <Cell key={columns[at]?.celsius} parted className="whitespace-nowrap">
                  <CellWords cell={cell} />
                </Cell>
              ))}
            </Row>
          ))}
        </tbody>
      </Table>
      <Missing sentences={missing} />
    </div>
  );
}

const ROLE_WORDS: Record<TemperatureRole, string> = {
  ambient: "ambient",
  "low-end": "lower end",
  "high-end": "upper end",
  plan: "asked besides",
};

const columnWords = ({ roles }: EvidenceColumn): string =>
  roles.length === 0 ? "not asked" : roles.map((role) => ROLE_WORDS[role]).join(", ");

function UnitWords({ row: { unit, copies, overRange }, place, of }: { row: EvidenceRow; place: number; of: number }) {
  if (unit === null)
    return <TwoLines upper={<span className="text-bare">not delivered</span>} lower={`unit ${place} of ${of}`} />;
  const lower = copies.length > 0 ? `same data as ${copies.join(", ")}` : overRange ? "over temperature" : "ambient";
  return <TwoLines upper={unit} lower={lower} />;
}

/** A filled mark and a bare ring mean here what they mean of a line: all that is asked is there, or some of it is not. */
function CellWords({ cell }: { cell: EvidenceCell }) {
  const { state, sweeps } = cell;
  if (state === "not-asked") return <span className="text-quiet">not asked</span>;
  if (state === "extra") return <span className="text-quiet">{sweepsWords(sweeps.length)}, not asked</span>;
  const isThere = state === "delivered";
  return (
    <span className={`inline-flex items-center gap-1.75 ${isThere ? "" : "text-bare"}`}>
      <VerdictMark verdict={isThere ? "pass" : "not-covered"} size={12} silent />
      {sweeps.length === 0 ? "missing" : sweepsWords(sweeps.length)}
      {isThere ? <span className="sr-only">, delivered</span> : null}
      {state === "partly" ? ", in part" : null}
    </span>
  );
}

const sweepsWords = (count: number): string => `${count} ${count === 1 ? "sweep" : "sweeps"}`;

function Missing({ sentences }: { sentences: readonly string[] }) {
  if (sentences.length === 0) return <p className="mt-3 text-13 text-quiet">All that was asked is there.</p>;
  return (
    <ul aria-label="Missing" className="mt-3 flex max-w-180 flex-col gap-1 text-13">
      {sentences.map((sentence) => (
        <li key={sentence} className="flex items-start gap-2 text-bare">
          <span className="flex h-5 items-center">
            <VerdictMark verdict="not-covered" size={12} silent />
          </span>
          <span>{sentence}</span>
        </li>
      ))}
    </ul>
  );
}
