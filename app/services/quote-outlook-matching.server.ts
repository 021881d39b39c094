// Unit-to-unit matching of a submitted quote, over one of the specification's passbands at one temperature.
import type { MeasurementRow } from "~/db/models";
import type { MatchingPhase, OutlookQuery } from "~/forms/outlook";
import {
  decimate,
  matchUnits,
  placeOf,
  placesOf,
  prepare,
  type Band,
  type MatchedUnit,
  type Prepared,
  type Spread,
  type TemperaturePlace,
  type Trace,
  type TwoPort,
} from "~/rf/index";
import { firstAtOrAbove } from "~/rf/frequency";
import { identicalUnits } from "~/rf/same-data";
import { eachNetwork } from "./measured-networks.server";
import { passbandsOf, type Passband } from "./passbands.server";
import type { Person } from "./person.server";
import type { ScoringFrame } from "./scoring-sweeps.server";

/** Points of the files that are read unasked, and at most. */
const UNASKED_POINTS = 300_000;
const MOST_POINTS = 4_000_000;
/** px columns of the figure. */
const COLUMNS = 400;

export interface MatchingView {
  readonly passbands: readonly Passband[];
  readonly places: readonly TemperaturePlace[];
  readonly chosen: {
    readonly lineNumber: string | null;
    /** °C. */
    readonly celsius: number;
    readonly phase: MatchingPhase;
  };
  readonly result: MatchingResult;
}

export type MatchingResult =
  | {
      readonly kind: "found";
      readonly units: readonly string[];
      /** Left out: their data is that of another unit. */
      readonly copies: readonly string[];
      readonly band: Band;
      readonly level: Spread;
      readonly phase: Spread;
      readonly points: number;
      /** Which of the common frequencies were compared: 1 for each, 2 for every second …. */
      readonly every: number;
      readonly missing: readonly Band[];
      /** Degree. */
      readonly largestPhaseStep: number;
      readonly curves: readonly MatchingTrace[];
    }
  | { readonly kind: "none"; readonly reason: "no-passband" | "too-few-units" | "no-common-band" }
  | { readonly kind: "large"; readonly points: number; readonly most: number; readonly mayAsk: boolean };

/** Deviation from the mean of the units against frequency, thinned to what a figure shows. */
export interface MatchingTrace {
  readonly unit: string;
  /** Hz against dB. */
  readonly level: readonly (readonly [hz: number, db: number])[];
  /** Hz against degree. */
  readonly phase: readonly (readonly [hz: number, degrees: number])[];
}

/** Compares the units of a version as the address asks for it; the first passband at ambient if it does not. */
export async function readMatching(
  person: Person,
  frame: ScoringFrame,
  sweeps: readonly MeasurementRow[],
  query: OutlookQuery,
): Promise<MatchingView> {
  const passbands = passbandsOf(frame);
  const measured = placesOf(sweeps.map(celsiusOf), frame).filter(
    ({ celsius }) => sweepsAt(sweeps, celsius, frame).length > 0,
  );
  const passband = passbands.find(({ lineNumber }) => lineNumber === query.line) ?? passbands[0];
  const place =
    measured.find(({ celsius }) => celsius === query.temperature) ??
    measured.find(({ name }) => name === "ambient") ??
    measured[0];
  const celsius = place?.celsius ?? frame.ambient;
  const isAsked = query.line !== null || query.temperature !== null;
  const result = await compare(person, frame, sweepsAt(sweeps, celsius, frame), passband, { ...query, isAsked });
  const chosen = { lineNumber: passband?.lineNumber ?? null, celsius, phase: query.phase };
  return { passbands, places: measured, chosen, result };
}

const celsiusOf = ({ temperature }: MeasurementRow): number => Number(temperature);

/** The sweeps that speak for a place, those nearest to it first. */
function sweepsAt(sweeps: readonly MeasurementRow[], celsius: number, frame: ScoringFrame): MeasurementRow[] {
  return sweeps
    .filter((sweep) => placeOf(celsiusOf(sweep), frame).celsius === celsius)
    .sort((one, other) => Math.abs(celsiusOf(one) - celsius) - Math.abs(celsiusOf(other) - celsius));
}

async function compare(
  person: Person,
  frame: ScoringFrame,
  sweeps: readonly MeasurementRow[],
  passband: Passband | undefined,
  { phase, isAsked }: { phase: MatchingPhase; isAsked: boolean },
): Promise<MatchingResult> {
  if (!passband) return { kind: "none", reason: "no-passband" };
  const points = sweeps.reduce((sum, sweep) => sum + sweep.points, 0);
  const most = isAsked ? MOST_POINTS : UNASKED_POINTS;
  if (points > most) return { kind: "large", points, most: MOST_POINTS, mayAsk: points <= MOST_POINTS };
  const { units, copies } = await readUnits(person, frame, sweeps, passband.band);
  const { band, maxStep } = passband;
  const options = { band, removesDelay: phase === "removed", ...(maxStep === undefined ? {} : { maxStep }) };
  const found = matchUnits(units, options);
  if (found.kind === "none") return found;
  const { level, phase: spread, frequency, every, missing, largestPhaseStep } = found;
  const thinned = (values: Float64Array<ArrayBuffer>) => {
    const { x, y } = decimate(frequency, values, COLUMNS);
    return [...x].map((hz, index) => [hz, y[index] ?? NaN] as const);
  };
  const curves = found.curves.map((curve) => ({
    unit: curve.unit,
    level: thinned(curve.level),
    phase: thinned(curve.phase),
  }));
  const names = curves.map(({ unit }) => unit);
  return {
    kind: "found",
    units: names,
    copies,
    band,
    level,
    phase: spread,
    points: frequency.length,
    every,
    missing,
    largestPhaseStep,
    curves,
  };
}

/** Each unit with the passband's part of its sweeps, so that large files are not held whole; of units with the same data there the first. */
async function readUnits(person: Person, frame: ScoringFrame, sweeps: readonly MeasurementRow[], band: Band) {
  const read: { unit: string; network: TwoPort; prepared: Prepared }[] = [];
  const ids = sweeps.map(({ id }) => id);
  for await (const { measurement, network } of eachNetwork(person, ids)) {
    const unit = measurement.serial ?? "";
    const prepared = prepare(network, frame.impedance);
    const cut = cutTo(prepared.network, band);
    const own = prepared.network === network ? cut : cutTo(network, band);
    if (cut && own) read.push({ unit, network: own, prepared: { ...prepared, network: cut } });
  }
  const aliases = identicalUnits(read);
  const names = [...new Set(read.map(({ unit }) => unit))].filter((unit) => !aliases.has(unit));
  const units = names.map((unit): MatchedUnit => ({
    unit,
    sweeps: read.filter((one) => one.unit === unit).map(({ prepared }) => prepared),
  }));
  return { units, copies: [...aliases.keys()] };
}

/** The samples of a sweep within a band and one beyond each end; null where it holds none. */
function cutTo(network: TwoPort, [from, to]: Band): TwoPort | null {
  const { frequency, s11, s21, s12, s22 } = network;
  const first = Math.max(0, firstAtOrAbove(frequency, from * (1 - 1e-9)) - 1);
  const last = Math.min(frequency.length, firstAtOrAbove(frequency, to * (1 + 1e-9)) + 1);
  if (first >= last) return null;
  const part = ({ re, im }: Trace): Trace => ({ re: re.slice(first, last), im: im.slice(first, last) });
  const cut = { s11: part(s11), s21: part(s21), s12: part(s12), s22: part(s22) };
  return { ...network, frequency: frequency.slice(first, last), ...cut };
}
