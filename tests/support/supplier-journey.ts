// A supplier at work on the scenario's RFQ: its quote begun, its measured files uploaded.
import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import type { Quote, Rfq } from "~/db/models";
import type { SpecificationLine, Verdict } from "~/rf/index";
import { addMeasurement } from "~/services/measurements.server";
import type { Person } from "~/services/person.server";
import { buildInvitation, buildOrganisation, buildPerson, buildQuote, buildRfq } from "./factories";
import { expectedSupplier, JOURNEY_LINES, type ExpectedFile, type ExpectedSupplier } from "./journey";

export interface NamedBytes {
  readonly name: string;
  readonly bytes: Buffer;
}

const DATA = "db/seeds/demo-data";

/** The measured files of a supplier by its folder's name, in the order of their names. */
export const journeyFiles = (folder: string): NamedBytes[] =>
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

export type JourneyQuote = Awaited<ReturnType<typeof buildJourneyQuote>>;

/** One more supplier of the same RFQ. */
export async function addSupplier(rfq: Rfq, name: string) {
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

/** Uploads files in their order; throws where one is refused. */
export async function uploadFiles(person: Person, quote: Quote, files: readonly NamedBytes[]): Promise<void> {
  for (const file of files) {
    const added = await addMeasurement(person, quote.publicId, file);
    if (!added?.ok) throw new Error(`${file.name}: ${JSON.stringify(added)}`);
  }
}

/** What the figures of a supplier hold besides its lines. */
export interface SupplierFigures extends ExpectedSupplier {
  readonly verdict: Verdict;
  readonly units: readonly string[];
  readonly unitsOverRange: readonly string[];
  readonly files: readonly (ExpectedFile & {
    readonly results: readonly { readonly id: string; readonly margin: number }[];
  })[];
}

export const supplierFigures = (name: string): SupplierFigures => expectedSupplier(name) as SupplierFigures;
