// What an RFQ says besides its head: what is asked of quotes and data, what is assumed, what an opening would mail.
import { AuditEvent, Invitation, SpecificationRevision } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SETUP_FIELDS, setupToValues } from "~/forms/setup";
import type { Setup } from "~/rf/contract";
import type { MeasurementPlan } from "~/rf/measurement-plan";
import { rfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";
import { findRfq } from "./rfq-head.server";
import { readBreaks } from "./rfqs.server";
import { supplierNames } from "./suppliers.server";

export interface RfqOverview {
  readonly text: string | null;
  readonly breaks: readonly number[];
  readonly unitsAsked: number;
  readonly unitsOverRange: number;
  readonly measurementPlan: MeasurementPlan;
  /** Hz; of the specification. */
  readonly lowestTestFrequency: number | null;
  /** Label and figure with its unit, of what is assumed. */
  readonly assumedSetup: readonly (readonly [label: string, figure: string])[];
  /** °C, lower end first; null where the specification gives no range. */
  readonly temperatureRange: readonly [number, number] | null;
  /** °C */
  readonly ambient: number;
  /** ISO 8601, UTC, like every instant here. */
  readonly createdAt: string;
  readonly openedAt: string | null;
  readonly closedAt: string | null;
  /** Why it was cancelled. */
  readonly cancelReason: string | null;
  readonly now: string;
  /** Addresses the opening would mail, in the order they were added. */
  readonly toMail: readonly { readonly company: string; readonly email: string }[];
  /** What keeps a draft from being opened. */
  readonly missing: readonly ("invitation" | "due-date")[];
}

/** All an RFQ says but its head, or null where the person does not see it. */
export async function readRfqOverview(person: Person, rfqPublicId: string): Promise<RfqOverview | null> {
  const rfq = await findRfq(person, rfqPublicId);
  if (!rfq) return null;
  const [breaks, revision, toMail, cancelled, now] = await Promise.all([
    readBreaks(person, rfq.id),
    SpecificationRevision.findByPk(rfq.revisionId, { actor: person, rejectOnEmpty: true }),
    readAddressees(person, rfq.id),
    AuditEvent.findOne({ where: { rfqId: rfq.id, subject: "rfq", action: "cancelled" }, actor: person }),
    databaseNow(),
  ]);
  const { temperatureFrom: from, temperatureTo: to } = revision;
  const state = rfqState(rfq, now);
  const closedAt = rfq.closedAt ?? (state === "closed" ? rfq.dueAt : null);
  return {
    text: rfq.text,
    breaks,
    unitsAsked: rfq.unitsAsked,
    unitsOverRange: rfq.unitsOverRange,
    measurementPlan: rfq.measurementPlan,
    lowestTestFrequency: revision.lowestTestFrequency,
    assumedSetup: setupInWords(rfq.assumedSetup),
    temperatureRange: from === null || to === null ? null : [from, to],
    ambient: revision.ambient,
    createdAt: rfq.createdAt.toISOString(),
    openedAt: rfq.openedAt?.toISOString() ?? null,
    closedAt: closedAt?.toISOString() ?? null,
    cancelReason: reasonOf(cancelled?.detail),
    now: now.toISOString(),
    toMail,
    missing: [
      ...(toMail.length === 0 ? (["invitation"] as const) : []),
      ...(rfq.dueAt <= now ? (["due-date"] as const) : []),
    ],
  };
}

async function readAddressees(person: Person, rfqId: number) {
  const invitations = await Invitation.findAll({
    where: { rfqId, state: "draft" },
    order: [["id", "ASC"]],
    actor: person,
  });
  const names = await supplierNames(person, invitations);
  return invitations.map(({ supplierId, email }) => ({ company: names.get(supplierId) ?? "", email }));
}

const reasonOf = (detail: object | null | undefined): string | null =>
  detail && "reason" in detail && typeof detail.reason === "string" ? detail.reason : null;

function setupInWords(setup: Setup): [label: string, figure: string][] {
  const texts = setupToValues(setup);
  return SETUP_FIELDS.flatMap(({ field, label }): [string, string][] => {
    const text = texts[`setup.${field}`] ?? "";
    if (text === "") return [];
    return [[label, field === "noiseFloor" ? `${text} ${setup.noiseFloorKind ?? "peak"}` : text]];
  });
}
