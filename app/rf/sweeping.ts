// One sweep as the assessments read it: its curves, its setup, and where a band from DC starts.
import type { Band, Setup } from "./contract.ts";
import type { Curves } from "./curves.ts";
import { isBelow } from "./frequency.ts";
import { readingsOf, type Readings } from "./readings.ts";
import { transmissionEnds, transmissionTerms } from "./uncertainty.ts";

export function notMeasuredReason(parameter: string): string {
  return `${parameter} was not measured: it lies below 200 dB at every point.`;
}

export class Sweeping {
  readonly curves: Curves;
  readonly setup: Setup;
  readonly #lowestTestFrequency: number;
  readonly #lossFactor: number;

  /** @param lossFactor multiplies insertion loss alone, for an outlook at a higher temperature @default 1 */
  constructor(curves: Curves, setup: Setup, lowestTestFrequency = 0, lossFactor = 1) {
    this.curves = curves;
    this.setup = setup;
    this.#lowestTestFrequency = lowestTestFrequency;
    this.#lossFactor = lossFactor;
  }

  /** Readings that insertion-loss lines are scored on. */
  lossReadings(): Readings {
    if (this.#lossFactor === 1) return this.curves.transmission("s21", this.setup);
    const terms = transmissionTerms(this.setup, this.curves.points);
    const scaled = this.curves.loss("s21").map((loss) => loss * this.#lossFactor);
    return readingsOf(this.curves.frequency, scaled, (loss) => transmissionEnds(loss, terms));
  }

  /** The band as tested: one that starts at exactly 0 Hz starts at the lowest test frequency. Undefined if it ends below. */
  testBand(band: Band): Band | undefined {
    return testBand(band, this.#lowestTestFrequency);
  }
}

/** The band as tested, see {@link Sweeping.testBand}. */
export function testBand([from, to]: Band, lowestTestFrequency = 0): Band | undefined {
  const start = from === 0 ? lowestTestFrequency : from;
  return isBelow(to, start) ? undefined : [start, Math.max(start, to)];
}
