// The production outlook: what share of the production the measured units speak for, by one-sided tolerance limits.
import { bracketedRoot } from "./bracketed-root.ts";
import type { Cell, Result } from "./contract.ts";
import { noncentralTCdf } from "./noncentral-t.ts";
import { normalCdf, normalQuantile } from "./special-functions.ts";

/** With which the share is stated. */
export const OUTLOOK_CONFIDENCE = 0.95;
/** Fewer say nothing of a spread. */
export const LEAST_UNITS = 3;
/** Shares are not told apart nearer to 0 and 1 than this; the statement "at least" stays true. */
const LEAST_SHARE = 1e-6;
/** Margins this close, relative to the largest, are equal: readings that were rounded or copied, not a spread. */
const EQUAL = 1e-9;

/**
 * One unit's margin at a temperature, in the requirement's unit; the least where a unit was measured more than once. Of a unit
 * that fails on the part of the band it was measured over, that part's: over the whole band it can only be less.
 */
export interface UnitMargin {
  readonly unit: string;
  readonly margin: number;
}

export type NoOutlookReason =
  "predicted" | "not-covered" | "too-few-units" | "duplicate-data" | "infinite-margin" | "no-spread";

export type ProductionOutlook =
  | {
      readonly kind: "found";
      readonly margins: readonly UnitMargin[];
      /** Of the margins, in the requirement's unit. */
      readonly mean: number;
      /** Sample standard deviation of the margins (divisor n − 1). */
      readonly deviation: number;
      /** At least this share of the population has a margin of zero or more, with the confidence; 0 to 1. */
      readonly conforming: number;
    }
  | { readonly kind: "none"; readonly margins: readonly UnitMargin[]; readonly reason: NoOutlookReason };

/**
 * The outlook of one line at one temperature: the p for which k1(n, p, confidence) is the mean of the margins over their standard deviation.
 * It supposes that the margin is normally distributed and that the units are a random sample. A mean below zero gives p as well, small.
 *
 * @param cells of one line at one temperature; predicted ones do not count, and of those whose band was not wholly covered only a fail
 *   that stands: to leave a unit out because it fails would make the others a chosen sample
 * @param aliases units whose data is that of another, with the name they count under: they count once
 * @see ISO 16269-6:2014, one-sided statistical tolerance interval for a normal population, unknown mean and deviation
 */
export function productionOutlook(
  cells: readonly Cell[],
  aliases: ReadonlyMap<string, string> = new Map(),
  confidence = OUTLOOK_CONFIDENCE,
): ProductionOutlook {
  const measured = cells.filter(({ predicted }) => !predicted);
  const known = measured.filter(({ result }) => isKnown(result));
  const named = leastMargins(known, ({ unit }) => unit);
  const margins = leastMargins(known, ({ unit }) => aliases.get(unit) ?? unit);
  const reason = obstacleOf(cells, measured, named, margins);
  if (reason !== undefined) return { kind: "none", margins, reason };
  const { mean, deviation } = momentsOf(margins.map(({ margin }) => margin));
  return {
    kind: "found",
    margins,
    mean,
    deviation,
    conforming: conformingShare(margins.length, mean / deviation, confidence),
  };
}

/** Whether a margin speaks for its unit: that of the whole band, or a fail on a part of it. */
const isKnown = ({ covered, verdict, margin }: Result): boolean =>
  !Number.isNaN(margin) && (covered === undefined || verdict === "fail");

function leastMargins(cells: readonly Cell[], unitOf: (cell: Cell) => string): UnitMargin[] {
  const least = new Map<string, number>();
  for (const cell of cells) {
    const unit = unitOf(cell);
    least.set(unit, Math.min(least.get(unit) ?? Infinity, cell.result.margin));
  }
  return [...least].map(([unit, margin]) => ({ unit, margin }));
}

function obstacleOf(
  cells: readonly Cell[],
  measured: readonly Cell[],
  named: readonly UnitMargin[],
  margins: readonly UnitMargin[],
): NoOutlookReason | undefined {
  if (margins.length < LEAST_UNITS) {
    if (named.length >= LEAST_UNITS) return "duplicate-data";
    if (unitsOf(measured) >= LEAST_UNITS) return "not-covered";
    return unitsOf(cells) >= LEAST_UNITS && measured.length < cells.length ? "predicted" : "too-few-units";
  }
  const figures = margins.map(({ margin }) => margin);
  if (!figures.every(Number.isFinite)) return "infinite-margin";
  const largest = Math.max(...figures.map(Math.abs));
  return Math.max(...figures) - Math.min(...figures) <= EQUAL * largest ? "no-spread" : undefined;
}

const unitsOf = (cells: readonly Cell[]): number => new Set(cells.map(({ unit }) => unit)).size;

/** Mean and sample standard deviation (divisor n − 1) of two figures or more. */
export function momentsOf(figures: readonly number[]): { mean: number; deviation: number } {
  const mean = figures.reduce((sum, figure) => sum + figure, 0) / figures.length;
  const squares = figures.reduce((sum, figure) => sum + (figure - mean) ** 2, 0);
  return { mean, deviation: Math.sqrt(squares / (figures.length - 1)) };
}

/**
 * The share p of a normal population above zero that n units speak for with a confidence: k1(n, p, confidence) = mean / deviation.
 *
 * @param ratio mean over sample standard deviation of the units' margins
 * @returns 0 to 1; 0 and 1 − 1e-6 where it is beyond what is told apart
 */
export function conformingShare(units: number, ratio: number, confidence = OUTLOOK_CONFIDENCE): number {
  const root = Math.sqrt(units);
  const excess = (z: number) => noncentralTCdf(ratio * root, units - 1, z * root) - confidence;
  const [least, most] = [normalQuantile(LEAST_SHARE), -normalQuantile(LEAST_SHARE)];
  // The distribution falls as its noncentrality grows.
  if (excess(least) <= 0) return 0;
  if (excess(most) >= 0) return 1 - LEAST_SHARE;
  return normalCdf(bracketedRoot(excess, least, most, 1e-12));
}

/**
 * The exact one-sided tolerance factor k1 of a normal sample: with the confidence, at least the share p lies above mean − k1 · deviation.
 * k1 √n is the quantile of the noncentral t with n − 1 degrees of freedom and noncentrality z_p √n.
 *
 * @param units n >= 2
 * @throws RangeError for fewer than two units, or a share or confidence not between 0 and 1
 * @see NIST/SEMATECH e-Handbook of Statistical Methods, 7.2.6.3
 */
export function toleranceFactor(units: number, share: number, confidence = OUTLOOK_CONFIDENCE): number {
  if (!(units >= 2)) throw new RangeError(`a tolerance factor needs two units, got ${units}`);
  if (!(confidence > 0 && confidence < 1))
    throw new RangeError(`a confidence between 0 and 1 was expected, got ${confidence}`);
  const degrees = units - 1;
  const noncentrality = normalQuantile(share) * Math.sqrt(units);
  const excess = (t: number) => noncentralTCdf(t, degrees, noncentrality) - confidence;
  let reach = Math.sqrt(1 + noncentrality ** 2 / (2 * degrees));
  while (excess(noncentrality - reach) > 0 || excess(noncentrality + reach) < 0) reach *= 2;
  return bracketedRoot(excess, noncentrality - reach, noncentrality + reach) / Math.sqrt(units);
}

/** The share that conforms to all lines together, however they depend on one another: 1 − Σ(1 − pᵢ), never below 0. */
export function jointShare(shares: readonly number[]): number {
  return Math.max(0, 1 - shares.reduce((lost, share) => lost + (1 - share), 0));
}
