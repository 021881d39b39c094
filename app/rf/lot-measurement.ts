// One measurement of a lot: its sweeps prepared, and the result that they together give for a requirement.
import { needsOneSweep } from "./assess.ts";
import { conclude } from "./assessment.ts";
import { fieldsInUse, mergeSetup } from "./assumed-setup.ts";
import type { LotOptions, Measurement, Prepared, Requirement, Result, Setup } from "./contract.ts";
import { assessorOf } from "./evaluate.ts";
import { combineSweeps } from "./lot-combine.ts";
import { preparedAt } from "./prepare.ts";
import { checkSetup } from "./uncertainty.ts";

export interface PreparedSweep {
  readonly id: string;
  readonly prepared: Prepared;
  readonly setup: Setup;
  /** Fields of the setup that were taken from the assumed one. */
  readonly assumed: ReadonlySet<keyof Setup>;
}

export interface PreparedMeasurement {
  readonly unit: string;
  /** °C. */
  readonly temperature: number;
  readonly sweeps: readonly PreparedSweep[];
}

/** The result of a measurement and the sweep whose point it reports. */
export interface MeasurementResult {
  readonly sweepId: string;
  readonly result: Result;
}

export type Scorer = (requirement: Requirement) => MeasurementResult;

/** Measurements of one unit at one temperature together, in order of first appearance; those without a sweep are none. */
export function prepareMeasurements(measurements: readonly Measurement[], options: LotOptions): PreparedMeasurement[] {
  const groups = new Map<string, Measurement>();
  for (const measurement of measurements) {
    const key = `${measurement.temperature} ${measurement.unit}`;
    const known = groups.get(key);
    groups.set(key, known === undefined ? measurement : { ...known, sweeps: [...known.sweeps, ...measurement.sweeps] });
  }
  return [...groups.values()]
    .filter(({ sweeps }) => sweeps.length > 0)
    .map((measurement) => prepareMeasurement(measurement, options));
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

/** What scores requirements on a measurement. @param lossFactor multiplies insertion loss, for a prediction @default 1 */
export function scorerOf({ sweeps }: PreparedMeasurement, options: LotOptions, lossFactor?: number): Scorer {
  const assessors = sweeps.map((sweep) => ({
    ...sweep,
    assessOne: assessorOf(sweep.prepared, sweep.setup, options.lowestTestFrequency, lossFactor),
  }));
  return (requirement) => {
    const entries = assessors.map(({ id, setup, assumed, assessOne }) => ({
      sweepId: id,
      assessment: assessOne(requirement),
      assumed: fieldsInUse(requirement, setup).some((field) => assumed.has(field)),
    }));
    const { sweepId, assessment, assumed } = combineSweeps(entries, needsOneSweep(requirement));
    return { sweepId, result: conclude(requirement, assessment, assumed) };
  };
}
