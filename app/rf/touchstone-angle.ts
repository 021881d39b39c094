// Pairs of magnitude and angle as complex numbers: cosine and sine of one angle together.

const STEPS_PER_TURN = 64;
const STEPS_PER_DEGREE = STEPS_PER_TURN / 360;
/** 45/8: exact, so that an angle less its whole steps is exact too. */
const DEGREES_PER_STEP = 360 / STEPS_PER_TURN;
const RADIANS_PER_DEGREE = Math.PI / 180;
/** Added and taken away again, this rounds to a whole number (1.5 times 2^52). */
const ROUNDER = 6755399441055744;
/** Degrees; beyond these whole turns are taken off first, so that the steps stay 32-bit numbers. */
const LARGEST_ANGLE = 1e6;

/** Places of the tables: from zero up to a turn and, as 32-bit numbers have it, from minus a turn up to zero. */
const PLACES = 2 * STEPS_PER_TURN;
const LAST_PLACE = PLACES - 1;
const HALF = STEPS_PER_TURN / 2;
const QUARTER = STEPS_PER_TURN / 4;

/** Binary places of the whole numbers that the tables are computed with. */
const FIXED_BITS = 120n;
const FIXED_PI = (314159265358979323846264338327950288419n << FIXED_BITS) / 10n ** 38n;

/** Taylor's series of the sine or, from the term 1 on, the cosine of some steps, up to an eighth of a turn. */
function seriesOf(steps: number, isCosine: boolean): number {
  const angle = (FIXED_PI * BigInt(2 * steps)) / BigInt(STEPS_PER_TURN);
  let term = isCosine ? 1n << FIXED_BITS : angle;
  let sum = 0n;
  for (let power = isCosine ? 2n : 3n; term !== 0n; power += 2n) {
    sum += term;
    term = (((-term * angle) >> FIXED_BITS) * angle) / (power * (power - 1n)) / (1n << FIXED_BITS);
  }
  return Number(sum) / 2 ** Number(FIXED_BITS);
}

/** From zero to a quarter turn. */
const FIRST_SINES = Float64Array.from({ length: QUARTER + 1 }, (_, step) =>
  step <= QUARTER / 2 ? seriesOf(step, false) : seriesOf(QUARTER - step, true),
);

/**
 * The sine of each place, the very double nearest to it, whatever the engine. -180 degrees is another place than 180: its
 * sine is minus zero, so that the phase stays where the file has it.
 */
const SINES = Float64Array.from({ length: PLACES }, (_, place) => {
  const steps = place < STEPS_PER_TURN ? place : place - PLACES;
  const within = Math.abs(steps) % HALF;
  const size = FIRST_SINES[Math.min(within, HALF - within)] as number;
  const isPositive = steps < 0 ? steps < -HALF : steps <= HALF;
  return isPositive ? size : -size;
});
const COSINES = SINES.map((_, place) => 0 + (SINES[(place + QUARTER) & LAST_PLACE] as number));

/**
 * Turns magnitudes (in `re`) and angles in degrees (in `im`) into real and imaginary parts, in place.
 *
 * The angle is taken to the nearest of 64 steps a turn, exactly; the rest, at most pi/64, needs four terms of each series
 * (the fifth is below 2^-57), and the addition theorems put the two together. Only the rest is converted to radians,
 * so that the result is nearer to the written angle than one that rounds the whole angle in radians first.
 *
 * @param from first sample turned
 * @param to sample behind the last one
 */
export function turnIntoParts(re: Float64Array, im: Float64Array, from: number, to: number): void {
  for (let k = from; k < to; k += 1) {
    const magnitude = re[k] as number;
    let degrees = im[k] as number;
    if (Math.abs(degrees) > LARGEST_ANGLE) degrees %= 360;
    const steps = degrees * STEPS_PER_DEGREE + ROUNDER - ROUNDER;
    const rest = (degrees - steps * DEGREES_PER_STEP) * RADIANS_PER_DEGREE;
    const square = rest * rest;
    const restSine = rest - rest * square * (1 / 6 - square * (1 / 120 - square * (1 / 5040)));
    const restFall = square * (1 / 2 - square * (1 / 24 - square * (1 / 720 - square * (1 / 40320)))); // 1 - cosine
    const place = ~~steps & LAST_PLACE;
    const cosine = COSINES[place] as number;
    const sine = SINES[place] as number;
    re[k] = magnitude * (cosine - (cosine * restFall + sine * restSine));
    im[k] = magnitude * (sine - (sine * restFall - cosine * restSine));
  }
}
