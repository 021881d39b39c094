// The readout: what each reported curve shows at a frequency.
import { formatFrequency, formatLevel } from "~/components/format";
import { levelOn } from "./limit-outline";
import { tracePoints } from "./layout";
import type { TraceSeries } from "./types";

export interface Reading {
  readonly id: string;
  /** "S21"; with the curve's label where several curves show that parameter. */
  readonly name: string;
  /** dB; NaN where the curve does not reach. */
  readonly level: number;
}

/** Levels of the reported curves at a frequency in Hz, linear in dB between samples. */
export function readingsAt(traces: readonly TraceSeries[], frequency: number): Reading[] {
  return traces
    .filter((trace) => trace.emphasis === "worst")
    .map((trace) => {
      const first = trace.frequency[0] ?? Infinity;
      const last = trace.frequency[trace.frequency.length - 1] ?? -Infinity;
      const reached = frequency >= first && frequency <= last;
      const level = reached ? levelOn(tracePoints(trace), frequency) : Number.NaN;
      return { id: trace.id, name: readingName(trace, traces), level };
    });
}

/** What a curve is called among others: its parameter, and its label where that does not tell it from the rest. */
export function readingName(trace: TraceSeries, traces: readonly TraceSeries[]): string {
  const parameter = trace.parameter.toUpperCase();
  const alike = traces.filter((other) => other.emphasis === "worst" && other.parameter === trace.parameter);
  return alike.length > 1 && trace.label !== parameter ? `${trace.label} ${parameter}` : parameter;
}

/** Of the sweeps of one measurement the first that has data there. */
function oneOfEach(readings: readonly Reading[]): Reading[] {
  return [...new Set(readings.map(({ name }) => name))].flatMap((name) => {
    const alike = readings.filter((reading) => reading.name === name);
    return alike.find(({ level }) => !Number.isNaN(level)) ?? alike.slice(0, 1);
  });
}

/** "1.9800 GHz: S21 1.20 dB, S11 16.4 dB". */
export function readoutWords(traces: readonly TraceSeries[], frequency: number): string {
  const readings = oneOfEach(readingsAt(traces, frequency)).map(({ name, level }) =>
    Number.isNaN(level) ? `${name} no data` : `${name} ${formatLevel(level)} dB`,
  );
  return readings.length > 0 ? `${formatFrequency(frequency)}: ${readings.join(", ")}` : formatFrequency(frequency);
}
