// The list of a buyer's RFQs: one page of it, with real counts by state.
import { Op, type Order, type WhereOptions } from "sequelize";
import { Invitation, Quote, Rfq, Specification, SpecificationRevision, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import type { RfqListQuery, RfqSort } from "~/forms/rfq-list";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import { rfqState, type RfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";

export const RFQS_A_PAGE = 25;

export interface RfqListEntry {
  readonly publicId: string;
  readonly number: string;
  readonly title: string;
  /** "SPEC-0007 A" */
  readonly specification: string;
  readonly ownerName: string;
  readonly dueAt: string;
  readonly dueZone: string;
  readonly quantity: number;
  readonly state: RfqState;
  readonly quotes: { readonly submitted: number; readonly invited: number };
}

export interface RfqList {
  readonly entries: readonly RfqListEntry[];
  readonly counts: Readonly<Record<RfqState, number>>;
  /** Of the state asked for. */
  readonly total: number;
  readonly pages: number;
  readonly now: string;
}

const ORDER: Record<RfqSort, (direction: "ASC" | "DESC") => Order> = {
  number: (direction) => [
    ["year", direction],
    ["number", direction],
  ],
  title: (direction) => [
    ["title", direction],
    ["id", direction],
  ],
  due: (direction) => [
    ["dueAt", direction],
    ["id", direction],
  ],
  quantity: (direction) => [
    ["quantity", direction],
    ["id", direction],
  ],
};

/** The stored rows that are in a state at an instant, as `rfqState` tells it. */
function inState(state: RfqState | null, now: Date): WhereOptions<Rfq> {
  if (state === "open") return { status: "open", dueAt: { [Op.gt]: now } };
  if (state !== "closed") return state === null ? {} : { status: state };
  return { [Op.or]: [{ status: "closed" }, { status: "open", dueAt: { [Op.lte]: now } }] };
}

/** One page of the RFQs the person sees. */
export async function listRfqs(person: Person, query: RfqListQuery): Promise<RfqList> {
  const now = await databaseNow();
  const [counts, rfqs] = await Promise.all([
    countByState(person, now),
    Rfq.findAll({
      where: inState(query.state, now),
      order: ORDER[query.sort](query.direction === "ascending" ? "ASC" : "DESC"),
      limit: RFQS_A_PAGE,
      offset: (query.page - 1) * RFQS_A_PAGE,
      actor: person,
    }),
  ]);
  const total =
    query.state === null ? Object.values(counts).reduce((sum, count) => sum + count, 0) : counts[query.state];
  return {
    entries: await toEntries(person, rfqs, now),
    counts,
    total,
    pages: Math.max(1, Math.ceil(total / RFQS_A_PAGE)),
    now: now.toISOString(),
  };
}

async function countByState(person: Person, now: Date): Promise<Record<RfqState, number>> {
  const [grouped, overdue] = await Promise.all([
    Rfq.count({ group: ["status"], actor: person }),
    Rfq.count({ where: { status: "open", dueAt: { [Op.lte]: now } }, actor: person }),
  ]);
  const stored = new Map(grouped.map(({ status, count }) => [status, count]));
  const of = (state: RfqState) => stored.get(state) ?? 0;
  return {
    draft: of("draft"),
    open: of("open") - overdue,
    closed: of("closed") + overdue,
    decided: of("decided"),
    cancelled: of("cancelled"),
  };
}

async function toEntries(person: Person, rfqs: readonly Rfq[], now: Date): Promise<RfqListEntry[]> {
  if (rfqs.length === 0) return [];
  const rfqId = rfqs.map(({ id }) => id);
  const [specifications, revisions, owners, invited, submitted] = await Promise.all([
    Specification.findAll({ where: { id: rfqs.map((rfq) => rfq.specificationId) }, actor: person }),
    SpecificationRevision.findAll({ where: { id: rfqs.map((rfq) => rfq.revisionId) }, actor: person }),
    User.findAll({ where: { id: rfqs.map((rfq) => rfq.ownerId) }, actor: person }),
    Invitation.count({ where: { rfqId, state: { [Op.ne]: "revoked" } }, group: ["rfq_id"], actor: person }),
    Quote.count({ where: { rfqId, state: "submitted" }, group: ["rfq_id"], actor: person }),
  ]);
  const numbers = new Map(specifications.map(({ id, number }) => [id, specificationNumber(number)]));
  const letters = new Map(revisions.map(({ id, letter }) => [id, letter]));
  const names = new Map(owners.map(({ id, name }) => [id, name]));
  const [invitedTo, submittedTo] = [invited, submitted].map(byRfq);
  return rfqs.map((rfq) => ({
    publicId: rfq.publicId,
    number: rfqNumber(rfq.year, rfq.number),
    title: rfq.title,
    specification: `${numbers.get(rfq.specificationId) ?? ""} ${letters.get(rfq.revisionId) ?? ""}`,
    ownerName: names.get(rfq.ownerId) ?? "",
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    quantity: rfq.quantity,
    state: rfqState(rfq, now),
    quotes: { submitted: submittedTo?.get(rfq.id) ?? 0, invited: invitedTo?.get(rfq.id) ?? 0 },
  }));
}

const byRfq = (groups: readonly Record<string, unknown>[]): Map<number, number> =>
  new Map(groups.map((group) => [Number(group.rfq_id), Number(group.count)]));
