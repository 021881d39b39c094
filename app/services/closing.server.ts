// How an RFQ ends without a decision: closed by its due date or early by hand, or cancelled.
import { Op } from "sequelize";
import { Rfq } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { invalid, ok, type Result } from "~/forms/form";
import { rfqRefusal, rfqState } from "~/workflow/rfq";
import { recordEvent } from "./audit.server";
import { log } from "./log.server";
import type { Person } from "./person.server";
import { lockRfq } from "./rfq-head.server";
import { inTransaction } from "./transaction.server";

const about = (rfq: Rfq) => ({ subject: "rfq", buyerOrganisationId: rfq.buyerOrganisationId, rfqId: rfq.id });

/** Closes an open RFQ before its due date. Null where the person does not see it. */
export async function closeRfq(person: Person, rfqPublicId: string): Promise<Result<null> | null> {
  return inTransaction(async (transaction) => {
    const rfq = await lockRfq(person, rfqPublicId, transaction);
    if (!rfq) return null;
    const now = await databaseNow(transaction);
    const refusal = rfqRefusal("close", rfqState(rfq, now));
    if (refusal) return invalid({ form: [refusal] });
    await rfq.update({ status: "closed", closedAt: now, lockVersion: rfq.lockVersion + 1 }, { transaction });
    const detail = { early: true, dueAt: rfq.dueAt.toISOString() };
    await recordEvent(person, now, { action: "closed", ...about(rfq), detail }, transaction);
    return ok(null);
  });
}

/** Cancels an open or closed RFQ for a reason, which its pages keep. Null where the person does not see it. */
export async function cancelRfq(person: Person, rfqPublicId: string, reason: string): Promise<Result<null> | null> {
  return inTransaction(async (transaction) => {
    const rfq = await lockRfq(person, rfqPublicId, transaction);
    if (!rfq) return null;
    const now = await databaseNow(transaction);
    const state = rfqState(rfq, now);
    const refusal = rfqRefusal("cancel", state);
    if (refusal) return invalid({ form: [refusal] });
    const closedAt = rfq.closedAt ?? (state === "closed" ? rfq.dueAt : now);
    await rfq.update({ status: "cancelled", closedAt, lockVersion: rfq.lockVersion + 1 }, { transaction });
    await recordEvent(person, now, { action: "cancelled", ...about(rfq), detail: { reason } }, transaction);
    return ok(null);
  });
}

/** Marks every open RFQ whose due date has passed, with an entry by the system; returns how many. Their state is closed without it. */
export async function closeDueRfqs(): Promise<number> {
  const due = await Rfq.findAll({
    where: { status: "open", dueAt: { [Op.lte]: await databaseNow() } },
    attributes: ["id"],
    order: [["dueAt", "ASC"]],
    limit: 100,
    actor: SYSTEM,
  });
  let closed = 0;
  for (const { id } of due) {
    try {
      if (await closeDue(id)) closed += 1;
    } catch (error) {
      log.error({ err: error, rfqId: id }, "closing failed"); // the next pass tries again; the others are not held up
    }
  }
  return closed;
}

/** Closes one if it is still open and due: another worker, or an earlier hand, may have been first. */
function closeDue(id: number): Promise<boolean> {
  return inTransaction(async (transaction) => {
    const rfq = await Rfq.findByPk(id, { actor: SYSTEM, transaction, lock: transaction.LOCK.UPDATE });
    const now = await databaseNow(transaction);
    if (rfq?.status !== "open" || rfqState(rfq, now) !== "closed") return false;
    await rfq.update({ status: "closed", closedAt: rfq.dueAt, lockVersion: rfq.lockVersion + 1 }, { transaction });
    const detail = { dueAt: rfq.dueAt.toISOString() };
    await recordEvent(null, now, { action: "closed", ...about(rfq), detail }, transaction);
    return true;
  });
}
