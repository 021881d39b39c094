// The axis of a value that grows upwards and may be negative: round ends, ticks in steps of 1, 2 and 5.
import { scaleLinear } from "@visx/scale";
import { formatNumber } from "~/components/format";
import { decimalsOf, LEAST_LEVEL_SPACING, type LevelScale } from "./level-scale";
import { stripTicks } from "./strip-scale";

/** px beyond the panel at which a value that would lie further out is drawn. */
const BEYOND = 40;

/**
 * A scale from the least to the most value, widened to whole ticks, the most on top.
 *
 * @param extent in the unit of the axis; finite
 * @param range px of the upper and lower end
 */
export function createValueScale(
  [least, most]: readonly [number, number],
  range: readonly [number, number],
): LevelScale {
  const [top, end] = range;
  const count = Math.max(2, Math.floor((end - top) / LEAST_LEVEL_SPACING) - 1);
  const inner = stripTicks(least, most > least ? most : least + 1, count);
  const step = inner.length > 1 ? (inner[1] ?? 1) - (inner[0] ?? 0) : (most > least ? most - least : 1) / 2;
  const from = clean(Math.floor(least / step + 1e-9) * step);
  const to = clean(Math.max(Math.ceil(most / step - 1e-9) * step, from + step));
  const scale = scaleLinear<number>({ domain: [to, from], range: [top, end] });
  const ticks = stripTicks(from, to, Math.round((to - from) / step));
  const decimals = Math.max(0, ...ticks.map(decimalsOf));
  return {
    scale,
    toPixel: (value) => {
      if (Math.abs(value) === Infinity) return value > 0 ? top - BEYOND : end + BEYOND;
      return Math.min(Math.max(scale(value), top - BEYOND), end + BEYOND);
    },
    toLevel: (pixel) => scale.invert(pixel),
    bottom: from,
    ticks: ticks.map((level) => ({ level, label: formatNumber(level, decimals) })),
    range,
  };
}

/** The quantile of a list, between 0 and 1; infinities count, NaN does not. */
export function quantile(values: readonly number[], share: number): number {
  const sorted = values.filter((value) => !Number.isNaN(value)).sort((one, other) => one - other);
  return sorted[Math.round(share * (sorted.length - 1))] ?? NaN;
}

const clean = (value: number): number => Number(value.toPrecision(12));
