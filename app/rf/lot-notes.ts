// Doubts about the data of a lot that no sweep shows by itself: sweeps of one measurement that differ, units with the same data.
import { mergeSetup } from "./assumed-setup.ts";
import type { Measurement, Note, Setup, Sweep, TwoPort } from "./contract.ts";
import { formatFrequency, formatLevel } from "./describe.ts";
import { celsiusList, listed } from "./lot-words.ts";
import { preparedAt } from "./prepare.ts";
import { sameDataGroups, unitsCountedAs } from "./same-data.ts";
import { boundedTrace, COMPARED, differenceOf, overlaps, type Compared, type Difference } from "./sweep-differences.ts";

/** A note and what it is about. */
export interface LotNote extends Note {
  /** Serial; of several units the first. */
  readonly unit: string;
  /** Serials, where it is about several; the first is the one they count as. */
  readonly units?: readonly string[];
  /** °C; absent where it is about the unit at all temperatures. */
  readonly temperature?: number;
  /** Ids of the sweeps it is about, if it is about sweeps. */
  readonly sweepIds?: readonly string[];
}

export interface LotContext {
  /** Ohm, of the specification. @default [50, 50] */
  readonly impedance?: readonly [number, number];
  readonly assumedSetup?: Setup;
}

/** Samples compared in a lot at most, in each parameter; beyond, every second, third … sample is. */
const MOST_COMPARED = 2_000_000;

/**
 * Notes on the lot as a whole, by unit and temperature in order of first appearance, data under two names first.
 *
 * - `identical-data`: two serials, or two temperatures of one, with the same numbers to the bit.
 * - `sweeps-differ`: two sweeps of one measurement that overlap and whose readings of |S21| or of a return loss differ there by
 *   more than both their uncertainties. One note a parameter, of the pair that differs most. A parameter of which no uncertainty
 *   is stated or assumed is not compared.
 */
export function checkLot(measurements: readonly Measurement[], context: LotContext = {}): LotNote[] {
  return [...identicalData(measurements), ...differingSweeps(measurements, context)];
}

/** Units that the notes found to hold another one's data, each with the unit it counts as. */
export const unitsAlike = (notes: readonly LotNote[]): Map<string, string> =>
  unitsCountedAs(notes.flatMap(({ code, units }) => (code === "identical-data" && units ? [units] : [])));

interface PlacedNetwork {
  readonly unit: string;
  readonly temperature: number;
  readonly sweep: Sweep;
}

const networkOf = ({ network }: Sweep): TwoPort => ("kind" in network ? network.network : network);

function placed(measurements: readonly Measurement[]): PlacedNetwork[] {
  return measurements.flatMap(({ unit, temperature, sweeps }) => sweeps.map((sweep) => ({ unit, temperature, sweep })));
}

function identicalData(measurements: readonly Measurement[]): LotNote[] {
  const all = placed(measurements);
  const groups = sameDataGroups(all.map(({ sweep }) => networkOf(sweep))).map((group) =>
    group.map((index) => all[index] as PlacedNetwork),
  );
  return [...underTwoSerials(groups), ...atTwoTemperatures(groups)];
}

/** One note for each set of serials, however many sweeps they share. */
function underTwoSerials(groups: readonly (readonly PlacedNetwork[])[]): LotNote[] {
  const bySerials = new Map<string, PlacedNetwork[][]>();
  for (const group of groups) {
    const serials = JSON.stringify(unitsOf(group));
    if (unitsOf(group).length > 1) bySerials.set(serials, [...(bySerials.get(serials) ?? []), [...group]]);
  }
  return [...bySerials.values()].map((shared): LotNote => {
    const members = shared.flat();
    const units = unitsOf(members);
    const temperatures = temperaturesOf(members);
    const sweeps = shared.length === 1 ? "one sweep" : `${shared.length} sweeps`;
    const message = `Units ${listed(units)} have the same data to the bit in ${sweeps}, at ${celsiusList(temperatures)}: they count as one unit.`;
    const [temperature] = temperatures.length === 1 ? temperatures : [];
    return { ...identical(message, members), units, ...(temperature === undefined ? {} : { temperature }) };
  });
}

function atTwoTemperatures(groups: readonly (readonly PlacedNetwork[])[]): LotNote[] {
  return groups.flatMap((group) =>
    unitsOf(group).flatMap((unit) => {
      const own = group.filter((member) => member.unit === unit);
      const temperatures = temperaturesOf(own);
      if (temperatures.length < 2) return [];
      const message = `Unit ${unit} has the same data to the bit at ${celsiusList(temperatures)}: it was measured at one of them at most.`;
      return [identical(message, own)];
    }),
  );
}

const unitsOf = (members: readonly PlacedNetwork[]): string[] => [...new Set(members.map(({ unit }) => unit))];
const temperaturesOf = (members: readonly PlacedNetwork[]): number[] =>
  [...new Set(members.map(({ temperature }) => temperature))].sort((a, b) => a - b);

const identical = (message: string, members: readonly PlacedNetwork[]): LotNote => ({
  code: "identical-data",
  severity: "doubtful",
  message,
  unit: members[0]?.unit ?? "",
  sweepIds: members.map(({ sweep }) => sweep.id),
});

interface ComparedSweep {
  readonly id: string;
  readonly network: TwoPort;
  readonly setup: Setup;
}

interface Overlapping {
  readonly unit: string;
  readonly temperature: number;
  readonly sweeps: readonly ComparedSweep[];
  /** Indices of sweeps that overlap. */
  readonly pairs: readonly (readonly [number, number])[];
}

function differingSweeps(measurements: readonly Measurement[], context: LotContext): LotNote[] {
  const groups = new Map<string, PlacedNetwork[]>();
  for (const one of placed(measurements)) {
    const key = `${one.temperature} ${one.unit}`;
    groups.set(key, [...(groups.get(key) ?? []), one]);
  }
  const overlapping = [...groups.values()]
    .filter(({ length }) => length > 1)
    .map((group) => overlapsOf(group, context));
  const stride = Math.max(1, Math.ceil(overlapping.reduce((sum, one) => sum + samplesOf(one), 0) / MOST_COMPARED));
  return overlapping.flatMap((measurement) => COMPARED.flatMap((parameter) => noteOn(parameter, measurement, stride)));
}

function overlapsOf(group: readonly PlacedNetwork[], { impedance, assumedSetup }: LotContext): Overlapping {
  const { unit, temperature } = group[0] as PlacedNetwork;
  const sweeps = group.map(({ sweep }) => ({
    id: sweep.id,
    network: preparedAt(sweep.network, impedance).network,
    setup: mergeSetup(sweep.setup, assumedSetup).setup,
  }));
  const frequencies = sweeps.map(({ network }) => network.frequency);
  const pairs = frequencies.flatMap((one, place) =>
    frequencies.flatMap((other, after) => (after > place && overlaps(one, other) ? [[place, after] as const] : [])),
  );
  return { unit, temperature, sweeps, pairs };
}

function samplesOf({ sweeps, pairs }: Overlapping): number {
  const points = sweeps.map(({ network }) => network.frequency.length);
  return pairs.reduce((sum, [one, other]) => sum + (points[one] ?? 0) + (points[other] ?? 0), 0);
}

/** One note on the pair that differs most in a parameter, if any does. */
function noteOn(parameter: Compared, { unit, temperature, sweeps, pairs }: Overlapping, stride: number): LotNote[] {
  const traces = sweeps.map(({ network, setup }) => boundedTrace(network, parameter, setup));
  const differing = pairs.flatMap((pair) => {
    const [one, other] = pair.map((index) => traces[index] ?? null);
    const difference = one && other ? differenceOf(one, other, stride) : null;
    return difference === null ? [] : [{ pair, difference }];
  });
  const [first, ...rest] = differing;
  if (first === undefined) return [];
  const worst = rest.reduce((most, one) => (one.difference.excess > most.difference.excess ? one : most), first);
  const others =
    rest.length === 0 ? "" : ` ${rest.length} other ${rest.length === 1 ? "pair differs" : "pairs differ"} too.`;
  return [
    {
      code: "sweeps-differ",
      severity: "doubtful",
      message: `${differenceWords(parameter, worst.difference)}${others}`,
      frequency: worst.difference.range,
      unit,
      temperature,
      sweepIds: worst.pair.map((index) => sweeps[index]?.id ?? ""),
    },
  ];
}

const PARAMETER_WORDS: Record<Compared, string> = {
  s21: "the loss S21",
  s11: "the return loss of port 1",
  s22: "the return loss of port 2",
};

function differenceWords(
  parameter: Compared,
  { frequency, readings, excess, range, count, compared }: Difference,
): string {
  const [one, other] = readings;
  const place = `at ${formatFrequency(frequency)}`;
  const beyond = Number.isFinite(excess) ? `${formatLevel(excess)} more than` : "more than";
  const spread = `from ${formatFrequency(range[0])} to ${formatFrequency(range[1])}, at ${count} of ${compared} samples`;
  return `Two sweeps differ in ${PARAMETER_WORDS[parameter]}: ${decibels(one)} and ${decibels(other)} ${place}, ${beyond} their uncertainties allow${count > 1 ? `; they differ ${spread}` : ""}.`;
}

const decibels = (level: number): string => (Number.isFinite(level) ? formatLevel(level) : "a loss without end");
