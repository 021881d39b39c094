// What the curves of a value plot show at a frequency, for readout and table.
import { formatFrequency } from "~/components/format";
import { levelOn, type Point } from "./limit-outline";
import type { ValuePanel, ValueSeries } from "./value-plot";

/** A column of a table and a part of a readout: one curve, or one end of an uncertainty band. */
export interface ValueColumn {
  readonly id: string;
  /** "|Z|, far port open" */
  readonly name: string;
  /** NaN where no curve of that name reaches. */
  readonly at: (frequency: number) => number;
}

/** The columns of a plot: curves by name, pieces of one name as one, then the ends of the bands. */
export function valueColumns(panels: readonly ValuePanel[]): ValueColumn[] {
  return panels.flatMap(({ id, series, bands = [], columnSuffix = "" }) => [
    ...[...new Set(series.map(({ label }) => label))].map((label) => ({
      id: `${id} ${label}`,
      name: `${label}${columnSuffix}`,
      at: readerOf(series.filter((one) => one.label === label)),
    })),
    ...(bands.length === 0
      ? []
      : [
          { id: `${id} lower`, name: "Lower end", at: readerOf(bands.map((band) => ({ ...band, value: band.lower }))) },
          { id: `${id} upper`, name: "Upper end", at: readerOf(bands.map((band) => ({ ...band, value: band.upper }))) },
        ]),
  ]);
}

/** Linear between samples; where pieces overlap the least counts. */
function readerOf(pieces: readonly Pick<ValueSeries, "frequency" | "value">[]): ValueColumn["at"] {
  const lines = pieces.map(({ frequency, value }) =>
    frequency.map((hz, index): Point => [hz, value[index] ?? Number.NaN]),
  );
  return (frequency) => {
    const reached = lines.filter(
      (line) => (line[0]?.[0] ?? Infinity) <= frequency && (line.at(-1)?.[0] ?? -Infinity) >= frequency,
    );
    const values = reached.map((line) => levelOn(line, frequency)).filter((value) => !Number.isNaN(value));
    return values.length === 0 ? NaN : Math.min(...values);
  };
}

/** "1.9800 GHz: margin 0.24 dB, lower end 0.13 dB, …" */
export function valueReadout(
  panels: readonly ValuePanel[],
  frequency: number,
  unit: string,
  format: (value: number) => string,
): string {
  const parts = valueColumns(panels).map(({ name, at }) => {
    const value = at(frequency);
    if (Number.isNaN(value)) return `${name} no data`;
    return `${name} ${format(value)}${Number.isFinite(value) ? ` ${unit}` : ""}`;
  });
  return `${formatFrequency(frequency)}: ${parts.join(", ")}`;
}
