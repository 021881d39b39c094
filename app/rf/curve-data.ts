// A measurement's curves as they are sent to a figure: thinned to what it can show, rounded, JSON-safe.
import { needsOneSweep } from "./assess.ts";
import type { Band, Prepared, Series, Setup, Trace } from "./contract.ts";
import { coverageOfBands, segmentsWithin } from "./coverage.ts";
import { curvesOf } from "./curves.ts";
import { aperturesWithin, delayCurve, type DelayOptions } from "./delay-curve.ts";
import { bandOf, firstAtOrAbove } from "./frequency.ts";
import { openImpedance, terminatedImpedance } from "./input-impedance.ts";
import { marginCurve, type MarginCurve, type PointwiseRequirement } from "./margin-curve.ts";
import { storeNumber, type StoredNumber } from "./stored-result.ts";
import { extremeSamples, locusSamples } from "./thin-curves.ts";

/** One sweep of a measurement, at the specification's impedances and with the setup it is scored with. */
export interface PreparedSweepData {
  readonly id: string;
  readonly prepared: Prepared;
  readonly setup: Setup;
}

/** What a figure can show, and the part of the frequency axis it is zoomed to. */
export interface Resolution {
  /** px columns. */
  readonly columns: number;
  /** Hz; finer inside, as coarse as before outside. */
  readonly window?: Band | undefined;
}

/** A stretch of the margin: n points, frequency in Hz, the rest in the requirement's core unit (dB, s). */
export interface MarginStretchData {
  readonly sweepId: string;
  readonly frequency: readonly number[];
  readonly margin: readonly StoredNumber[];
  readonly lower: readonly StoredNumber[];
  readonly upper: readonly StoredNumber[];
}

export interface MarginData {
  readonly stretches: readonly MarginStretchData[];
  /** Hz, the band as tested. */
  readonly band: Band;
  /** Hz, what no sweep that counts covers. */
  readonly missing: readonly Band[];
}

/** dB and Ω to a hundred-thousandth, Γ too; what a figure shows has two to four digits. */
const LEVEL_STEP = 1e-5;
const SECONDS_STEP = 1e-14;
/** In the plane of Γ: a thousandth of a chart 600 px across is under a pixel. */
const LOCUS_STEP = 0.004;
const LOCUS_STEP_IN_BAND = 0.0015;
const MOST_LOCUS_POINTS = 700;

/**
 * The margin against frequency of one measurement. A figure that needs one sweep comes from the sweeps that reach all it
 * needs, as in scoring, where there are any.
 */
export function marginData(
  sweeps: readonly PreparedSweepData[],
  requirement: PointwiseRequirement,
  options: Resolution & { readonly lowestTestFrequency?: number | undefined },
): MarginData {
  const { lowestTestFrequency } = options;
  const curves = sweeps.map(({ id, prepared, setup }) => ({
    id,
    curve: marginCurve(prepared, requirement, { setup, lowestTestFrequency }),
  }));
  const whole = curves.filter(({ curve }) => curve.stretches.length > 0 && curve.missing.length === 0);
  const counting = needsOneSweep(requirement) && whole.length > 0 ? whole : curves;
  const band = curves[0]?.curve.band ?? requirement.band;
  const step = requirement.kind === "group-delay" ? SECONDS_STEP : LEVEL_STEP;
  return {
    stretches: counting.flatMap(({ id, curve }) => marginStretches(id, curve, step, options)),
    band,
    missing: coverageOfBands(
      counting.flatMap(({ curve }) => curve.covered),
      band,
    ).missing,
  };
}

function marginStretches(sweepId: string, { stretches }: MarginCurve, step: number, resolution: Resolution) {
  return stretches.map(({ frequency, margin, lower, upper }): MarginStretchData => {
    const kept = thinned(frequency, [margin, lower, upper], resolution);
    const shown = (values: Series) => kept.map((index) => storeNumber(rounded(values[index] as number, step)));
    return {
      sweepId,
      frequency: frequenciesAt(frequency, kept),
      margin: shown(margin),
      lower: shown(lower),
      upper: shown(upper),
    };
  });
}

/** A reflection in the plane: n points, frequency in Hz. */
export interface LocusData {
  readonly sweepId: string;
  readonly port: 1 | 2;
  /** Ω that Γ is normalised to. */
  readonly reference: number;
  readonly frequency: readonly number[];
  readonly re: readonly number[];
  readonly im: readonly number[];
}

/** Reflections of both ports, those that were measured; finer within the bands. */
export function locusData(sweeps: readonly PreparedSweepData[], bands: readonly Band[]): LocusData[] {
  return ([1, 2] as const).flatMap((port) =>
    sweeps.flatMap(({ id, prepared }) => {
      const parameter = port === 1 ? "s11" : "s22";
      if (!curvesOf(prepared).isMeasured(parameter)) return [];
      const { frequency, referenceImpedance } = prepared.network;
      const locus = prepared.network[parameter];
      const kept = locusIndices(frequency, locus, bands);
      return [
        {
          sweepId: id,
          port,
          reference: referenceImpedance[port - 1] as number,
          frequency: frequenciesAt(frequency, kept),
          re: kept.map((index) => rounded(locus.re[index] as number, LEVEL_STEP)),
          im: kept.map((index) => rounded(locus.im[index] as number, LEVEL_STEP)),
        },
      ];
    }),
  );
}

function locusIndices(frequency: Series, locus: Trace, bands: readonly Band[]): number[] {
  const kept = new Set(locusSamples(locus, { distance: LOCUS_STEP, most: MOST_LOCUS_POINTS }));
  for (const band of bands) {
    const first = firstAtOrAbove(frequency, band[0]);
    const end = firstAtOrAbove(frequency, band[1] * (1 + 1e-9));
    const part = { re: locus.re.subarray(first, end), im: locus.im.subarray(first, end) };
    const options = { distance: LOCUS_STEP_IN_BAND, most: MOST_LOCUS_POINTS };
    for (const index of locusSamples(part, options)) kept.add(first + index);
  }
  return [...kept].sort((one, other) => one - other);
}

/** A stretch of the group delay without holes: n points, Hz and s. */
export interface DelayStretchData {
  readonly sweepId: string;
  readonly frequency: readonly number[];
  readonly delay: readonly number[];
}

export interface DelayData {
  readonly stretches: readonly DelayStretchData[];
  /** Hz, least and largest aperture in use within the band asked for; null where no delay lies in it. */
  readonly aperture: Band | null;
  /** s, expanded (k = 2); null where the setup states none. */
  readonly uncertainty: number | null;
}

/** The group delay of one measurement, as a delay line is scored: with its aperture and its widest step. */
export function delayData(
  sweeps: readonly PreparedSweepData[],
  options: DelayOptions & { readonly band: Band },
  resolution: Resolution,
): DelayData {
  const measured = sweeps.filter(({ prepared }) => curvesOf(prepared).isMeasured("s21"));
  const curves = measured.map(({ id, prepared }) => ({ id, curve: delayCurve(curvesOf(prepared), options) }));
  const apertures = curves.flatMap(({ curve }) => aperturesWithin(curve, options.band) ?? []);
  const uncertainties = measured.flatMap(({ setup }) => setup.groupDelay ?? []);
  return {
    stretches: curves.flatMap(({ id, curve: { frequency, delay } }) =>
      segmentsWithin(frequency, delay, bandOf(frequency), options.maxStep).map(({ first, last }) => {
        const [x, y] = [frequency.slice(first, last + 1), delay.slice(first, last + 1)];
        const kept = thinned(x, [y], resolution);
        return {
          sweepId: id,
          frequency: frequenciesAt(x, kept),
          delay: kept.map((index) => rounded(y[index] as number, SECONDS_STEP)),
        };
      }),
    ),
    aperture: apertures.length === 0 ? null : [Math.min(...apertures), Math.max(...apertures)],
    uncertainty: uncertainties.length === 0 ? null : Math.max(...uncertainties),
  };
}

/** Impedances at one port on one sweep: n points, Hz and Ω; null where there is none. */
export interface ImpedanceData {
  readonly sweepId: string;
  readonly port: 1 | 2;
  /** Ω the far port is terminated in. */
  readonly termination: number;
  readonly frequency: readonly number[];
  readonly terminated: ImpedanceParts;
  readonly open: ImpedanceParts;
  /** Samples of the whole sweep at which each of the two has no value, of how many. */
  readonly absent: { readonly terminated: number; readonly open: number };
  readonly points: number;
}

export interface ImpedanceParts {
  readonly re: readonly (number | null)[];
  readonly im: readonly (number | null)[];
}

/** Impedances at a port, with the far port terminated and open. */
export function impedanceData(
  sweeps: readonly PreparedSweepData[],
  port: 1 | 2,
  resolution: Resolution,
): ImpedanceData[] {
  return sweeps.map(({ id, prepared }) => {
    const { frequency, referenceImpedance } = prepared.network;
    const terminated = terminatedImpedance(prepared, port);
    const open = openImpedance(prepared, port);
    const kept = thinned(frequency, [terminated.re, terminated.im, open.re, open.im], resolution);
    return {
      sweepId: id,
      port,
      termination: referenceImpedance[port === 1 ? 1 : 0],
      frequency: frequenciesAt(frequency, kept),
      terminated: partsAt(terminated, kept),
      open: partsAt(open, kept),
      absent: { terminated: absentIn(terminated), open: absentIn(open) },
      points: frequency.length,
    };
  });
}

const absentIn = ({ re }: Trace): number => re.reduce((count, value) => count + (Number.isNaN(value) ? 1 : 0), 0);

function partsAt({ re, im }: Trace, kept: readonly number[]): ImpedanceParts {
  const figure = (values: Series) =>
    kept.map((index) => {
      const value = values[index] as number;
      return Number.isFinite(value) ? Number(value.toPrecision(7)) : null;
    });
  return { re: figure(re), im: figure(im) };
}

/** Samples of the whole grid, with those of the window as fine as the columns allow. */
function thinned(frequency: Series, curves: readonly Series[], { columns, window }: Resolution): number[] {
  const whole = extremeSamples(frequency, curves, columns);
  const reaches = window !== undefined && window[0] <= (frequency.at(-1) ?? NaN) && window[1] >= (frequency[0] ?? NaN);
  if (!reaches) return whole;
  const fine = extremeSamples(frequency, curves, columns, window);
  return [...new Set([...whole, ...fine])].sort((one, other) => one - other);
}

const frequenciesAt = (frequency: Series, kept: readonly number[]): number[] =>
  kept.map((index) => Math.round(frequency[index] as number));

/** To a step; infinities and NaN stay. */
function rounded(value: number, step: number): number {
  return Number.isFinite(value) ? Number((Math.round(value / step) * step).toPrecision(12)) : value;
}
