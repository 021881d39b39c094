// Ports perhaps swapped: noted where the limits that tell the ports apart hold only with the ports exchanged.
import { expect, test } from "vitest";
import { checkPorts, withPortsExchanged } from "~/rf/check-ports";
import { checkNetwork } from "~/rf/check-network";
import type { Requirement, TwoPort } from "~/rf/contract";
import { sweepOf } from "./sweep-of";

const FREQUENCY = [1e9, 1.5e9, 2e9];
const band = [1e9, 2e9] as const;
const match = (port: 1 | 2, min: number): Requirement => ({ id: `4.${port}`, kind: "return-loss", port, band, min });
const loss: Requirement = { id: "2.1", kind: "insertion-loss", band, max: 2 };
const reverse: Requirement = { id: "3.1", kind: "reverse-isolation", band, min: 20 };

/** Flat levels: S21 and S12 as losses, S11 and S22 as return losses, dB. */
function flat(levels: { s21?: number; s12?: number; s11: number; s22: number }): TwoPort {
  const { s21 = 1, s12 = 1, s11, s22 } = levels;
  const three = (level: number) => FREQUENCY.map(() => level);
  const one = sweepOf({ frequency: FREQUENCY, loss: three(s21), reverse: three(s12), returnLoss: three(s11) });
  return { ...one, s22: sweepOf({ frequency: FREQUENCY, loss: three(1), returnLoss: three(s22) }).s22 };
}

test("return losses that hold only exchanged are noted, with the line that does not hold", () => {
  const lines = [match(1, 18), match(2, 12)];
  const [note, ...others] = checkPorts(flat({ s11: 14, s22: 20 }), lines);
  expect(others).toEqual([]);
  expect(note).toMatchObject({ code: "ports-swapped", severity: "doubtful" });
  expect(note?.message).toContain("the return loss of port 1 does not hold");
  expect(checkNetwork(flat({ s11: 14, s22: 20 }), { requirements: lines }).map(({ code }) => code)).toContain(
    "ports-swapped",
  );
});

test("data that hold as they are, fail both ways, or of which one port alone is asked, give no note", () => {
  const lines = [match(1, 18), match(2, 12)];
  expect(checkPorts(flat({ s11: 20, s22: 14 }), lines)).toEqual([]);
  expect(checkPorts(flat({ s11: 20, s22: 20 }), lines)).toEqual([]);
  expect(checkPorts(flat({ s11: 14, s22: 16 }), lines)).toEqual([]);
  expect(checkPorts(flat({ s11: 10, s22: 20 }), lines)).toEqual([]);
  expect(checkPorts(flat({ s11: 14, s22: 20 }), [match(1, 18)])).toEqual([]);
  // Equal limits cannot hold one way only.
  expect(checkPorts(flat({ s11: 14, s22: 20 }), [match(1, 18), match(2, 18)])).toEqual([]);
});

test("a part that passes one way is noted where forward and reverse hold only exchanged", () => {
  const [note] = checkPorts(flat({ s21: 30, s12: 1, s11: 20, s22: 20 }), [loss, reverse]);
  expect(note?.message).toContain("the insertion loss and the reverse isolation do not hold");
  expect(checkPorts(flat({ s21: 1, s12: 30, s11: 20, s22: 20 }), [loss, reverse])).toEqual([]);
  expect(checkPorts(flat({ s21: 30, s12: 1, s11: 20, s22: 20 }), [loss])).toEqual([]);
});

test("all limits that tell the ports apart must hold exchanged, reflections and transmission together", () => {
  const lines = [loss, reverse, match(1, 18), match(2, 12)];
  expect(checkPorts(flat({ s21: 30, s12: 1, s11: 14, s22: 20 }), lines)).toHaveLength(1);
  expect(checkPorts(flat({ s21: 30, s12: 1, s11: 20, s22: 14 }), lines)).toEqual([]);
});

test("exchanging twice gives the network, and the references go with their ports", () => {
  const network: TwoPort = { ...flat({ s21: 1, s12: 2, s11: 14, s22: 20 }), referenceImpedance: [50, 75] };
  expect(withPortsExchanged(network).referenceImpedance).toEqual([75, 50]);
  expect(withPortsExchanged(withPortsExchanged(network))).toEqual(network);
});

test("a sweep over the passband alone is judged by the lines it reaches: a stopband it does not cover says nothing either way", () => {
  const stopband: Requirement = { id: "3.2", kind: "rejection", band: [3e9, 4e9], min: 40 };
  const [note] = checkPorts(flat({ s21: 30, s12: 1, s11: 20, s22: 20 }), [loss, reverse, stopband]);
  expect(note?.message).toContain("all limits within the sweep that tell the ports apart hold");
  // A port that was not measured is reached one way only: half an evidence is none.
  const swapped = flat({ s11: 14, s22: 20 });
  const none = { re: new Float64Array(3), im: new Float64Array(3) };
  expect(checkPorts({ ...swapped, s22: none }, [match(1, 18), match(2, 12)])).toEqual([]);
});
