// Files checked in the supplier's browser: the same figures, words and worst line as the server's, by itself and as a lot.
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import type { CheckFrame } from "~/rf/check-frame";
import { measuredRequirements, readNumber, type StoredResult, type Verdict } from "~/rf/index";
import { isMeasured } from "~/rf/line-definition";
import { standingOf, worstStanding } from "~/services/worst-line.server";
import { Checker } from "~/workers/checker";
import { expectedSupplier, JOURNEY_LINES, JOURNEY_SETUP, journeyKey } from "../support/journey";

const FRAME: CheckFrame = {
  requirements: measuredRequirements(JOURNEY_LINES),
  impedance: [50, 50],
  ambient: 25,
  range: [-30, 70],
  lines: JOURNEY_LINES.filter(({ definition }) => isMeasured(definition)),
  assumedSetup: JOURNEY_SETUP,
  statedSetup: {},
  statedDrift: null,
  basis: "measured",
  decisionRule: "simple",
  unitsAsked: 3,
  unitsOverRange: 1,
  mostPoints: 5_000_000,
};

const bytesOf = (file: string) => new Uint8Array(readFileSync(file));

function checked(checker: Checker, id: number, name: string, bytes: Uint8Array) {
  const outcome = checker.check(id, name, bytes);
  if (!outcome.ok) throw new Error(outcome.refusal.sentence);
  return outcome.checked;
}

/** Checks a supplier's files in their order; ids from 0. */
function checkSupplier(name: string, frame = FRAME) {
  const checker = new Checker(frame);
  const { files, lines } = expectedSupplier(name);
  const sweeps = files.map(({ path }, id) => checked(checker, id, path.split("/").at(-1) ?? "", bytesOf(path)));
  return { checker, files, lines, sweeps, ids: files.map((_, id) => id) };
}

// Figures made by ngspice and numpy: tests/reference/journey/README.md.
test.each(["Kestrel Cavity Filters", "Halden Resonator Works"])(
  "files of %s are labelled as they are, and together get numpy's verdict and margin on every line",
  (name) => {
    const { checker, files, lines, sweeps, ids } = checkSupplier(name);
    sweeps.forEach(({ serial, temperature, points }, id) => {
      expect([serial, temperature, points]).toEqual([files[id]?.unit, files[id]?.temperature, files[id]?.points]);
    });
    const lot = checker.lot(ids);
    expect(lot.ids).toEqual(ids);
    expect(lines).toHaveLength(lot.lines.length);
    for (const { id, verdict, worst } of lines) {
      const line = lot.lines.find(({ lineKey }) => lineKey === journeyKey(id));
      const cell = line?.cells[line.worst];
      expect([line?.verdict, cell?.unit, cell?.temperature]).toEqual([verdict, worst.unit, worst.temperature]);
      expect(Math.abs(readNumber(cell?.result.margin ?? null) - worst.margin)).toBeLessThan(1e-6);
    }
  },
);

test("a file's worst line is the one the server's list would name", () => {
  const lineOf = ({ id }: StoredResult) => {
    const line = JOURNEY_LINES.find(({ lineKey }) => lineKey === id);
    if (!line) throw new Error(`no line ${id}`);
    return line;
  };
  for (const supplier of ["Kestrel Cavity Filters", "Halden Resonator Works", "Orme Microwave"])
    for (const { results, worstLineKey } of checkSupplier(supplier).sweeps) {
      const standings = results.map((result) => standingOf(lineOf(result), result.verdict, result));
      expect(worstLineKey).toBe(worstStanding(standings)?.lineKey);
    }
});

test("a refused file is told with code, line and the sentence, and is not part of a lot", () => {
  const checker = new Checker(FRAME);
  const outcome = checker.check(0, "A1_25C.s2p", bytesOf("tests/fixtures/decimal-comma.s2p"));
  expect(outcome).toMatchObject({ ok: false, refusal: { code: "decimal-comma", line: 3 } });
  expect(outcome.ok ? "" : outcome.refusal.sentence).toMatch(/^Line 3.*point/);
  expect(checker.lot([0])).toMatchObject({ ids: [], units: 0, verdict: "not-covered" });
});

test("files without a temperature or a unit are scored by themselves and left out of the lot", () => {
  const { checker, files } = checkSupplier("Orme Microwave");
  const bytes = readFileSync(files[0]?.path ?? "", "latin1").replace(/^!.*\n/gm, "");
  const wide = checked(checker, 7, "wide.s2p", Buffer.from(bytes, "latin1"));
  expect(wide).toMatchObject({ serial: null, temperature: null });
  expect(wide.results).toHaveLength(FRAME.requirements.length);
  expect(checker.lot([0, 7]).ids).toEqual([0]);
});

test("dropped files leave the lot, and units are counted with those that cover the range", () => {
  const { checker, files, ids } = checkSupplier("Kestrel Cavity Filters");
  expect(checker.lot(ids)).toMatchObject({ units: 3, unitsOverRange: 3 });
  const cold = files.findIndex(({ unit, temperature }) => unit === "KCF-0205" && temperature === -30);
  checker.drop(cold);
  const lot = checker.lot(ids);
  expect(lot).toMatchObject({ units: 3, unitsOverRange: 2 });
  expect(lot.ids).not.toContain(cold);
});

test("a second serial with the same data to the bit is no further unit", () => {
  const { checker, files } = checkSupplier("Orme Microwave");
  const copy = readFileSync(files[0]?.path ?? "", "latin1").replaceAll("OM-0031", "OM-0032");
  checked(checker, 1, "OM-0032_25C.s2p", Buffer.from(copy, "latin1"));
  expect(checker.lot([0, 1]).units).toBe(1);
});

test("data of a similar part never does better than a conditional pass, and range lines are not covered", () => {
  const { checker, ids } = checkSupplier("Halden Resonator Works", { ...FRAME, basis: "similar" });
  const verdicts = new Set<Verdict>(checker.lot(ids).lines.map(({ verdict }) => verdict));
  expect(verdicts).toEqual(new Set(["not-covered"]));
});

test("a stated setup is what files are scored with, by themselves and together", () => {
  const stated = {
    transmission: 0.02,
    directivity: 46,
    sourceMatch: 40,
    loadMatch: 46,
    tracking: 0.05,
    noiseFloor: 110,
  };
  const assumed = checkSupplier("Kestrel Cavity Filters");
  const own = checkSupplier("Kestrel Cavity Filters", { ...FRAME, statedSetup: stated });
  const width = (results: readonly StoredResult[], line: string) => {
    const result = results.find(({ id }) => id === journeyKey(line));
    return readNumber(result?.interval[1] ?? null) - readNumber(result?.interval[0] ?? null);
  };
  const [sweep, assumedSweep] = [own.sweeps[0]?.results ?? [], assumed.sweeps[0]?.results ?? []];
  // Ut = 0.1 and 0.02 dB, either side of a loss far above the floor (domain: |S21| · 10^(±Ut/20) ± L).
  expect(width(assumedSweep, "2.1")).toBeCloseTo(0.2, 2);
  expect(width(sweep, "2.1")).toBeCloseTo(0.04, 2);
  const lot = own.checker.lot(own.ids).lines.find(({ lineKey }) => lineKey === journeyKey("2.1"));
  expect(lot?.cells.every(({ result }) => result.assumed === undefined || !result.assumed)).toBe(true);
});
