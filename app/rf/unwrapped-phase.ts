// Phase unwrapped along a sweep, computed for a part of it: the whole turns before that part are counted without angles.
import type { Series, Trace } from "./contract.ts";
import { LazySeries } from "./lazy-series.ts";

const DEGREES_PER_RADIAN = 180 / Math.PI;
/** Two samples whose products are smaller have lost digits to the range of a double. */
const LEAST_PRODUCT = 1e-280;
/** Sine of an angle to half a turn below which the angles themselves are compared. */
const NEAR_HALF_TURN = 1e-6;

export class UnwrappedPhase {
  private readonly trace: Trace;
  /** Whole turns of each sample, counted up to `counted`. */
  private readonly turns: Int32Array;
  private counted = 0;
  /** The last sample with a phase. */
  private last = -1;
  private readonly phase: LazySeries;

  constructor(trace: Trace) {
    this.trace = trace;
    this.turns = new Int32Array(trace.re.length);
    this.phase = new LazySeries(trace.re.length, (values, from, to) => {
      this.fill(values, from, to);
    });
  }

  /** Degree, valid from sample `first` to `last`; NaN at a sample without phase. */
  within(first: number, last: number): Series {
    return this.phase.within(first, last);
  }

  whole(): Series {
    return this.phase.whole();
  }

  private fill(values: Series, from: number, to: number): void {
    const { re, im } = this.trace;
    const { turns } = this;
    if (to > this.counted) {
      this.last = countTurns(this.trace, turns, this.last, this.counted, to);
      this.counted = to;
    }
    for (let index = from; index < to; index += 1) {
      const real = re[index] as number;
      const imaginary = im[index] as number;
      const isZero = real === 0 && imaginary === 0;
      values[index] = isZero ? NaN : wrappedPhase(real, imaginary) + 360 * (turns[index] as number);
    }
  }
}

/**
 * Counts the whole turns that each sample's phase has beyond its wrapped value, from the sample `from` up to `to`, so that
 * neighbours differ by half a turn at most; a sample that is zero is passed over, and behind one that is no number counting
 * begins anew.
 *
 * The way from one sample to the next passes the negative real axis where the two lie on different sides of the real axis
 * and the sign of the sine of the angle between them says so. Where that is not certain the angles are compared.
 *
 * @param turns filled
 * @param before the last sample with a phase before `from`, -1 if there is none
 * @returns the last sample with a phase before `to`
 */
function countTurns({ re, im }: Trace, turns: Int32Array, before: number, from: number, to: number): number {
  let last = before;
  let lastRe = last < 0 ? NaN : (re[last] as number);
  let lastIm = last < 0 ? NaN : (im[last] as number);
  let count = last < 0 ? 0 : (turns[last] as number);
  for (let index = from; index < to; index += 1) {
    const nextRe = re[index] as number;
    const nextIm = im[index] as number;
    if (nextRe === 0 && nextIm === 0) continue;
    const sine = nextRe * lastIm - nextIm * lastRe;
    const cosine = nextRe * lastRe + nextIm * lastIm;
    if (!isCertain(sine, cosine, lastIm * nextIm)) count = turnsByAngle(lastRe, lastIm, count, nextRe, nextIm);
    else if (lastIm > 0 && nextIm < 0 && sine < 0) count += 1;
    else if (lastIm < 0 && nextIm > 0 && sine > 0) count -= 1;
    turns[index] = count;
    last = index;
    lastRe = nextRe;
    lastIm = nextIm;
  }
  return last;
}

const wrappedPhase = (re: number, im: number): number => Math.atan2(im, re) * DEGREES_PER_RADIAN;

/** Whether the products of two samples are normal numbers, and their angle is clearly less than half a turn. */
function isCertain(sine: number, cosine: number, product: number): boolean {
  const size = Math.abs(sine) + Math.abs(cosine);
  const isNormal = size > LEAST_PRODUCT && size < Infinity && product !== 0;
  return isNormal && (cosine > 0 || Math.abs(sine) > NEAR_HALF_TURN * size);
}

function turnsByAngle(lastRe: number, lastIm: number, count: number, nextRe: number, nextIm: number): number {
  const previous = wrappedPhase(lastRe, lastIm) + 360 * count;
  const step = (previous - wrappedPhase(nextRe, nextIm)) / 360;
  if (Number.isNaN(step)) return 0;
  return Math.abs(step) <= 0.5 ? 0 : Math.round(step);
}
