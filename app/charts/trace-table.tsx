// The curves of a figure as a table: frequency and level of each reported curve.
import { memo } from "react";
import { formatLevel, formatNumber } from "~/components/format";
import type { Band } from "~/rf/index";
import { frequencyUnit } from "./frequency-range";
import { readingName, readingsAt } from "./readout";
import type { TraceSeries } from "./types";

/** Rows at most; a sweep has thousands of points. */
const MOST_ROWS = 101;

interface TraceTableProps {
  readonly traces: readonly TraceSeries[];
  /** Hz shown in the figure. */
  readonly window: Band;
}

/** Evenly spaced frequencies of the window, and what the reported curves show there. */
export const TraceTable = memo(function TraceTable({ traces, window }: TraceTableProps) {
  const unit = frequencyUnit(window);
  const reported = traces.filter((trace) => trace.emphasis === "worst");
  const rows = tableFrequencies(reported, window);
  return (
    <div
      className="mt-3 max-h-[420px] overflow-auto border border-rule bg-leaf px-4"
      tabIndex={0}
      role="region"
      aria-label="Measured values"
    >
      <table className="w-full text-13 tabular-nums">
        <caption className="py-2 text-left text-12 text-quiet">
          {rows.length} points of the part shown, linear in dB between samples
        </caption>
        <thead>
          <tr className="text-12 text-quiet">
            <th scope="col" className="sticky top-0 bg-leaf py-2 text-left font-normal">
              Frequency, {unit.name}
            </th>
            {reported.map((trace) => (
              <th key={trace.id} scope="col" className="sticky top-0 bg-leaf py-2 text-right font-normal">
                {readingName(trace, reported)}, dB
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((frequency) => (
            <tr key={frequency} className="border-t border-rule">
              <th scope="row" className="py-1 text-left font-normal">
                {formatNumber(frequency / unit.hertz, unit.name === "GHz" ? 4 : 3)}
              </th>
              {readingsAt(reported, frequency).map((reading) => (
                <td key={reading.id} className="py-1 text-right">
                  {formatLevel(reading.level)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
});

/** The samples themselves where they are few, else an even raster over the window. */
function tableFrequencies(traces: readonly TraceSeries[], [from, to]: Band): number[] {
  const samples = [...new Set(traces.flatMap((trace) => trace.frequency))]
    .filter((frequency) => frequency >= from && frequency <= to)
    .sort((one, other) => one - other);
  if (samples.length <= MOST_ROWS) return samples;
  return Array.from({ length: MOST_ROWS }, (_, index) => from + ((to - from) * index) / (MOST_ROWS - 1));
}
