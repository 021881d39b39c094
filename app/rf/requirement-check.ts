// Refuses a malformed requirement, one that no measurement could be held against.
import type { Band, Requirement } from "./contract.ts";
import { checkLimit } from "./limits.ts";
import { testBand } from "./sweeping.ts";

/**
 * @param lowestTestFrequency Hz: where a band from 0 Hz starts, for the points of its sloped limit
 * @throws RangeError naming the requirement and what is wrong with it
 */
export function checkRequirement(requirement: Requirement, lowestTestFrequency?: number): void {
  const name = `requirement ${requirement.id}`;
  if ("band" in requirement) checkBand(requirement.band, name);
  if ("within" in requirement && requirement.within !== undefined) checkBand(requirement.within, name);
  checkPositive(requirement.maxStep, `${name}: maxStep`);
  checkFigures(requirement, name, lowestTestFrequency);
}

function checkFigures(requirement: Requirement, name: string, lowestTestFrequency: number | undefined): void {
  switch (requirement.kind) {
    case "insertion-loss":
    case "rejection":
    case "return-loss":
    case "reverse-isolation":
      checkLevel(requirement, name, lowestTestFrequency);
      break;
    case "ripple":
    case "group-delay":
    case "group-delay-variation":
    case "phase-linearity":
      if ("window" in requirement) checkPositive(requirement.window, `${name}: window`);
      if ("aperture" in requirement) checkPositive(requirement.aperture, `${name}: aperture`);
      checkFinite(requirement.max, `${name}: max`);
      break;
    case "centre-frequency":
      checkPositive(requirement.level, `${name}: level`);
      checkPositive(requirement.nominal, `${name}: nominal`);
      checkFinite(requirement.tolerance, `${name}: tolerance`);
      break;
    case "bandwidth":
      checkBandwidth(requirement, name);
      break;
    case "shape-factor":
      for (const level of requirement.levels) checkPositive(level, `${name}: level`);
      checkFinite(requirement.max, `${name}: max`);
      break;
    default:
      throw new RangeError(`${name}: unknown kind ${String((requirement as { kind: unknown }).kind)}`);
  }
}

type LevelKind = "insertion-loss" | "rejection" | "return-loss" | "reverse-isolation";

function checkLevel(
  requirement: Extract<Requirement, { readonly kind: LevelKind }>,
  name: string,
  lowestTestFrequency: number | undefined,
): void {
  if (requirement.kind === "return-loss" && ![1, 2].includes(requirement.port)) {
    throw new RangeError(`${name}: there is no port ${requirement.port}`);
  }
  if ("relativeTo" in requirement && requirement.relativeTo !== undefined) checkBand(requirement.relativeTo, name);
  const limit = requirement.kind === "insertion-loss" ? requirement.max : requirement.min;
  checkLimit(limit, testBand(requirement.band, lowestTestFrequency) ?? requirement.band, name);
}

function checkBandwidth({ level, min, max }: Extract<Requirement, { readonly kind: "bandwidth" }>, name: string): void {
  checkPositive(level, `${name}: level`);
  if (min === undefined && max === undefined) throw new RangeError(`${name}: a bandwidth needs a min or a max`);
  if (min !== undefined) checkFinite(min, `${name}: min`);
  if (max !== undefined) checkFinite(max, `${name}: max`);
  if (min !== undefined && max !== undefined && min > max) throw new RangeError(`${name}: min lies above max`);
}

function checkBand([from, to]: Band, name: string): void {
  const isUsable = Number.isFinite(from) && Number.isFinite(to) && from >= 0 && from <= to;
  if (!isUsable) throw new RangeError(`${name}: ${from} to ${to} Hz is not a band`);
}

function checkPositive(figure: number | undefined, name: string): void {
  if (figure !== undefined && !(Number.isFinite(figure) && figure > 0)) {
    throw new RangeError(`${name} must be positive, got ${figure}`);
  }
}

function checkFinite(figure: number, name: string): void {
  if (!(Number.isFinite(figure) && figure >= 0)) throw new RangeError(`${name} must be 0 or more, got ${figure}`);
}
