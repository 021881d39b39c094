// A figure with its unit, an uncertainty where it has one, and an instant: written whole, never broken over lines.
import type { RfqState } from "~/workflow/rfq";
import { formatDateTime, formatDue, formatLevel, formatMargin, formatNumber, formatRelative } from "./format";
import { verdictColour, type ShownVerdict } from "./verdict-mark";

interface FigureProps {
  /** Already written, by a function of `format.ts`. */
  value: string;
  unit?: string | undefined;
  /** Colours the figure as the verdict does; passing figures stay ink. */
  verdict?: ShownVerdict | undefined;
  className?: string;
}

export function Figure({ value, unit, verdict, className = "" }: FigureProps) {
  const colour = verdict === undefined || verdict === "pass" ? "" : `font-semibold ${verdictColour(verdict)}`;
  return (
    <span className={`whitespace-nowrap tabular-nums ${colour} ${className}`}>
      {value}
      {unit === undefined || value === "–" ? null : ` ${unit}`}
    </span>
  );
}

interface MeasuredProps {
  value: number;
  /** Expanded uncertainty, k = 2, in the value's unit. */
  uncertainty?: number;
  unit?: string;
  verdict?: ShownVerdict;
  decimals?: number;
  className?: string;
}

/** A margin, signed: "−0.06 ± 0.05 dB". */
export function Margin({ value, uncertainty, decimals = 2, ...rest }: MeasuredProps) {
  return <Figure {...rest} value={withUncertainty(formatMargin(value, { decimals }), uncertainty, decimals)} />;
}

/** A measured value; a failing one (verdict fail or conditional fail) needs its limit to be written well. */
export function Level({ value, limit, uncertainty, decimals = 2, ...rest }: MeasuredProps & { limit?: number }) {
  const fails = rest.verdict === "fail" || rest.verdict === "conditional-fail";
  const text = formatLevel(value, { decimals, ...(fails && limit !== undefined ? { failingAgainst: limit } : {}) });
  return <Figure {...rest} value={withUncertainty(text, uncertainty, decimals)} />;
}

const withUncertainty = (text: string, uncertainty: number | undefined, decimals: number): string =>
  uncertainty === undefined || text === "–" ? text : `${text} ± ${formatNumber(uncertainty, decimals)}`;

interface InstantProps {
  /** ISO 8601, UTC. */
  at: string;
  /** IANA name of the zone it is told in. */
  zone: string;
  /** The server's clock; adds "in 3 days". */
  now?: string;
}

export function Instant({ at, zone, now }: InstantProps) {
  return (
    <time dateTime={at}>
      {formatDateTime(at, zone)}
      {now === undefined ? null : <span className="text-quiet"> ({formatRelative(at, now)})</span>}
    </time>
  );
}

const dueWords = (at: string, now: string, state: RfqState): string =>
  state === "cancelled" ? "cancelled" : formatDue(at, now, state === "open" || state === "draft");

/** An RFQ's due date with "in 3 days", or with why that no longer counts. */
export function DueDate({ at, zone, now, state }: Required<InstantProps> & { state: RfqState }) {
  return (
    <time dateTime={at}>
      {formatDateTime(at, zone)}
      <span className="text-quiet"> ({dueWords(at, now, state)})</span>
    </time>
  );
}
