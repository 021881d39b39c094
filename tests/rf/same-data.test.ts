// Data alike to the bit are found, and a difference of one last digit is a difference.
import { expect, test } from "vitest";
import type { Trace, TwoPort } from "~/rf/contract";
import { identicalUnits, sameData } from "~/rf/same-data";

function network(seed: number, length = 50): TwoPort {
  const trace = (offset: number): Trace => ({
    re: Float64Array.from({ length }, (_, k) => Math.sin(seed + offset + k)),
    im: Float64Array.from({ length }, (_, k) => Math.cos(seed + offset + k)),
  });
  const frequency = Float64Array.from({ length }, (_, k) => 1e9 + k * 1e6);
  const traces = { s11: trace(0), s21: trace(1), s12: trace(2), s22: trace(3) };
  return { frequency, ...traces, referenceImpedance: [50, 50], comments: [`unit ${seed}`], version: "1", notes: [] };
}

const copyOf = (one: TwoPort): TwoPort => ({ ...structuredClone(one), comments: ["another serial"] });

test("pairs alike to the bit are listed in order, each once", () => {
  const [first, second] = [network(1), network(2)];
  expect(sameData([first, second, copyOf(first), copyOf(second), copyOf(first)])).toEqual([
    [0, 2],
    [0, 4],
    [1, 3],
    [2, 4],
  ]);
});

test("one last digit, one point fewer, or another column order is another measurement", () => {
  const one = network(1);
  const digit = copyOf(one);
  digit.s12.im[49] = (digit.s12.im[49] as number) * (1 + Number.EPSILON);
  const swapped: TwoPort = { ...copyOf(one), s21: one.s12, s12: one.s21 };
  expect(sameData([one, digit, network(1, 49), swapped])).toEqual([]);
});

test("no networks and one network have no pairs", () => {
  expect(sameData([])).toEqual([]);
  expect(sameData([network(1)])).toEqual([]);
});

test("a unit whose data is another's counts as that one, however many copies there are", () => {
  const one = network(1);
  const files = [
    { unit: "A", network: one },
    { unit: "B", network: network(2) },
    { unit: "C", network: copyOf(one) },
    { unit: "D", network: copyOf(one) },
    { unit: "A", network: copyOf(one) },
  ];
  expect([...identicalUnits(files)]).toEqual([
    ["C", "A"],
    ["D", "A"],
  ]);
});

test("units alike by different sweeps all count as one", () => {
  const [one, other] = [network(1), network(2)];
  const files = [
    { unit: "B", network: one },
    { unit: "A", network: other },
    { unit: "C", network: copyOf(one) },
    { unit: "B", network: copyOf(other) },
  ];
  expect([...identicalUnits(files)]).toEqual([
    ["C", "A"],
    ["B", "A"],
  ]);
});
