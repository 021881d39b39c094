// The evaluation against figures computed in numpy: every kind, on four networks and with four setups.
import { expect, test } from "vitest";
import type { Requirement, Setup, TwoPort } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { readNumber, type StoredNumber } from "~/rf/stored-result";
import truth from "../reference/evaluation.json";
import { item } from "./sweep-of";

interface Expected {
  verdict: string;
  value: StoredNumber;
  frequency: StoredNumber;
  limit: StoredNumber;
  margin: StoredNumber;
  interval: StoredNumber[];
  marginInterval: StoredNumber[];
  decidingFrequency: StoredNumber;
}

interface Case {
  network: string;
  requirement: Requirement;
  setup: Setup;
  setupName: string;
  impedance?: [number, number];
  expected: Expected;
}

interface StoredTrace {
  re: number[];
  im: number[];
}

type StoredNetwork = Record<"s11" | "s21" | "s12" | "s22", StoredTrace> & {
  frequency: number[];
  referenceImpedance: number[];
};

// Written by reference/recipes/make_evaluation_truth.py with numpy 1.24 alone: dense brute force, no code in common.
const cases = truth.cases as unknown as Case[];
const networks = new Map(Object.entries(truth.networks).map(([name, network]) => [name, twoPort(network)]));

function twoPort(stored: StoredNetwork): TwoPort {
  const trace = ({ re, im }: StoredTrace) => ({ re: Float64Array.from(re), im: Float64Array.from(im) });
  return {
    frequency: Float64Array.from(stored.frequency),
    s11: trace(stored.s11),
    s21: trace(stored.s21),
    s12: trace(stored.s12),
    s22: trace(stored.s22),
    referenceImpedance: [50, 50],
    comments: [],
    version: "1",
    notes: [],
  };
}

function networkOf(name: string): TwoPort {
  const network = networks.get(name);
  if (network === undefined) throw new RangeError(`no network ${name}`);
  return network;
}

/** Relative to the size of the figure: both sides compute in doubles, through dB and back. */
function isClose(actual: number, expected: StoredNumber | undefined, scale: number): boolean {
  const wanted = readNumber(expected ?? null);
  return actual === wanted || Math.abs(actual - wanted) <= 1e-9 * scale;
}

function differences({ requirement, setup, network, impedance, expected }: Case): string[] {
  const options = { setup, ...(impedance === undefined ? {} : { impedance }) };
  const result = item(evaluate(networkOf(network), [requirement], options));
  const scale = Math.max(
    1e-9,
    Math.abs(readNumber(expected.limit)),
    Math.min(1e12, Math.abs(readNumber(expected.value))),
  );
  const wrong: string[] = [];
  const check = (name: string, actual: number, wanted: StoredNumber | undefined, size: number) => {
    if (!isClose(actual, wanted, size)) wrong.push(`${name} ${actual} instead of ${wanted}`);
  };
  if (result.verdict !== expected.verdict) wrong.push(`verdict ${result.verdict} instead of ${expected.verdict}`);
  check("value", result.value, expected.value, scale);
  check("frequency", result.frequency, expected.frequency, 2e9);
  check("limit", result.limit, expected.limit, scale);
  check("margin", result.margin, expected.margin, scale);
  check("deciding frequency", result.decidingFrequency, expected.decidingFrequency, 2e9);
  for (const end of [0, 1] as const) {
    check(`interval[${end}]`, result.interval[end], expected.interval[end], scale);
    check(`marginInterval[${end}]`, result.marginInterval[end], expected.marginInterval[end], scale);
  }
  return wrong.map((text) => `${requirement.id} ${requirement.kind} ${network}: ${text}`);
}

const KINDS = [...new Set(cases.map(({ requirement }) => requirement.kind))];

test("the stored truth holds every kind of requirement and every verdict", () => {
  expect(KINDS).toHaveLength(11);
  const verdicts = new Set(cases.map(({ expected }) => expected.verdict));
  expect([...verdicts].sort()).toEqual(["conditional-fail", "conditional-pass", "fail", "pass"]);
});

test.each(KINDS)("%s agrees with numpy in value, place, limit, margin, both intervals and verdict", (kind) => {
  const chosen = cases.filter(({ requirement }) => requirement.kind === kind);
  expect(chosen.length).toBeGreaterThanOrEqual(12);
  expect(chosen.flatMap(differences)).toEqual([]);
});
