// The words of a chart: what a worst point says on its plate and in the list, and what a drawing shows, in one sentence.
import { formatBand, formatFrequency, formatLevel, formatMargin, formatNumber } from "~/components/format";
import { frequencyUnit } from "./frequency-range";
import { limitExtent } from "./limit-outline";
import { decimalsOf } from "./level-scale";
import type { DrawingProps, Wall, WorstPoint } from "./types";

/** A width in the unit that keeps it short: "60 MHz", "2.5 MHz". */
export function formatWidth(width: number): string {
  const unit = frequencyUnit([width, width]);
  return `${Number((width / unit.hertz).toPrecision(6))} ${unit.name}`;
}

/** Digits after the point of a value: two, one from 10 dB on and from 100 of other units on. */
function valueDecimals(value: number, unit: string): number {
  return Math.abs(value) < (unit === "dB" ? 10 : 100) ? 2 : 1;
}

/** "2.1 fails by 0.25 dB", "2.2 passes conditionally, +0.06 dB". */
export function verdictPhrase(point: WorstPoint): string {
  const signed = `${formatMargin(point.margin)} ${point.unit}`;
  switch (point.verdict) {
    case "fail":
      return `${point.lineNumber} fails by ${formatMargin(-Math.abs(point.margin)).slice(1)} ${point.unit}`;
    case "conditional-fail":
      return `${point.lineNumber} fails conditionally, ${signed}`;
    case "conditional-pass":
      return `${point.lineNumber} passes conditionally, ${signed}`;
    case "pass":
      return `${point.lineNumber} passes, ${signed}`;
    case "not-covered":
      return `${point.lineNumber} is not covered`;
  }
}

/** "1.01 ± 0.05 dB at 1.9800 GHz"; an uneven interval in brackets. */
export function valuePhrase(point: WorstPoint): string {
  if (Number.isNaN(point.value)) return "no value";
  const place = Number.isFinite(point.frequency) ? ` at ${formatFrequency(point.frequency)}` : "";
  return `${valueWithInterval(point)}${place}`;
}

type Valued = Pick<WorstPoint, "value" | "interval" | "unit" | "limit"> & { readonly margin?: number };

/** A value with its interval: "1.01 ± 0.05 dB", "58.2 dB (57.1 to 59.6)"; a failing one never reads as its limit. */
export function valueWithInterval({ value, interval, unit, limit, margin }: Valued): string {
  const least = valueDecimals(value, unit);
  const fails = limit !== undefined && margin !== undefined && margin < 0;
  const figure = formatLevel(value, { decimals: least, ...(fails ? { failingAgainst: limit } : {}) });
  const decimals = figure.split(".")[1]?.length ?? 0;
  if (!Number.isFinite(value) || !interval?.every(Number.isFinite)) return `${figure} ${unit}`;
  const below = (value - interval[0]).toFixed(decimals);
  const above = (interval[1] - value).toFixed(decimals);
  if (Number(below) === 0 && Number(above) === 0) return `${figure} ${unit}`;
  if (below === above) return `${figure} ± ${above} ${unit}`;
  return `${figure} ${unit} (${formatNumber(interval[0], decimals)} to ${formatNumber(interval[1], decimals)})`;
}

/** What stands under a drawing about its scale. */
export function scaleWords(breakLevel: number | undefined): string {
  const stretched = breakLevel === undefined ? "" : `; passband part stretched, 0 to ${breakLevel} dB`;
  return `Losses in positive dB, growing downwards${stretched}`;
}

/** What a drawing shows, for those who cannot see it: walls, curves, worst points. */
export function describeDrawing({ walls, traces = [], worstPoints = [] }: Partial<DrawingProps>): string {
  const parts = [
    walls && walls.length > 0 ? `Limits: ${walls.map(describeWall).join("; ")}.` : "No limits.",
    traces.length > 0
      ? describeTraces(
          traces.filter((trace) => trace.emphasis === "worst"),
          traces.length,
        )
      : "",
    ...worstPoints.map((point) => `Line ${verdictPhrase(point)}, ${valuePhrase(point)}.`),
  ];
  return parts.filter((part) => part !== "").join(" ");
}

function describeTraces(named: readonly { readonly label: string }[], count: number): string {
  const names = named.map((trace) => trace.label).join(", ");
  const others = count - named.length;
  const rest = others > 0 ? `${names === "" ? "" : " and "}${others} more` : "";
  return `Curves: ${names}${rest}.`;
}

function describeWall(wall: Wall): string {
  const [least, greatest] = limitExtent(wall.limit, wall.band);
  const word = wall.panel === "match" ? "return loss" : wall.side === "floor" ? "loss" : "rejection";
  const level = (value: number) => formatNumber(value, decimalsOf(value));
  const limit = least === greatest ? level(least) : `${level(least)} to ${level(greatest)}`;
  const sense = wall.side === "floor" ? "at most" : "at least";
  const lines = `${wall.lineNumbers.length > 1 ? "lines" : "line"} ${wall.lineNumbers.join(", ")}`;
  return `${lines} ${word} ${sense} ${limit} dB, ${formatBand(wall.band)}`;
}
