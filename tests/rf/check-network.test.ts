// Notes on data quality: each kind once with its place, and none for sound data.
import { expect, test } from "vitest";
import { checkNetwork, type CheckContext } from "~/rf/check-network";
import type { NoteCode, Requirement, TwoPort } from "~/rf/contract";
import { twoPortOf, type ComplexNumber, type MatrixSeries } from "../support/complex-matrix";

const polar = (magnitude: number, degrees: number): ComplexNumber => ({
  re: magnitude * Math.cos((degrees * Math.PI) / 180),
  im: magnitude * Math.sin((degrees * Math.PI) / 180),
});

interface Levels {
  readonly s11?: (k: number) => ComplexNumber;
  readonly s21?: (k: number) => ComplexNumber;
  readonly s12?: (k: number) => ComplexNumber;
  readonly s22?: (k: number) => ComplexNumber;
}

/** A matched filter with a loss of 1 dB and 10 degrees a sample, reciprocal but for rounding, 1 to 2 GHz in 10 MHz. */
function network(levels: Levels = {}, frequency = grid(101), comments: readonly string[] = []): TwoPort {
  const transmission = (k: number) => polar(0.89, -10 * k);
  const {
    s11 = (k: number) => polar(0.1, -20 * k),
    s21 = transmission,
    s12 = (k: number) => polar(0.8900001, -10 * k),
    s22 = (k: number) => polar(0.11, -20 * k),
  } = levels;
  const s: MatrixSeries = frequency.map((_, k) => [
    [s11(k), s12(k)],
    [s21(k), s22(k)],
  ]);
  return twoPortOf(frequency, s, [50, 50], comments);
}

const grid = (points: number) => Array.from({ length: points }, (_, k) => 1e9 + k * 10e6);
const codes = (data: TwoPort, context?: CheckContext): NoteCode[] =>
  checkNetwork(data, context).map(({ code }) => code);
const only = (data: TwoPort, context?: CheckContext) => {
  const notes = checkNetwork(data, context);
  expect(notes).toHaveLength(1);
  return notes[0];
};

test("sound data give no note", () => {
  const requirements: Requirement[] = [
    { id: "1", kind: "insertion-loss", band: [1.2e9, 1.8e9], max: 2 },
    { id: "2", kind: "rejection", band: [1.2e9, 1.8e9], min: 40, maxStep: 10e6 },
  ];
  const context = { requirements, impedance: [50, 50], setup: { noiseFloor: 90 }, partNumber: "TB-100" } as const;
  expect(checkNetwork(network(), context)).toEqual([]);
});

test("a network with gain is not passive, beyond the uncertainty that was stated", () => {
  // By hand: matched, 0.04 dB of gain at sample 50.
  const s21 = (k: number) => polar(k === 50 ? 10 ** (0.04 / 20) : 0.89, -10 * k);
  const data = network({ s11: () => polar(1e-9, 0), s22: () => polar(2e-9, 0), s21, s12: s21 });
  expect(codes(data)).not.toContain("not-passive");
  const note = checkNetwork(data, { setup: { transmission: 0.03 } }).find(({ code }) => code === "not-passive");
  expect(note).toMatchObject({ severity: "doubtful", frequency: [1.5e9, 1.5e9] });
  expect(note?.message).toMatch(/1 point.*0\.04 dB.*1\.5/);
});

test("a lossless through is passive to the last digit", () => {
  const through = () => polar(1, 0);
  const data = network({ s11: () => polar(0, 0), s22: () => polar(0, 0), s21: through, s12: through });
  expect(codes(data, { setup: { transmission: 0 } })).not.toContain("not-passive");
});

test("numbers whose squares overflow are gain and not reciprocal, not a reason to fail", () => {
  const huge = network({ s21: (k) => polar(k === 50 ? 1e300 : 0.89, -10 * k), s12: () => polar(1e-10, 0) });
  const notes = checkNetwork(huge, { setup: { noiseFloor: 250 } });
  expect(notes.find(({ code }) => code === "not-passive")).toMatchObject({ frequency: [1.5e9, 1.5e9] });
  expect(notes.find(({ code }) => code === "not-passive")?.message).toContain("6000.00 dB");
  expect(notes.find(({ code }) => code === "not-reciprocal")?.message).toContain("6200.00 dB");
});

test("S21 and S12 that differ are noted where both stand above the floor", () => {
  const weak = (k: number) => polar(k === 30 ? 1e-4 : 0.89, -10 * k);
  const reverse = (k: number) => polar(k === 30 ? 3e-4 : 0.89, -10 * k);
  const data = network({ s21: weak, s12: reverse });
  expect(codes(data)).toEqual([]); // 30 lies more than 60 dB below the peak
  expect(codes(data, { setup: { noiseFloor: 88 } })).toEqual([]); // less than 10 dB above the floor
  const note = only(data, { setup: { noiseFloor: 100 } });
  expect(note).toMatchObject({ code: "not-reciprocal", frequency: [1.3e9, 1.3e9] });
  expect(note?.message).toContain("9.54 dB"); // 20 log10 3
});

test("columns of zeros, constants and copies are noted by name", () => {
  const zero = () => polar(0, 0);
  expect(only(network({ s12: zero }))).toMatchObject({ code: "not-measured", message: /^S12/ });
  expect(only(network({ s22: () => polar(1e-11, 5) }))).toMatchObject({ code: "not-measured", message: /^S22/ });
  expect(only(network({ s11: () => polar(0.1, 3) }))).toMatchObject({ code: "constant-column", message: /^S11/ });
  const reflection = (k: number) => polar(0.1, -7 * k);
  expect(only(network({ s11: reflection, s22: reflection }))).toMatchObject({ code: "copied-column", message: /^S22/ });
  const transmission = (k: number) => polar(0.89, -10 * k);
  expect(only(network({ s12: transmission }))).toMatchObject({ code: "copied-column", message: /^S12/ });
});

test("a phase that moves over 135 degrees between samples is noted, unless it is noise", () => {
  const jump = (k: number) => polar(0.89, k < 40 ? -10 * k : -10 * k - 140);
  const note = only(network({ s21: jump }));
  expect(note).toMatchObject({ code: "phase-step", frequency: [1.39e9, 1.4e9] });
  expect(note?.message).toMatch(/1 step: by 150°/);
  const noise = (k: number) => polar(k === 40 ? 1e-5 : 0.89, k === 40 ? 100 : -10 * k);
  expect(codes(network({ s21: noise, s12: noise }))).not.toContain("phase-step");
});

test("rejection above 140 dB and readings at the floor are noted with their stretch", () => {
  const deep = (k: number) => polar(k >= 20 && k <= 25 ? 10 ** (-150 / 20) : 0.89, -10 * k);
  const note = only(network({ s21: deep }));
  expect(note).toMatchObject({ code: "deep-rejection", frequency: [1.2e9, 1.25e9] });
  expect(note?.message).toMatch(/6 points.*150/);
  const low = (k: number) => polar(k === 20 ? 10 ** (-85 / 20) : 0.89, -10 * k);
  const floored = network({ s21: low });
  expect(codes(floored)).toEqual([]);
  expect(codes(floored, { setup: { noiseFloor: 92 } })).toEqual([]);
  expect(only(floored, { setup: { noiseFloor: 90 } })).toMatchObject({ code: "at-floor", frequency: [1.2e9, 1.2e9] });
  // An rms figure over 101 points is lowered by 10 log10 ln 101 = 6.64 dB, to 85.4 dB.
  expect(codes(floored, { setup: { noiseFloor: 92, noiseFloorKind: "rms" } })).toEqual(["at-floor"]);
});

test("a hole is a step wider than both neighbours, not a change of spacing", () => {
  const holed = [...grid(50), ...grid(101).slice(60)];
  expect(only(network({}, holed))).toMatchObject({ code: "hole", frequency: [1.49e9, 1.6e9] });
  const twoSpacings = [...grid(50), ...Array.from({ length: 20 }, (_, k) => 1.49e9 + (k + 1) * 100e6)];
  expect(codes(network({}, twoSpacings))).toEqual([]);
});

test("steps are wide beyond maxStep, else beyond a 500th of the frequency in stopbands", () => {
  const rejection = (maxStep?: number): Requirement => ({
    id: "3.1",
    kind: "rejection",
    band: [1.2e9, 1.3e9],
    min: 40,
    ...(maxStep !== undefined && { maxStep }),
  });
  const note = only(network(), { requirements: [rejection()] });
  expect(note).toMatchObject({ code: "wide-step", requirementId: "3.1", frequency: [1.2e9, 1.21e9] });
  expect(codes(network(), { requirements: [rejection(10e6)] })).toEqual([]);
  expect(only(network(), { requirements: [rejection(5e6)] })?.message).toContain("not covered");
});

test("fewer than 20 samples in a passband are noted, where the sweep reaches it", () => {
  const loss = (from: number, to: number): Requirement => ({
    id: "2.1",
    kind: "insertion-loss",
    band: [from, to],
    max: 2,
  });
  expect(codes(network(), { requirements: [loss(1.2e9, 1.39e9)] })).toEqual([]); // 20 samples
  const note = only(network(), { requirements: [loss(1.2e9, 1.38e9)] });
  expect(note).toMatchObject({ code: "few-samples", requirementId: "2.1", message: /^19 samples/ });
  expect(codes(network(), { requirements: [loss(3e9, 4e9), loss(1.5e9, 1.5e9)] })).toEqual([]);
});

test("a delay without an aperture names the one it is taken over, per line", () => {
  const delay = (aperture?: number): Requirement => ({
    id: "5.1",
    kind: "group-delay",
    band: [1.2e9, 1.6e9],
    max: 1e-8,
    ...(aperture !== undefined && { aperture }),
  });
  const note = only(network(), { requirements: [delay()] });
  expect(note).toMatchObject({ code: "delay-aperture", requirementId: "5.1", frequency: [1.2e9, 1.6e9] });
  // Two steps of 10 MHz.
  expect(note?.message).toContain("20.00 MHz;");
  expect(codes(network(), { requirements: [delay(20e6)] })).toEqual([]);
  const uneven = [
    ...grid(51),
    ...grid(101)
      .slice(51)
      .filter((_, k) => k % 2 === 1),
  ];
  const spread = checkNetwork(network({}, uneven), { requirements: [delay()] });
  expect(spread.find(({ code }) => code === "delay-aperture")?.message).toContain("20.00 MHz to 40.00 MHz");
});

test("references unlike the specification's and comments that name another part are noted", () => {
  expect(only(network(), { impedance: [50, 75] })).toMatchObject({
    code: "reference-impedance",
    message: /50 Ω.*50 Ω and 75 Ω/,
  });
  const commented = (...comments: string[]) => codes(network({}, grid(101), comments), { partNumber: "TB-1200 A" });
  expect(commented("Part no.: TB1300A")).toEqual(["other-part"]);
  expect(commented("P/N TB-1300")).toEqual(["other-part"]);
  expect(commented("Part number: tb1200a", "P/N: TB 1200 A")).toEqual([]);
  expect(commented("Exported in part: see note", "TB-1300 is another one")).toEqual([]);
  expect(codes(network({}, grid(101), ["Part no.: TB1300A"]))).toEqual([]);
});
