// The history of an RFQ: its audit rows, as the roles may read them.
import { AuditEvent, Supplier } from "~/db/models";
import { historyScope } from "~/workflow/roles";
import type { Person } from "./person.server";
import { findRfq } from "./rfq-head.server";

export const EVENTS_A_PAGE = 50;

export interface HistoryEvent {
  readonly id: number;
  /** ISO 8601, UTC. */
  readonly at: string;
  /** null: by the system. */
  readonly actorName: string | null;
  /** The supplier whose act it was, as the buyer's directory names it. */
  readonly company: string | null;
  readonly subject: string;
  readonly action: string;
  readonly detail: Readonly<Record<string, unknown>>;
}

export interface History {
  /** False for an engineer who does not own the RFQ: no event is in it then. */
  readonly isReadable: boolean;
  readonly events: readonly HistoryEvent[];
  readonly total: number;
  readonly pages: number;
}

/** One page of what happened, latest first, or null where the person does not see the RFQ. `page` counts from 1. */
export async function readHistory(person: Person, rfqPublicId: string, page: number): Promise<History | null> {
  const rfq = await findRfq(person, rfqPublicId);
  if (!rfq) return null;
  if (historyScope(person.role) === "own-rfqs" && rfq.ownerId !== person.userId)
    return { isReadable: false, events: [], total: 0, pages: 1 };
  const { rows, count } = await AuditEvent.findAndCountAll({
    where: { rfqId: rfq.id },
    order: [["id", "DESC"]],
    limit: EVENTS_A_PAGE,
    offset: (page - 1) * EVENTS_A_PAGE,
    actor: person,
  });
  const companies = await namesOfOrganisations(person, rows);
  const events = rows.map((row) => ({
    id: row.id,
    at: row.at.toISOString(),
    actorName: row.actorName,
    company: row.actorOrganisationId === null ? null : (companies.get(row.actorOrganisationId) ?? null),
    subject: row.subject,
    action: row.action,
    detail: { ...row.detail },
  }));
  return { isReadable: true, events, total: count, pages: Math.max(1, Math.ceil(count / EVENTS_A_PAGE)) };
}

async function namesOfOrganisations(person: Person, rows: readonly AuditEvent[]): Promise<Map<number, string>> {
  const ids = new Set(rows.flatMap(({ actorOrganisationId }) => actorOrganisationId ?? []));
  ids.delete(person.organisationId);
  if (ids.size === 0) return new Map();
  const suppliers = await Supplier.findAll({ where: { supplierOrganisationId: [...ids] }, actor: person });
  return new Map(
    suppliers.flatMap(({ supplierOrganisationId: id, name }) => (id === null ? [] : [[id, name] as const])),
  );
}
