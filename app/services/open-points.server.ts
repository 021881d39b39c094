// What needs a buyer's person today, read from the states things are in.
import { Op, type WhereOptions } from "sequelize";
import {
  Decision,
  Invitation,
  Quote,
  QuoteVersion,
  Rfq,
  Specification,
  SpecificationRevision,
  Supplier,
  User,
} from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { approvalRefusal } from "~/workflow/decision";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import { may } from "~/workflow/roles";
import { rfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";

/** Rows shown of each kind; `count` counts all. */
export const MOST_SHOWN = 10;

interface Points<T> {
  readonly count: number;
  readonly items: readonly T[];
}

export interface RfqPoint {
  readonly publicId: string;
  readonly number: string;
  readonly title: string;
  readonly ownerName: string;
  /** ISO 8601, UTC. */
  readonly dueAt: string;
  readonly dueZone: string;
  readonly quotes: { readonly submitted: number; readonly invited: number };
}

export interface DecisionPoint {
  readonly rfq: Pick<RfqPoint, "publicId" | "number" | "title">;
  /** Who recommended, or who returned it. */
  readonly byName: string;
  readonly at: string;
  /** What the recommender wrote, or the remark it was returned with. */
  readonly text: string;
}

export interface QuotePoint {
  readonly publicId: string;
  readonly rfq: Pick<RfqPoint, "publicId" | "number" | "title">;
  readonly supplierName: string;
  readonly version: number;
  readonly at: string;
}

export interface DraftPoint {
  readonly publicId: string;
  readonly number: string;
  readonly letter: string;
  readonly title: string;
  readonly savedAt: string;
}

export interface OpenPoints {
  readonly now: string;
  /** Recommendations this person may approve. */
  readonly toApprove: Points<DecisionPoint>;
  /** The person's own recommendations that came back. */
  readonly returned: Points<DecisionPoint>;
  /** Closed, with nothing recommended. */
  readonly toRecommend: Points<RfqPoint>;
  /** Soonest due first. */
  readonly open: Points<RfqPoint>;
  /** Submitted to RFQs that are not decided, latest first. */
  readonly quotes: Points<QuotePoint>;
  readonly rfqDrafts: Points<RfqPoint>;
  /** The person's own drafts. */
  readonly specificationDrafts: Points<DraftPoint>;
}

const points = <T>(all: readonly T[]): Points<T> => ({ count: all.length, items: all.slice(0, MOST_SHOWN) });

/** An engineer sees the RFQs she owns, purchasing and administrators those of everybody. */
export async function readOpenPoints(person: Person): Promise<OpenPoints> {
  const now = await databaseNow();
  const mine: WhereOptions<Rfq> = person.role === "engineer" ? { ownerId: person.userId } : {};
  const rfqs = await Rfq.findAll({
    where: { [Op.and]: [mine, { status: { [Op.in]: ["draft", "open", "closed"] } }] },
    order: [
      ["dueAt", "ASC"],
      ["id", "ASC"],
    ],
    actor: person,
  });
  const inState = (state: string) => rfqs.filter((rfq) => rfqState(rfq, now) === state);
  const decisions = await readDecisions(person);
  const live = new Set(decisions.live.map(({ rfqId }) => rfqId));
  const closed = inState("closed").filter(({ id }) => !live.has(id));
  const unanswered = decisions.returned.filter(({ rfqId }) => !live.has(rfqId));
  const returned = await ofClosed(person, unanswered, now);
  const cameBack = new Set(returned.map(({ rfqId }) => rfqId));
  const running = [...inState("open"), ...closed];
  return {
    now: now.toISOString(),
    toApprove: await decisionPoints(person, await ofClosed(person, decisions.toApprove, now), "recommended"),
    returned: await decisionPoints(person, returned, "returned"),
    toRecommend: await rfqPoints(
      person,
      closed.filter(({ id }) => !cameBack.has(id)),
    ),
    open: await rfqPoints(person, inState("open")),
    quotes: await quotePoints(person, running),
    rfqDrafts: await rfqPoints(person, inState("draft")),
    specificationDrafts: may(person.role, "write-specification") ? await draftPoints(person) : points([]),
  };
}

/** Recommendations that wait, those the person may approve, and the person's own whose last word is a return. */
async function readDecisions(person: Person) {
  const live = await Decision.findAll({
    where: { state: "recommended" },
    order: [["recommendedAt", "ASC"]],
    attributes: { exclude: ["snapshot"] },
    actor: person,
  });
  const returned = await Decision.findAll({
    where: { state: "returned" },
    order: [["id", "DESC"]],
    attributes: { exclude: ["snapshot"] },
    actor: person,
  });
  const lastReturn = returned.filter(
    ({ rfqId }, index) => returned.findIndex((other) => other.rfqId === rfqId) === index,
  );
  return {
    live,
    toApprove: live.filter((decision) => approvalRefusal(person, decision, decision.secondPerson) === null),
    returned: lastReturn.filter(({ recommendedBy }) => recommendedBy === person.userId),
  };
}

/** Those whose RFQ is neither decided nor cancelled: the others are done with. */
async function ofClosed(person: Person, decisions: readonly Decision[], now: Date): Promise<Decision[]> {
  const rfqs = await Rfq.findAll({ where: { id: decisions.map(({ rfqId }) => rfqId) }, actor: person });
  const closed = new Set(rfqs.flatMap((rfq) => (rfqState(rfq, now) === "closed" ? rfq.id : [])));
  return decisions.filter(({ rfqId }) => closed.has(rfqId));
}

async function decisionPoints(
  person: Person,
  decisions: readonly Decision[],
  kind: "recommended" | "returned",
): Promise<Points<DecisionPoint>> {
  const { count, items } = points(decisions);
  const rfqs = await Rfq.findAll({ where: { id: items.map(({ rfqId }) => rfqId) }, actor: person });
  const byOf = ({ recommendedBy, decidedBy }: Decision) => (kind === "recommended" ? recommendedBy : (decidedBy ?? 0));
  const names = await userNames(person, items.map(byOf));
  const shown = items.flatMap((decision) => {
    const rfq = rfqs.find(({ id }) => id === decision.rfqId);
    if (!rfq) return [];
    return {
      rfq: naming(rfq),
      byName: names.get(byOf(decision)) ?? "",
      at: (kind === "returned" ? (decision.decidedAt ?? decision.recommendedAt) : decision.recommendedAt).toISOString(),
      text: (kind === "returned" ? decision.remark : decision.reason) ?? "",
    };
  });
  return { count, items: shown };
}

const naming = ({ publicId, year, number, title }: Rfq) => ({ publicId, number: rfqNumber(year, number), title });

async function userNames(person: Person, ids: readonly number[]): Promise<Map<number, string>> {
  const users = await User.findAll({ where: { id: [...new Set(ids)] }, actor: person });
  return new Map(users.map(({ id, name }) => [id, name]));
}

async function rfqPoints(person: Person, rfqs: readonly Rfq[]): Promise<Points<RfqPoint>> {
  const { count, items } = points(rfqs);
  const rfqId = items.map(({ id }) => id);
  const [names, submitted, invited] = await Promise.all([
    userNames(
      person,
      items.map(({ ownerId }) => ownerId),
    ),
    Quote.findAll({ where: { rfqId, state: "submitted" }, attributes: ["rfqId"], raw: true, actor: person }),
    Invitation.findAll({
      where: { rfqId, state: { [Op.ne]: "revoked" } },
      attributes: ["rfqId"],
      raw: true,
      actor: person,
    }),
  ]);
  const of = (rows: readonly { readonly rfqId: number }[], id: number) => rows.filter((row) => row.rfqId === id).length;
  const shown = items.map((rfq) => ({
    ...naming(rfq),
    ownerName: names.get(rfq.ownerId) ?? "",
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    quotes: { submitted: of(submitted, rfq.id), invited: of(invited, rfq.id) },
  }));
  return { count, items: shown };
}

async function quotePoints(person: Person, rfqs: readonly Rfq[]): Promise<Points<QuotePoint>> {
  const quotes = await Quote.findAll({
    where: { rfqId: rfqs.map(({ id }) => id), state: "submitted", currentVersionId: { [Op.ne]: null } },
    attributes: ["publicId", "rfqId", "invitationId", "currentVersionId"],
    actor: person,
  });
  const versions = await QuoteVersion.findAll({
    where: { id: quotes.flatMap(({ currentVersionId }) => currentVersionId ?? []) },
    attributes: ["id", "number", "submittedAt"],
    order: [
      ["submittedAt", "DESC"],
      ["id", "DESC"],
    ],
    limit: MOST_SHOWN,
    actor: person,
  });
  const byVersion = new Map(quotes.map((quote) => [quote.currentVersionId, quote]));
  const names = await supplierNames(
    person,
    versions.flatMap(({ id }) => byVersion.get(id)?.invitationId ?? []),
  );
  const items = versions.flatMap(({ id, number, submittedAt }) => {
    const quote = byVersion.get(id);
    const rfq = rfqs.find((one) => one.id === quote?.rfqId);
    if (!quote || !rfq) return [];
    return {
      publicId: quote.publicId,
      rfq: naming(rfq),
      supplierName: names.get(quote.invitationId) ?? "",
      version: number,
      at: submittedAt.toISOString(),
    };
  });
  return { count: quotes.length, items };
}

/** The buyer's own names of suppliers, by invitation. */
async function supplierNames(person: Person, invitationIds: readonly number[]): Promise<Map<number, string>> {
  const invitations = await Invitation.findAll({ where: { id: [...invitationIds] }, actor: person });
  const where = { id: invitations.map(({ supplierId }) => supplierId) };
  const suppliers = await Supplier.findAll({ where, actor: person });
  const names = new Map(suppliers.map(({ id, name }) => [id, name]));
  return new Map(invitations.map(({ id, supplierId }) => [id, names.get(supplierId) ?? ""]));
}

async function draftPoints(person: Person): Promise<Points<DraftPoint>> {
  const drafts = await SpecificationRevision.findAll({
    where: { status: "draft" },
    order: [["savedAt", "DESC"]],
    actor: person,
  });
  const owned = await Specification.findAll({
    where: { id: drafts.map(({ specificationId }) => specificationId), ownerId: person.userId },
    actor: person,
  });
  const byId = new Map(owned.map((specification) => [specification.id, specification]));
  return points(
    drafts.flatMap(({ specificationId, letter, title, savedAt }) => {
      const specification = byId.get(specificationId);
      if (!specification) return [];
      const { publicId, number } = specification;
      return { publicId, number: specificationNumber(number), letter, title, savedAt: savedAt.toISOString() };
    }),
  );
}
