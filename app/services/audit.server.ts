// The audit trail: one row for each change of state, in the transaction of the change.
import type { Transaction } from "sequelize";
import { AuditEvent } from "~/db/models";
import type { Person } from "./person.server";

export interface AuditEntry {
  /** What kind of thing it happened to, for example "rfq". */
  readonly subject: string;
  /** What happened, a past participle, for example "opened". */
  readonly action: string;
  readonly buyerOrganisationId?: number;
  /** Set where the supplier may read the entry. */
  readonly supplierOrganisationId?: number;
  readonly rfqId?: number;
  readonly quoteId?: number;
  readonly specificationId?: number;
  readonly detail?: Record<string, unknown>;
  /** Of a request nobody is signed in for; a person brings their own. */
  readonly requestId?: string;
  readonly ip?: string;
}

/** Adds an entry. `by` is null for what the system does by itself. */
export async function recordEvent(
  by: Person | null,
  at: Date,
  entry: AuditEntry,
  transaction: Transaction,
): Promise<void> {
  await AuditEvent.create(
    {
      at,
      actorUserId: by?.userId ?? null,
      actorName: by?.name ?? null,
      actorOrganisationId: by?.organisationId ?? null,
      requestId: by?.requestId ?? null,
      ip: by?.ip ?? null,
      ...entry,
    },
    { transaction },
  );
}
