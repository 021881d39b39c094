// Every two-port file that Debian's python3-scikit-rf ships, read by both, live.
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { parseTouchstone } from "~/rf/touchstone";
import { expectMatrix, type ComplexNumber, type MatrixSeries } from "../support/complex-matrix";
import { runPython } from "../support/python";

interface PackageFile {
  readonly path: string;
  readonly name: string;
  readonly f_hz: readonly number[];
  readonly s: MatrixSeries;
  readonly z0: readonly (readonly ComplexNumber[])[];
}

/** Solver comments: scikit-rf takes the reference from "! Port Impedance"; a comment means nothing to us. S is the same. */
const REFERENCE_FROM_COMMENTS = [
  "io/tests/HFSS_2019R2/test_multiport.s2p",
  "io/tests/HFSS_2020R2/test_multiport.s2p",
  "io/tests/hfss_twoport.s2p",
  "media/tests/wr1p5_1in_swg_Al_0rough.s2p",
  "media/tests/wr1p5_1in_swg_Al_100nm_rough.s2p",
  "tests/hfss_twoport.s2p",
];
/** 1.5 GHz stands twice with equal numbers: scikit-rf keeps both, which would make the delay infinite. */
const REPEATED_FREQUENCY = "tests/ntwk_noise.s2p";
/** "R (50+50j)": the format has real references only. */
const COMPLEX_REFERENCE = "io/tests/simple_touchstone.s2p";

const files = runPython("read_scikit_rf_files.py") as PackageFile[];
const ours = (file: PackageFile) => parseTouchstone(readFileSync(file.path), file.name);

test("at least 15 two-port files come with scikit-rf, and the exceptions are among them", () => {
  console.log(`${files.length} two-port files of python3-scikit-rf, ${files.length - 1} read and compared, 1 refused`);
  expect(files.length).toBeGreaterThanOrEqual(15 + 1);
  const names = files.map(({ name }) => name);
  expect(names).toEqual(expect.arrayContaining([...REFERENCE_FROM_COMMENTS, REPEATED_FREQUENCY, COMPLEX_REFERENCE]));
});

for (const file of files) {
  if (file.name === COMPLEX_REFERENCE) {
    test(`${file.name} is refused: its reference impedance is complex`, () => {
      expect(() => ours(file)).toThrow(/complex/);
    });
    continue;
  }
  test(`${file.name} has the frequencies, S-parameters and references that scikit-rf reads`, () => {
    const wanted = file.name === REPEATED_FREQUENCY ? withoutRepeats(file) : file;
    const network = ours(file);
    expect(network.frequency).toHaveLength(wanted.f_hz.length);
    // scikit-rf multiplies by the unit, which may miss the nearest double by one place.
    wanted.f_hz.forEach((hz, k) =>
      expect(Math.abs((network.frequency[k] ?? NaN) - hz)).toBeLessThanOrEqual(3e-16 * hz),
    );
    expectMatrix(network, wanted.s, 1e-12);
    if (REFERENCE_FROM_COMMENTS.includes(file.name)) {
      expect(network.referenceImpedance).toEqual([50, 50]);
      expect(wanted.z0.every((ports) => ports.every(({ re, im }) => re === 50 && im === 0))).toBe(false);
    } else {
      const [first, second] = network.referenceImpedance;
      const want = [
        { re: first, im: 0 },
        { re: second, im: 0 },
      ];
      wanted.z0.forEach((ports) => expect(ports).toEqual(want));
    }
  });
}

function withoutRepeats(file: PackageFile): PackageFile {
  const isFirst = (_: unknown, k: number) => k === 0 || file.f_hz[k] !== file.f_hz[k - 1];
  expect(file.f_hz.every(isFirst)).toBe(false);
  return { ...file, f_hz: file.f_hz.filter(isFirst), s: file.s.filter(isFirst), z0: file.z0.filter(isFirst) };
}
