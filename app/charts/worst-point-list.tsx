// Worst points as a list under the figure: mark, what it says, value and limit.
import { VerdictMark, verdictColour } from "~/components/verdict-mark";
import type { WorstPoint } from "./types";
import { valuePhrase, verdictPhrase } from "./words";

/** A figure is not parted from its unit at a line's end. */
const withUnitKept = (text: string | undefined) => (text ?? "").replace(/(\d) (°C|dB|ns|GHz|MHz|kHz)/g, "$1\u00a0$2");

/** The points in their order; nothing where there are none. */
export function WorstPointList({ points, className = "" }: { points: readonly WorstPoint[]; className?: string }) {
  if (points.length === 0) return null;
  return (
    <ul className={`m-0 list-none p-0 text-13 ${className}`}>
      {points.map((point) => (
        <li
          key={`${point.lineNumber} ${point.label ?? ""} ${point.frequency}`}
          className="flex gap-3 border-b border-rule py-2"
        >
          <VerdictMark verdict={point.verdict} silent />
          <div>
            <p className={`font-semibold ${verdictColour(point.verdict)}`}>{verdictPhrase(point)}</p>
            <p>{[valuePhrase(point), point.limitText, point.label].filter(Boolean).map(withUnitKept).join(", ")}</p>
          </div>
        </li>
      ))}
    </ul>
  );
}
