// Prepares a network for scoring: renormalised to the specification's impedances, its curves computed on first use.
import type { Prepared, Series, Trace, TwoPort } from "./contract.ts";
import { Curves, type Parameter } from "./curves.ts";
import { renormalise } from "./network.ts";

const DEFAULT_IMPEDANCE = [50, 50] as const;
const PARAMETERS = ["s11", "s21", "s12", "s22"] as const satisfies readonly Parameter[];

/**
 * The network at the given impedances, for scoring many times.
 *
 * A file in which an S-parameter was not measured cannot be renormalised: its prepared values are NaN throughout, so
 * that nothing of it is covered.
 *
 * @param impedance ohm, of the specification @default [50, 50]
 * @throws RangeError if an impedance is not real and positive
 */
export function prepare(network: TwoPort, impedance: readonly [number, number] = DEFAULT_IMPEDANCE): Prepared {
  if (!impedance.every((ohm) => Number.isFinite(ohm) && ohm > 0)) {
    throw new RangeError(`impedances must be positive, got ${impedance.join(" and ")} ohm`);
  }
  const [first, second] = network.referenceImpedance;
  const isAsMeasured = first === impedance[0] && second === impedance[1];
  if (isAsMeasured) return { kind: "prepared", network, impedance };
  const curves = new Curves(network);
  const isComplete = PARAMETERS.every((parameter) => curves.isMeasured(parameter));
  return {
    kind: "prepared",
    network: isComplete ? renormalise(network, impedance) : unknown(network, impedance),
    impedance,
  };
}

/** A network or a prepared one, at the impedances asked for; a prepared one keeps its own where none are asked for. */
export function preparedAt(network: TwoPort | Prepared, impedance?: readonly [number, number]): Prepared {
  if (!("kind" in network)) return prepare(network, impedance);
  const fits =
    impedance === undefined || (impedance[0] === network.impedance[0] && impedance[1] === network.impedance[1]);
  return fits ? network : prepare(network.network, impedance);
}

/** True for a prepared network whose file could not be renormalised. */
export function isUnknown(prepared: Prepared): boolean {
  return PARAMETERS.every((parameter) => isNothing(prepared.network[parameter].re));
}

function isNothing(values: Series): boolean {
  return values.every((value) => Number.isNaN(value));
}

function unknown(network: TwoPort, impedance: readonly [number, number]): TwoPort {
  const points = network.frequency.length;
  const nothing = (): Trace => ({ re: new Float64Array(points).fill(NaN), im: new Float64Array(points).fill(NaN) });
  return { ...network, s11: nothing(), s21: nothing(), s12: nothing(), s22: nothing(), referenceImpedance: impedance };
}
