// The scales of the two strips: where margins and values stand, and their ticks.
import { decimalsOf } from "./level-scale";

/** Margins are shown from here to here unless told otherwise, on the strip's common scale. */
export const MARGIN_SCALE: readonly [number, number] = [-12, 22];
/** px left free at both ends of a margin strip, for a mark or a chevron. */
export const STRIP_INSET = 10;

export interface StripPlace {
  readonly x: number;
  /** Beyond the scale, to the left or to the right: a chevron stands at that end. */
  readonly beyond?: "left" | "right";
}

/** Where a margin stands on a strip of a width in px. */
export function stripPlace(margin: number, scale: readonly [number, number], width: number): StripPlace {
  const [from, to] = scale;
  if (margin < from) return { x: STRIP_INSET, beyond: "left" };
  if (margin > to) return { x: width - STRIP_INSET, beyond: "right" };
  return { x: STRIP_INSET + ((margin - from) / (to - from)) * (width - 2 * STRIP_INSET) };
}

/** Round values from `from` to `to`, about `count` of them, in steps of 1, 2 or 5. */
export function stripTicks(from: number, to: number, count: number): number[] {
  const least = (to - from) / count;
  const decade = 10 ** Math.floor(Math.log10(least));
  const step = decade * ([1, 2, 5, 10].find((factor) => factor * decade >= least * (1 - 1e-9)) ?? 10);
  const ticks: number[] = [];
  for (let index = Math.ceil(from / step - 1e-9); index * step <= to + step * 1e-9; index += 1) {
    ticks.push(Number((index * step).toPrecision(12)));
  }
  return ticks;
}

export interface ValueScale {
  readonly from: number;
  readonly to: number;
  readonly ticks: readonly number[];
  readonly decimals: number;
}

/**
 * A scale on which limit, value and interval all show, with room on either side and round ends.
 *
 * @returns in the unit of the values; infinite ends are left out
 */
export function valueScale(limit: number, value: number, interval: readonly [number, number]): ValueScale {
  const shown = [limit, value, ...interval].filter(Number.isFinite);
  const least = Math.min(...shown);
  const most = Math.max(...shown);
  const room = Math.max(most - least, Math.abs(limit) * 0.02, 1e-12) * 0.5;
  const inner = stripTicks(least - room, most + room, 6);
  const step = (inner[1] ?? 1) - (inner[0] ?? 0);
  const from = Math.floor((least - room) / step + 1e-9) * step;
  const to = Math.ceil((most + room) / step - 1e-9) * step;
  const ticks = stripTicks(from, to, Math.round((to - from) / step));
  return { from, to, ticks, decimals: Math.max(...ticks.map(decimalsOf)) };
}
