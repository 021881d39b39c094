// The curves of a figure as a table: frequency and level of each reported curve.
import { memo } from "react";
import { formatLevel, formatNumber } from "~/components/format";
import type { Band } from "~/rf/index";
import { FigureTable } from "./figure-table";
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
    <FigureTable
      label="Measured values"
      caption={`${rows.length} points of the part shown, linear in dB between samples`}
      heads={[`Frequency, ${unit.name}`, ...reported.map((trace) => `${readingName(trace, reported)}, dB`)]}
      rows={rows.map((frequency) => [
        formatNumber(frequency / unit.hertz, unit.name === "GHz" ? 4 : 3),
        ...readingsAt(reported, frequency).map(({ level }) => formatLevel(level)),
      ])}
    />
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
