// A flat offset near a pad's is noted; a filter that is merely lossy, solved live by ngspice, is not.
import { beforeAll, expect, test } from "vitest";
import { checkFlatOffset } from "~/rf/check-offset";
import type { Requirement, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { twoPortOf, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";
import { item } from "./sweep-of";

interface Lossy {
  readonly quality: number;
  readonly f_hz: readonly number[];
  readonly s: MatrixSeries;
}

/** Unloaded Q: 3,000 loses about 0.25 dB, 230, 115, 69 and 32 about as much as the usual pads. */
const QUALITIES = [3000, 400, 300, 260, 230, 210, 180, 150, 125, 115, 105, 85, 69, 60, 45, 33, 32, 30];
let filters: readonly Lossy[];
beforeAll(() => {
  filters = runPython("lossy_filters.py", [], { quality: QUALITIES }) as Lossy[];
}, 240_000);

const loss = (from: number, to: number): Requirement => ({
  id: "2.1",
  kind: "insertion-loss",
  band: [from, to],
  max: 1,
});
const PASSBAND = loss(1.92e9, 1.98e9);
const networkOf = ({ f_hz, s }: Lossy): TwoPort => twoPortOf(f_hz, s);

/** With a matched attenuator before port 1: S21 and S12 by its loss, S11 by twice. */
function padded(network: TwoPort, decibels: number): TwoPort {
  const scaled = ({ re, im }: TwoPort["s21"], by: number) => ({
    re: re.map((value) => value * 10 ** (-by / 20)),
    im: im.map((value) => value * 10 ** (-by / 20)),
  });
  const { s11, s21, s12 } = network;
  return { ...network, s11: scaled(s11, 2 * decibels), s21: scaled(s21, decibels), s12: scaled(s12, decibels) };
}

test("a pad of 3, 6, 10 or 20 dB before a filter of low loss is noted, with figures and place", () => {
  const filter = networkOf(item(filters));
  expect(checkFlatOffset(filter, [PASSBAND])).toEqual([]);
  for (const pad of [3, 6, 10, 20]) {
    const [note, ...others] = checkFlatOffset(padded(filter, pad), [PASSBAND]);
    expect(others).toEqual([]);
    expect(note).toMatchObject({ code: "flat-offset", severity: "doubtful", frequency: [1.92e9, 1.98e9] });
    expect(note?.message).toContain(`near a ${pad} dB pad`);
  }
  for (const pad of [1.5, 4.5, 8, 15]) expect(checkFlatOffset(padded(filter, pad), [PASSBAND])).toEqual([]);
});

test("lossy filters are not noted, whatever their loss and however narrow the passband asked for", () => {
  const least = filters.map((filter) => {
    const { s21 } = networkOf(filter);
    return -20 * Math.log10(Math.max(...s21.re.map((re, k) => Math.hypot(re, s21.im[k] as number))));
  });
  // The list is to hold losses near every pad.
  for (const pad of [3, 6, 10, 20])
    expect(
      least.some((level) => Math.abs(level - pad) < 0.5),
      `${pad} dB`,
    ).toBe(true);
  for (const filter of filters)
    for (const half of [30e6, 25e6, 20e6, 15e6, 10e6, 5e6]) {
      const line = loss(1.95e9 - half, 1.95e9 + half);
      expect(checkFlatOffset(networkOf(filter), [line]), `Q ${filter.quality}, ± ${half / 1e6} MHz`).toEqual([]);
    }
});

test("a mismatched passband, one not swept whole or with few samples, and a specification without a loss line give no note", () => {
  const filter = padded(networkOf(item(filters)), 6);
  const mismatched = { ...filter, s22: { re: filter.s22.re.map(() => 0.5), im: filter.s22.im } };
  expect(checkFlatOffset(mismatched, [PASSBAND])).toEqual([]);
  expect(checkFlatOffset(filter, [loss(1.8e9, 1.98e9)])).toEqual([]);
  expect(checkFlatOffset(filter, [loss(1.95e9, 1.953e9)])).toEqual([]);
  expect(checkFlatOffset(filter, [{ id: "3.1", kind: "rejection", band: [1.92e9, 1.98e9], min: 1 }])).toEqual([]);
});

test("nothing is subtracted: the figures stay as read", () => {
  const filter = padded(networkOf(item(filters)), 6);
  const [before] = evaluate(filter, [PASSBAND]);
  checkFlatOffset(filter, [PASSBAND]);
  expect(evaluate(filter, [PASSBAND])[0]).toEqual(before);
  expect(before?.value).toBeGreaterThan(6);
});
