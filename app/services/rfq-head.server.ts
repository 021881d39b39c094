// What the title block of an RFQ's sheets says.
import { Op, type Transaction } from "sequelize";
import { Invitation, Quote, Rfq, Specification, SpecificationRevision, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import { rfqState, type RfqState } from "~/workflow/rfq";
import type { Person } from "./person.server";

export interface RfqHead {
  readonly publicId: string;
  /** "RFQ-2026-0001" */
  readonly number: string;
  readonly title: string;
  /** By the database's clock when it was read. */
  readonly state: RfqState;
  readonly specification: { readonly publicId: string; readonly number: string; readonly letter: string };
  readonly ownerName: string;
  readonly decisionRule: "simple" | "guarded";
  /** ISO 8601, UTC. */
  readonly dueAt: string;
  readonly dueZone: string;
  /** Of the quote that is compared. */
  readonly quantity: number;
  readonly currency: string;
  /** `invited` leaves revoked invitations out. */
  readonly quotes: { readonly submitted: number; readonly invited: number };
}

/** The RFQ's row, or null where the person does not see it. */
export const findRfq = (person: Person, publicId: string, transaction?: Transaction): Promise<Rfq | null> =>
  Rfq.findOne({ where: { publicId }, actor: person, transaction });

/** The RFQ's row, locked until the transaction ends: every change of an RFQ and of what hangs on it begins with this. */
export const lockRfq = (person: Person, publicId: string, transaction: Transaction): Promise<Rfq | null> =>
  Rfq.findOne({ where: { publicId }, actor: person, transaction, lock: transaction.LOCK.UPDATE });

/** The head of an RFQ, or null where the person does not see it. */
export async function readRfqHead(person: Person, rfqPublicId: string): Promise<RfqHead | null> {
  const rfq = await findRfq(person, rfqPublicId);
  if (!rfq) return null;
  const [specification, revision, owner, submitted, invited, now] = await Promise.all([
    Specification.findByPk(rfq.specificationId, { actor: person, rejectOnEmpty: true }),
    SpecificationRevision.findByPk(rfq.revisionId, { actor: person, rejectOnEmpty: true }),
    User.findByPk(rfq.ownerId, { actor: person, rejectOnEmpty: true }),
    Quote.count({ where: { rfqId: rfq.id, state: "submitted" }, actor: person }),
    Invitation.count({ where: { rfqId: rfq.id, state: { [Op.ne]: "revoked" } }, actor: person }),
    databaseNow(),
  ]);
  return {
    publicId: rfq.publicId,
    number: rfqNumber(rfq.year, rfq.number),
    title: rfq.title,
    state: rfqState(rfq, now),
    specification: {
      publicId: specification.publicId,
      number: specificationNumber(specification.number),
      letter: revision.letter,
    },
    ownerName: owner.name,
    decisionRule: rfq.decisionRule,
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    quantity: rfq.quantity,
    currency: rfq.currency,
    quotes: { submitted, invited },
  };
}
