// The decision sheet of an RFQ: quotes to choose from, the recommendation that waits, the record of what was decided.
import { Op } from "sequelize";
import { Decision, Organisation, User, type Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { approvalRefusal, decisionRefusal, type DecisionState } from "~/workflow/decision";
import { may } from "~/workflow/roles";
import { rfqRefusal, rfqState } from "~/workflow/rfq";
import { readComparedQuotes, sortQuotes, type ComparedQuote } from "./comparison.server";
import { readApprovers } from "./decision-mails.server";
import { snapshotHash, type DecisionSnapshot } from "./decision-snapshot.server";
import type { Person } from "./person.server";
import { recommendationRefusal } from "./recommendation.server";
import { findRfq } from "./rfq-head.server";

export interface Candidate extends ComparedQuote {
  /** Why it cannot be recommended; null where it can. */
  readonly refusal: string | null;
}

export interface DecisionRecord {
  readonly publicId: string;
  readonly state: DecisionState;
  readonly reason: string;
  readonly recommendedBy: string;
  readonly recommendedAt: string;
  readonly decidedBy: string | null;
  readonly decidedAt: string | null;
  readonly remark: string | null;
  readonly secondPerson: boolean;
  readonly snapshot: DecisionSnapshot;
  /** Hexadecimal SHA-256. */
  readonly snapshotHash: string;
  /** Whether the stored snapshot still gives that hash. */
  readonly intact: boolean;
}

export interface DecisionView {
  /** Conforming first, then by cost at the asked quantity. Empty once a decision is live. */
  readonly candidates: readonly Candidate[];
  /** Why nothing can be recommended now; null where something can. */
  readonly recommendRefusal: string | null;
  readonly mayRecommend: boolean;
  readonly live: DecisionRecord | null;
  /** Why the person can neither approve nor return the live recommendation; null where it can. */
  readonly approvalRefusal: string | null;
  /** Who can. */
  readonly approvers: readonly string[];
  /** Latest first. */
  readonly returned: readonly DecisionRecord[];
  /** The database's clock. */
  readonly now: string;
}

/** The decision sheet, or null where the person does not see the RFQ. */
export async function readDecisionView(person: Person, rfqPublicId: string): Promise<DecisionView | null> {
  const rfq = person.organisationKind === "buyer" ? await findRfq(person, rfqPublicId) : null;
  if (!rfq) return null;
  const [decisions, organisation, now] = await Promise.all([
    Decision.findAll({ where: { rfqId: rfq.id }, order: [["id", "DESC"]], actor: person }),
    Organisation.findByPk(person.organisationId, { actor: person, rejectOnEmpty: true }),
    databaseNow(),
  ]);
  const live = decisions.find(({ state }) => state !== "returned") ?? null;
  const secondPerson = organisation.secondPerson || (live?.secondPerson ?? false);
  const userIds = decisions.flatMap(({ recommendedBy, decidedBy }) => [recommendedBy, decidedBy ?? recommendedBy]);
  const [people, approvers] = await Promise.all([
    User.findAll({ where: { id: { [Op.in]: userIds } }, actor: person }),
    readApprovers(person, secondPerson ? (live?.recommendedBy ?? person.userId) : null),
  ]);
  const names = new Map(people.map(({ id, name }) => [id, name]));
  return {
    candidates: live ? [] : await readCandidates(person, rfq, now),
    recommendRefusal:
      decisionRefusal("recommend", live?.state ?? "none") ?? rfqRefusal("recommend", rfqState(rfq, now)),
    mayRecommend: may(person.role, "recommend-award"),
    live: live && recordOf(live, names),
    approvalRefusal: live && approvalRefusal(person, live, secondPerson),
    approvers: approvers.map(({ name }) => name),
    returned: decisions.filter(({ state }) => state === "returned").map((decision) => recordOf(decision, names)),
    now: now.toISOString(),
  };
}

async function readCandidates(person: Person, rfq: Rfq, now: Date): Promise<Candidate[]> {
  const { quotes } = await readComparedQuotes(person, rfq, rfq.quantity);
  const candidates = quotes.map((quote) => ({
    ...quote,
    refusal: recommendationRefusal(quote, rfq.quantity, now, rfq.dueZone),
  }));
  const sorted = sortQuotes(candidates, "cost", "ascending");
  return [...sorted.filter(({ conforming }) => conforming), ...sorted.filter(({ conforming }) => !conforming)];
}

function recordOf(decision: Decision, names: ReadonlyMap<number, string>): DecisionRecord {
  const { publicId, state, reason, remark, secondPerson, decidedBy } = decision;
  return {
    publicId,
    state,
    reason,
    recommendedBy: names.get(decision.recommendedBy) ?? "",
    recommendedAt: decision.recommendedAt.toISOString(),
    decidedBy: decidedBy === null ? null : (names.get(decidedBy) ?? ""),
    decidedAt: decision.decidedAt?.toISOString() ?? null,
    remark,
    secondPerson,
    snapshot: decision.snapshot as DecisionSnapshot,
    snapshotHash: decision.snapshotHash.toString("hex"),
    intact: snapshotHash(decision.snapshot).equals(decision.snapshotHash),
  };
}
