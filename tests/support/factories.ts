// Rows for tests: each factory fills what the test does not care about, through the models and with no service involved.
import {
  Invitation,
  Organisation,
  Quote,
  RequirementRow,
  Rfq,
  RfqQuantity,
  Specification,
  SpecificationRevision,
  Supplier,
  User,
} from "~/db/models";
import type { Setup } from "~/rf/contract";
import type { SpecificationLine } from "~/rf/line-definition";
import { newPublicId } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";
import { EMPTY_QUOTE_DRAFT } from "~/workflow/quote-draft";
import type { Role } from "~/workflow/roles";

let serial = 0;
const next = () => (serial += 1);
const at = new Date("2026-11-02T08:00:00.000Z");

export const ASSUMED_SETUP: Setup = {
  transmission: 0.1,
  directivity: 36,
  sourceMatch: 32,
  loadMatch: 36,
  tracking: 0.1,
  noiseFloor: 90,
  noiseFloorKind: "peak",
};

export const buildOrganisation = (
  kind: "buyer" | "supplier",
  overrides: Partial<Organisation["_creationAttributes"]> = {},
) =>
  Organisation.create({
    publicId: newPublicId(),
    kind,
    name: `${kind === "buyer" ? "Buyer" : "Supplier"} ${next()}`,
    timeZone: "Europe/Berlin",
    currency: "EUR",
    createdAt: at,
    ...overrides,
  });

/** A user of an organisation, as the person services run for. */
export async function buildPerson(
  organisation: Organisation,
  role?: Role,
  overrides: Partial<User["_creationAttributes"]> = {},
): Promise<Person> {
  const number = next();
  const user = await User.create({
    publicId: newPublicId(),
    organisationId: organisation.id,
    organisationKind: organisation.kind,
    email: `person-${number}@example.test`,
    name: `Person ${number}`,
    role: role ?? (organisation.kind === "supplier" ? "supplier" : "engineer"),
    timeZone: "Europe/Berlin",
    createdAt: at,
    ...overrides,
  });
  return {
    userId: user.id,
    publicId: user.publicId,
    organisationId: organisation.id,
    organisationKind: organisation.kind,
    organisationName: organisation.name,
    role: user.role,
    name: user.name,
    email: user.email,
    timeZone: user.timeZone,
    requestId: "00000000-0000-4000-8000-000000000000",
    ip: "127.0.0.1",
  };
}

/** Lines of a short specification: a passband, a stopband, both matches, one declared. */
export const SHORT_LINES: readonly SpecificationLine[] = [
  { lineKey: "lineloss", lineNumber: "2.1", definition: { kind: "insertion-loss", band: [1.92e9, 1.98e9], max: 1.2 } },
  { lineKey: "linerej1", lineNumber: "3.1", definition: { kind: "rejection", band: [2.04e9, 2.14e9], min: 50 } },
  {
    lineKey: "linerl1",
    lineNumber: "4.1",
    definition: { kind: "return-loss", port: 1, band: [1.92e9, 1.98e9], min: 15 },
  },
  {
    lineKey: "linerl2",
    lineNumber: "4.2",
    definition: { kind: "return-loss", port: 2, band: [1.92e9, 1.98e9], min: 15 },
  },
  {
    lineKey: "linepower",
    lineNumber: "6.1",
    definition: { kind: "declared", name: "Input power, continuous", limit: "min 20 W" },
  },
];

interface BuildSpecification {
  readonly lines?: readonly SpecificationLine[] | undefined;
  readonly status?: "draft" | "released";
  readonly title?: string;
  readonly range?: readonly [number, number] | null;
}

export async function buildSpecification(
  owner: Person,
  {
    lines = SHORT_LINES,
    status = "released",
    title = "Transmit band-pass",
    range = [-30, 70],
  }: BuildSpecification = {},
) {
  const specification = await Specification.create({
    publicId: newPublicId(),
    buyerOrganisationId: owner.organisationId,
    number: next(),
    title,
    ownerId: owner.userId,
    createdAt: at,
  });
  const revision = await SpecificationRevision.create({
    buyerOrganisationId: owner.organisationId,
    specificationId: specification.id,
    letter: "A",
    status,
    title,
    impedance1: 50,
    impedance2: 50,
    ambient: 25,
    temperatureFrom: range?.[0] ?? null,
    temperatureTo: range?.[1] ?? null,
    releasedAt: status === "released" ? at : null,
    releasedBy: status === "released" ? owner.userId : null,
    contentHash: status === "released" ? Buffer.alloc(32) : null,
    savedAt: at,
    createdAt: at,
  });
  for (const [ordinal, line] of lines.entries())
    await RequirementRow.create({
      buyerOrganisationId: owner.organisationId,
      revisionId: revision.id,
      ordinal,
      lineKey: line.lineKey,
      lineNumber: line.lineNumber,
      kind: line.definition.kind,
      definition: line.definition,
      createdAt: at,
    });
  return { specification, revision };
}

export async function buildRfq(
  owner: Person,
  overrides: Partial<Rfq["_creationAttributes"]> = {},
  lines?: readonly SpecificationLine[],
) {
  const { specification, revision } = await buildSpecification(owner, { lines });
  const rfq = await Rfq.create({
    publicId: newPublicId(),
    buyerOrganisationId: owner.organisationId,
    year: 2026,
    number: next(),
    title: "Transmit band-pass, 500 pieces",
    specificationId: specification.id,
    revisionId: revision.id,
    ownerId: owner.userId,
    status: "open",
    openedAt: at,
    dueAt: new Date(Date.now() + 7 * 24 * 60 * 60 * 1000),
    dueZone: "Europe/Berlin",
    decisionRule: "simple",
    quantity: 500,
    currency: "EUR",
    unitsAsked: 3,
    unitsOverRange: 1,
    assumedSetup: ASSUMED_SETUP,
    createdAt: at,
    ...overrides,
  });
  for (const quantity of [100, 500, 1000])
    await RfqQuantity.create({ buyerOrganisationId: owner.organisationId, rfqId: rfq.id, quantity });
  return { specification, revision, rfq };
}

/** An accepted invitation of a supplier's organisation, with its directory entry. */
export async function buildInvitation(
  rfq: Rfq,
  supplierOrganisation: Organisation,
  email = `invited-${next()}@example.test`,
) {
  const [supplier] = await Supplier.findOrCreate({
    where: { buyerOrganisationId: rfq.buyerOrganisationId, supplierOrganisationId: supplierOrganisation.id },
    defaults: {
      publicId: newPublicId(),
      buyerOrganisationId: rfq.buyerOrganisationId,
      name: supplierOrganisation.name,
      supplierOrganisationId: supplierOrganisation.id,
      createdAt: at,
    },
    actor: { userId: 0, organisationId: rfq.buyerOrganisationId, organisationKind: "buyer", role: "admin" },
  });
  const invitation = await Invitation.create({
    publicId: newPublicId(),
    buyerOrganisationId: rfq.buyerOrganisationId,
    rfqId: rfq.id,
    supplierId: supplier.id,
    email,
    supplierOrganisationId: supplierOrganisation.id,
    state: "accepted",
    sentAt: at,
    acceptedAt: at,
    createdAt: at,
  });
  return { supplier, invitation };
}

export const buildQuote = (
  invitation: Invitation,
  supplierOrganisationId: number,
  overrides: Partial<Quote["_creationAttributes"]> = {},
) =>
  Quote.create({
    publicId: newPublicId(),
    buyerOrganisationId: invitation.buyerOrganisationId,
    supplierOrganisationId,
    invitationId: invitation.id,
    rfqId: invitation.rfqId,
    draft: EMPTY_QUOTE_DRAFT,
    savedAt: at,
    createdAt: at,
    ...overrides,
  });
