// What the waves themselves make doubtful: gain, non-reciprocity, phase that jumps, levels no receiver reads.

import { isNotMeasured } from "./check-columns.ts";
import type { Note, Setup, Trace, TwoPort } from "./contract.ts";
import { formatFrequency, formatLevel } from "./describe.ts";
import { transmissionTerms } from "./uncertainty.ts";

/** dB; allowed beyond 0 dB where no uncertainty is stated. */
const DEFAULT_UNCERTAINTY = 0.05;
/** dB; |S21| and |S12| of a reciprocal network are equal. */
const RECIPROCITY = 0.1;
/** dB above a stated floor, or below the peak where none is stated, from which a level is taken for a reading. */
const ABOVE_FLOOR = 10;
const BELOW_PEAK = 60;
/** dB above the floor within which a reading is a bound. */
const AT_FLOOR = 6;
const DEEP_REJECTION = 140;
const PHASE_STEP = (135 * Math.PI) / 180;

const decibel = (magnitude: number) => 20 * Math.log10(magnitude);
const fromDecibel = (level: number) => 10 ** (level / 20);
const magnitude = ({ re, im }: Trace, k: number) => Math.hypot(re[k] as number, im[k] as number);

/** Relative distance from a threshold beyond which the squares decide: their rounding is a few parts in 1e16. */
const CLEAR = 1e-9;
/** Squares between these are neither lost nor overflown. */
const SMALLEST_SQUARE = 1e-290;
const power = ({ re, im }: Trace, k: number) =>
  (re[k] as number) * (re[k] as number) + (im[k] as number) * (im[k] as number);

/** Whether the magnitude lies above a level; the root, which costs most, is taken only near it. */
function exceeds(trace: Trace, k: number, level: number): boolean {
  const square = power(trace, k);
  const threshold = level * level;
  if (square > SMALLEST_SQUARE && square < Infinity && threshold > SMALLEST_SQUARE) {
    if (square > threshold * (1 + CLEAR)) return true;
    if (square < threshold * (1 - CLEAR)) return false;
  }
  return magnitude(trace, k) > level;
}

/** Whether the largest singular value is clearly below a limit. */
function isClearlyPassive({ s11, s21, s12, s22 }: TwoPort, k: number, limit: number): boolean {
  const re11 = s11.re[k] as number;
  const im11 = s11.im[k] as number;
  const re21 = s21.re[k] as number;
  const im21 = s21.im[k] as number;
  const re12 = s12.re[k] as number;
  const im12 = s12.im[k] as number;
  const re22 = s22.re[k] as number;
  const im22 = s22.im[k] as number;
  const column1 = re11 * re11 + im11 * im11 + re21 * re21 + im21 * im21;
  const column2 = re12 * re12 + im12 * im12 + re22 * re22 + im22 * im22;
  const crossRe = re11 * re12 + im11 * im12 + re21 * re22 + im21 * im22;
  const crossIm = re11 * im12 - im11 * re12 + re21 * im22 - im21 * re22;
  const half = (column1 - column2) / 2;
  const square = (column1 + column2) / 2 + Math.sqrt(half * half + crossRe * crossRe + crossIm * crossIm);
  return square < limit * limit * (1 - CLEAR);
}

export function checkWaves(network: TwoPort, setup: Setup = {}): Note[] {
  const floor = transmissionTerms(setup, network.frequency.length).floor;
  return [
    ...checkPassivity(network, setup.transmission ?? DEFAULT_UNCERTAINTY),
    ...checkReciprocity(network, floor),
    ...checkPhaseSteps(network, floor),
    ...checkDeepRejection(network),
    ...checkFloor(network, floor),
  ];
}

/**
 * Largest singular value of S at one point: the square root of the largest eigenvalue of S^H S. Above 1 the network
 * gives back more power than it is given, at some excitation.
 */
export function largestSingularValue({ s11, s21, s12, s22 }: TwoPort, k: number): number {
  const column1 = magnitude(s11, k) ** 2 + magnitude(s21, k) ** 2;
  const column2 = magnitude(s12, k) ** 2 + magnitude(s22, k) ** 2;
  const [re11, im11] = [s11.re[k] as number, s11.im[k] as number];
  const [re21, im21] = [s21.re[k] as number, s21.im[k] as number];
  const [re12, im12] = [s12.re[k] as number, s12.im[k] as number];
  const [re22, im22] = [s22.re[k] as number, s22.im[k] as number];
  const crossRe = re11 * re12 + im11 * im12 + re21 * re22 + im21 * im22;
  const crossIm = re11 * im12 - im11 * re12 + re21 * im22 - im21 * re22;
  const spread = Math.hypot((column1 - column2) / 2, crossRe, crossIm);
  const value = Math.sqrt((column1 + column2) / 2 + spread);
  return value < Infinity ? value : largestMagnitude([s11, s21, s12, s22], k);
}

/** A bound from below that no square overflows in, for numbers that no instrument writes; at most twice too small. */
function largestMagnitude(traces: readonly Trace[], k: number): number {
  return Math.max(...traces.map((trace) => magnitude(trace, k)));
}

function checkPassivity(network: TwoPort, uncertainty: number): Note[] {
  // Rounding alone gives a lossless network a few parts in 1e16 above 1.
  const limit = fromDecibel(uncertainty) * (1 + 1e-9);
  let worst = limit;
  let at = -1;
  let count = 0;
  for (let k = 0; k < network.frequency.length; k += 1) {
    if (isClearlyPassive(network, k, limit)) continue;
    const value = largestSingularValue(network, k);
    if (value > limit) count += 1;
    if (value > worst) {
      worst = value;
      at = k;
    }
  }
  if (at < 0) return [];
  const excess = formatLevel(decibel(worst));
  const message = `Not passive at ${points(count)}: up to ${excess} of gain, at ${place(network, at)}.`;
  return [note("not-passive", network, at, at, message)];
}

function checkReciprocity(network: TwoPort, floor: number): Note[] {
  const { s21, s12 } = network;
  if (isNotMeasured(s21) || isNotMeasured(s12)) return [];
  const gate = readingGate(network, floor);
  let worst = RECIPROCITY;
  let at = -1;
  let count = 0;
  for (let k = 0; k < network.frequency.length; k += 1) {
    if (!(exceeds(s21, k, gate) && exceeds(s12, k, gate))) continue;
    const forward = magnitude(s21, k);
    const reverse = magnitude(s12, k);
    // Not of the quotient, which may overflow.
    const difference = Math.abs(decibel(forward) - decibel(reverse));
    if (difference > RECIPROCITY) count += 1;
    if (difference > worst) {
      worst = difference;
      at = k;
    }
  }
  if (at < 0) return [];
  const message = `S21 and S12 differ at ${points(count)}: by up to ${formatLevel(worst)}, at ${place(network, at)}.`;
  return [note("not-reciprocal", network, at, at, message)];
}

/** Linear level above which a transmission reading says something. */
function readingGate({ s21, s12, frequency }: TwoPort, floor: number): number {
  if (floor > 0) return floor * fromDecibel(ABOVE_FLOOR);
  let peak = 0;
  for (let k = 0; k < frequency.length; k += 1) {
    if (exceeds(s21, k, peak)) peak = magnitude(s21, k);
    if (exceeds(s12, k, peak)) peak = magnitude(s12, k);
  }
  return peak * fromDecibel(-BELOW_PEAK);
}

function checkPhaseSteps(network: TwoPort, floor: number): Note[] {
  const { s21, frequency } = network;
  if (isNotMeasured(s21)) return [];
  const gate = readingGate(network, floor);
  let worst = PHASE_STEP;
  let at = -1;
  let count = 0;
  for (let k = 1; k < frequency.length; k += 1) {
    if (!(exceeds(s21, k - 1, gate) && exceeds(s21, k, gate))) continue;
    const step = phaseStep(s21, k);
    if (step > PHASE_STEP) count += 1;
    if (step > worst) {
      worst = step;
      at = k;
    }
  }
  if (at < 0) return [];
  const degrees = ((worst * 180) / Math.PI).toFixed(0);
  const steps = count === 1 ? "1 step" : `${count} steps`;
  const message = `The phase of S21 moves over 135° in ${steps}: by ${degrees}° up to ${place(network, at)}; the delay is unknowable there.`;
  return [note("phase-step", network, at - 1, at, message)];
}

/** Absolute phase from sample k - 1 to k, 0 to pi. */
function phaseStep({ re, im }: Trace, k: number): number {
  const [re0, im0, re1, im1] = [re[k - 1] as number, im[k - 1] as number, re[k] as number, im[k] as number];
  return Math.abs(Math.atan2(re0 * im1 - im0 * re1, re0 * re1 + im0 * im1));
}

function checkDeepRejection(network: TwoPort): Note[] {
  const { s21 } = network;
  if (isNotMeasured(s21)) return [];
  return checkBelow(network, fromDecibel(-DEEP_REJECTION), "deep-rejection", (count, deepest) => {
    const level = deepest === 0 ? "a loss without end" : formatLevel(-decibel(deepest));
    return `S21 reads more than ${DEEP_REJECTION} dB of loss at ${points(count)}, up to ${level}: deeper than receivers reach.`;
  });
}

function checkFloor(network: TwoPort, floor: number): Note[] {
  if (floor === 0 || isNotMeasured(network.s21)) return [];
  return checkBelow(network, floor * fromDecibel(AT_FLOOR), "at-floor", (count) => {
    const level = formatLevel(-decibel(floor));
    return `S21 is within ${AT_FLOOR} dB of the noise floor (${level}) at ${points(count)}: such readings are bounds.`;
  });
}

function checkBelow(
  network: TwoPort,
  level: number,
  code: "deep-rejection" | "at-floor",
  describe: (count: number, deepest: number) => string,
): Note[] {
  let first = -1;
  let last = -1;
  let count = 0;
  let deepest = Infinity;
  for (let k = 0; k < network.frequency.length; k += 1) {
    if (exceeds(network.s21, k, level)) continue;
    const value = magnitude(network.s21, k);
    if (!(value < level)) continue;
    if (first < 0) first = k;
    last = k;
    count += 1;
    deepest = Math.min(deepest, value);
  }
  return count === 0 ? [] : [note(code, network, first, last, describe(count, deepest))];
}

const points = (count: number) => (count === 1 ? "1 point" : `${count} points`);
const place = ({ frequency }: TwoPort, k: number) => formatFrequency(frequency[k] as number);

function note(code: Note["code"], { frequency }: TwoPort, first: number, last: number, message: string): Note {
  return { code, severity: "doubtful", message, frequency: [frequency[first] as number, frequency[last] as number] };
}
