// Predictions of a lot: units with a stated drift at the ends of the range where they were not measured.
import type { Drift, LotOptions } from "./contract.ts";
import { moved, movesOf } from "./drift.ts";
import { scorerOf, type MeasurementResult, type PreparedMeasurement, type Scorer } from "./lot-measurement.ts";
import { endsWithoutMeasurement, isAmbient } from "./lot-temperature.ts";
import { verdictRank } from "./verdict.ts";

export interface Prediction {
  readonly unit: string;
  /** °C, the end predicted. */
  readonly temperature: number;
  readonly score: Scorer;
}

/** For each unit with ambient data, if a drift was stated: the ends of the range that it has no scored measurement at. */
export function predictionsOf(measurements: readonly PreparedMeasurement[], options: LotOptions): Prediction[] {
  const { range, ppmPerKelvin } = options;
  if (range === undefined || ppmPerKelvin === undefined) return [];
  const units = new Set(measurements.map(({ unit }) => unit));
  return [...units].flatMap((unit) => {
    const own = measurements.filter((measurement) => measurement.unit === unit);
    const base = own.find(({ temperature }) => isAmbient(temperature, options));
    if (base === undefined) return [];
    const temperatures = own.map(({ temperature }) => temperature);
    return endsWithoutMeasurement(temperatures, range).map((temperature) => {
      const drift = driftTo(temperature, base.temperature, ppmPerKelvin, options);
      return { unit, temperature, score: predictorOf(base, drift, options) };
    });
  });
}

function driftTo(to: number, from: number, ppmPerKelvin: number, options: LotOptions): Drift {
  const { driftEither, lossPerKelvin } = options;
  return {
    ppmPerKelvin,
    from,
    to: [to],
    ...(driftEither === undefined ? {} : { either: driftEither }),
    ...(lossPerKelvin === undefined ? {} : { lossPerKelvin }),
  };
}

/** The worst result over the signs of the drift; a sign moves all sweeps of the measurement alike. */
function predictorOf(base: PreparedMeasurement, drift: Drift, options: LotOptions): Scorer {
  const scorers = movesOf(drift).map(({ factor, lossFactor }) => {
    const sweeps = base.sweeps.map((sweep) => ({ ...sweep, prepared: moved(sweep.prepared, factor) }));
    return scorerOf({ ...base, sweeps }, options, lossFactor);
  });
  return (requirement) => scorers.map((score) => score(requirement)).reduce(worseOf);
}

function worseOf(worst: MeasurementResult, other: MeasurementResult): MeasurementResult {
  const difference = verdictRank(other.result.verdict) - verdictRank(worst.result.verdict);
  return difference < 0 || (difference === 0 && other.result.margin < worst.result.margin) ? other : worst;
}
