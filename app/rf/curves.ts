// Curves of a prepared network: losses, unwrapped phase and the ends of readings, computed on first use.
import type { Prepared, Series, Setup, Trace, TwoPort } from "./contract.ts";
import { valueBetween } from "./coverage.ts";
import {
  lossOf,
  magnitudeOf,
  reflectionEnds,
  reflectionTerms,
  transmissionEnds,
  transmissionTerms,
  type Ends,
} from "./uncertainty.ts";

export type Parameter = "s11" | "s21" | "s12" | "s22";

/** Readings on the sweep's grid with their ends, n points each; NaN where a sample has no value. */
export interface Readings {
  readonly frequency: Series;
  readonly value: Series;
  readonly low: Series;
  readonly high: Series;
  /** Ends of the value interpolated at `hz`, between samples `below` and `below + 1`. */
  readonly endsBetween: (value: number, below: number, hz: number) => Ends;
  /** Makes `low` and `high` valid from sample `first` to `last`; to be called before either is read. */
  readonly fillEnds: (first: number, last: number) => void;
  /** The ends follow from the value alone and rise with it. */
  readonly endsRise: boolean;
}

/** An S-parameter below -200 dB at every point was not measured: one-path test sets write zeros. */
const NOT_MEASURED = 200;
const DEGREES_PER_RADIAN = 180 / Math.PI;
const KEPT_READINGS = 8;

export class Curves {
  readonly frequency: Series;
  readonly #network: TwoPort;
  readonly #losses = new Map<Parameter, Series>();
  readonly #measured = new Map<Parameter, boolean>();
  readonly #readings = new Map<string, Readings>();
  #phase: Series | undefined;

  constructor(network: TwoPort) {
    this.#network = network;
    this.frequency = network.frequency;
  }

  get points(): number {
    return this.frequency.length;
  }

  /** -20 log10 of the magnitude, dB, n points; Infinity at an exact zero. */
  loss(parameter: Parameter): Series {
    return remember(this.#losses, parameter, () => lossesOf(this.#network[parameter]));
  }

  isMeasured(parameter: Parameter): boolean {
    return remember(this.#measured, parameter, () => this.loss(parameter).some((loss) => !(loss > NOT_MEASURED)));
  }

  /** Phase of S21 unwrapped along the whole sweep, degree, n points; NaN at an exact zero, which has no phase. */
  phase(): Series {
    return (this.#phase ??= unwrappedPhase(this.#network.s21));
  }

  /** Losses of S21 or S12 with their ends. */
  transmission(parameter: "s21" | "s12", setup: Setup): Readings {
    const terms = transmissionTerms(setup, this.points);
    const key = `${parameter} ${terms.factor} ${terms.floor}`;
    return this.#keep(key, () => {
      const value = this.loss(parameter);
      return readingsOf(this.frequency, value, (loss) => transmissionEnds(loss, terms), isExact(terms));
    });
  }

  /** Return losses of a port with their ends. */
  reflection(port: 1 | 2, setup: Setup): Readings {
    const terms = reflectionTerms(setup);
    const key = `port ${port} ${Object.values(terms).join(" ")}`;
    return this.#keep(key, () => {
      const value = this.loss(port === 1 ? "s11" : "s22");
      if (Object.values(terms).every((term) => term === 0)) return exactReadings(this.frequency, value);
      const through = this.#through(value);
      const endsOf = (index: number) =>
        reflectionEnds(value[index] as number, magnitudeOf(through[index] as number), terms);
      const endsBetween = (reading: number, below: number, hz: number) =>
        reflectionEnds(reading, magnitudeOf(valueBetween(this.frequency, through, below, hz)), terms);
      return { ...lazyReadings(this.frequency, value, endsOf, endsBetween), endsRise: false };
    });
  }

  /**
   * Loss of S21 plus loss of S12, dB. A direction that was not measured is taken equal to the other; with neither, the
   * most a passive part of this reflection could pass, 1 - |Γ|².
   */
  #through(returnLoss: Series): Series {
    const measured = (["s21", "s12"] as const).filter((parameter) => this.isMeasured(parameter));
    const forward = measured[0];
    const backward = measured[1] ?? forward;
    if (forward === undefined || backward === undefined) {
      return returnLoss.map((loss) => lossOf(1 - magnitudeOf(2 * loss)));
    }
    const other = this.loss(backward);
    return this.loss(forward).map((loss, index) => loss + (other[index] as number));
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

/** Readings whose ends depend on the value alone and rise with it. Without uncertainty the ends are the value itself. */
export function readingsOf(
  frequency: Series,
  value: Series,
  endsOf: (value: number) => Ends,
  withoutUncertainty = false,
): Readings {
  if (withoutUncertainty) return exactReadings(frequency, value);
  return lazyReadings(frequency, value, (index) => endsOf(value[index] as number), endsOf);
}

/** Readings whose ends are the values themselves. */
function exactReadings(frequency: Series, value: Series): Readings {
  const endsBetween = (reading: number) => [reading, reading] as const;
  return { frequency, value, low: value, high: value, endsBetween, fillEnds, endsRise: false };
}

function fillEnds(): void {
  // Nothing to fill: the ends are the values.
}

/** Readings whose ends are computed for the stretch of the sweep that is asked for: most bands are a part of it. */
function lazyReadings(
  frequency: Series,
  value: Series,
  endsAt: (index: number) => Ends,
  endsBetween: Readings["endsBetween"],
): Readings {
  const low = new Float64Array(value.length);
  const high = new Float64Array(value.length);
  let filledFrom = 0;
  let filledTo = 0;
  const fill = (from: number, to: number) => {
    for (let index = from; index < to; index += 1) {
      const ends = endsAt(index);
      low[index] = ends[0];
      high[index] = ends[1];
    }
  };
  const fillEnds = (first: number, last: number) => {
    if (last < first) return;
    if (filledTo === filledFrom) filledFrom = filledTo = first;
    fill(first, filledFrom);
    fill(filledTo, last + 1);
    filledFrom = Math.min(filledFrom, first);
    filledTo = Math.max(filledTo, last + 1);
  };
  return { frequency, value, low, high, endsBetween, fillEnds, endsRise: true };
}

function isExact(terms: { factor: number; floor: number }): boolean {
  return terms.factor === 1 && terms.floor === 0;
}

function remember<Key, Value>(store: Map<Key, Value>, key: Key, make: () => Value): Value {
  const known = store.get(key);
  if (known !== undefined) return known;
  const made = make();
  store.set(key, made);
  return made;
}

/** -10 log10(re² + im²); a square out of range is taken again through the magnitude. */
function lossesOf(trace: Trace): Series {
  const loss = new Float64Array(trace.re.length);
  for (let index = 0; index < loss.length; index += 1) {
    const re = trace.re[index] as number;
    const im = trace.im[index] as number;
    const power = re * re + im * im;
    loss[index] = power > 1e-290 && power < Infinity ? -10 * Math.log10(power) : lossOfExtreme(re, im);
  }
  return loss;
}

/** A point that is not finite, as renormalising may leave one, has no loss. */
function lossOfExtreme(re: number, im: number): number {
  return Number.isFinite(re) && Number.isFinite(im) ? lossOf(Math.hypot(re, im)) : NaN;
}

function unwrappedPhase(trace: Trace): Series {
  const phase = new Float64Array(trace.re.length);
  let previous = NaN;
  for (let index = 0; index < phase.length; index += 1) {
    const re = trace.re[index] as number;
    const im = trace.im[index] as number;
    if (re === 0 && im === 0) {
      phase[index] = NaN;
      continue;
    }
    const wrapped = Math.atan2(im, re) * DEGREES_PER_RADIAN;
    const step = Number.isNaN(previous) ? 0 : (previous - wrapped) / 360;
    const turns = Math.abs(step) <= 0.5 ? 0 : Math.round(step);
    previous = wrapped + 360 * turns;
    phase[index] = previous;
  }
  return phase;
}
