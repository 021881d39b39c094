// The scenario's specification, its measured files and the figures computed of them outside the project, for tests.
import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import type { Quote } from "~/db/models";
import type { Requirement, SpecificationLine } from "~/rf/index";
import { addMeasurement } from "~/services/measurements.server";
import type { Person } from "~/services/person.server";
import { buildInvitation, buildOrganisation, buildPerson, buildQuote, buildRfq } from "./factories";

interface JourneySpecification {
  readonly title: string;
  readonly requirements: readonly Requirement[];
  readonly declared: readonly {
    readonly id: string;
    readonly kind: "declared";
    readonly name: string;
    readonly limit: string;
  }[];
}

export interface ExpectedResult {
  readonly id: string;
  readonly verdict: string;
  readonly value: number;
  readonly frequency: number;
  readonly margin: number;
  readonly interval: readonly [number, number];
  readonly marginInterval: readonly [number, number];
}

export interface ExpectedSupplier {
  readonly supplier: string;
  readonly units: readonly string[];
  readonly unitsOverRange: readonly string[];
  readonly verdict: string;
  readonly worstLine: string;
  readonly lines: readonly {
    readonly id: string;
    readonly verdict: string;
    readonly worst: ExpectedResult & { readonly unit: string; readonly temperature: number };
    readonly creditedMargin: number;
  }[];
  readonly files: readonly {
    readonly path: string;
    readonly unit: string;
    readonly temperature: number;
    readonly points: number;
    readonly results: readonly ExpectedResult[];
  }[];
}

const journey = (file: string): unknown => JSON.parse(readFileSync(path.join("tests/reference/journey", file), "utf8"));

const specification = journey("specification.json") as JourneySpecification;
const { suppliers } = journey("expected.json") as { suppliers: ExpectedSupplier[] };

/** Line "2.1" has the key "line21". */
export const lineKeyOf = (lineNumber: string): string => `line${lineNumber.replace(".", "")}`;

/** The ten measured and two declared lines. */
export const JOURNEY_LINES: readonly SpecificationLine[] = [
  ...specification.requirements,
  ...specification.declared,
].map(({ id, ...definition }) => ({ lineKey: lineKeyOf(id), lineNumber: id, definition }) as SpecificationLine);

/** What ngspice's data gives by numpy; `tests/reference/journey/README.md`. */
export function expectedOf(supplier: string): ExpectedSupplier {
  const found = suppliers.find((entry) => entry.supplier === supplier);
  if (!found) throw new Error(`no figures of ${supplier}`);
  return found;
}

const DATA = "db/seeds/demo-data";

/** The measured files of a supplier by its folder's name. */
export const journeyFiles = (folder: string): { name: string; bytes: Buffer }[] =>
  readdirSync(path.join(DATA, folder))
    .sort()
    .map((name) => ({ name, bytes: readFileSync(path.join(DATA, folder, name)) }));

/** An open RFQ on the scenario's specification, with a supplier invited and its quote begun. */
export async function buildJourneyQuote(
  supplierName: string,
  overrides: Parameters<typeof buildRfq>[1] = {},
  lines: readonly SpecificationLine[] = JOURNEY_LINES,
) {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq, specification, revision } = await buildRfq(engineer, overrides, lines);
  return { buyer, engineer, rfq, specification, revision, ...(await addSupplier(rfq, supplierName)) };
}

/** One more supplier of the same RFQ. */
export async function addSupplier(rfq: Parameters<typeof buildInvitation>[0], name: string) {
  const organisation = await buildOrganisation("supplier", { name });
  const person = await buildPerson(organisation);
  const { invitation } = await buildInvitation(rfq, organisation);
  const quote = await buildQuote(invitation, organisation.id, { draft: { values: COMPLETE_DRAFT } });
  return { organisation, person, invitation, quote };
}

/** Terms and declarations in which nothing is missing. */
export const COMPLETE_DRAFT: Record<string, string> = {
  "prices.100": "145.00",
  "prices.500": "129.50",
  "prices.1000": "118",
  nre: "4,200.00",
  leadFirstDays: "28",
  leadVolumeDays: "56",
  validUntil: "2031-03-31",
  minimumQuantity: "",
  orderMultiple: "",
  incoterms: "DAP",
  place: "Augsburg",
  paymentTerms: "30 days net",
  remarks: "",
  basis: "measured",
  "declarations.line61.answer": "comply",
  "declarations.line61.text": "25 W",
  "declarations.line62.answer": "comply",
  "declarations.line62.text": "",
};

/** Uploads a supplier's files; throws where one is refused. */
export async function uploadFiles(person: Person, quote: Quote, files: readonly { name: string; bytes: Uint8Array }[]) {
  for (const file of files) {
    const added = await addMeasurement(person, quote.publicId, file);
    if (!added?.ok) throw new Error(`${file.name}: ${JSON.stringify(added)}`);
  }
}

export type JourneyQuote = Awaited<ReturnType<typeof buildJourneyQuote>>;
