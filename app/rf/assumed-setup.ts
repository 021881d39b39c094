// The assumed setup: every field a supplier leaves out takes it, and a result that rests on such a field is marked.
import type { Requirement, Setup } from "./contract.ts";

export interface MergedSetup {
  readonly setup: Setup;
  /** Fields that came from the assumed setup. */
  readonly assumed: ReadonlySet<keyof Setup>;
}

/** The stated setup completed by the assumed one. The kind of a noise floor travels with its figure. */
export function mergeSetup(stated: Setup = {}, assumed: Setup = {}): MergedSetup {
  const fields = Object.keys(assumed) as (keyof Setup)[];
  const taken = new Set(fields.filter((field) => field !== "noiseFloorKind" && stated[field] === undefined));
  const takesFloor = taken.has("noiseFloor") && assumed.noiseFloor !== undefined;
  const kind = takesFloor ? assumed.noiseFloorKind : stated.noiseFloorKind;
  const filled = Object.fromEntries([...taken].map((field) => [field, assumed[field]]));
  const { noiseFloorKind: _, ...own } = stated;
  return {
    setup: { ...own, ...filled, ...(kind === undefined ? {} : { noiseFloorKind: kind }) },
    assumed: new Set([...taken].filter((field) => assumed[field] !== undefined)),
  };
}

/** The fields of a setup that a requirement's ends are made from. */
export function fieldsInUse(requirement: Requirement, setup: Setup): readonly (keyof Setup)[] {
  const difference: readonly (keyof Setup)[] =
    setup.transmissionRelative === undefined ? ["transmission", "noiseFloor"] : ["transmissionRelative", "noiseFloor"];
  switch (requirement.kind) {
    case "insertion-loss":
    case "reverse-isolation":
      return ["transmission", "noiseFloor"];
    case "rejection":
      return requirement.relativeTo === undefined ? ["transmission", "noiseFloor"] : difference;
    case "ripple":
      return difference;
    case "return-loss":
      return ["directivity", "sourceMatch", "loadMatch", "tracking"];
    case "group-delay":
    case "group-delay-variation":
      return ["groupDelay"];
    case "phase-linearity":
      return ["phase"];
    case "centre-frequency":
    case "bandwidth":
    case "shape-factor":
      return setup.transmissionRelative === undefined ? ["transmission"] : ["transmissionRelative"];
  }
}
