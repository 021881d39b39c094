// Generated two-ports, read, renormalised and scored as scikit-rf has them, live: passive ones, ladders, every format.
import { beforeAll, expect, test } from "vitest";
import type { Requirement, Trace } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { formatTouchstone } from "~/rf/format-touchstone";
import { renormalise, toImpedance } from "~/rf/network";
import { parseTouchstone } from "~/rf/touchstone";
import { expectMatrix, twoPortOf, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";

interface Generated {
  readonly kind: "passive" | "ladder";
  readonly f_hz: readonly number[];
  readonly s: MatrixSeries;
  readonly z0: readonly [number, number];
  readonly to: readonly [number, number];
  readonly renormalised: MatrixSeries;
  /** Ohm; null where 1 - S is nearly singular. */
  readonly z: readonly (MatrixSeries[number] | null)[];
  /** s, of S21. */
  readonly delay: readonly number[];
}
interface GeneratedFile {
  readonly name: string;
  readonly text: string;
  readonly f_hz: readonly number[];
  readonly s: MatrixSeries;
  readonly z0: readonly [number, number];
}

const SEED = 20260214;
const COUNT = 48;
let networks: readonly Generated[];
let files: readonly GeneratedFile[];

beforeAll(() => {
  ({ networks, files } = runPython("generate_two_ports.py", [], { seed: SEED, count: COUNT }) as {
    networks: Generated[];
    files: GeneratedFile[];
  });
});

const networkOf = ({ f_hz, s, z0 }: Generated) => twoPortOf(f_hz, s, z0);

test("as many passive two-ports as ladders were generated, between references that differ", () => {
  expect(networks.map(({ kind }) => kind).filter((kind) => kind === "ladder")).toHaveLength(COUNT / 2);
  expect(networks).toHaveLength(COUNT);
  networks.forEach(({ z0, to }) => expect(new Set([...z0, ...to]).size).toBe(4));
  console.log(`seed ${SEED}: ${networks.length} networks of ${networks[0]?.f_hz.length} points, ${files.length} files`);
});

test("renormalised to other references they are scikit-rf's cascade of impedance steps within 1e-12", () => {
  networks.forEach((one, k) => expectMatrix(renormalise(networkOf(one), one.to), one.renormalised, 1e-12, `${k}`));
});

test("their impedance matrices are scikit-rf's within 1e-9 where 1 - S is well conditioned", () => {
  let compared = 0;
  for (const one of networks) {
    const matrix = toImpedance(networkOf(one));
    const found = [matrix.z11, matrix.z12, matrix.z21, matrix.z22];
    one.z.forEach((wanted, k) => {
      if (wanted === null) return;
      const largest = Math.max(...wanted.flat().map(({ re, im }) => Math.hypot(re, im)));
      wanted.flat().forEach((figure, at) => {
        const { re, im } = found[at] as Trace;
        const distance = Math.hypot((re[k] ?? NaN) - figure.re, (im[k] ?? NaN) - figure.im);
        expect(distance / largest).toBeLessThanOrEqual(1e-9);
      });
      compared += 1;
    });
  }
  // Well conditioned is the rule.
  expect(compared).toBeGreaterThan(0.8 * COUNT * 25);
});

test("their group delays at every sample are scikit-rf's within 1e-9", () => {
  for (const one of networks) {
    const lines = one.f_hz.map((hz, k): Requirement => ({ id: `${k}`, kind: "group-delay", band: [hz, hz], max: 1 }));
    const delays = evaluate(networkOf(one), lines, { impedance: one.z0 }).map(({ value }) => value);
    const largest = Math.max(...one.delay.map(Math.abs));
    delays.forEach((delay, k) => expect(Math.abs(delay - (one.delay[k] ?? NaN)) / largest).toBeLessThanOrEqual(1e-9));
  }
});

test("files in every format and unit, and of Z, Y, H and G, are read to scikit-rf's frequencies and S-parameters", () => {
  const forms = new Set(files.map(({ name }) => name).filter((name) => name.includes(" in ")));
  expect(forms.size).toBe(12);
  expect(new Set(files.map(({ name }) => name)).size).toBe(12 + 8);
  for (const { name, text, f_hz, s, z0 } of files) {
    const network = parseTouchstone(text);
    expect(network.referenceImpedance, name).toEqual(z0);
    // scikit-rf multiplies by the unit both ways, which may miss the nearest double.
    f_hz.forEach((hz, k) => expect(Math.abs((network.frequency[k] ?? NaN) - hz)).toBeLessThanOrEqual(1e-15 * hz));
    expectMatrix(network, s, 1e-12, name);
  }
});

test("a generated network written and read again is the same to the bit", () => {
  for (const one of networks) {
    const network = networkOf(one);
    expect(parseTouchstone(formatTouchstone(network))).toEqual(network);
  }
});
