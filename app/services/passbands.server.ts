// The passbands of a specification, each by the first line that names it.
import type { Band, Requirement } from "~/rf/index";
import type { ScoringFrame } from "./scoring-sweeps.server";

export interface Passband {
  readonly lineNumber: string;
  readonly kind: Requirement["kind"];
  /** Hz; a lower end of DC is where it is tested from. */
  readonly band: Band;
  /** Hz; the widest step that still counts as covered. */
  readonly maxStep?: number;
}

/** Lines that limit what passes; a passband is what they name. */
const PASSBAND_KINDS: readonly Requirement["kind"][] = [
  "insertion-loss",
  "ripple",
  "group-delay-variation",
  "group-delay",
  "phase-linearity",
];

/** In the order of the lines, insertion loss first; a band that several lines name once. */
export function passbandsOf({ lines, requirements, lowestTestFrequency = 0 }: ScoringFrame): Passband[] {
  const numbers = new Map(lines.map(({ lineKey, lineNumber }) => [lineKey, lineNumber]));
  const found: Passband[] = [];
  for (const kind of PASSBAND_KINDS)
    for (const requirement of requirements) {
      if (requirement.kind !== kind || !("band" in requirement)) continue;
      const [from, to] = requirement.band;
      const band: Band = [from === 0 ? lowestTestFrequency : from, to];
      if (found.some((known) => known.band[0] === band[0] && known.band[1] === band[1])) continue;
      const { maxStep } = requirement;
      const lineNumber = numbers.get(requirement.id) ?? "";
      found.push({ lineNumber, kind, band, ...(maxStep === undefined ? {} : { maxStep }) });
    }
  return found;
}
