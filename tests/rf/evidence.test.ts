// The evidence grid: temperatures that count for each other, sweeps that deliver, units that are asked, what is missing in words.
import fc from "fast-check";
import { expect, test } from "vitest";
import { evidenceOf, type DeliveredSweep, type EvidenceAsked } from "~/rf/evidence";
import { coversRange } from "~/rf/lot-temperature";

const asked = (more: Partial<EvidenceAsked> = {}): EvidenceAsked => ({
  units: 1,
  unitsOverRange: 1,
  ambient: 25,
  range: [-30, 70],
  plan: {},
  ...more,
});

const sweep = (
  unit: string | null,
  temperature: number | null,
  more: Partial<DeliveredSweep> = {},
): DeliveredSweep => ({
  unit,
  temperature,
  from: 1e9,
  to: 3e9,
  points: 2001,
  steps: [[1e9, 3e9, 1e6]],
  ...more,
});

const states = (...given: Parameters<typeof evidenceOf>) =>
  evidenceOf(...given).rows.map(({ unit, cells }) => [unit, ...cells.map(({ state }) => state)]);

test("a unit at ambient and both ends delivers what is asked, and nothing is missing", () => {
  const evidence = evidenceOf(asked(), [sweep("A", -30), sweep("A", 25), sweep("A", 70)]);
  expect(evidence.columns).toEqual([
    { celsius: -30, roles: ["low-end"] },
    { celsius: 25, roles: ["ambient"] },
    { celsius: 70, roles: ["high-end"] },
  ]);
  expect(evidence.rows[0]?.cells.map(({ state }) => state)).toEqual(["delivered", "delivered", "delivered"]);
  expect(evidence.rows[0]).toMatchObject({ unit: "A", overRange: true, copies: [] });
  expect(evidence.missing).toEqual([]);
});

test("an end is spoken for from 3 °C beyond to 2 °C inside, ambient within 5 °C, a planned temperature within 2 °C", () => {
  const one = (celsius: number, more: Partial<EvidenceAsked> = {}) => {
    const { columns, rows } = evidenceOf(asked(more), [sweep("A", celsius)]);
    return columns.flatMap((column, at) => (rows[0]?.cells[at]?.state === "delivered" ? [column.celsius] : []));
  };
  expect([-33.1, -33, -28, -27.9].map((celsius) => one(celsius))).toEqual([[], [-30], [-30], []]);
  expect([67.9, 68, 73, 73.1].map((celsius) => one(celsius))).toEqual([[], [70], [70], []]);
  expect([19.9, 20, 30, 30.1].map((celsius) => one(celsius))).toEqual([[], [25], [25], []]);
  const plan = { plan: { temperatures: [50] } };
  expect([47.9, 48, 52, 52.1].map((celsius) => one(celsius, plan))).toEqual([[], [50], [50], []]);
});

test("a unit whose cells of ambient and both ends are delivered is one the scoring counts over temperature, and no other", () => {
  const temperatures = fc.array(
    fc.integer({ min: -400, max: 800 }).map((tenths) => tenths / 10),
    { maxLength: 6 },
  );
  const ranges = fc
    .tuple(fc.integer({ min: -40, max: 30 }), fc.integer({ min: 0, max: 60 }))
    .map(([from, width]) => [from, from + width] as const);
  fc.assert(
    fc.property(temperatures, ranges, (list, range) => {
      const options = asked({ range });
      const { columns, rows } = evidenceOf(
        options,
        list.map((celsius) => sweep("A", celsius)),
      );
      const isThere = columns.every(({ roles }, at) => roles.length === 0 || rows[0]?.cells[at]?.state === "delivered");
      expect(isThere).toBe(coversRange(list, options));
    }),
  );
});

test("measured and not asked is extra: another temperature, and more units over temperature than asked", () => {
  const { columns } = evidenceOf(asked(), [sweep("A", 25), sweep("A", 50)]);
  expect(columns).toContainEqual({ celsius: 50, roles: [] });
  const all = ["A", "B"].flatMap((unit) => [-30, 25, 70].map((celsius) => sweep(unit, celsius)));
  expect(states(asked({ units: 2 }), all)).toEqual([
    ["A", "delivered", "delivered", "delivered"],
    ["B", "extra", "delivered", "extra"],
  ]);
  expect(states(asked({ units: 2, unitsOverRange: 2 }), all)).toEqual([
    ["A", "delivered", "delivered", "delivered"],
    ["B", "delivered", "delivered", "delivered"],
  ]);
});

test("the units asked over temperature are those with most of it, whatever their names", () => {
  const given = [sweep("A", 25), sweep("B", 25), sweep("B", -30), sweep("C", -30), sweep("C", 25), sweep("C", 70)];
  expect(states(asked({ units: 3 }), given)).toEqual([
    ["A", "not-asked", "delivered", "not-asked"],
    ["B", "extra", "delivered", "not-asked"],
    ["C", "delivered", "delivered", "delivered"],
  ]);
});

test("units that did not come are rows without a name, and told by number", () => {
  const evidence = evidenceOf(asked({ units: 3, unitsOverRange: 2 }), [
    sweep("A", 25),
    sweep("A", -30),
    sweep("A", 70),
  ]);
  expect(evidence.rows.map(({ unit, overRange }) => [unit, overRange])).toEqual([
    ["A", true],
    [null, true],
    [null, false],
  ]);
  expect(evidence.rows[2]?.cells.map(({ state }) => state)).toEqual(["not-asked", "missing", "not-asked"]);
  expect(evidence.missing).toEqual([
    "3 units asked, 1 measured.",
    "2 units over temperature asked (−30, +25 and +70 °C), 1 measured.",
  ]);
});

test("nothing delivered is said in two sentences", () => {
  expect(evidenceOf(asked({ units: 3 }), []).missing).toEqual([
    "3 units asked, none measured.",
    "1 unit over temperature asked (−30, +25 and +70 °C), none measured.",
  ]);
  expect(evidenceOf({ units: 2, unitsOverRange: 1, ambient: 25, plan: {} }, []).columns).toEqual([
    { celsius: 25, roles: ["ambient"] },
  ]);
});

const plan = {
  sweeps: [
    { band: [1.9e9, 2e9] as const, maxStep: 0.1e6 },
    { band: [0, 6e9] as const, maxStep: 10e6 },
  ],
};
const ambientOnly = { units: 1, unitsOverRange: 0, ambient: 25, plan, lowestTestFrequency: 10e6 };
const fine = sweep("A", 25, { from: 1.9e9, to: 2e9, points: 1001, steps: [[1.9e9, 2e9, 0.1e6]] });
const wide = sweep("A", 25, { from: 10e6, to: 6e9, points: 600, steps: [[10e6, 6e9, 10e6]] });

test("sweeps of one measurement deliver the planned ones together; from DC means from the lowest test frequency", () => {
  expect(evidenceOf(ambientOnly, [fine, wide]).missing).toEqual([]);
  const { lowestTestFrequency: _, ...fromZero } = ambientOnly;
  expect(evidenceOf(fromZero, [fine, wide]).missing).toEqual(["Unit A at +25 °C: DC to 10.00 MHz not swept."]);
});

test("a planned sweep not reached or too coarse is partly delivered, with the stretches and the steps found", () => {
  const { rows, missing } = evidenceOf(ambientOnly, [wide]);
  expect(rows[0]?.cells[0]).toMatchObject({
    state: "partly",
    gaps: [{ kind: "too-coarse", stretches: [[1.9e9, 2e9]], step: 10e6 }],
  });
  expect(missing).toEqual(["Unit A at +25 °C: 1.9000 to 2.0000 GHz in steps of up to 10.00 MHz, 100 kHz asked."]);
  const narrow = { ...wide, from: 1e9, to: 3e9, steps: [[1e9, 3e9, 10e6]] as const };
  expect(evidenceOf(ambientOnly, [fine, narrow]).missing).toEqual([
    "Unit A at +25 °C: 10.00 MHz to 1.0000 GHz and 3.0000 to 6.0000 GHz not swept.",
  ]);
});

test("sweeps taken at temperatures a little apart are measurements of their own, and that is said", () => {
  const { rows, missing } = evidenceOf(ambientOnly, [fine, { ...wide, temperature: 24 }]);
  expect(rows[0]?.cells[0]).toMatchObject({ state: "partly", apart: [24, 25] });
  expect(missing[0]).toMatch(/its sweeps at \+24 and \+25 °C are measurements of their own\.$/);
});

test("steps that were not kept are said to be unknown, and deliver nothing that a step was asked for", () => {
  const old = { ...wide, steps: null };
  const { rows, missing } = evidenceOf(ambientOnly, [fine, old]);
  expect(rows[0]?.cells[0]?.gaps.map(({ kind }) => kind)).toEqual(["step-unknown"]);
  expect(missing[0]).toContain("10.00 MHz to 1.9000 GHz and 2.0000 to 6.0000 GHz were not kept");
});

test("the same lack at several temperatures and units is one sentence", () => {
  const units = ["A", "B"].flatMap((unit) => [-30, 25, 70].map((celsius) => ({ ...wide, unit, temperature: celsius })));
  expect(
    evidenceOf({ ...asked({ units: 2, unitsOverRange: 2, plan }), lowestTestFrequency: 10e6 }, units).missing,
  ).toEqual(["Units A and B at −30, +25 and +70 °C: 1.9000 to 2.0000 GHz in steps of up to 10.00 MHz, 100 kHz asked."]);
});

test("serials with the same data are one row and count once", () => {
  const given = [sweep("A", 25), sweep("A", -30), sweep("B", 25), sweep("B", 70)];
  const { rows, missing } = evidenceOf(asked({ units: 2 }), given, new Map([["B", "A"]]));
  expect(rows.map(({ unit, copies }) => [unit, copies])).toEqual([
    ["A", ["B"]],
    [null, []],
  ]);
  // As the scoring counts it: the one unit has all temperatures.
  expect(rows[0]?.cells.map(({ state }) => state)).toEqual(["delivered", "delivered", "delivered"]);
  expect(missing).toEqual(["2 units asked, 1 measured.", "Units A and B have the same data: they count as one unit."]);
});

test("files without a unit or a temperature count for nothing, and that is said", () => {
  expect(evidenceOf(asked(), [sweep(null, 25), sweep("", 25), sweep("A", null)]).missing).toEqual([
    "1 unit asked, none measured.",
    "1 unit over temperature asked (−30, +25 and +70 °C), none measured.",
    "3 files without a unit or a temperature count for nothing.",
  ]);
});

test("simulated data and data of a similar part cover no range", () => {
  const given = [sweep("A", -30), sweep("A", 25), sweep("A", 70)];
  expect(evidenceOf(asked({ basis: "simulated" }), given).missing).toEqual([
    "1 unit over temperature asked (−30, +25 and +70 °C), none measured: data of a simulation does not count.",
  ]);
});
