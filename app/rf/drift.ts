// The temperature outlook: a sweep as it would stand at another temperature, moved by a stated drift.
import type { Drift, Prepared } from "./contract.ts";

/** Relative change of frequency, drift · 10⁻⁶ · (T - T₀), for each sign that was stated. */
function factorsOf({ ppmPerKelvin, either = false, from }: Drift, temperature: number): readonly number[] {
  const shift = ppmPerKelvin * 1e-6 * (temperature - from);
  return either && shift !== 0 ? [1 + shift, 1 - shift] : [1 + shift];
}

/** How a sweep changes towards one temperature: frequencies and insertion losses are multiplied. */
export interface Move {
  readonly factor: number;
  readonly lossFactor: number;
}

/**
 * The moves of a drift: one for each temperature and each of its signs. The mask stays where it is; above the temperature
 * of the measurement insertion loss grows by √(1 + lossPerKelvin (T - T₀)), as the square root of a metal's resistivity.
 *
 * @throws RangeError for a drift without a temperature to predict
 */
export function movesOf(drift: Drift): readonly Move[] {
  if (drift.to.length === 0) throw new RangeError("drift: no temperature to predict");
  return drift.to.flatMap((temperature) => {
    const rise = Math.max(0, temperature - drift.from);
    const lossFactor = Math.sqrt(1 + (drift.lossPerKelvin ?? 0) * rise);
    return factorsOf(drift, temperature).map((factor) => ({ factor, lossFactor }));
  });
}

/** The sweep with its frequencies multiplied. */
export function moved(prepared: Prepared, factor: number): Prepared {
  if (factor === 1) return prepared;
  const frequency = prepared.network.frequency.map((hz) => hz * factor);
  return { ...prepared, network: { ...prepared.network, frequency } };
}
