// A flat offset near that of a pad in the passband: an attenuator that was left in the path, or normalised out and taken away.

import { isNotMeasured } from "./check-columns.ts";
import type { Band, Note, Requirement, Trace, TwoPort } from "./contract.ts";
import { formatFrequency, formatLevel } from "./describe.ts";
import { firstAtOrAbove, isBelow } from "./frequency.ts";
import { prepare } from "./prepare.ts";

/** dB, of usual fixed attenuators (common practice, no source). */
const PADS = [3, 6, 10, 20] as const;
/** dB from the least loss to a pad's. */
const NEAR_PAD = 0.5;
/** dB from the least to the largest loss of the passband. */
const FLAT = 0.5;
/** Linear; return loss of 10 dB or more: mismatch takes under 0.5 dB. */
const GOOD_MATCH = 10 ** (-10 / 20);
const LEAST_SAMPLES = 20;
/** The delay is taken over this many parts of the passband, so that noise does not make it seem uneven. */
const PARTS = 10;
/** dB; where dissipation would not make at least this spread, nothing can be told. */
const TELLING = 0.5;
/** Of the spread that dissipation would make, below which the loss is not dissipation's. */
const MUCH_FLATTER = 0.4;
const PHASE_STEP = (135 * Math.PI) / 180;

/**
 * One note where the loss in the passband of an insertion-loss line looks like a pad's. All of these must hold over the
 * band, swept whole with 20 samples or more:
 *
 * - the least loss is within 0.5 dB of 3, 6, 10 or 20 dB,
 * - the loss varies by 0.5 dB at most, and the return loss of both ports is 10 dB or more,
 * - the loss does not follow the delay. The loss of resonators is proportional to their delay (S. B. Cohn, Proc. IRE 47,
 *   1959): a filter that lost the least loss L by dissipation alone would vary by L (τmax/τmin − 1). Where that is 0.5 dB
 *   or more and the loss varies by less than 0.4 of it, a flat part of the loss is something else.
 *
 * So a filter that is merely lossy is not noted, and neither is one of flat delay, of which this cannot be told. Nothing is
 * subtracted.
 *
 * @param impedance ohm, of the specification @default the file's own
 */
export function checkFlatOffset(
  network: TwoPort,
  requirements: readonly Requirement[],
  impedance: readonly [number, number] = network.referenceImpedance,
): Note[] {
  const bands = requirements.flatMap((requirement) =>
    requirement.kind === "insertion-loss" ? [requirement.band] : [],
  );
  if (bands.length === 0) return [];
  const prepared = prepare(network, impedance).network;
  for (const band of bands) {
    const found = padLike(prepared, band);
    if (found === null) continue;
    const { pad, least, spread } = found;
    const where = `from ${formatFrequency(band[0])} to ${formatFrequency(band[1])}`;
    const message = `The loss ${where} is at least ${formatLevel(least)} and varies by ${formatLevel(spread)} only: near a ${pad} dB pad, and flatter than the delay lets a lossy filter be.`;
    return [{ code: "flat-offset", severity: "doubtful", message, frequency: band }];
  }
  return [];
}

function padLike(network: TwoPort, band: Band): { pad: number; least: number; spread: number } | null {
  const { frequency, s11, s21, s22 } = network;
  const first = firstAtOrAbove(frequency, band[0]);
  const end = firstAtOrAbove(frequency, band[1] * (1 + Number.EPSILON));
  const isSwept = !isBelow(band[0], frequency[0] as number) && !isBelow(frequency.at(-1) as number, band[1]);
  if (!isSwept || end - first < LEAST_SAMPLES) return null;
  const least = -20 * Math.log10(extreme(s21, first, end, Math.max));
  const spread = -20 * Math.log10(extreme(s21, first, end, Math.min)) - least;
  const pad = PADS.find((level) => Math.abs(level - least) <= NEAR_PAD);
  if (pad === undefined || !(spread <= FLAT)) return null;
  const isMatched = [s11, s22].every(
    (trace) => isNotMeasured(trace) || extreme(trace, first, end, Math.max) <= GOOD_MATCH,
  );
  if (!isMatched) return null;
  const expected = least * (delayRatio(network, first, end) - 1);
  return expected >= TELLING && spread < MUCH_FLATTER * expected ? { pad, least, spread } : null;
}

/** The largest or least magnitude of samples first to end − 1. */
function extreme({ re, im }: Trace, first: number, end: number, choose: (one: number, other: number) => number) {
  let found = Math.hypot(re[first] as number, im[first] as number);
  for (let k = first + 1; k < end; k += 1) found = choose(found, Math.hypot(re[k] as number, im[k] as number));
  return found;
}

/** Largest delay of S21 over the least, each over a tenth of the samples; NaN where a phase step leaves it open. */
function delayRatio({ frequency, s21 }: TwoPort, first: number, end: number): number {
  let [least, largest] = [Infinity, 0];
  for (let part = 0; part < PARTS; part += 1) {
    const from = first + Math.floor(((end - 1 - first) * part) / PARTS);
    const to = first + Math.floor(((end - 1 - first) * (part + 1)) / PARTS);
    const turned = phaseBetween(s21, from, to);
    const delay = -turned / ((frequency[to] as number) - (frequency[from] as number));
    least = Math.min(least, delay);
    largest = Math.max(largest, delay);
  }
  return least > 0 ? largest / least : NaN;
}

/** Radians from sample to sample, added up; NaN where one step is over 135 degrees. */
function phaseBetween({ re, im }: Trace, from: number, to: number): number {
  let turned = 0;
  for (let k = from + 1; k <= to; k += 1) {
    const [re0, im0, re1, im1] = [re[k - 1] as number, im[k - 1] as number, re[k] as number, im[k] as number];
    const step = Math.atan2(re0 * im1 - im0 * re1, re0 * re1 + im0 * im1);
    if (Math.abs(step) > PHASE_STEP) return NaN;
    turned += step;
  }
  return turned;
}
