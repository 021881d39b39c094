// Scores a lot: every requirement on every measured unit and temperature, predictions, and the roll-up of each line.
import { needsOneSweep } from "./assess.ts";
import { conclude } from "./assessment.ts";
import { fieldsInUse, mergeSetup } from "./assumed-setup.ts";
import type { Cell, Drift, LotOptions, Measurement, Prepared, Requirement, Result, Row, Setup } from "./contract.ts";
import { driftedSweeps } from "./drift.ts";
import { assessAll } from "./evaluate.ts";
import { combineSweeps, type SweepAssessment } from "./lot-combine.ts";
import { capped, isMeasuredBasis, rollUp, type ScoredCell } from "./lot-roll-up.ts";
import { endsWithoutMeasurement, isAmbient, isScored, scopeOf } from "./lot-temperature.ts";
import { preparedAt } from "./prepare.ts";
import { checkRequirement } from "./requirement-check.ts";
import { checkSetup } from "./uncertainty.ts";
import { verdictRank } from "./verdict.ts";

interface PreparedSweep {
  readonly id: string;
  readonly prepared: Prepared;
  readonly setup: Setup;
  readonly assumed: ReadonlySet<keyof Setup>;
}

interface PreparedMeasurement {
  readonly unit: string;
  readonly temperature: number;
  readonly sweeps: readonly PreparedSweep[];
}

/** Per requirement one result, and the sweep whose point it reports. */
interface MeasurementResult {
  readonly sweepId: string;
  readonly result: Result;
}

/**
 * One row per requirement, in their order; in each a cell per measurement, then the predicted ones. Measurements of one
 * unit at one temperature are one measurement.
 *
 * @throws RangeError for a malformed requirement, setup or impedance; never for a band that is not reached
 */
export function evaluateLot(
  measurements: readonly Measurement[],
  requirements: readonly Requirement[],
  options: LotOptions = {},
): Row[] {
  requirements.forEach((requirement) => checkRequirement(requirement, options.lowestTestFrequency));
  const prepared = grouped(measurements).map((measurement) => prepareMeasurement(measurement, options));
  const measured = prepared.map((measurement) => scoreMeasurement(measurement, requirements, options));
  const predictions = predictionsOf(prepared, options).map(({ base, temperature, drift }) => ({
    unit: base.unit,
    temperature,
    results: predictMeasurement(base, { ...drift, to: [temperature] }, requirements, options),
  }));

  return requirements.map((requirement, index) => {
    const scope = scopeOf(requirement, options);
    const measuredCells = prepared.map(({ unit, temperature }, place): ScoredCell => {
      const { sweepId, result } = measured[place]![index]!;
      const scored = isScored(temperature, scope, options);
      const shown = isMeasuredBasis(options) ? result : capped(result);
      return { cell: { unit, temperature, sweepId, predicted: false, scored, result: shown }, own: result.verdict };
    });
    const predictedCells = (scope === "range" ? predictions : []).map(({ unit, temperature, results }): ScoredCell => {
      const { sweepId, result } = results[index]!;
      const scored = result.verdict !== "not-covered";
      const cell: Cell = { unit, temperature, sweepId, predicted: true, scored, result: capped(result) };
      return { cell, own: result.verdict };
    });
    return rollUp(requirement, [...measuredCells, ...predictedCells], options);
  });
}

/** Measurements of one unit at one temperature together, in order of first appearance. */
function grouped(measurements: readonly Measurement[]): Measurement[] {
  const groups = new Map<string, Measurement>();
  for (const measurement of measurements) {
    const key = `${measurement.temperature} ${measurement.unit}`;
    const known = groups.get(key);
    groups.set(key, known === undefined ? measurement : { ...known, sweeps: [...known.sweeps, ...measurement.sweeps] });
  }
  return [...groups.values()].filter(({ sweeps }) => sweeps.length > 0);
}

function prepareMeasurement({ unit, temperature, sweeps }: Measurement, options: LotOptions): PreparedMeasurement {
  return {
    unit,
    temperature,
    sweeps: sweeps.map(({ id, network, setup: stated }) => {
      const { setup, assumed } = mergeSetup(stated, options.assumedSetup);
      checkSetup(setup);
      return { id, prepared: preparedAt(network, options.impedance), setup, assumed };
    }),
  };
}

function scoreMeasurement(
  { sweeps }: PreparedMeasurement,
  requirements: readonly Requirement[],
  options: LotOptions,
  lossFactor?: number,
): MeasurementResult[] {
  const bySweep = sweeps.map(({ prepared, setup }) =>
    assessAll(prepared, requirements, setup, options.lowestTestFrequency, lossFactor),
  );
  return requirements.map((requirement, index) => {
    const entries = sweeps.map((sweep, place): SweepAssessment => {
      const assumed = fieldsInUse(requirement, sweep.setup).some((field) => sweep.assumed.has(field));
      return { sweepId: sweep.id, assessment: bySweep[place]![index]!, assumed };
    });
    const { sweepId, assessment, assumed } = combineSweeps(entries, needsOneSweep(requirement));
    return { sweepId, result: conclude(requirement, assessment, assumed) };
  });
}

/** The ends of the range to predict: for units with ambient data and a stated drift, ends without a scored measurement. */
function predictionsOf(
  measurements: readonly PreparedMeasurement[],
  options: LotOptions,
): { readonly base: PreparedMeasurement; readonly temperature: number; readonly drift: Drift }[] {
  const { range, ppmPerKelvin, driftEither, lossPerKelvin } = options;
  if (range === undefined || ppmPerKelvin === undefined) return [];
  const units = new Set(measurements.map(({ unit }) => unit));
  return [...units].flatMap((unit) => {
    const own = measurements.filter((measurement) => measurement.unit === unit);
    const base = own.find(({ temperature }) => isAmbient(temperature, options));
    if (base === undefined) return [];
    const open = endsWithoutMeasurement(
      own.map(({ temperature }) => temperature),
      range,
    );
    const from = base.temperature;
    const common = { ppmPerKelvin, from, ...(driftEither === undefined ? {} : { either: driftEither }) };
    const drift: Drift = { ...common, to: open, ...(lossPerKelvin === undefined ? {} : { lossPerKelvin }) };
    return open.map((temperature) => ({ base, temperature, drift }));
  });
}

/** The worst result over the signs of the drift; a sign moves all sweeps of the measurement alike. */
function predictMeasurement(
  base: PreparedMeasurement,
  drift: Drift,
  requirements: readonly Requirement[],
  options: LotOptions,
): MeasurementResult[] {
  const moved = base.sweeps.map(({ prepared }) => driftedSweeps(prepared, drift));
  const signs = moved[0]!.map((_, sign) => {
    const sweeps = base.sweeps.map((sweep, place) => ({ ...sweep, prepared: moved[place]![sign]!.sweep }));
    return scoreMeasurement({ ...base, sweeps }, requirements, options, moved[0]![sign]!.lossFactor);
  });
  return requirements.map((_, index) => signs.map((results) => results[index]!).reduce(worseOf));
}

function worseOf(worst: MeasurementResult, other: MeasurementResult): MeasurementResult {
  const difference = verdictRank(other.result.verdict) - verdictRank(worst.result.verdict);
  return difference < 0 || (difference === 0 && other.result.margin < worst.result.margin) ? other : worst;
}
