// Drift observed: what a unit's centre frequency did over temperature, from measured data.
import type { Band, Measurement, Sweep } from "./contract.ts";
import { evaluate } from "./evaluate.ts";
import { preparedAt } from "./prepare.ts";

/** dB below the peak at which the centre is read. */
export const CENTRE_LEVEL = 3;

export interface CentreOptions {
  /** Hz; the peak is searched here: a passband of the specification. */
  readonly within: Band;
  /** Ohm, of the specification. */
  readonly impedance?: readonly [number, number];
}

/**
 * The centre of a measured passband, Hz: the arithmetic mean of the first crossings outwards from the highest |S21| within the band, 3 dB
 * below it. Of several sweeps the one with the most samples in the band is read, so that at each temperature it is the same kind of
 * sweep: between a fine and a coarse one the centre moves by a part of the coarse step. NaN where a side never crosses, or
 * where no sweep reaches the band.
 */
export function passbandCentre({ sweeps }: Measurement, options: CentreOptions): number {
  const read = sweeps.map((sweep) => centreOf(sweep, options)).filter(({ centre }) => !Number.isNaN(centre));
  return read.reduce((finest, one) => (one.samples > finest.samples ? one : finest), { centre: NaN, samples: -1 })
    .centre;
}

function centreOf({ network }: Sweep, { within, impedance }: CentreOptions) {
  const prepared = preparedAt(network, impedance);
  const samples = prepared.network.frequency.filter((hz) => hz >= within[0] && hz <= within[1]).length;
  const nominal = (within[0] + within[1]) / 2;
  const line = {
    id: "centre",
    kind: "centre-frequency",
    level: CENTRE_LEVEL,
    nominal,
    tolerance: nominal,
    within,
  } as const;
  const [result] = evaluate(prepared, [line]);
  return { centre: result?.value ?? NaN, samples };
}

export interface CentreAt {
  /** °C. */
  readonly celsius: number;
  /** Hz. */
  readonly centre: number;
}

/** Drift between two centres, ppm/K of the first: (f₂ − f₁)/(f₁(T₂ − T₁)). NaN where the temperatures are one. */
export function driftBetween(first: CentreAt, second: CentreAt): number {
  const rise = second.celsius - first.celsius;
  return rise === 0 ? NaN : ((second.centre - first.centre) / (first.centre * rise)) * 1e6;
}

export interface ObservedDrift {
  /** ppm/K, all of the centre at ambient: from the low end to ambient, from ambient to the high end, and between the ends. */
  readonly below: number;
  readonly above: number;
  readonly whole: number;
}

/** What one unit's centre did over the range, as apparent drift; NaN where a centre is. */
export function observedDrift(low: CentreAt, ambient: CentreAt, high: CentreAt): ObservedDrift {
  const between = (one: CentreAt, other: CentreAt) =>
    ((other.centre - one.centre) / (ambient.centre * (other.celsius - one.celsius))) * 1e6;
  return { below: driftBetween(ambient, low), above: driftBetween(ambient, high), whole: between(low, high) };
}
