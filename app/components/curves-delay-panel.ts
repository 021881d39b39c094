// The plot of a group delay: its curve in ns and the limits of delay lines that can stand in it as walls.
import { levelOn, type Point } from "~/charts/limit-outline";
import type { ValuePanel, ValueSeries, ValueWall } from "~/charts/value-plot";
import { passbands, wallsFromRequirements } from "~/charts/walls";
import type { DelayData } from "~/rf/curve-data";
import type { Band } from "~/rf/index";
import type { scoredRequirements } from "./curves-words";

export type NumberedRequirement = ReturnType<typeof scoredRequirements>[number];
export type DelayLine = Extract<NumberedRequirement, { kind: "group-delay" | "group-delay-variation" }>;

export const isDelay = (requirement: NumberedRequirement): requirement is DelayLine =>
  requirement.kind === "group-delay" || requirement.kind === "group-delay-variation";

export const NANOSECONDS = 1e9;

/**
 * @param line the one whose aperture the delay is taken over; lines with another are no walls
 */
export function delayPanel(
  data: DelayData,
  requirements: readonly NumberedRequirement[],
  line: DelayLine | undefined,
): ValuePanel {
  const series = data.stretches.map(({ sweepId, frequency, delay }, index): ValueSeries => ({
    id: `${sweepId} ${index}`,
    label: "Delay S21",
    frequency,
    value: delay.map((seconds) => seconds * NANOSECONDS),
  }));
  const isOneSweep = new Set(data.stretches.map(({ sweepId }) => sweepId)).size === 1;
  const walls = requirements
    .filter(isDelay)
    .filter((one) => one.aperture === line?.aperture)
    .flatMap((one) => wallOf(one, series, isOneSweep));
  const bands = walls.length > 0 ? walls.map(({ band }) => band) : passbands(wallsFromRequirements(requirements));
  return {
    id: "delay",
    title: "Group delay, ns",
    series,
    walls,
    extent: () => delayExtent(series, bands, walls),
  };
}

/**
 * A largest delay is a wall. A variation over the whole band is one too, counted from the least delay in it, where it comes
 * from one sweep: beyond that wall lies what is more than the limit above the least.
 */
function wallOf(line: DelayLine, series: readonly ValueSeries[], isOneSweep: boolean): ValueWall[] {
  const { id, lineNumber, band } = line;
  const largest = line.max * NANOSECONDS;
  if (line.kind === "group-delay") return [{ id, lineNumber, band, limit: largest, side: "above" }];
  const [least] = rangeWithin(series, [band]);
  if (!isOneSweep || line.window !== undefined || !Number.isFinite(least)) return [];
  return [{ id, lineNumber, band, limit: least + largest, side: "above" }];
}

/** Least and largest of the curves within bands, with the values at their edges. */
function rangeWithin(series: readonly ValueSeries[], bands: readonly Band[]): readonly [number, number] {
  let [least, largest] = [Infinity, -Infinity];
  for (const { frequency, value } of series) {
    const points = frequency.map((hz, index): Point => [hz, value[index] ?? NaN]);
    for (const [from, to] of bands) {
      const inside = points.filter(([hz]) => hz >= from && hz <= to).map(([, delay]) => delay);
      const reached = [from, to].filter(
        (hz) => hz >= (frequency[0] ?? Infinity) && hz <= (frequency.at(-1) ?? -Infinity),
      );
      for (const delay of [...inside, ...reached.map((hz) => levelOn(points, hz))]) {
        least = Math.min(least, delay);
        largest = Math.max(largest, delay);
      }
    }
  }
  return [least, largest];
}

function delayExtent(series: readonly ValueSeries[], bands: readonly Band[], walls: readonly ValueWall[]) {
  const [least, largest] = rangeWithin(series, bands);
  if (!Number.isFinite(least)) return [0, 1] as const;
  const top = Math.max(largest, ...walls.map(({ limit }) => limit));
  const room = 0.15 * (top - least || Math.abs(top) || 1);
  const bottom = least - room;
  return [bottom > 0 && bottom < 0.35 * top ? 0 : bottom, top + room] as const;
}
