// Scores a lot: every requirement on every measured unit and temperature, predictions, and the roll-up of each line.
import type { LotOptions, Measurement, Requirement, Row } from "./contract.ts";
import { prepareMeasurements, scorerOf } from "./lot-measurement.ts";
import { predictionsOf } from "./lot-predict.ts";
import { capped, isMeasuredBasis, rollUp, type ScoredCell } from "./lot-roll-up.ts";
import { isScored, scopeOf } from "./lot-temperature.ts";
import { checkRequirement } from "./requirement-check.ts";
import { identicalUnits } from "./same-data.ts";

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
  requirements.forEach((requirement) => {
    checkRequirement(requirement, options.lowestTestFrequency);
  });
  const prepared = prepareMeasurements(measurements, options);
  const measured = prepared.map((measurement) => ({ ...measurement, score: scorerOf(measurement, options) }));
  const predictions = predictionsOf(prepared, options);
  const files = prepared.flatMap(({ unit, sweeps }) => sweeps.map(({ prepared: { network } }) => ({ unit, network })));
  const aliases = options.range === undefined ? new Map<string, string>() : identicalUnits(files);

  return requirements.map((requirement) => {
    const scope = scopeOf(requirement, options);
    const cells = measured.map(({ unit, temperature, score }): ScoredCell => {
      const { sweepId, result } = score(requirement);
      const scored = isScored(temperature, scope, options);
      const shown = isMeasuredBasis(options) ? result : capped(result);
      return { cell: { unit, temperature, sweepId, predicted: false, scored, result: shown }, own: result.verdict };
    });
    const predicted = (scope === "range" ? predictions : []).map(({ unit, temperature, score }): ScoredCell => {
      const { sweepId, result } = score(requirement);
      const scored = result.verdict !== "not-covered";
      const shown = capped(result);
      return { cell: { unit, temperature, sweepId, predicted: true, scored, result: shown }, own: result.verdict };
    });
    return rollUp(requirement, [...cells, ...predicted], options, aliases);
  });
}
