// Columns that no instrument measured: written as zeros, constant, or copied from another.

import type { Note, Series, Trace, TwoPort } from "./contract.ts";

/** Linear, -200 dB: one-path test sets write zeros for what they cannot measure. */
const NOT_MEASURED_LEVEL = 1e-10;

/** True if the S-parameter lies below -200 dB at every point. */
export function isNotMeasured({ re, im }: Trace): boolean {
  return re.every((value, k) => Math.hypot(value, im[k] as number) < NOT_MEASURED_LEVEL);
}

export function checkColumns(network: TwoPort): Note[] {
  const { s11, s21, s12, s22 } = network;
  const notes = [
    ...checkColumn("S11", s11),
    ...checkColumn("S21", s21),
    ...checkColumn("S12", s12),
    ...checkColumn("S22", s22),
  ];
  if (isCopy(s22, s11))
    notes.push(doubt("copied-column", "S22 equals S11 number by number: it may not have been measured."));
  if (isCopy(s12, s21))
    notes.push(doubt("copied-column", "S12 equals S21 number by number: it may not have been measured."));
  return notes;
}

function checkColumn(name: string, trace: Trace): Note[] {
  if (isNotMeasured(trace)) {
    return [doubt("not-measured", `${name} lies below −200 dB at every point: it was not measured.`)];
  }
  const isConstant = trace.re.length > 1 && isSame(trace.re) && isSame(trace.im);
  return isConstant ? [doubt("constant-column", `${name} is the same number at every point.`)] : [];
}

const isSame = (series: Series) => series.every((value) => value === series[0]);

const isEqual = (one: Series, other: Series) => one.every((value, k) => value === other[k]);

/** One point may agree by chance; two zeros are already said to be not measured. */
function isCopy(one: Trace, other: Trace): boolean {
  return one.re.length > 1 && isEqual(one.re, other.re) && isEqual(one.im, other.im) && !isNotMeasured(one);
}

function doubt(code: "not-measured" | "constant-column" | "copied-column", message: string): Note {
  return { code, severity: "doubtful", message };
}
