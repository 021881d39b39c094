// Losses of one S-parameter along a sweep, with what can be said of them before a logarithm is taken.
import type { Series, Trace } from "./contract.ts";
import { BLOCK_BITS, LazyBlocks, LazySeries } from "./lazy-series.ts";
import { lossOf } from "./uncertainty.ts";

/** Powers out of these bounds have lost digits to the range of a double. */
const LEAST_POWER = 1e-290;
/** dB: more than rounding takes from a loss. */
const ROUNDING = 1e-9;

export class LossSeries {
  private readonly trace: Trace;
  private readonly losses: LazySeries;
  /** Of each block, NaN if one of its samples is not finite. */
  private readonly greatestPowers: Float64Array;
  private readonly powerBlocks: LazyBlocks;

  constructor(trace: Trace) {
    const { re, im } = trace;
    const greatestPowers = new Float64Array((re.length >> BLOCK_BITS) + 1);
    this.trace = trace;
    this.losses = new LazySeries(re.length, (values, from, to) => {
      for (let index = from; index < to; index += 1) values[index] = lossAt(re[index] as number, im[index] as number);
    });
    this.greatestPowers = greatestPowers;
    this.powerBlocks = new LazyBlocks(re.length, (from, to) => {
      greatestPowers[from >> BLOCK_BITS] = greatestPower(re, im, from, to);
    });
  }

  /** dB, valid from sample `first` to `last`; Infinity at an exact zero, NaN at a sample that is not finite. */
  within(first: number, last: number): Series {
    return this.losses.within(first, last);
  }

  whole(): Series {
    return this.losses.whole();
  }

  /** The loss of one sample, dB. */
  at(index: number): number {
    return lossAt(this.trace.re[index] as number, this.trace.im[index] as number);
  }

  /** Whether every sample from `first` to `last` has a loss. */
  isComplete(first: number, last: number): boolean {
    this.powerBlocks.reach(first, last);
    for (let block = first >> BLOCK_BITS; block <= last >> BLOCK_BITS; block += 1) {
      if (Number.isNaN(this.greatestPowers[block])) return false;
    }
    return true;
  }

  /** What no loss of a block of samples lies below, dB. */
  leastOfBlock(block: number): number {
    this.powerBlocks.reach(block << BLOCK_BITS, block << BLOCK_BITS);
    const power = this.greatestPowers[block] as number;
    return power > LEAST_POWER && power < Infinity ? -10 * Math.log10(power) - ROUNDING : -Infinity;
  }
}

/** -10 log10(re² + im²); a square out of range is taken again through the magnitude. */
function lossAt(re: number, im: number): number {
  const power = re * re + im * im;
  return power > LEAST_POWER && power < Infinity ? -10 * Math.log10(power) : lossOfExtreme(re, im);
}

/** A point that is not finite, as renormalising may leave one, has no loss. */
function lossOfExtreme(re: number, im: number): number {
  return Number.isFinite(re) && Number.isFinite(im) ? lossOf(Math.hypot(re, im)) : NaN;
}

function greatestPower(re: Series, im: Series, from: number, to: number): number {
  let greatest = 0;
  let finite = 0;
  for (let index = from; index < to; index += 1) {
    const real = re[index] as number;
    const imaginary = im[index] as number;
    const power = real * real + imaginary * imaginary;
    if (power > greatest) greatest = power;
    finite += real * 0 + imaginary * 0;
  }
  return greatest + finite;
}
