// Readings on a sweep's grid with their ends, computed for the parts that are asked for.
import type { Band, Series } from "./contract.ts";
import { samplesAround, segmentsWithin, type Segment } from "./coverage.ts";
import { BLOCK_BITS, LazyBlocks } from "./lazy-series.ts";
import type { Ends } from "./uncertainty.ts";

/** How the ends of readings follow from them. */
export interface EndsOfReadings {
  /** Ends of the value of a sample. */
  readonly at: (value: number, index: number) => Ends;
  /** Ends of the value interpolated at `hz`, between samples `below` and `below + 1`. */
  readonly between: (value: number, below: number, hz: number) => Ends;
  /**
   * A lower bound of the lower ends from sample `first` to `last`, by the value, rising with it. Absent where the ends follow
   * from the value alone, rise with it, and lie no nearer to it as they rise.
   */
  readonly lowest?: (first: number, last: number) => (value: number) => number;
}

/** Where values come from: a series that is computed, or one that is there. */
export interface Values {
  readonly within: (first: number, last: number) => Series;
  readonly whole: () => Series;
  /** Whether samples have values, told without computing them. */
  readonly isComplete?: (first: number, last: number) => boolean;
  /** What no value of a block of samples lies below, told without computing them. */
  readonly leastOfBlock?: (block: number) => number;
}

/** Samples of a part of the sweep, and what no value of theirs lies below. */
export interface Block {
  readonly first: number;
  readonly last: number;
  readonly least: number;
}

/** Values, NaN where a sample has none, with low <= value <= high. */
export class Readings {
  readonly frequency: Series;
  /** Undefined where the ends are the values themselves. */
  readonly ends: EndsOfReadings | undefined;
  private readonly values: Values;
  private kept: { readonly low: Series; readonly high: Series; readonly blocks: LazyBlocks } | undefined;

  constructor(frequency: Series, values: Values, ends?: EndsOfReadings) {
    this.frequency = frequency;
    this.values = values;
    this.ends = ends;
  }

  /** Every value, n points. */
  get value(): Series {
    return this.values.whole();
  }

  /** Lower ends, n points, where `fillEnds` made them valid. */
  get low(): Series {
    return this.kept?.low ?? this.value;
  }

  /** Higher ends, n points, where `fillEnds` made them valid. */
  get high(): Series {
    return this.kept?.high ?? this.value;
  }

  /** The values, valid from sample `first` to `last` only. */
  valuesWithin(first: number, last: number): Series {
    return this.values.within(first, last);
  }

  /** Makes `low` and `high` valid from sample `first` to `last`. */
  fillEnds(first: number, last: number): void {
    if (this.ends === undefined) return;
    this.kept ??= this.noEnds(this.ends);
    this.kept.blocks.reach(first, last);
  }

  endsAt(value: number, index: number): Ends {
    return this.ends === undefined ? [value, value] : this.ends.at(value, index);
  }

  endsBetween(value: number, below: number, hz: number): Ends {
    return this.ends === undefined ? [value, value] : this.ends.between(value, below, hz);
  }

  /** Stretches of a band that hold readings, see {@link segmentsWithin}. */
  segments(band: Band, maxStep?: number): Segment[] {
    const { frequency } = this;
    const [first, last] = samplesAround(frequency, band);
    const isComplete = this.values.isComplete?.(first, last) ?? false;
    return segmentsWithin(frequency, isComplete ? frequency : this.values.within(first, last), band, maxStep);
  }

  /** The samples from `first` to `last` in blocks, ascending; one block where nothing is known of the values. */
  blocks(first: number, last: number): Block[] {
    const { values } = this;
    if (values.leastOfBlock === undefined) return [{ first, last, least: -Infinity }];
    const blocks: Block[] = [];
    for (let block = first >> BLOCK_BITS; block <= last >> BLOCK_BITS; block += 1) {
      blocks.push({
        first: Math.max(first, block << BLOCK_BITS),
        last: Math.min(last, ((block + 1) << BLOCK_BITS) - 1),
        least: values.leastOfBlock(block),
      });
    }
    return blocks;
  }

  private noEnds(ends: EndsOfReadings): NonNullable<Readings["kept"]> {
    const { frequency, values } = this;
    const low = new Float64Array(frequency.length);
    const high = new Float64Array(frequency.length);
    const blocks = new LazyBlocks(frequency.length, (from, to) => {
      const readings = values.within(from, to - 1);
      for (let index = from; index < to; index += 1) {
        const [lower, higher] = ends.at(readings[index] as number, index);
        low[index] = lower;
        high[index] = higher;
      }
    });
    return { low, high, blocks };
  }
}

/** Readings at hand, with ends that depend on the value alone and rise with it. Without uncertainty the ends are the values. */
export function readingsOf(
  frequency: Series,
  value: Series,
  endsOf: (value: number) => Ends,
  withoutUncertainty = false,
): Readings {
  const values = { within: () => value, whole: () => value };
  return new Readings(frequency, values, withoutUncertainty ? undefined : { at: endsOf, between: endsOf });
}
