// Writes a two-port as a Touchstone 1.1 file that reads back to the very same numbers.

import type { Trace, TwoPort } from "./contract.ts";

/**
 * Version 1.1, Hz, S, RI; each number with the fewest digits that read back the same.
 *
 * @throws RangeError if a number is not finite: the format has no such number
 */
export function formatTouchstone(network: TwoPort): string {
  const { frequency, s11, s21, s12, s22, referenceImpedance } = network;
  const [first, second] = referenceImpedance;
  const lines = network.comments.map((comment) => `! ${comment.replace(/[\r\n]+/g, " ")}`);
  lines.push(`# Hz S RI R ${first === second ? digits(first) : `${digits(first)} ${digits(second)}`}`);
  const traces = [s11, s21, s12, s22];
  for (let k = 0; k < frequency.length; k += 1) {
    lines.push(`${digits(frequency[k])} ${traces.map((trace) => pair(trace, k)).join(" ")}`);
  }
  return `${lines.join("\n")}\n`;
}

const pair = ({ re, im }: Trace, k: number) => `${digits(re[k])} ${digits(im[k])}`;

function digits(value: number | undefined): string {
  if (value === undefined || !Number.isFinite(value)) throw new RangeError(`Touchstone has no number for ${value}`);
  return Object.is(value, -0) ? "-0" : String(value);
}
