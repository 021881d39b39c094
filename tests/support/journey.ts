// The demo's specification and the figures an independent tool gives for its files.
import { readFileSync } from "node:fs";
import type { Setup, SpecificationLine, Verdict } from "~/rf/index";
import type { RequirementDefinition } from "~/rf/line-definition";

interface StoredLine {
  readonly id: string;
  readonly [field: string]: unknown;
}

const read = (name: string): unknown => JSON.parse(readFileSync(`tests/reference/journey/${name}`, "utf8"));

const specification = read("specification.json") as {
  requirements: readonly StoredLine[];
  declared: readonly StoredLine[];
  assumedSetup: Setup;
};

/** Lines of the demo's specification; the key of line "2.1" is "line21". */
export const JOURNEY_LINES: readonly SpecificationLine[] = [
  ...specification.requirements,
  ...specification.declared,
].map(({ id, ...definition }) => ({
  lineKey: journeyKey(id),
  lineNumber: id,
  definition: definition as unknown as RequirementDefinition,
}));

export const JOURNEY_SETUP = specification.assumedSetup;

export function journeyKey(lineNumber: string): string {
  return `line${lineNumber.replace(".", "")}`;
}

export interface ExpectedFile {
  readonly path: string;
  readonly unit: string;
  readonly temperature: number;
  readonly points: number;
}

export interface ExpectedSupplier {
  readonly supplier: string;
  readonly worstLine: string;
  readonly lines: readonly ExpectedLine[];
  readonly files: readonly ExpectedFile[];
}

export interface ExpectedLine {
  readonly id: string;
  readonly verdict: Verdict;
  readonly worst: {
    readonly unit: string;
    readonly temperature: number;
    readonly value: number;
    readonly frequency: number;
    readonly margin: number;
    readonly marginInterval: readonly [number, number];
  };
  readonly creditedMargin: number;
}

/** Made by ngspice and numpy: see `tests/reference/journey/README.md`. */
export function expectedSupplier(name: string): ExpectedSupplier {
  const { suppliers } = read("expected.json") as { suppliers: ExpectedSupplier[] };
  const found = suppliers.find(({ supplier }) => supplier === name);
  if (!found) throw new Error(`no expected figures of ${name}`);
  return found;
}
