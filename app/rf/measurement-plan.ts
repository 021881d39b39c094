// What an RFQ asks of the measured data, besides how many units: temperatures, sweeps with their steps, how to measure.
import type { Band, Requirement } from "./contract.ts";

/** Sweeps a plan holds at most. */
export const MOST_PLANNED_SWEEPS = 12;

/** A stretch of frequency to be swept, and the largest step in it. */
export interface PlannedSweep {
  /** Hz, from < to. */
  readonly band: Band;
  /** Hz. */
  readonly maxStep: number;
}

export interface MeasurementPlan {
  /** Ascending by lower end, at most `MOST_PLANNED_SWEEPS`. Absent: none was asked for. */
  readonly sweeps?: readonly PlannedSweep[];
  /** °C asked besides ambient and the ends of the specification's range, ascending. */
  readonly temperatures?: readonly number[];
  /** Hz. */
  readonly ifBandwidth?: number;
  /** dBm at the part's input. */
  readonly power?: number;
  /** Hz, of the group delay, where a line states none itself. */
  readonly delayAperture?: number;
  readonly referencePlane?: "connector" | "board" | "fixture";
  /** Where the plane lies and, for a fixture, how it is de-embedded. */
  readonly referencePlaneWords?: string;
}

/**
 * The requirements with what the plan says where a line says nothing itself: the largest step of the narrowest planned sweep
 * that holds its band, and the aperture of its group delay. What the RFQ asks for and the file does not deliver is not covered.
 *
 * @param lowestTestFrequency Hz: a sweep from there on holds a band that starts at exactly 0 Hz
 */
export function withPlannedSteps(
  requirements: readonly Requirement[],
  { sweeps = [], delayAperture }: MeasurementPlan,
  lowestTestFrequency = 0,
): readonly Requirement[] {
  if (sweeps.length === 0 && delayAperture === undefined) return requirements;
  return requirements.map((requirement) => {
    const aperture = takesAperture(requirement) ? (requirement.aperture ?? delayAperture) : undefined;
    const maxStep = requirement.maxStep ?? plannedStep(requirement, sweeps, lowestTestFrequency);
    return {
      ...requirement,
      ...(maxStep === undefined ? {} : { maxStep }),
      ...(aperture === undefined ? {} : { aperture }),
    };
  });
}

type DelayRequirement = Extract<Requirement, { readonly kind: "group-delay" | "group-delay-variation" }>;

const takesAperture = (requirement: Requirement): requirement is DelayRequirement =>
  requirement.kind === "group-delay" || requirement.kind === "group-delay-variation";

/** Of a band that only several sweeps together hold, the widest of their steps: no data that keeps to the plan falls short. */
function plannedStep(
  requirement: Requirement,
  sweeps: readonly PlannedSweep[],
  lowestTestFrequency: number,
): number | undefined {
  if (!("band" in requirement)) return undefined;
  const to = requirement.band[1];
  const from = requirement.band[0] === 0 ? Math.min(lowestTestFrequency, to) : requirement.band[0];
  const holding = sweeps.filter(({ band }) => band[0] <= from && to <= band[1]);
  const narrowest = holding.toSorted((a, b) => widthOf(a.band) - widthOf(b.band))[0];
  if (narrowest !== undefined) return narrowest.maxStep;
  const meeting = sweeps.filter(({ band }) => band[0] <= to && from <= band[1]);
  const reach = meeting
    .toSorted((a, b) => a.band[0] - b.band[0])
    .reduce((reached, { band }) => (band[0] <= reached ? Math.max(reached, band[1]) : reached), from);
  return meeting.length > 0 && reach >= to ? Math.max(...meeting.map(({ maxStep }) => maxStep)) : undefined;
}

const widthOf = ([from, to]: Band): number => to - from;

/** Steps a band is divided into: 100 in a passband, 10 elsewhere. */
const PASSBAND_STEPS = 100;
const OTHER_STEPS = 10;

/** Kinds asked where the filter passes. */
const PASSBAND_KINDS: ReadonlySet<Requirement["kind"]> = new Set([
  "insertion-loss",
  "ripple",
  "group-delay",
  "group-delay-variation",
  "phase-linearity",
]);

/**
 * The sweeps to propose for a specification: one over each passband in steps of a hundredth of its width, and one over all
 * edges in steps of a tenth of the narrowest other band. Passbands that overlap are one sweep in the finer step, half an
 * aperture wider at either end where a delay line states one. What a passband's sweep holds asks for nothing more; a single
 * frequency has no width to take a step from.
 *
 * @returns ascending by lower end; empty where no line has a band with a width
 */
export function proposeSweeps(requirements: readonly Requirement[]): PlannedSweep[] {
  const bands = requirements.flatMap((requirement) => ("band" in requirement ? [requirement] : []));
  const wide = bands.filter(({ band }) => widthOf(band) > 0);
  const fine = joined(passbandsOf(wide).map(fineSweep));
  const isHeld = (band: Band) => fine.some((sweep) => sweep.band[0] <= band[0] && band[1] <= sweep.band[1]);
  const others = wide.filter(({ band }) => !isHeld(band));
  if (others.length === 0) return fine;
  const edges = [...requirements.flatMap(bandsOf), ...fine.map(({ band }) => band)].flat();
  const overAll: PlannedSweep = {
    band: [Math.min(...edges), Math.max(...edges)],
    maxStep: Math.min(...others.map(({ band }) => widthOf(band) / OTHER_STEPS)),
  };
  // A passband no finer than the sweep over all is part of it.
  return [...fine.filter(({ maxStep }) => maxStep < overAll.maxStep), overAll].sort(ascending);
}

type BandRequirement = Extract<Requirement, { readonly band: Band }>;

/** Lines asked over a passband; a match apart from all of these names a passband of its own. */
function passbandsOf(lines: readonly BandRequirement[]): BandRequirement[] {
  const named = lines.filter(({ kind }) => PASSBAND_KINDS.has(kind));
  const isApart = ({ band }: BandRequirement) =>
    named.every((other) => band[1] < other.band[0] || other.band[1] < band[0]);
  return [...named, ...lines.filter((line) => line.kind === "return-loss" && isApart(line))];
}

/** Half an aperture is needed beyond either edge. */
function fineSweep(requirement: BandRequirement): PlannedSweep {
  const [from, to] = requirement.band;
  const beyond = takesAperture(requirement) ? (requirement.aperture ?? 0) / 2 : 0;
  return { band: [Math.max(0, from - beyond), to + beyond], maxStep: (to - from) / PASSBAND_STEPS };
}

const ascending = (one: PlannedSweep, other: PlannedSweep): number =>
  one.band[0] - other.band[0] || one.band[1] - other.band[1];

/** All bands a line names. */
function bandsOf(requirement: Requirement): Band[] {
  if (!("band" in requirement)) return requirement.within === undefined ? [] : [requirement.within];
  const reference = requirement.kind === "rejection" ? requirement.relativeTo : undefined;
  return reference === undefined ? [requirement.band] : [requirement.band, reference];
}

/** Overlapping sweeps as one in the finer step; all as one where a plan with the sweep over all edges could not hold them. */
function joined(sweeps: readonly PlannedSweep[]): PlannedSweep[] {
  const apart: PlannedSweep[] = [];
  for (const sweep of sweeps.toSorted(ascending)) {
    const last = apart.at(-1);
    if (last === undefined || sweep.band[0] >= last.band[1]) apart.push(sweep);
    else apart[apart.length - 1] = together([last, sweep]);
  }
  return apart.length < MOST_PLANNED_SWEEPS ? apart : [together(apart)];
}

const together = (sweeps: readonly PlannedSweep[]): PlannedSweep => ({
  band: [Math.min(...sweeps.map(({ band }) => band[0])), Math.max(...sweeps.map(({ band }) => band[1]))],
  maxStep: Math.min(...sweeps.map(({ maxStep }) => maxStep)),
});

/** Samples that keep a planned step over its whole band, both edges among them. */
export const leastPoints = ({ band, maxStep }: PlannedSweep): number => Math.ceil(widthOf(band) / maxStep - 1e-9) + 1;
