// Series computed for the parts of a sweep that are asked for: most bands are a part of it.
import type { Series } from "./contract.ts";

/** Samples are computed in blocks of 2^6. */
export const BLOCK_BITS = 6;

/** Runs a computation once for each block of samples, when the block is first reached. */
export class LazyBlocks {
  private readonly length: number;
  private readonly isFilled: Uint8Array;
  private readonly fill: (from: number, to: number) => void;

  /** @param fill computes the samples from `from` up to `to`, the latter not included */
  constructor(length: number, fill: (from: number, to: number) => void) {
    this.length = length;
    this.isFilled = new Uint8Array((length >> BLOCK_BITS) + 1);
    this.fill = fill;
  }

  /** Makes the samples from `first` to `last` valid. */
  reach(first: number, last: number): void {
    const { isFilled } = this;
    const end = Math.min(last, this.length - 1) >> BLOCK_BITS;
    for (let block = Math.max(0, first) >> BLOCK_BITS; block <= end; block += 1) {
      if (isFilled[block] !== 0) continue;
      isFilled[block] = 1;
      this.fill(block << BLOCK_BITS, Math.min(this.length, (block + 1) << BLOCK_BITS));
    }
  }
}

/** One series that is computed so. */
export class LazySeries {
  private readonly values: Series;
  private readonly blocks: LazyBlocks;

  /** @param fill writes the values from sample `from` up to `to`, the latter not included */
  constructor(length: number, fill: (values: Series, from: number, to: number) => void) {
    const values = new Float64Array(length);
    this.values = values;
    this.blocks = new LazyBlocks(length, (from, to) => {
      fill(values, from, to);
    });
  }

  /** The series, valid from sample `first` to `last`; what lies outside may not be there yet. */
  within(first: number, last: number): Series {
    this.blocks.reach(first, last);
    return this.values;
  }

  whole(): Series {
    return this.within(0, this.values.length - 1);
  }
}
