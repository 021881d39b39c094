// The core's public face: everything outside app/rf imports from here.
export * from "./contract.ts";
export { checkNetwork, type CheckContext } from "./check-network.ts";
export { decimate } from "./decimate.ts";
export { evaluate } from "./evaluate.ts";
export { formatTouchstone } from "./format-touchstone.ts";
export { limitAt } from "./limits.ts";
export {
  isMeasured,
  measuredRequirements,
  type DeclaredDefinition,
  type MeasuredDefinition,
  type RequirementDefinition,
  type SpecificationLine,
} from "./line-definition.ts";
export { evaluateLot } from "./lot.ts";
export { renormalise, toImpedance } from "./network.ts";
export { prepare } from "./prepare.ts";
export { sameData } from "./same-data.ts";
export {
  readCell,
  readNumber,
  readResult,
  storeCell,
  storeNumber,
  storeResult,
  type StoredCell,
  type StoredNumber,
  type StoredResult,
} from "./stored-result.ts";
export { MAX_POINTS, parseTouchstone } from "./touchstone.ts";
export { TouchstoneError, type TouchstoneErrorCode } from "./touchstone-error.ts";
export { complies, verdictRank, worstVerdict } from "./verdict.ts";
export { CORE_VERSION } from "./version.ts";
export { driftBetween, observedDrift, passbandCentre, type ObservedDrift } from "./observed-drift.ts";
export {
  jointShare,
  LEAST_UNITS,
  OUTLOOK_CONFIDENCE,
  productionOutlook,
  toleranceFactor,
  type NoOutlookReason,
  type ProductionOutlook,
  type UnitMargin,
} from "./production-outlook.ts";
export {
  placeOf,
  placesOf,
  temperatureOutlook,
  type PlaceOutlook,
  type TemperaturePlace,
} from "./temperature-outlook.ts";
export { matchUnits, type MatchedUnit, type Spread, type UnitMatching } from "./unit-matching.ts";
export { delayCurve, type DelayCurve } from "./delay-curve.ts";
export { impedanceOf, openImpedance, standingWaveRatio, terminatedImpedance } from "./input-impedance.ts";
export {
  isPointwise,
  marginCurve,
  type MarginCurve,
  type MarginStretch,
  type PointwiseRequirement,
} from "./margin-curve.ts";
