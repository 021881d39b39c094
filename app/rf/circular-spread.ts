// The largest difference among several figures, on the line and on the circle, and which two differ so.

export interface Extremes {
  /** Zero or more; on the circle at most 180 degrees. */
  readonly spread: number;
  /** Index of the greater figure; on the circle of the one that is ahead by `spread`. */
  readonly high: number;
  readonly low: number;
}

/** Greatest less least. @param figures one or more */
export function extremes(figures: readonly number[]): Extremes {
  let high = 0;
  let low = 0;
  figures.forEach((figure, index) => {
    if (figure > (figures[high] as number)) high = index;
    if (figure < (figures[low] as number)) low = index;
  });
  return { spread: high === low ? 0 : (figures[high] as number) - (figures[low] as number), high, low };
}

/** An angle on the turn nearest to zero: −180 to 180 degrees. */
export const wrapped = (degrees: number): number => degrees - 360 * Math.round(degrees / 360);

/**
 * The largest distance of two angles on the circle: where all lie within a half circle, from one end of their arc to the other; else, in the
 * order of a sort, each against those nearest to its opposite.
 *
 * @param figures degrees, any number of turns, one or more
 */
export function circularSpread(figures: readonly number[]): Extremes {
  const arc = extremes(figures.map((degrees) => wrapped(degrees - (figures[0] ?? 0))));
  return arc.spread <= 180 ? arc : farthestPair(figures);
}

function farthestPair(figures: readonly number[]): Extremes {
  const sorted = figures
    .map((degrees, index) => ({ angle: degrees - 360 * Math.floor(degrees / 360), index }))
    .sort((one, other) => one.angle - other.angle);
  let best: Extremes = { spread: 0, high: 0, low: 0 };
  let ahead = 0;
  const count = sorted.length;
  const angleAt = (place: number) => (sorted[place % count]?.angle ?? NaN) + 360 * Math.floor(place / count);
  for (let place = 0; place < count; place += 1) {
    // The farthest that is at most half a turn ahead of this one.
    ahead = Math.max(ahead, place);
    while (ahead + 1 < place + count && angleAt(ahead + 1) - angleAt(place) <= 180) ahead += 1;
    const spread = angleAt(ahead) - angleAt(place);
    if (spread > best.spread) {
      best = { spread, high: sorted[ahead % count]?.index ?? 0, low: sorted[place]?.index ?? 0 };
    }
  }
  return best;
}
