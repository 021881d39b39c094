// Lots: several sweeps, units and temperatures, coverage of the range, roll-up, caps, assumed setups, predictions.
import { expect, test } from "vitest";
import type { LotOptions, Measurement, Requirement, Row, Sweep } from "~/rf/contract";
import { evaluateLot } from "~/rf/lot";
import checkValues from "../reference/check-values.json";
import { item, sweepOf } from "./sweep-of";

const passband: Requirement = { id: "loss", kind: "insertion-loss", band: [1e9, 2e9], max: 2 };
const ambientLine: Requirement = { ...passband, temperature: "ambient" };
const rejection: Requirement = { id: "rej", kind: "rejection", band: [3e9, 4e9], min: 40 };

// Each sweep of its own loss, so that no two units hold the same data.
const flat = (loss: number, id = `${loss} dB`): Sweep => ({
  id,
  network: sweepOf({ frequency: [0.9e9, 1.5e9, 2.1e9], loss: [loss, loss, loss] }),
});
const at = (unit: string, temperature: number, ...sweeps: Sweep[]): Measurement => ({ unit, temperature, sweeps });
const row = (measurements: Measurement[], requirement: Requirement = passband, options: LotOptions = {}): Row =>
  item(evaluateLot(measurements, [requirement], options));

const RANGE: LotOptions = { range: [-30, 70] };
const overRange = (unit: string, loss: number): Measurement[] => [
  at(unit, -30, flat(loss)),
  at(unit, 25, flat(loss + 0.01)),
  at(unit, 70, flat(loss + 0.02)),
];

test("a row has a cell per measurement, its verdict is the worst of them and it points to the worst cell", () => {
  const result = row([at("1", 25, flat(1)), at("2", 25, flat(2.5)), at("3", 25, flat(1.5))]);
  expect(result).toMatchObject({ requirementId: "loss", verdict: "fail", worst: 1 });
  expect(result.cells.map(({ unit, sweepId }) => [unit, sweepId])).toEqual([
    ["1", "1 dB"],
    ["2", "2.5 dB"],
    ["3", "1.5 dB"],
  ]);
  expect(result.cells.map(({ result: { verdict } }) => verdict)).toEqual(["pass", "fail", "pass"]);
});

test("of equal verdicts the cell with the least margin is the worst", () => {
  expect(row([at("1", 25, flat(1)), at("2", 25, flat(1.8)), at("3", 25, flat(1.5))])).toMatchObject({
    verdict: "pass",
    worst: 1,
  });
});

test("rows come in the order of the requirements", () => {
  const rows = evaluateLot([at("1", 25, flat(1))], [rejection, passband]);
  expect(rows.map(({ requirementId, verdict }) => [requirementId, verdict])).toEqual([
    ["rej", "not-covered"],
    ["loss", "pass"],
  ]);
});

test("a lot without measurements covers nothing", () => {
  expect(row([])).toMatchObject({ cells: [], verdict: "not-covered", worst: -1 });
  expect(row([], passband, RANGE).verdict).toBe("not-covered");
});

test("a fine passband sweep and a coarse wide one make one measurement", () => {
  const fine: Sweep = { id: "fine", network: sweepOf({ frequency: [1e9, 1.2e9, 1.4e9, 1.6e9], loss: [1, 1, 1.2, 1] }) };
  const wide: Sweep = { id: "wide", network: sweepOf({ frequency: [1.5e9, 3e9, 4e9], loss: [1, 1, 45] }) };
  const [loss, rej] = evaluateLot([at("1", 25, fine, wide)], [passband, { ...rejection, band: [3.95e9, 4e9] }]);
  expect(loss?.cells[0]).toMatchObject({ sweepId: "fine", result: { verdict: "pass", frequency: 1.4e9 } });
  expect(rej?.cells[0]).toMatchObject({ sweepId: "wide", result: { verdict: "pass" } });
  expect(item(evaluateLot([at("1", 25, wide)], [passband])).verdict).toBe("not-covered");
});

test("files of one unit at one temperature are one measurement", () => {
  const low: Sweep = { id: "low", network: sweepOf({ frequency: [1e9, 1.5e9], loss: [1, 1] }) };
  const high: Sweep = { id: "high", network: sweepOf({ frequency: [1.5e9, 2e9], loss: [1, 1] }) };
  const result = row([at("1", 25, low), at("2", 25, flat(1)), at("1", 25, high)]);
  expect(result.cells.map(({ unit }) => unit)).toEqual(["1", "2"]);
  expect(result.verdict).toBe("pass");
});

test("sweeps that leave a gap between them do not reach the band together", () => {
  const low: Sweep = { id: "low", network: sweepOf({ frequency: [1e9, 1.4e9], loss: [1, 1] }) };
  const high: Sweep = { id: "high", network: sweepOf({ frequency: [1.5e9, 2e9], loss: [1, 1] }) };
  const result = row([at("1", 25, low, high)]);
  expect(result.verdict).toBe("not-covered");
  expect(result.reason).toContain("1.4000 to 1.5000 GHz");
});

test("ripple comes only from a sweep that reaches the whole band", () => {
  const ripple: Requirement = { id: "ripple", kind: "ripple", band: [1e9, 2e9], max: 1 };
  const low: Sweep = { id: "low", network: sweepOf({ frequency: [1e9, 1.5e9], loss: [1, 1.2] }) };
  const high: Sweep = { id: "high", network: sweepOf({ frequency: [1.5e9, 2e9], loss: [1.2, 1.4] }) };
  const failing: Sweep = { id: "failing", network: sweepOf({ frequency: [1.5e9, 1.8e9], loss: [1, 3] }) };
  expect(row([at("1", 25, low, high)], ripple)).toMatchObject({
    verdict: "not-covered",
    reason: "No single sweep reaches the whole band. Worst on the covered part: 0.20 dB at 1.5000 GHz, limit 1.00 dB.",
  });
  expect(row([at("1", 25, low, failing)], ripple)).toMatchObject({ verdict: "fail", worst: 0 });
  expect(row([at("1", 25, failing, flat(1, "whole"))], ripple).cells[0]).toMatchObject({
    sweepId: "whole",
    result: { verdict: "pass" },
  });
});

test("a requirement is over the range where the specification gives one, unless it says ambient", () => {
  expect(row([at("1", 25, flat(1))]).verdict).toBe("pass");
  expect(row([at("1", 25, flat(1))], passband, RANGE)).toMatchObject({
    verdict: "not-covered",
    reason: "0 of 1 units over temperature, 1 needed.",
  });
  expect(row([at("1", 25, flat(1))], ambientLine, RANGE).verdict).toBe("pass");
  expect(row([at("1", 25, flat(1))], { ...passband, temperature: "range" }).verdict).toBe("not-covered");
});

test("ambient is 25 °C, 5 to either side; what is measured elsewhere is shown and not scored", () => {
  const result = row([at("1", 20, flat(1)), at("1", 30.5, flat(9))]);
  expect(result.cells.map(({ scored }) => scored)).toEqual([true, false]);
  expect(result).toMatchObject({ verdict: "pass", worst: 0 });
  expect(row([at("1", 30.5, flat(1))])).toMatchObject({ verdict: "not-covered", worst: -1 });
  expect(row([at("1", 38, flat(1))], passband, { ambient: 40 }).verdict).toBe("pass");
});

test("a unit covers the range up to 3 °C beyond and 2 °C inside each end, with one measurement at ambient", () => {
  const verdict = (...temperatures: number[]) =>
    row(
      temperatures.map((temperature, index) => at("1", temperature, flat(1 + index / 100))),
      passband,
      RANGE,
    ).verdict;
  expect(verdict(-30, 25, 70)).toBe("pass");
  expect(verdict(-33, 21, 73)).toBe("pass");
  expect(verdict(-28, 30, 68)).toBe("pass");
  expect(verdict(-27.5, 25, 70)).toBe("not-covered");
  expect(verdict(-30, 25, 67.5)).toBe("not-covered");
  expect(verdict(-33.5, 25, 70)).toBe("not-covered");
  expect(verdict(-30, 70)).toBe("not-covered");
  expect(verdict(-30, 35, 70)).toBe("not-covered");
});

test("measurements more than 3 °C outside the range are shown, not scored", () => {
  const result = row([...overRange("1", 1), at("1", 85, flat(9)), at("1", 73, flat(1.5))], passband, RANGE);
  expect(result.cells.map(({ scored }) => scored)).toEqual([true, true, true, false, true]);
  expect(result).toMatchObject({ verdict: "pass", worst: 4 });
});

test("as many units as asked must cover the range", () => {
  const lot = [...overRange("1", 1), ...overRange("2", 1.1), at("3", 25, flat(1.5))];
  expect(row(lot, passband, { ...RANGE, unitsOverRange: 2 }).verdict).toBe("pass");
  const short = row(lot, passband, { ...RANGE, unitsOverRange: 3 });
  expect(short).toMatchObject({ verdict: "not-covered", reason: "2 of 3 units over temperature, 3 needed." });
  expect(row([...lot, at("4", 25, flat(3))], passband, { ...RANGE, unitsOverRange: 3 }).verdict).toBe("fail");
});

test("two units with the same data count as one", () => {
  const lot = [...overRange("1", 1), ...overRange("2", 1)];
  expect(row(lot, passband, { ...RANGE, unitsOverRange: 2 })).toMatchObject({
    verdict: "not-covered",
    reason: "1 of 1 units over temperature, 2 needed.",
  });
});

test("data of a similar part or a simulation never exceeds a conditional pass and does not cover the range", () => {
  for (const basis of ["similar", "simulated"] as const) {
    expect(row([at("1", 25, flat(1))], ambientLine, { ...RANGE, basis })).toMatchObject({
      verdict: "conditional-pass",
    });
    expect(row(overRange("1", 1), passband, { ...RANGE, basis }).verdict).toBe("not-covered");
    expect(row(overRange("1", 3), passband, { ...RANGE, basis }).verdict).toBe("fail");
    expect(row([at("1", 25, flat(3))], ambientLine, { ...RANGE, basis }).verdict).toBe("fail");
  }
});

test("every setup field a supplier leaves out takes the assumed one, and the result says so", () => {
  const assumedSetup = { transmission: 0.5, noiseFloor: 90, directivity: 36 };
  const stated = { ...flat(1.7), setup: { transmission: 0.1 } };
  const full = { ...flat(1.7), setup: { transmission: 0.1, noiseFloor: 120 } };
  const cellOf = (sweep: Sweep, line: Requirement = passband) =>
    item(row([at("1", 25, sweep)], line, { assumedSetup }).cells).result;
  expect(cellOf(flat(1.7))).toMatchObject({ verdict: "conditional-pass", assumed: true });
  expect(cellOf(stated)).toMatchObject({ verdict: "pass", assumed: true });
  expect(cellOf(full).assumed).toBeUndefined();
  const returnLoss: Requirement = { id: "rl", kind: "return-loss", port: 1, band: [1e9, 2e9], min: 15 };
  expect(cellOf(full, returnLoss).assumed).toBe(true);
  expect(item(row([at("1", 25, flat(1.7))]).cells).result.assumed).toBeUndefined();
});

test("the kind of a noise floor travels with its figure", () => {
  const line: Requirement = { id: "r", kind: "rejection", band: [1e9, 2e9], min: 10 };
  const assumedSetup = { noiseFloor: 50, noiseFloorKind: "rms" } as const;
  const lowEnd = (setup: Sweep["setup"], points: number) => {
    const frequency = Array.from({ length: points }, (_, index) => 1e9 + (index * 1e9) / (points - 1));
    const network = sweepOf({ frequency, loss: frequency.map(() => 40) });
    const sweep: Sweep = { id: "1", network, ...(setup === undefined ? {} : { setup }) };
    return item(row([at("1", 25, sweep)], line, { assumedSetup }).cells).result.interval[0];
  };
  const level = (floor: number) => -20 * Math.log10(10 ** -2 + 10 ** (-floor / 20));
  expect(lowEnd({}, 1001)).toBeCloseTo(level(50 - 10 * Math.log10(Math.log(1001))), 9);
  expect(lowEnd({ noiseFloor: 50 }, 1001)).toBeCloseTo(level(50), 9);
});

test("a stated drift moves the trace to the ends that were not measured, marked as predicted", () => {
  // check-values.json "tcf-2.45e+09--4" (hand calculation): 2.45 GHz, -4 ppm/K, from 25 to 85 °C moves by -588 kHz.
  const rows = checkValues.values as unknown as { id: string; value: number }[];
  const shift = rows.find(({ id }) => id === "tcf-2.45e+09--4")?.value ?? NaN;
  const tooth = sweepOf({ frequency: [2e9, 2.45e9, 3e9], loss: [1, 3, 1] });
  const line: Requirement = { id: "loss", kind: "insertion-loss", band: [2.1e9, 2.9e9], max: 4 };
  const measurements = [at("1", 25, { id: "a", network: tooth })];
  const result = row(measurements, line, { range: [-40, 85], ppmPerKelvin: -4 });
  expect(result.verdict).toBe("not-covered");
  const predicted = result.cells.filter((cell) => cell.predicted);
  expect(predicted.map(({ temperature }) => temperature)).toEqual([-40, 85]);
  expect(item(predicted, 1).result.frequency - 2.45e9).toBeCloseTo(shift, 3);
  expect(item(predicted, 1).result.verdict).toBe("conditional-pass");
  expect(row(measurements, ambientLine, { range: [-40, 85], ppmPerKelvin: -4 }).cells).toHaveLength(1);
});

test("a predicted fail fails the line, a predicted pass does not lower a measured one", () => {
  // An edge at 2.1 GHz that a drift of 2000 ppm/K moves into the band.
  const edge = (shift: number): Sweep => ({
    id: `edge ${shift}`,
    network: sweepOf({ frequency: [0.8e9, 2.1e9 + shift, 2.2e9 + shift], loss: [1, 1, 30] }),
  });
  const stated = { ...RANGE, ppmPerKelvin: 2000 };
  expect(row([at("1", 25, edge(0))], passband, stated).verdict).toBe("fail");
  const mild = { ...RANGE, ppmPerKelvin: 1 };
  const lot = [at("1", -30, edge(1e6)), at("1", 25, edge(2e6)), at("1", 70, edge(3e6)), at("2", 25, edge(4e6))];
  const result = row(lot, passband, mild);
  expect(result.verdict).toBe("pass");
  expect(result.cells.filter(({ predicted }) => predicted).map(({ result: { verdict } }) => verdict)).toEqual([
    "conditional-pass",
    "conditional-pass",
  ]);
});

test("above the measured temperature the loss grows with the square root of the resistivity, and nothing else does", () => {
  const options: LotOptions = { range: [-30, 70], ppmPerKelvin: 0, lossPerKelvin: 0.0039 };
  const cells = (line: Requirement) =>
    row([at("1", 25, flat(1.5))], line, options).cells.filter(({ predicted }) => predicted);
  const [cold, hot] = cells(passband);
  expect(cold?.result.value).toBeCloseTo(1.5, 9);
  expect(hot?.result.value).toBeCloseTo(1.5 * Math.sqrt(1 + 0.0039 * 45), 9);
  const [, hotRejection] = cells({ id: "r", kind: "rejection", band: [1e9, 2e9], min: 1 });
  expect(hotRejection?.result.value).toBeCloseTo(1.5, 9);
});

test("a malformed requirement is refused before anything is scored", () => {
  expect(() => row([], { ...passband, band: [2e9, 1e9] })).toThrow(RangeError);
});
