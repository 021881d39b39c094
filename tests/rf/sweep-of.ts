// Sweeps for tests of the evaluation, written as losses in dB against frequency.
import type { TwoPort, Trace } from "~/rf/contract";

export interface SweepText {
  /** Hz. */
  readonly frequency: readonly number[];
  /** -20 log10|S21|, dB; Infinity for an exact zero. */
  readonly loss: readonly number[];
  /** -20 log10|S12|, dB @default loss */
  readonly reverse?: readonly number[];
  /** Return loss of both ports, dB @default 20 at every point */
  readonly returnLoss?: readonly number[];
  /** Phase of S21, degree @default 0 */
  readonly phase?: readonly number[];
}

/** A two-port at 50 ohm with the given losses. */
export function sweepOf({ frequency, loss, reverse = loss, returnLoss, phase }: SweepText): TwoPort {
  const reflection = traceOf(returnLoss ?? frequency.map(() => 20));
  return {
    frequency: Float64Array.from(frequency),
    s11: reflection,
    s21: traceOf(loss, phase),
    s12: traceOf(reverse),
    s22: reflection,
    referenceImpedance: [50, 50],
    comments: [],
    version: "1",
    notes: [],
  };
}

function traceOf(loss: readonly number[], phase: readonly number[] = []): Trace {
  const magnitude = loss.map((level) => 10 ** (-level / 20));
  const angle = loss.map((_, index) => ((phase[index] ?? 0) * Math.PI) / 180);
  return {
    re: Float64Array.from(magnitude, (size, index) => size * Math.cos(angle[index] as number)),
    im: Float64Array.from(magnitude, (size, index) => size * Math.sin(angle[index] as number)),
  };
}

/** The samples of a sweep from index `first` to `last`, both included. */
export function cut(network: TwoPort, first: number, last: number): TwoPort {
  const part = ({ re, im }: Trace): Trace => ({ re: re.slice(first, last + 1), im: im.slice(first, last + 1) });
  return {
    ...network,
    frequency: network.frequency.slice(first, last + 1),
    s11: part(network.s11),
    s21: part(network.s21),
    s12: part(network.s12),
    s22: part(network.s22),
  };
}

/** An item of a list that must be there. */
export function item<Item>(list: readonly Item[], index = 0): Item {
  const found = list[index];
  if (found === undefined) throw new RangeError(`no item ${index} in a list of ${list.length}`);
  return found;
}
