// The frequency axis: how far it reaches, its unit, and ticks in steps of 1, 2 and 5.
import type { Band } from "~/rf/index";
import { decimalsOf } from "./level-scale";
import type { TraceSeries, Wall } from "./types";
import { passbands } from "./walls";

/** px between frequency ticks. */
const LEAST_FREQUENCY_SPACING = 70;

export interface FrequencyUnit {
  readonly name: "GHz" | "MHz" | "kHz" | "Hz";
  readonly hertz: number;
}

export interface FrequencyTick {
  /** Hz */
  readonly frequency: number;
  readonly label: string;
}

export interface FrequencyTicks {
  readonly unit: FrequencyUnit;
  readonly ticks: readonly FrequencyTick[];
}

const UNITS: readonly FrequencyUnit[] = [
  { name: "GHz", hertz: 1e9 },
  { name: "MHz", hertz: 1e6 },
  { name: "kHz", hertz: 1e3 },
  { name: "Hz", hertz: 1 },
];

/** The unit the axis and the readout use: the largest in which the upper end is at least 1. */
export function frequencyUnit(range: Band): FrequencyUnit {
  return UNITS.find((unit) => range[1] >= unit.hertz) ?? { name: "Hz", hertz: 1 };
}

/**
 * All that walls and curves span, Hz. Where a pillar is the outermost wall, half its width is left free beside it;
 * undefined where there is nothing to draw.
 */
export function fullRange(walls: readonly Wall[], traces: readonly TraceSeries[] = []): Band | undefined {
  const lows: number[] = [];
  const highs: number[] = [];
  for (const wall of walls) {
    const room = wall.side === "floor" ? (wall.band[1] - wall.band[0]) / 2 : 0;
    lows.push(Math.max(0, wall.band[0] - room));
    highs.push(wall.band[1] + room);
  }
  for (const trace of traces) {
    const first = trace.frequency[0];
    const last = trace.frequency[trace.frequency.length - 1];
    if (first === undefined || last === undefined) continue;
    lows.push(first);
    highs.push(last);
  }
  if (lows.length === 0) return undefined;
  const from = Math.min(...lows);
  const to = Math.max(...highs);
  return to > from ? [from, to] : [from * 0.9, to * 1.1 || 1];
}

/** The passbands with one width (of all of them together) free on either side, within the full range. */
export function passbandWindow(walls: readonly Wall[], full: Band): Band | undefined {
  const bands = passbands(walls);
  const first = bands[0];
  const last = bands[bands.length - 1];
  if (!first || !last) return undefined;
  const room = Math.max(last[1] - first[0], first[0] * 1e-6);
  return [Math.max(full[0], first[0] - room), Math.min(full[1], last[1] + room)];
}

/**
 * Ticks of the frequency axis.
 *
 * @param range Hz
 * @param width px: ticks stand 70 px apart or more, up to 140 where a step of 1, 2 or 5 allows it
 */
export function frequencyTicks(range: Band, width: number): FrequencyTicks {
  const unit = frequencyUnit(range);
  const from = range[0] / unit.hertz;
  const to = range[1] / unit.hertz;
  const step = niceStep(((to - from) * LEAST_FREQUENCY_SPACING) / width);
  const decimals = decimalsOf(step);
  const ticks: FrequencyTick[] = [];
  for (let index = Math.ceil(from / step - 1e-9); index * step <= to + step * 1e-9; index += 1) {
    ticks.push({ frequency: index * step * unit.hertz, label: (index * step).toFixed(decimals) });
  }
  return { unit, ticks };
}

/** Smallest 1, 2 or 5 times a power of ten that is not below `least`. */
function niceStep(least: number): number {
  const decade = 10 ** Math.floor(Math.log10(least));
  for (const factor of [1, 2, 5, 10]) {
    if (factor * decade >= least * (1 - 1e-9)) return Number((factor * decade).toPrecision(6));
  }
  return 10 * decade;
}
