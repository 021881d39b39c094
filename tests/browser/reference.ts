// The journey's specification and the figures its pages must show, made by ngspice, scikit-rf and numpy: see tests/reference/journey.
import { readFileSync } from "node:fs";
import path from "node:path";

const FOLDER = path.join("tests", "reference", "journey");

type Band = readonly [number, number];
type Slope = { readonly points: readonly (readonly [number, number])[] };

export interface ReferenceLine {
  readonly id: string;
  readonly kind: string;
  readonly band: Band;
  readonly max?: number;
  readonly min?: number | Slope;
  readonly port?: number;
  readonly relativeTo?: Band;
}

export interface ReferenceSpecification {
  readonly title: string;
  readonly range: Band;
  readonly requirements: readonly ReferenceLine[];
  readonly declared: readonly { readonly id: string; readonly name: string; readonly limit: string }[];
}

export interface ReferenceResult {
  readonly id: string;
  readonly unit: string;
  readonly temperature: number;
  readonly verdict: string;
  readonly value: number;
  readonly frequency: number;
  readonly margin: number;
}

interface ReferenceSupplier {
  readonly supplier: string;
  readonly verdict: string;
  readonly worstLine: string;
  readonly lines: readonly { readonly id: string; readonly verdict: string; readonly worst: ReferenceResult }[];
  readonly files: readonly ReferenceFile[];
}

export interface ReferenceFile {
  readonly path: string;
  readonly unit: string;
  readonly temperature: number;
  readonly results: readonly ReferenceResult[];
}

const read = (file: string): unknown => JSON.parse(readFileSync(path.join(FOLDER, file), "utf8"));

export const SPECIFICATION = read("specification.json") as ReferenceSpecification;
const { suppliers } = read("expected.json") as { readonly suppliers: readonly ReferenceSupplier[] };

export function referenceOf(supplier: string): ReferenceSupplier {
  const found = suppliers.find((one) => one.supplier === supplier);
  if (!found) throw new Error(`no reference figures of ${supplier}`);
  return found;
}

/** A line's worst result over all files, under the verdict of the line. */
export function worstOf(supplier: string, line: string): ReferenceResult {
  const found = referenceOf(supplier).lines.find(({ id }) => id === line);
  if (!found) throw new Error(`no reference figure of ${supplier} for line ${line}`);
  return { ...found.worst, verdict: words(found.verdict) };
}

/** "conditional pass" */
const words = (verdict: string): string => verdict.replace("-", " ");

/** "−30" */
export const celsius = (value: number): string => String(value).replace("-", "−");

/** What counts as full credit, dB, as tests/reference/journey/README.md says. */
const FULL_CREDIT: Readonly<Record<string, number>> = {
  "insertion-loss": 0.2,
  ripple: 0.1,
  rejection: 3,
  "reverse-isolation": 3,
  "return-loss": 2,
};

const SEVERITY = ["fail", "conditional-fail", "not-covered", "conditional-pass", "pass"];

/** The result that decides one file: the worst verdict, and among equals the least margin as a part of full credit. */
export function decidingOf(file: ReferenceFile): ReferenceResult {
  const credited = ({ id, margin }: ReferenceResult) => {
    const kind = SPECIFICATION.requirements.find((line) => line.id === id)?.kind ?? "";
    return margin / (FULL_CREDIT[kind] ?? NaN);
  };
  const sorted = [...file.results].sort(
    (a, b) => SEVERITY.indexOf(a.verdict) - SEVERITY.indexOf(b.verdict) || credited(a) - credited(b),
  );
  const first = sorted[0];
  if (!first) throw new Error(`no results of ${file.path}`);
  return { ...first, verdict: words(first.verdict) };
}
