// The scenario's measured files, scored: every figure against the numpy recipe in tests/reference/recipes/make_journey_expected.py.
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { evaluate, evaluateLot, parseTouchstone, type Measurement, type Requirement, type Setup } from "~/rf/index";

interface ExpectedResult {
  readonly id: string;
  readonly verdict: string;
  readonly value: number;
  readonly frequency: number;
  readonly limit: number;
  readonly margin: number;
  readonly interval: readonly [number, number];
  readonly marginInterval: readonly [number, number];
  readonly decidingFrequency: number;
}
interface ExpectedSupplier {
  readonly supplier: string;
  readonly lines: readonly {
    id: string;
    verdict: string;
    worst: ExpectedResult & { unit: string; temperature: number };
  }[];
  readonly files: readonly { path: string; unit: string; temperature: number; results: readonly ExpectedResult[] }[];
}
interface Specification {
  readonly requirements: readonly Requirement[];
  readonly range: readonly [number, number];
  readonly ambient: number;
  readonly assumedSetup: Setup;
}

const read = (name: string): unknown => JSON.parse(readFileSync(`tests/reference/journey/${name}`, "utf8"));
const specification = read("specification.json") as Specification;
const { suppliers } = read("expected.json") as { suppliers: readonly ExpectedSupplier[] };

/** Levels are stored to 1e-9 dB; numpy's last digits differ from run to run. */
const LEVEL_DB = 1e-6;
const FREQUENCY = 1e-9;

function expectFigures(actual: ExpectedResult, expected: ExpectedResult, where: string) {
  expect(actual.verdict, where).toBe(expected.verdict);
  for (const name of ["value", "limit", "margin"] as const)
    expect(Math.abs(actual[name] - expected[name]), `${where} ${name}`).toBeLessThan(LEVEL_DB);
  for (const end of [0, 1] as const) {
    expect(Math.abs(actual.interval[end] - expected.interval[end]), `${where} interval`).toBeLessThan(LEVEL_DB);
    expect(
      Math.abs(actual.marginInterval[end] - expected.marginInterval[end]),
      `${where} margin interval`,
    ).toBeLessThan(LEVEL_DB);
  }
  for (const name of ["frequency", "decidingFrequency"] as const)
    expect(Math.abs(actual[name] / expected[name] - 1), `${where} ${name}`).toBeLessThan(FREQUENCY);
}

test("all 19 files give the figures numpy gives, line by line", () => {
  let figures = 0;
  for (const file of suppliers.flatMap((supplier) => supplier.files)) {
    const network = parseTouchstone(readFileSync(file.path), file.path);
    const results = evaluate(network, specification.requirements, { setup: specification.assumedSetup });
    expect(results).toHaveLength(file.results.length);
    results.forEach((result, k) => {
      const expected = file.results[k];
      if (!expected) throw new Error("no expected result");
      expect(result.id).toBe(expected.id);
      expectFigures(result, expected, `${file.path} ${expected.id}`);
      figures += 1;
    });
  }
  expect(figures).toBe(190);
});

test("each supplier's lot gives numpy's verdict and worst point for every line, and Orme's single unit covers nothing", () => {
  for (const { supplier, files, lines } of suppliers) {
    const measurements = files.map(({ path, unit, temperature }): Measurement => ({
      unit,
      temperature,
      sweeps: [{ id: path, network: parseTouchstone(readFileSync(path), path) }],
    }));
    const { requirements, range, ambient, assumedSetup } = specification;
    const rows = evaluateLot(measurements, requirements, { assumedSetup, range, ambient, unitsOverRange: 1 });
    lines.forEach((line, k) => {
      const row = rows[k];
      expect(`${row?.requirementId} ${row?.verdict}`, supplier).toBe(`${line.id} ${line.verdict}`);
      const cell = row?.cells[row.worst];
      if (!cell) throw new Error(`${supplier} ${line.id} has no worst cell`);
      expect(`${cell.unit} at ${cell.temperature}`).toBe(`${line.worst.unit} at ${line.worst.temperature}`);
      expect(Math.abs(cell.result.margin - line.worst.margin), `${supplier} ${line.id}`).toBeLessThan(LEVEL_DB);
    });
  }
});
