// The search for the worst point: least margin and least ends of the margin, each with its frequency.
import type { Ends } from "./uncertainty.ts";

/**
 * Collects points in ascending frequency. Margins that lie within the tolerance of each other are equal, and of equals
 * the lowest frequency is reported; the least figures themselves are kept exactly.
 */
export class WorstPoint {
  margin = Infinity;
  value = NaN;
  frequency = NaN;
  limit = NaN;
  low = NaN;
  high = NaN;
  lowerEnd = Infinity;
  upperEnd = Infinity;
  lowerFrequency = NaN;
  upperFrequency = NaN;
  isEmpty = true;
  readonly isUpperLimit: boolean;
  readonly tolerance: number;
  private reportedMargin = Infinity;
  private reportedLowerEnd = Infinity;
  private reportedUpperEnd = Infinity;

  /** @param isUpperLimit true where the value must not exceed its limit */
  constructor(isUpperLimit: boolean, tolerance: number) {
    this.isUpperLimit = isUpperLimit;
    this.tolerance = tolerance;
  }

  add(frequency: number, value: number, limit: number, low: number, high: number): void {
    const margin = this.isUpperLimit ? limit - value : value - limit;
    const lowerEnd = this.isUpperLimit ? limit - high : low - limit;
    const upperEnd = this.isUpperLimit ? limit - low : high - limit;
    const isFirst = this.isEmpty;
    this.isEmpty = false;
    if (isFirst || margin < this.margin) {
      this.margin = margin;
      if (isFirst || margin < this.reportedMargin - this.tolerance) {
        this.reportedMargin = margin;
        this.value = value;
        this.frequency = frequency;
        this.limit = limit;
        this.low = low;
        this.high = high;
      }
    }
    if (isFirst || lowerEnd < this.lowerEnd) {
      this.lowerEnd = lowerEnd;
      if (isFirst || lowerEnd < this.reportedLowerEnd - this.tolerance) {
        this.reportedLowerEnd = lowerEnd;
        this.lowerFrequency = frequency;
      }
    }
    if (isFirst || upperEnd < this.upperEnd) {
      this.upperEnd = upperEnd;
      if (isFirst || upperEnd < this.reportedUpperEnd - this.tolerance) {
        this.reportedUpperEnd = upperEnd;
        this.upperFrequency = frequency;
      }
    }
  }

  /** The figures an assessment takes over. */
  figures(): {
    readonly value: number;
    readonly frequency: number;
    readonly limit: number;
    readonly margin: number;
    readonly interval: Ends;
    readonly marginInterval: Ends;
    readonly marginFrequencies: readonly [number, number];
  } {
    return {
      value: this.value,
      frequency: this.frequency,
      limit: this.limit,
      margin: this.margin,
      interval: [this.low, this.high],
      marginInterval: [this.lowerEnd, this.upperEnd],
      marginFrequencies: [this.lowerFrequency, this.upperFrequency],
    };
  }
}
