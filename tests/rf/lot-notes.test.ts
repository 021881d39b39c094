// Doubts about a lot: sweeps that differ where they overlap, beyond both uncertainties; the same data under two names.
import fc from "fast-check";
import { expect, test } from "vitest";
import type { Measurement, Setup, Sweep, TwoPort } from "~/rf/contract";
import { checkLot } from "~/rf/lot-notes";
import { twoPortOf, type ComplexNumber } from "../support/complex-matrix";
import { item, sweepOf } from "./sweep-of";

const SETUP: Setup = {
  transmission: 0.1,
  directivity: 36,
  sourceMatch: 32,
  loadMatch: 36,
  tracking: 0.1,
  noiseFloor: 90,
};
const even = (from: number, to: number, points: number) =>
  Array.from({ length: points }, (_, k) => from + ((to - from) * k) / (points - 1));

/** A sweep of a loss and a return loss that do not depend on frequency, but where told. */
function flat(
  id: string,
  loss: number,
  more: { from?: number; to?: number; points?: number; returnLoss?: number } = {},
): Sweep {
  const { from = 1e9, to = 2e9, points = 101, returnLoss = 20 } = more;
  const frequency = even(from, to, points);
  const network = sweepOf({
    frequency,
    loss: frequency.map(() => loss),
    returnLoss: frequency.map(() => returnLoss),
  });
  return { id, network, setup: SETUP };
}
const at = (unit: string, temperature: number, ...sweeps: Sweep[]): Measurement => ({ unit, temperature, sweeps });

test("two sweeps differ in loss where the ends of their readings lie apart, and not where they touch", () => {
  // Two readings of ± 0.1 dB (k = 2) reach each other up to 0.2 dB apart; the floor of 90 dB adds 0.0003 dB to each.
  expect(checkLot([at("A", 25, flat("1", 1), flat("2", 1.2))])).toEqual([]);
  const [note, ...others] = checkLot([at("A", 25, flat("1", 1), flat("2", 1.5))]);
  expect(others).toEqual([]);
  expect(note).toMatchObject({
    code: "sweeps-differ",
    severity: "doubtful",
    unit: "A",
    temperature: 25,
    sweepIds: ["1", "2"],
    frequency: [1e9, 2e9],
  });
  expect(note?.message).toContain("the loss S21: 1.00 dB and 1.50 dB at 1.0000 GHz, 0.30 dB more than");
  expect(note?.message).toContain("at 202 of 202 samples");
});

test("sweeps are compared within a measurement and within their overlap only", () => {
  const apart = [flat("1", 1, { from: 1e9, to: 1.5e9 }), flat("2", 5, { from: 1.6e9, to: 2e9 })];
  expect(checkLot([at("A", 25, ...apart)])).toEqual([]);
  expect(checkLot([at("A", 25, flat("1", 1)), at("A", 70, flat("2", 5)), at("B", 25, flat("3", 9))])).toEqual([]);
  const [note] = checkLot([
    at("A", 25, flat("1", 1, { to: 1.5e9, points: 51 })),
    at("A", 25, flat("2", 5, { from: 1.4e9 })),
  ]);
  expect(note?.frequency?.[0]).toBeCloseTo(1.4e9, 0);
  expect(note?.frequency?.[1]).toBeCloseTo(1.5e9, 0);
});

test("return losses differ by their own uncertainty, each port by itself", () => {
  // By hand at 20 dB: D + T|Γ| + M|Γ|² + K|S21||S12| = 0.0158 + 0.0012 + 0.0003 + 0.0126 = 0.030; 0.1 ± 0.030 reaches 0.13 ± 0.03.
  expect(checkLot([at("A", 25, flat("1", 1), flat("2", 1, { returnLoss: 17.7 }))])).toEqual([]);
  const notes = checkLot([at("A", 25, flat("1", 1), flat("2", 1, { returnLoss: 14 }))]);
  expect(notes.map(({ message }) => message.slice(0, 51))).toEqual([
    "Two sweeps differ in the return loss of port 1: 20.",
    "Two sweeps differ in the return loss of port 2: 20.",
  ]);
});

test("the setup in use decides: a sweep's own figures, the assumed ones where it has none, and no comparison without any", () => {
  const bare = (id: string, loss: number, setup: Setup = {}): Sweep => ({ ...flat(id, loss), setup });
  const lot = (own: Setup) => [at("A", 25, bare("1", 1, own), bare("2", 1.5))];
  expect(checkLot(lot({}))).toEqual([]);
  expect(checkLot(lot({}), { assumedSetup: { transmission: 0.1 } })).toHaveLength(1);
  expect(checkLot(lot({ transmission: 0.5 }), { assumedSetup: { transmission: 0.1 } })).toEqual([]);
});

test("a reading at the floor is no difference: its ends reach down to nothing", () => {
  expect(checkLot([at("A", 25, flat("1", 95), flat("2", 130))])).toEqual([]);
  expect(checkLot([at("A", 25, flat("1", 60), flat("2", 95))])).toHaveLength(1);
});

test("a parameter that was not measured is not compared", () => {
  const zeros = flat("2", 1);
  const network = zeros.network as TwoPort;
  const none = { re: new Float64Array(101), im: new Float64Array(101) };
  expect(checkLot([at("A", 25, flat("1", 1), { ...zeros, network: { ...network, s11: none, s22: none } })])).toEqual(
    [],
  );
});

/** A three-resonator-like response: S21 with a steep skirt, S11 with nulls, smooth in the complex plane. */
function response(frequency: readonly number[], extra = 0): TwoPort {
  const matrix = frequency.map((hz) => {
    const x = (hz - 1.5e9) / 0.1e9;
    const line = (magnitude: number, angle: number): ComplexNumber => ({
      re: magnitude * Math.cos(angle),
      im: magnitude * Math.sin(angle),
    });
    // Chebyshev characteristic function of order 3: |S11|² + |S21|² = 1.
    const k = 0.2 * (4 * x ** 3 - 3 * x);
    const passed = 1 / Math.hypot(1, k);
    const angle = -2 * x;
    const s21 = line(passed * 10 ** (-(0.5 + extra) / 20), angle);
    const reflected = line(k * passed, angle + Math.PI / 2);
    return [
      [reflected, s21],
      [s21, reflected],
    ];
  });
  return twoPortOf(frequency, matrix);
}

test("a fine and a coarse sweep of one smooth response never differ, whatever their grids, nulls and skirts included", () => {
  const grids = fc.tuple(
    fc.integer({ min: 60, max: 900 }),
    fc.integer({ min: 60, max: 900 }),
    fc.double({ min: 0, max: 0.05e9, noNaN: true }),
  );
  fc.assert(
    fc.property(grids, ([one, other, shift]) => {
      const sweeps = [
        { id: "1", network: response(even(1.2e9, 1.8e9, one)), setup: SETUP },
        { id: "2", network: response(even(1.25e9 + shift, 1.75e9 + shift, other)), setup: SETUP },
      ];
      expect(checkLot([at("A", 25, ...sweeps)])).toEqual([]);
    }),
  );
});

test("and do differ when one of them was taken with an offset beyond the uncertainties", () => {
  fc.assert(
    fc.property(fc.integer({ min: 60, max: 900 }), fc.integer({ min: 60, max: 900 }), (one, other) => {
      const sweeps = [
        { id: "1", network: response(even(1.2e9, 1.8e9, one)), setup: SETUP },
        { id: "2", network: response(even(1.25e9, 1.75e9, other), 0.5), setup: SETUP },
      ];
      expect(checkLot([at("A", 25, ...sweeps)]).map(({ message }) => message.slice(0, 33))).toEqual([
        "Two sweeps differ in the loss S21",
      ]);
    }),
    { numRuns: 30 },
  );
});

test("of many sweeps that differ one note is kept a parameter, on the pair that differs most", () => {
  const [note, ...others] = checkLot([at("A", 25, flat("1", 1), flat("2", 3), flat("3", 1.4), flat("4", 1))]);
  expect(others).toEqual([]);
  expect(note?.sweepIds).toEqual(["1", "2"]);
  expect(note?.message).toMatch(/4 other pairs differ too\.$/);
});

test("references unlike the specification's are renormalised before sweeps are compared", () => {
  const through = flat("1", 0.2);
  const other: Sweep = {
    ...through,
    id: "2",
    network: { ...(through.network as TwoPort), referenceImpedance: [200, 200] },
  };
  expect(checkLot([at("A", 25, through, other)], { impedance: [50, 50] })).not.toEqual([]);
});

test("two serials with the same numbers are one note, however many sweeps and temperatures they share", () => {
  const copy = (sweep: Sweep, id: string): Sweep => ({ id, network: structuredClone(sweep.network as TwoPort) });
  const [cold, warm, hot] = [flat("a", 1), flat("b", 1.1), flat("c", 1.2)];
  const [note, ...others] = checkLot([
    at("A", -30, cold),
    at("A", 25, warm),
    at("A", 70, hot),
    at("B", -30, copy(cold, "d")),
    at("B", 25, copy(warm, "e")),
    at("C", 25, flat("f", 1.3)),
  ]);
  expect(others).toEqual([]);
  expect(note).toMatchObject({ code: "identical-data", unit: "A", units: ["A", "B"], sweepIds: ["a", "d", "b", "e"] });
  expect(note).not.toHaveProperty("temperature");
  expect(note?.message).toBe(
    "Units A and B have the same data to the bit in 2 sweeps, at −30 and +25 °C: they count as one unit.",
  );
});

test("one unit with the same numbers at two temperatures is noted, at one temperature it is one file twice", () => {
  const copy = structuredClone(flat("a", 1).network as TwoPort);
  const [note, ...others] = checkLot([at("A", 25, flat("a", 1)), at("A", 70, { id: "b", network: copy })]);
  expect(others).toEqual([]);
  expect(note).toMatchObject({ code: "identical-data", unit: "A", sweepIds: ["a", "b"] });
  expect(note?.message).toContain("at +25 and +70 °C: it was measured at one of them at most");
  expect(checkLot([at("A", 25, flat("a", 1), { id: "b", network: copy })])).toEqual([]);
});

test("two hundred sweeps are checked in bounded time: all in one measurement, all alike, all apart", () => {
  const many = Array.from({ length: 200 }, (_, k) => flat(`${k}`, 1 + (k % 7) / 1000, { points: 2_001 }));
  const lots = [
    [at("A", 25, ...many)],
    many.map((sweep, k) => at(`${k}`, 25, { ...sweep, network: item(many).network })),
    many.map((sweep, k) => at("A", k, sweep)),
  ];
  for (const lot of lots) {
    // The processor's time, not the clock's: the machine may be busy otherwise.
    const before = process.cpuUsage().user;
    checkLot(lot);
    // Unbounded, the first is 19,900 pairs of 4,002 samples in three parameters: 240 million comparisons.
    expect((process.cpuUsage().user - before) / 1e6).toBeLessThan(8);
  }
}, 120_000);

test("against an exact zero two readings differ without a figure for by how much", () => {
  const bare = { setup: { transmission: 0.1 } };
  const [note] = checkLot([
    at("A", 25, { ...flat("1", 1), ...bare }, { ...flat("2", 1, { from: 1e9 }), ...nulled(), ...bare }),
  ]);
  expect(note?.message).toContain("1.00 dB and a loss without end at 1.5000 GHz, more than their uncertainties allow");
});

/** A sweep of 1 dB with an exact zero in its middle. */
function nulled(): Pick<Sweep, "network"> {
  const frequency = even(1e9, 2e9, 101);
  return { network: sweepOf({ frequency, loss: frequency.map((_, k) => (k === 50 ? Infinity : 1)) }) };
}
