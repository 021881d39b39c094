// Ends of a reading: what a loss or a return loss may be, given the setup of its sweep.
import type { Setup } from "./contract.ts";

/** A figure with its lower and upper end, lower <= upper. */
export type Ends = readonly [low: number, high: number];

/** Terms of a transmission reading, linear. */
export interface TransmissionTerms {
  /** 10^(Ut/20), 1 where no uncertainty is stated. */
  readonly factor: number;
  /** Linear level of the noise floor, 0 where none is stated. */
  readonly floor: number;
}

/** Terms of a reflection reading, linear: residual directivity, tracking, source match, load match. */
export interface ReflectionTerms {
  readonly directivity: number;
  readonly tracking: number;
  readonly sourceMatch: number;
  readonly loadMatch: number;
}

/** A reading this close to the noise floor is a bound, dB. */
const BOUND_DISTANCE = 6;
const LEVEL_TOLERANCE = 1e-9;

/** Linear magnitude of a loss in dB; 0 for an infinite loss. */
export function magnitudeOf(loss: number): number {
  return 10 ** (-loss / 20);
}

/** Loss in dB of a linear magnitude; Infinity for 0 and below. */
export function lossOf(magnitude: number): number {
  return magnitude > 0 ? -20 * Math.log10(magnitude) : Infinity;
}

/**
 * Noise floor as a peak figure, dB below a through; Infinity where none is stated. An rms figure is lowered by
 * 10 log10(max(1, ln N)) dB, about what the highest of N noisy samples stands above their rms.
 */
export function peakNoiseFloor(setup: Setup, points: number): number {
  if (setup.noiseFloor === undefined) return Infinity;
  const lowered = setup.noiseFloorKind === "rms" ? 10 * Math.log10(Math.max(1, Math.log(points))) : 0;
  return setup.noiseFloor - lowered;
}

export function transmissionTerms(setup: Setup, points: number): TransmissionTerms {
  return { factor: 10 ** ((setup.transmission ?? 0) / 20), floor: magnitudeOf(peakNoiseFloor(setup, points)) };
}

export function reflectionTerms(setup: Setup): ReflectionTerms {
  return {
    directivity: magnitudeOf(setup.directivity ?? Infinity),
    tracking: 10 ** ((setup.tracking ?? 0) / 20) - 1,
    sourceMatch: magnitudeOf(setup.sourceMatch ?? Infinity),
    loadMatch: magnitudeOf(setup.loadMatch ?? Infinity),
  };
}

/** Ends of a loss, dB: |S21| 10^(±Ut/20) ± L, never below 0. */
export function transmissionEnds(loss: number, terms: TransmissionTerms): Ends {
  const magnitude = magnitudeOf(loss);
  return [lossOf(magnitude * terms.factor + terms.floor), lossOf(magnitude / terms.factor - terms.floor)];
}

/**
 * Ends of a return loss, dB: |Γ| ± (D + T|Γ| + M|Γ|² + K|S21||S12|), clipped to [0, 1]. The reading itself always lies
 * between its ends, also where a reading above 1 is clipped.
 *
 * @param returnLoss dB
 * @param through |S21||S12|, linear
 * @see EURAMET cg-12 v2.0, 2011 (one-port part); the two-port term is from the usual error model
 */
export function reflectionEnds(returnLoss: number, through: number, terms: ReflectionTerms): Ends {
  const magnitude = magnitudeOf(returnLoss);
  const spread = reflectionSpread(magnitude, through, terms);
  if (spread === 0) return [returnLoss, returnLoss];
  const low = lossOf(Math.min(1, magnitude + spread));
  const high = lossOf(Math.min(1, magnitude - spread));
  return [Math.min(low, returnLoss), Math.max(high, returnLoss)];
}

/** D + T|Γ| + M|Γ|² + K|S21||S12|, linear. */
export function reflectionSpread(magnitude: number, through: number, terms: ReflectionTerms): number {
  const { directivity, tracking, sourceMatch, loadMatch } = terms;
  return directivity + tracking * magnitude + sourceMatch * magnitude * magnitude + loadMatch * through;
}

/** True where a loss stands within 6 dB of the noise floor, or below it: the part may be better than it reads. */
export function isAtFloor(loss: number, peakFloor: number): boolean {
  return Number.isFinite(peakFloor) && loss >= peakFloor - BOUND_DISTANCE - LEVEL_TOLERANCE;
}

/** Uncertainty that cancels or not in a difference of |S21| within one sweep: the level moved for bandwidths, dB. */
export function levelUncertainty(setup: Setup): number {
  return setup.transmissionRelative ?? 2 * (setup.transmission ?? 0);
}

const MAGNITUDES = [
  "transmission",
  "transmissionRelative",
  "noiseFloor",
  "directivity",
  "sourceMatch",
  "loadMatch",
  "tracking",
  "groupDelay",
  "phase",
] as const satisfies readonly (keyof Setup)[];

/** @throws RangeError for a figure that is negative or not finite */
export function checkSetup(setup: Setup): void {
  for (const field of MAGNITUDES) {
    const figure = setup[field];
    if (figure !== undefined && !(Number.isFinite(figure) && figure >= 0)) {
      throw new RangeError(`setup: ${field} must be a positive number, got ${figure}`);
    }
  }
}
