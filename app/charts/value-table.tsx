// The curves of a value plot as a table: frequency and value of each.
import { memo } from "react";
import { formatNumber } from "~/components/format";
import type { Band } from "~/rf/index";
import { frequencyUnit } from "./frequency-range";
import { FigureTable } from "./figure-table";
import type { ValuePanel } from "./value-plot";
import { valueColumns } from "./value-reading";

/** Rows at most; a sweep has thousands of points. */
const MOST_ROWS = 101;

interface ValueTableProps {
  readonly panels: readonly ValuePanel[];
  /** Hz shown in the figure. */
  readonly window: Band;
  readonly unit: string;
  /** A value without its unit. */
  readonly format: (value: number) => string;
}

export const ValueTable = memo(function ValueTable({ panels, window, unit, format }: ValueTableProps) {
  const frequency = frequencyUnit(window);
  const columns = valueColumns(panels);
  const rows = tableFrequencies(panels, window);
  return (
    <FigureTable
      caption={`${rows.length} points of the part shown, linear between samples`}
      heads={[`Frequency, ${frequency.name}`, ...columns.map(({ name }) => `${name}, ${unit}`)]}
      rows={rows.map((hz) => [
        formatNumber(hz / frequency.hertz, frequency.name === "GHz" ? 4 : 3),
        ...columns.map(({ at }) => format(at(hz))),
      ])}
    />
  );
});

/** The samples themselves where they are few, else an even raster over the window. */
function tableFrequencies(panels: readonly ValuePanel[], [from, to]: Band): number[] {
  const samples = [...new Set(panels.flatMap(({ series }) => series.flatMap(({ frequency }) => frequency)))]
    .filter((hz) => hz >= from && hz <= to)
    .sort((one, other) => one - other);
  if (samples.length <= MOST_ROWS) return samples;
  const [first, last] = [samples[0] ?? from, samples.at(-1) ?? to];
  return Array.from({ length: MOST_ROWS }, (_, index) => first + ((last - first) * index) / (MOST_ROWS - 1));
}
