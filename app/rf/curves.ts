// Curves of a prepared network: losses, unwrapped phase and the ends of readings, computed on first use and only where used.
import type { Band, Prepared, Series, Setup, TwoPort } from "./contract.ts";
import { segmentsWithin, valueBetween, type Segment } from "./coverage.ts";
import { crossingsAt, type Crossings } from "./crossings.ts";
import { BLOCK_BITS, LazySeries } from "./lazy-series.ts";
import { LossSeries } from "./loss-series.ts";
import { Readings, type EndsOfReadings } from "./readings.ts";
import {
  lossOf,
  magnitudeOf,
  reflectionEnds,
  reflectionTerms,
  transmissionEnds,
  transmissionTerms,
} from "./uncertainty.ts";
import { UnwrappedPhase } from "./unwrapped-phase.ts";

export { readingsOf, Readings } from "./readings.ts";

export type Parameter = "s11" | "s21" | "s12" | "s22";

/** An S-parameter below -200 dB at every point was not measured: one-path test sets write zeros. */
const NOT_MEASURED = 200;
const KEPT_READINGS = 8;
export class Curves {
  readonly frequency: Series;
  readonly #network: TwoPort;
  readonly #losses = new Map<Parameter, LossSeries>();
  readonly #measured = new Map<Parameter, boolean>();
  readonly #readings = new Map<string, Readings>();
  readonly #peaks = new Map<string, number>();
  readonly #crossings = new Map<string, Crossings>();
  #phase: UnwrappedPhase | undefined;

  constructor(network: TwoPort) {
    this.#network = network;
    this.frequency = network.frequency;
  }

  get points(): number {
    return this.frequency.length;
  }

  /** -20 log10 of the magnitude, dB, n points; Infinity at an exact zero. */
  loss(parameter: Parameter): Series {
    return this.#lossOf(parameter).whole();
  }

  /** The same, valid from sample `first` to `last` only. */
  lossWithin(parameter: Parameter, first: number, last: number): Series {
    return this.#lossOf(parameter).within(first, last);
  }

  isMeasured(parameter: Parameter): boolean {
    return remember(this.#measured, parameter, () => {
      const losses = this.#lossOf(parameter);
      return this.frequency.some((_, index) => !(losses.at(index) > NOT_MEASURED));
    });
  }

  /** Stretches of a band where S21 has a loss, see {@link segmentsWithin}. Where it has one everywhere no loss is computed. */
  segments(band: Band, maxStep?: number): Segment[] {
    const losses = this.#lossOf("s21");
    const presence = losses.isComplete(0, this.points - 1) ? this.frequency : losses.whole();
    return segmentsWithin(this.frequency, presence, band, maxStep);
  }

  /** Index of the sample of a band with the least loss of S21, the lowest of equals; -1 where it holds no sample. */
  peakIndex(band: Band): number {
    return remember(this.#peaks, band.join(" "), () => peakOf(this.#lossOf("s21"), this.segments(band)));
  }

  /** Crossings of a level below a peak of S21, see {@link crossingsAt}. */
  crossings(peak: number, level: number, maxStep?: number): Crossings {
    const key = `${peak} ${level} ${maxStep ?? ""}`;
    return remember(this.#crossings, key, () => crossingsAt(this, peak, level, maxStep));
  }

  /** Phase of S21 unwrapped along the whole sweep, degree, n points; NaN at an exact zero, which has no phase. */
  phase(): Series {
    return this.#unwrapped().whole();
  }

  /** The same, valid from sample `first` to `last` only. */
  phaseWithin(first: number, last: number): Series {
    return this.#unwrapped().within(first, last);
  }

  /** Losses of S21 or S12 with their ends. */
  transmission(parameter: "s21" | "s12", setup: Setup): Readings {
    const terms = transmissionTerms(setup, this.points);
    const key = `${parameter} ${terms.factor} ${terms.floor}`;
    const isExact = terms.factor === 1 && terms.floor === 0;
    const endsOf = (loss: number) => transmissionEnds(loss, terms);
    const ends: EndsOfReadings = { at: endsOf, between: endsOf };
    return this.#keep(key, () => this.#readingsOf(parameter, isExact ? undefined : ends));
  }

  /** Return losses of a port with their ends. */
  reflection(port: 1 | 2, setup: Setup): Readings {
    const terms = reflectionTerms(setup);
    const key = `port ${port} ${Object.values(terms).join(" ")}`;
    const parameter = port === 1 ? "s11" : "s22";
    if (Object.values(terms).every((term) => term === 0)) return this.#keep(key, () => this.#readingsOf(parameter));
    return this.#keep(key, () => {
      const through = this.#through(parameter);
      const endsOf = (reading: number, throughLoss: number) => reflectionEnds(reading, magnitudeOf(throughLoss), terms);
      return this.#readingsOf(parameter, {
        at: (reading, index) => endsOf(reading, through.within(index, index)[index] as number),
        between: (reading, below, hz) =>
          endsOf(reading, valueBetween(this.frequency, through.within(below, below + 1), below, hz)),
        lowest: (first, last) => {
          const least = leastOf(through.within(first, last), first, last);
          return (reading) => endsOf(reading, least)[0];
        },
      });
    });
  }

  #lossOf(parameter: Parameter): LossSeries {
    return remember(this.#losses, parameter, () => new LossSeries(this.#network[parameter]));
  }

  #readingsOf(parameter: Parameter, ends?: EndsOfReadings): Readings {
    return new Readings(this.frequency, this.#lossOf(parameter), ends);
  }

  #unwrapped(): UnwrappedPhase {
    return (this.#phase ??= new UnwrappedPhase(this.#network.s21));
  }

  /**
   * Loss of S21 plus loss of S12, dB. A direction that was not measured is taken equal to the other; with neither, the
   * most a passive part of this reflection could pass, 1 - |Γ|².
   */
  #through(reflection: "s11" | "s22"): LazySeries {
    const measured = (["s21", "s12"] as const).filter((parameter) => this.isMeasured(parameter));
    const forward = measured[0];
    const backward = measured[1] ?? forward;
    return new LazySeries(this.points, (values, from, to) => {
      if (forward === undefined || backward === undefined) {
        const returnLoss = this.lossWithin(reflection, from, to - 1);
        for (let index = from; index < to; index += 1) {
          values[index] = lossOf(1 - magnitudeOf(2 * (returnLoss[index] as number)));
        }
        return;
      }
      const one = this.lossWithin(forward, from, to - 1);
      const other = this.lossWithin(backward, from, to - 1);
      for (let index = from; index < to; index += 1) values[index] = (one[index] as number) + (other[index] as number);
    });
  }

  #keep(key: string, make: () => Readings): Readings {
    if (this.#readings.size >= KEPT_READINGS && !this.#readings.has(key)) this.#readings.clear();
    return remember(this.#readings, key, make);
  }
}

const curvesByPrepared = new WeakMap<Prepared, Curves>();

/** The curves of a prepared network, kept as long as it is. */
export function curvesOf(prepared: Prepared): Curves {
  const known = curvesByPrepared.get(prepared);
  if (known !== undefined) return known;
  const made = new Curves(prepared.network);
  curvesByPrepared.set(prepared, made);
  return made;
}

function remember<Key, Value>(store: Map<Key, Value>, key: Key, make: () => Value): Value {
  const known = store.get(key);
  if (known !== undefined) return known;
  const made = make();
  store.set(key, made);
  return made;
}

/** Index of the least loss, the lowest of equals. Blocks that hold no lesser one are passed over. */
function peakOf(losses: LossSeries, segments: readonly Segment[]): number {
  let peak = -1;
  let peakLoss = Infinity;
  for (const { first, last } of segments) {
    if (peak < 0 && first <= last) peak = first;
    for (let block = first >> BLOCK_BITS; block <= last >> BLOCK_BITS; block += 1) {
      if (losses.leastOfBlock(block) > peakLoss) continue;
      const from = Math.max(first, block << BLOCK_BITS);
      const to = Math.min(last, ((block + 1) << BLOCK_BITS) - 1);
      const values = losses.within(from, to);
      for (let index = from; index <= to; index += 1) {
        if (!((values[index] as number) < peakLoss)) continue;
        peak = index;
        peakLoss = values[index] as number;
      }
    }
  }
  return peak;
}

/** The least of some values; NaN among them is passed over. */
function leastOf(values: Series, first: number, last: number): number {
  let least = Infinity;
  for (let index = first; index <= last; index += 1) {
    if ((values[index] as number) < least) least = values[index] as number;
  }
  return least;
}
