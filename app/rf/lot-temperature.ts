// Temperatures of a lot: which measurements a requirement is scored on, and which units cover the range.
import type { LotOptions, Requirement } from "./contract.ts";

/** °C. */
const AMBIENT = 25;
const AMBIENT_TOLERANCE = 5;
/** A measurement up to this far beyond an end of the range still speaks for the end, and is scored. */
const BEYOND_END = 3;
/** A measurement this far inside an end of the range still speaks for it. */
const INSIDE_END = 2;

export type TemperatureScope = "ambient" | "range";

/** 'range' where the specification gives a range, else 'ambient', unless the requirement says. */
export function scopeOf(requirement: Requirement, options: LotOptions): TemperatureScope {
  return requirement.temperature ?? (options.range === undefined ? "ambient" : "range");
}

export function isAmbient(temperature: number, options: LotOptions): boolean {
  return Math.abs(temperature - (options.ambient ?? AMBIENT)) <= AMBIENT_TOLERANCE;
}

/** Whether a measurement at a temperature counts for a scope; others are shown, not scored. */
export function isScored(temperature: number, scope: TemperatureScope, options: LotOptions): boolean {
  if (scope === "ambient") return isAmbient(temperature, options);
  const { range } = options;
  return range !== undefined && temperature >= range[0] - BEYOND_END && temperature <= range[1] + BEYOND_END;
}

/** The ends of the range that none of a unit's temperatures speaks for. */
export function endsWithoutMeasurement(temperatures: readonly number[], range: readonly [number, number]): number[] {
  const [low, high] = range;
  const speaksForLow = (t: number) => t >= low - BEYOND_END && t <= low + INSIDE_END;
  const speaksForHigh = (t: number) => t >= high - INSIDE_END && t <= high + BEYOND_END;
  return [
    ...(temperatures.some(speaksForLow) ? [] : [low]),
    ...(temperatures.some(speaksForHigh) || high === low ? [] : [high]),
  ];
}

/** A unit covers the range with a measurement at each end and one at ambient. */
export function coversRange(temperatures: readonly number[], options: LotOptions): boolean {
  if (options.range === undefined) return false;
  const isAtBothEnds = endsWithoutMeasurement(temperatures, options.range).length === 0;
  return isAtBothEnds && temperatures.some((temperature) => isAmbient(temperature, options));
}
