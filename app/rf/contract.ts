// The core's contract: the types every part of the product shares. After they are complete they change only by addition.

/** Samples on a frequency grid; transferable to and from a worker. */
export type Series = Float64Array<ArrayBuffer>;

/** One S-parameter, n points, linear. */
export interface Trace {
  readonly re: Series;
  readonly im: Series;
}

export interface TwoPort {
  /** Hz, strictly ascending, n >= 1. */
  readonly frequency: Series;
  readonly s11: Trace;
  readonly s21: Trace;
  readonly s12: Trace;
  readonly s22: Trace;
  /** Ohm, port 1 and port 2, real and positive. */
  readonly referenceImpedance: readonly [number, number];
  /** At most 1,000 lines. */
  readonly comments: readonly string[];
  readonly version: "1" | "2.0" | "2.1";
  /** What the reader repaired or doubts. */
  readonly notes: readonly Note[];
}

export type NoteCode =
  | "default-option-line"
  | "default-data-order"
  | "missing-end"
  | "keyword-indented"
  | "noise-count-missing"
  | "repeated-frequency"
  | "byte-order-mark"
  | "carriage-return-line-ends"
  | "utf-16"
  | "latin-1"
  | "fortran-exponent"
  | "trailing-separator"
  | "comments-cut"
  | "noise-data-skipped"
  | "not-passive"
  | "not-reciprocal"
  | "hole"
  | "wide-step"
  | "few-samples"
  | "at-floor"
  | "phase-step"
  | "delay-aperture"
  | "flat-offset"
  | "ports-swapped"
  | "reference-impedance"
  | "not-measured"
  | "constant-column"
  | "copied-column"
  | "identical-data"
  | "other-part"
  | "deep-rejection"
  | "sweeps-differ";

export interface Note {
  readonly code: NoteCode;
  readonly severity: "repaired" | "doubtful";
  /** With the figure that gave rise to it. */
  readonly message: string;
  readonly line?: number;
  readonly frequency?: readonly [number, number];
  readonly requirementId?: string;
}

export type Verdict = "pass" | "conditional-pass" | "conditional-fail" | "fail" | "not-covered";

/** Hz, from <= to. */
export type Band = readonly [number, number];

export type Limit =
  number | { readonly points: readonly (readonly [hz: number, db: number])[]; readonly scale: "linear" | "log" };

interface Common {
  readonly id: string;
  readonly temperature?: "ambient" | "range";
  /** Hz; the widest step between samples that still counts as covered. */
  readonly maxStep?: number;
}

export type Requirement = Common &
  (
    | { readonly kind: "insertion-loss"; readonly band: Band; readonly max: Limit }
    | { readonly kind: "ripple"; readonly band: Band; readonly max: number; readonly window?: number }
    | { readonly kind: "rejection"; readonly band: Band; readonly min: Limit; readonly relativeTo?: Band }
    | { readonly kind: "return-loss"; readonly port: 1 | 2; readonly band: Band; readonly min: Limit }
    | { readonly kind: "reverse-isolation"; readonly band: Band; readonly min: Limit }
    | { readonly kind: "group-delay"; readonly band: Band; readonly max: number; readonly aperture?: number }
    | {
        readonly kind: "group-delay-variation";
        readonly band: Band;
        readonly max: number;
        readonly window?: number;
        readonly aperture?: number;
      }
    | { readonly kind: "phase-linearity"; readonly band: Band; readonly max: number }
    | {
        readonly kind: "centre-frequency";
        readonly level: number;
        readonly nominal: number;
        readonly tolerance: number;
        readonly within?: Band;
      }
    | {
        readonly kind: "bandwidth";
        readonly level: number;
        readonly min?: number;
        readonly max?: number;
        readonly within?: Band;
      }
    | {
        readonly kind: "shape-factor";
        readonly levels: readonly [number, number];
        readonly max: number;
        readonly within?: Band;
      }
  );

/** Measurement setup of a sweep; every field optional, absent = no such term. */
export interface Setup {
  /** Expanded uncertainty (k = 2) of |S21|, dB. */
  readonly transmission?: number;
  /** Expanded uncertainty of a difference of |S21| within one sweep, dB. */
  readonly transmissionRelative?: number;
  /** dB below a through, positive. */
  readonly noiseFloor?: number;
  /** @default "peak" */
  readonly noiseFloorKind?: "peak" | "rms";
  /** Residual, dB, positive. */
  readonly directivity?: number;
  readonly sourceMatch?: number;
  readonly loadMatch?: number;
  /** Residual reflection tracking, ± dB. */
  readonly tracking?: number;
  /** Expanded uncertainty, s. */
  readonly groupDelay?: number;
  /** Expanded uncertainty, degree. */
  readonly phase?: number;
}

export interface Result {
  readonly id: string;
  readonly verdict: Verdict;
  /** Worst value in the requirement's unit; ±Infinity is legal, NaN only when nothing was reached. */
  readonly value: number;
  /** Hz, where the worst value lies. */
  readonly frequency: number;
  readonly limit: number;
  /** Positive complies, in the requirement's unit. */
  readonly margin: number;
  /** Of the value at the reported point. */
  readonly interval: readonly [number, number];
  /** What the verdict was read from. */
  readonly marginInterval: readonly [number, number];
  /** Hz, where the deciding end of that interval lies. */
  readonly decidingFrequency: number;
  readonly covered?: readonly Band[];
  readonly reason?: string;
  /** A setup field was taken from the RFQ's assumed setup. */
  readonly assumed?: boolean;
  /** The value stands at the noise floor. */
  readonly bound?: "at-least" | "at-most";
}

export interface Drift {
  readonly ppmPerKelvin: number;
  readonly either?: boolean;
  readonly lossPerKelvin?: number;
  /** °C. */
  readonly from: number;
  readonly to: readonly number[];
}

export interface EvaluateOptions {
  /** Ohm, of the specification. @default [50, 50] */
  readonly impedance?: readonly [number, number];
  readonly setup?: Setup;
  readonly drift?: Drift;
  /** Hz: where a band that starts at exactly 0 Hz is taken to start. */
  readonly lowestTestFrequency?: number;
}

/** Renormalised, with dB, phase and delay filled on first use: for live scoring while a limit moves. */
export interface Prepared {
  readonly kind: "prepared";
  readonly network: TwoPort;
  readonly impedance: readonly [number, number];
}

export interface Sweep {
  readonly id: string;
  readonly network: TwoPort | Prepared;
  readonly setup?: Setup;
}

export interface Measurement {
  readonly unit: string;
  /** °C. */
  readonly temperature: number;
  readonly sweeps: readonly Sweep[];
}

export interface Cell {
  readonly unit: string;
  readonly temperature: number;
  readonly sweepId: string;
  readonly predicted: boolean;
  readonly scored: boolean;
  readonly result: Result;
}

export interface Row {
  readonly requirementId: string;
  readonly cells: readonly Cell[];
  readonly verdict: Verdict;
  /** Index into cells, -1 if none. */
  readonly worst: number;
  readonly reason?: string;
}

export interface LotOptions extends Omit<EvaluateOptions, "drift" | "setup"> {
  readonly assumedSetup?: Setup;
  /** °C. */
  readonly range?: readonly [number, number];
  /** °C. @default 25 */
  readonly ambient?: number;
  readonly ppmPerKelvin?: number;
  readonly driftEither?: boolean;
  readonly lossPerKelvin?: number;
  /** How many units must cover the temperature range. @default 1 */
  readonly unitsOverRange?: number;
  readonly basis?: "measured" | "similar" | "simulated";
}
