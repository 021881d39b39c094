// The scoping hook: no query on a tenant's table without an actor, and every one narrowed to what that actor may see.
import { literal, Op, Utils, type Sequelize, type WhereOptions } from "sequelize";
import { isTenantTable, VISIBILITY, type Actor, type TenantTable, type Visibility } from "../app/workflow/visibility";

/** The actor of jobs, seeds and sign-in: sees every row, and has to be named on purpose. */
export const SYSTEM = Symbol("system");
export type QueryActor = Actor | typeof SYSTEM;

declare module "sequelize" {
  interface Filterable {
    /** For whom the query is made; required on tenant tables. */
    actor?: QueryActor;
  }
  interface Hookable {
    actor?: QueryActor;
  }
}

export class UnscopedQueryError extends Error {
  override readonly name = "UnscopedQueryError";
}

/** An RFQ opens to a supplier by an accepted invitation, and only once it is no draft. */
const invitedRfqs = (organisationId: number) =>
  `(SELECT r.id FROM rfqs r JOIN invitations i ON i.rfq_id = r.id WHERE i.supplier_organisation_id = ${organisationId} AND i.state = 'accepted' AND r.status <> 'draft')`;

const invitedColumn = (column: string, organisationId: number) =>
  `(SELECT r.${column} FROM rfqs r JOIN invitations i ON i.rfq_id = r.id WHERE i.supplier_organisation_id = ${organisationId} AND i.state = 'accepted' AND r.status <> 'draft')`;

/** The condition an actor adds to a query on a table. */
export function visibilityCondition(actor: Actor, table: TenantTable): WhereOptions {
  const { organisationId } = actor;
  if (!Number.isSafeInteger(organisationId)) throw new UnscopedQueryError("the actor's organisation is not a number");
  const side = actor.organisationKind;
  const own = side === "buyer" ? { buyerOrganisationId: organisationId } : { supplierOrganisationId: organisationId };
  const within = (field: string, query: string) => ({ [field]: { [Op.in]: literal(query) } });
  const conditions: Record<Visibility, () => WhereOptions> = {
    own: () => own,
    "own-shared": () => ({ ...own, sharedAt: { [Op.ne]: null } }),
    self: () =>
      side === "buyer"
        ? { id: organisationId }
        : within(
            "id",
            `(SELECT ${organisationId} UNION SELECT i.buyer_organisation_id FROM invitations i WHERE i.supplier_organisation_id = ${organisationId})`,
          ),
    members: () => ({ organisationId }),
    "invited-rfq": () => within("id", invitedRfqs(organisationId)),
    "invited-rfq-part": () => within("rfqId", invitedRfqs(organisationId)),
    "invited-revision": () => within("id", invitedColumn("revision_id", organisationId)),
    "invited-revision-part": () => within("revisionId", invitedColumn("revision_id", organisationId)),
    "invited-specification": () => within("id", invitedColumn("specification_id", organisationId)),
    files: () =>
      within(
        "fileId",
        side === "buyer"
          ? `(SELECT f.id FROM files f WHERE f.buyer_organisation_id = ${organisationId} AND f.shared_at IS NOT NULL)`
          : `(SELECT f.id FROM files f WHERE f.supplier_organisation_id = ${organisationId})`,
      ),
    "shared-measurements": () => ({
      ...own,
      ...within(
        "measurementId",
        `(SELECT m.id FROM measurements m WHERE m.buyer_organisation_id = ${organisationId} AND m.shared_at IS NOT NULL)`,
      ),
    }),
    none: () => literal("1 = 0"),
  };
  return conditions[VISIBILITY[table][side]]();
}

interface HookedOptions {
  actor?: QueryActor;
  where?: WhereOptions;
  include?: unknown;
  scoped?: boolean;
}

const unchanged = (condition: WhereOptions): WhereOptions => condition;

function scope(options: HookedOptions, table: string, written = unchanged): void {
  if (!isTenantTable(table) || options.scoped) return;
  if (options.actor === undefined) throw new UnscopedQueryError(`a query on ${table} names no actor`);
  // A join would reach the joined table past this hook: read it with a query of its own.
  if (Array.isArray(options.include) && options.include.length > 0)
    throw new UnscopedQueryError(`a query on ${table} includes another table`);
  options.scoped = true;
  if (options.actor === SYSTEM) return;
  const condition = written(visibilityCondition(options.actor, table));
  options.where = options.where ? { [Op.and]: [options.where, condition] } : condition;
}

/** Queries that Sequelize runs past every hook. */
const UNHOOKED = ["sum", "min", "max", "increment", "decrement"] as const;

const refuse = (name: string) => () => {
  throw new UnscopedQueryError(`${name} passes no hook: write it as find or update`);
};

/** Adds the hook to a connection, for every model defined on it before or after. */
export function installScoping(sequelize: Sequelize): void {
  sequelize.addHook("afterDefine", (model) => {
    const table = (model as unknown as { tableName: string }).tableName;
    const apply = (options: unknown) => scope(options as HookedOptions, table);
    // Before this hook alone the attribute names have been turned into column names already.
    const applyToColumns = (options: unknown) =>
      scope(options as HookedOptions, table, (condition) => Utils.mapWhereFieldNames(condition, model) as WhereOptions);
    const target = model as unknown as { addHook(name: string, hook: (options: unknown) => void): void };
    for (const name of ["beforeFind", "beforeCount", "beforeBulkUpdate"]) target.addHook(name, apply);
    target.addHook("beforeBulkDestroy", applyToColumns);
    if (isTenantTable(table)) for (const name of UNHOOKED) Object.defineProperty(model, name, { value: refuse(name) });
  });
}
