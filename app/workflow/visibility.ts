// Who may see which rows: one table, applied to every query by the scoping hook in db/scoping.ts.
import type { Role } from "./roles.ts";

/** The person a query is made for. */
export interface Actor {
  readonly userId: number;
  readonly organisationId: number;
  readonly organisationKind: "buyer" | "supplier";
  readonly role: Role;
}

/**
 * What an organisation sees of a table.
 * - `own`: rows that carry its id as buyer or supplier
 * - `own-shared`: those, once the supplier has submitted them
 * - `self`: its own organisation row, and for a supplier those of buyers that invited it
 * - `members`: people of its own organisation
 * - `invited-*`: what an accepted invitation opens: the RFQ, its revision, its specification
 * - `files`: chunks of files it sees
 * - `none`: nothing
 */
export type Visibility =
  | "own"
  | "own-shared"
  | "self"
  | "members"
  | "invited-rfq"
  | "invited-rfq-part"
  | "invited-revision"
  | "invited-revision-part"
  | "invited-specification"
  | "files"
  | "shared-measurements"
  | "none";

/** Tables that belong to tenants; a table absent here (sessions, tokens, jobs, outbox) holds nothing a page lists. */
export const VISIBILITY = {
  organisations: { buyer: "self", supplier: "self" },
  users: { buyer: "members", supplier: "members" },
  suppliers: { buyer: "own", supplier: "none" },
  supplier_contacts: { buyer: "own", supplier: "none" },
  number_series: { buyer: "own", supplier: "none" },
  specifications: { buyer: "own", supplier: "invited-specification" },
  specification_revisions: { buyer: "own", supplier: "invited-revision" },
  requirements: { buyer: "own", supplier: "invited-revision-part" },
  rfqs: { buyer: "own", supplier: "invited-rfq" },
  rfq_quantities: { buyer: "own", supplier: "invited-rfq-part" },
  invitations: { buyer: "own", supplier: "own" },
  quotes: { buyer: "own-shared", supplier: "own" },
  quote_versions: { buyer: "own", supplier: "own" },
  quote_prices: { buyer: "own", supplier: "own" },
  quote_declarations: { buyer: "own", supplier: "own" },
  files: { buyer: "own-shared", supplier: "own" },
  file_chunks: { buyer: "files", supplier: "files" },
  measurements: { buyer: "own-shared", supplier: "own" },
  measurement_results: { buyer: "shared-measurements", supplier: "own" },
  version_measurements: { buyer: "own", supplier: "own" },
  quote_line_results: { buyer: "own", supplier: "own" },
  quote_summaries: { buyer: "own", supplier: "own" },
  decisions: { buyer: "own", supplier: "none" },
  awards: { buyer: "own", supplier: "none" },
  audit_events: { buyer: "own", supplier: "own" },
} as const satisfies Record<string, Record<"buyer" | "supplier", Visibility>>;

export type TenantTable = keyof typeof VISIBILITY;

export const isTenantTable = (table: string): table is TenantTable => Object.hasOwn(VISIBILITY, table);
