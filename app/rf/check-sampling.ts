// Where the sweep is too coarse to show what a requirement asks: holes, wide steps, few samples.

import type { Note, Requirement, Series, TwoPort } from "./contract.ts";
import { isHole } from "./coverage.ts";
import { formatFrequency } from "./describe.ts";
import { sameFrequency } from "./frequency.ts";

/** A step this many times wider than both its neighbours is a hole in the sweep and no change of its spacing. */
const HOLE_RATIO = 3;
const STOPBAND_STEPS = 500;
const PASSBAND_SAMPLES = 20;

const STOPBAND_KINDS: readonly Requirement["kind"][] = ["rejection", "reverse-isolation"];

export function checkSampling({ frequency }: TwoPort, requirements: readonly Requirement[] = []): Note[] {
  return [...checkHoles(frequency), ...requirements.flatMap((requirement) => checkRequirement(frequency, requirement))];
}

const step = (frequency: Series, k: number) => (frequency[k + 1] as number) - (frequency[k] as number);

function checkHoles(frequency: Series): Note[] {
  let widest = -1;
  let count = 0;
  for (let k = 1; k < frequency.length - 2; k += 1) {
    const neighbours = Math.max(step(frequency, k - 1), step(frequency, k + 1));
    if (step(frequency, k) <= HOLE_RATIO * neighbours) continue;
    count += 1;
    if (widest < 0 || step(frequency, k) > step(frequency, widest)) widest = k;
  }
  if (widest < 0) return [];
  const range = stretch(frequency, widest);
  const holes = count === 1 ? "A hole in the sweep" : `${count} holes in the sweep, the widest`;
  const message = `${holes} from ${formatFrequency(range[0])} to ${formatFrequency(range[1])}.`;
  return [{ code: "hole", severity: "doubtful", message, frequency: range }];
}

const stretch = (frequency: Series, k: number) => [frequency[k] as number, frequency[k + 1] as number] as const;

function checkRequirement(frequency: Series, requirement: Requirement): Note[] {
  if (!("band" in requirement)) return [];
  return [...checkAperture(frequency, requirement), ...checkDensity(frequency, requirement)];
}

/** The aperture of a delay where none is stated: from the sample below to the one above, at each sample in the band. */
function checkAperture(frequency: Series, requirement: BandRequirement): Note[] {
  if (requirement.kind !== "group-delay" && requirement.kind !== "group-delay-variation") return [];
  if (requirement.aperture !== undefined) return [];
  const { id, band } = requirement;
  let [narrowest, widest] = [Infinity, 0];
  for (let k = 1; k < frequency.length - 1; k += 1) {
    if ((frequency[k] as number) < band[0] || (frequency[k] as number) > band[1]) continue;
    const aperture = (frequency[k + 1] as number) - (frequency[k - 1] as number);
    narrowest = Math.min(narrowest, aperture);
    widest = Math.max(widest, aperture);
  }
  if (widest === 0) return [];
  const [from, to] = [narrowest, widest].map((hz) => formatFrequency(Number(hz.toPrecision(4))));
  const aperture = from === to ? `${from}` : `${from} to ${to}`;
  const message = `No aperture is stated for the delay: it is taken over the two steps about each sample, ${aperture}; noise grows as steps shrink.`;
  return [{ code: "delay-aperture", severity: "doubtful", message, frequency: band, requirementId: id }];
}

function checkDensity(frequency: Series, requirement: BandRequirement): Note[] {
  const isStopband = STOPBAND_KINDS.includes(requirement.kind);
  if (requirement.maxStep !== undefined || isStopband) return checkSteps(frequency, requirement);
  return checkSamples(frequency, requirement);
}

type BandRequirement = Extract<Requirement, { band: unknown }>;

/** The step within the band that exceeds most what is asked: maxStep as the coverage counts it, f/500 where none is asked. */
function checkSteps(frequency: Series, { id, band, maxStep }: BandRequirement): Note[] {
  let worst = -1;
  let worstRatio = 1;
  for (let k = 0; k < frequency.length - 1; k += 1) {
    const [from, to] = stretch(frequency, k);
    if (!(to > band[0] && from < band[1])) continue;
    const allowed = maxStep ?? to / STOPBAND_STEPS;
    const width = to - from;
    if (width <= worstRatio * allowed || !isWider(frequency, k, allowed)) continue;
    worst = k;
    worstRatio = width / allowed;
  }
  if (worst < 0) return [];
  const range = stretch(frequency, worst);
  const width = formatFrequency(range[1] - range[0]);
  const allowed = formatFrequency(maxStep ?? range[1] / STOPBAND_STEPS);
  const consequence =
    maxStep === undefined ? "a response between samples would not show" : "the stretch is not covered by this sweep";
  const message = `A step of ${width} at ${formatFrequency(range[0])}, wider than ${allowed}: ${consequence}.`;
  return [{ code: "wide-step", severity: "doubtful", message, frequency: range, requirementId: id }];
}

/** Two frequencies within 1e-9 are one: a step rounded to whole hertz keeps what it was rounded from. */
const isWider = (frequency: Series, below: number, allowed: number): boolean =>
  isHole(frequency, frequency, below, allowed);

function checkSamples(frequency: Series, { id, band }: BandRequirement): Note[] {
  if (sameFrequency(band[0], band[1])) return [];
  let inside = 0;
  for (let k = 0; k < frequency.length; k += 1) {
    if ((frequency[k] as number) >= band[0] && (frequency[k] as number) <= band[1]) inside += 1;
  }
  if (inside >= PASSBAND_SAMPLES || !reaches(frequency, band)) return [];
  const samples = inside === 1 ? "1 sample" : `${inside} samples`;
  const where = `from ${formatFrequency(band[0])} to ${formatFrequency(band[1])}`;
  const message = `${samples} ${where}, fewer than ${PASSBAND_SAMPLES}: the worst value may lie between them.`;
  return [{ code: "few-samples", severity: "doubtful", message, frequency: band, requirementId: id }];
}

/** Whether the sweep has a stretch in common with the band; where it has none, the evaluation says so. */
function reaches(frequency: Series, [from, to]: readonly [number, number]): boolean {
  return (frequency[0] as number) < to && (frequency[frequency.length - 1] as number) > from;
}
