// Assesses one requirement on one sweep, by its kind.
import { assessBandwidth, assessCentre, assessShapeFactor } from "./assess-crossings.ts";
import { assessDelayVariation, assessGroupDelay } from "./assess-delay.ts";
import { assessInsertionLoss, assessRejection, assessReturnLoss, assessReverseIsolation } from "./assess-levels.ts";
import { assessPhaseLinearity } from "./assess-phase.ts";
import { assessRipple } from "./assess-spread.ts";
import { unreached, type Assessment } from "./assessment.ts";
import type { Band, Requirement } from "./contract.ts";
import { limitAt } from "./limits.ts";
import type { Sweeping } from "./sweeping.ts";

type Banded = Extract<Requirement, { readonly band: Band }>;

export function assess(requirement: Requirement, sweeping: Sweeping): Assessment {
  switch (requirement.kind) {
    case "centre-frequency":
      return assessCentre(requirement, sweeping);
    case "bandwidth":
      return assessBandwidth(requirement, sweeping);
    case "shape-factor":
      return assessShapeFactor(requirement, sweeping);
    default:
      return assessBanded(requirement, sweeping);
  }
}

function assessBanded(requirement: Banded, sweeping: Sweeping): Assessment {
  const band = sweeping.testBand(requirement.band);
  if (band === undefined) {
    return nothingAssessed(requirement, requirement.band, "The band ends below the lowest test frequency.");
  }
  switch (requirement.kind) {
    case "insertion-loss":
      return assessInsertionLoss(requirement, band, sweeping);
    case "ripple":
      return assessRipple(requirement, band, sweeping);
    case "rejection":
      return assessRejection(requirement, band, sweeping);
    case "return-loss":
      return assessReturnLoss(requirement, band, sweeping);
    case "reverse-isolation":
      return assessReverseIsolation(requirement, band, sweeping);
    case "group-delay":
      return assessGroupDelay(requirement, band, sweeping);
    case "group-delay-variation":
      return assessDelayVariation(requirement, band, sweeping);
    case "phase-linearity":
      return assessPhaseLinearity(requirement, band, sweeping);
  }
}

/** An assessment of a requirement that nothing could be read for. */
export function nothingAssessed(requirement: Requirement, band: Band, obstacle: string): Assessment {
  return unreached(
    nominalLimit(requirement, band),
    { band, covered: [], missing: [band], standing: true, tolerance: 0 },
    obstacle,
  );
}

/** The limit shown where nothing was reached: the constant one, or a sloped one's at the lower edge. */
function nominalLimit(requirement: Requirement, band: Band): number {
  if (requirement.kind === "centre-frequency") return requirement.tolerance;
  if ("max" in requirement && requirement.max !== undefined) return limitAt(requirement.max, band[0]);
  return "min" in requirement && requirement.min !== undefined ? limitAt(requirement.min, band[0]) : NaN;
}

/** True for a figure that only one sweep can give, the sweep that reaches all it needs. */
export function needsOneSweep(requirement: Requirement): boolean {
  switch (requirement.kind) {
    case "insertion-loss":
    case "return-loss":
    case "reverse-isolation":
    case "group-delay":
      return false;
    case "rejection":
      return requirement.relativeTo !== undefined;
    default:
      return true;
  }
}
