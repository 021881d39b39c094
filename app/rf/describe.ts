// Reasons in words: missing stretches, the worst of a covered part, figures with their unit.
import type { Band, Requirement } from "./contract.ts";
import { formatBand, formatQuantity } from "./quantity.ts";

type Kind = Requirement["kind"];

/** Short for the hertz, so that a stretch reads in the digits its frequencies were written with. */
export function formatFrequency(hz: number): string {
  return Number.isFinite(hz) ? formatQuantity(Number(hz.toPrecision(12)), "frequency") : "no frequency";
}

/** A figure in the unit of a requirement's value: dB, ns, degrees, a frequency or a plain ratio. */
export function formatFigure(value: number, kind: Kind): string {
  if (!Number.isFinite(value)) return value > 0 ? "infinite" : "minus infinite";
  switch (kind) {
    case "group-delay":
    case "group-delay-variation":
      return `${(value * 1e9).toPrecision(4)} ns`;
    case "phase-linearity":
      return `${value.toFixed(2)}°`;
    case "centre-frequency":
    case "bandwidth":
      return formatFrequency(value);
    case "shape-factor":
      return value.toFixed(3);
    default:
      return formatLevel(value);
  }
}

export function formatLevel(value: number): string {
  return formatQuantity(value, "level", { decimals: 2 });
}

/** Stretches named in a reason: a sweep may have thousands of holes, and a sentence is read and stored. */
const MOST_NAMED = 20;

export function describeMissing(missing: readonly Band[]): string {
  const stretches = missing
    .slice(0, MOST_NAMED)
    .map(([from, to]) => formatBand([Number(from.toPrecision(12)), Number(to.toPrecision(12))]));
  const others = missing.length > MOST_NAMED ? ` and ${missing.length - MOST_NAMED} more stretches` : "";
  return `Not covered: ${stretches.join(", ")}${others}.`;
}

export function describePartial(
  requirement: Requirement,
  worst: { readonly value: number; readonly limit: number; readonly frequency: number },
): string {
  const value = formatFigure(worst.value, requirement.kind);
  const limit = formatFigure(worst.limit, requirement.kind);
  return `Worst on the covered part: ${value} at ${formatFrequency(worst.frequency)}, limit ${limit}.`;
}
