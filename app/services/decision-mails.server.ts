// Mails of a decision: to approvers, back to the recommender, and to each supplier about its own quote alone.
import { Op, type Transaction } from "sequelize";
import { config } from "~/config.server";
import { formatAmount } from "~/commerce/index";
import { Invitation, User, type Decision, type Quote, type QuoteVersion, type Rfq } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import type { ResultLine } from "~/emails/index";
import { rfqNumber } from "~/workflow/numbers";
import { may, ROLES } from "~/workflow/roles";
import { queueMail, type Recipient } from "./outbox.server";
import type { Person } from "./person.server";
import { readScores } from "./quote-scores.server";
import { resultLines } from "./result-lines.server";
import { readLines } from "./specification-lines.server";

/** What a mail says was recommended. */
export interface AwardWords {
  readonly supplierName: string;
  readonly version: number;
  /** "48,200.00 EUR for 500 pieces" */
  readonly amount: string;
}

export interface SuppliedVersion {
  readonly quote: Quote;
  readonly version: QuoteVersion;
}

export const amountWords = (total: string, currency: string, quantity: number): string =>
  `${formatAmount(total).replace(/\B(?=(\d{3})+(?=\.))/g, ",")} ${currency} for ${String(quantity).replace(/\B(?=(\d{3})+$)/g, ",")} ${quantity === 1 ? "piece" : "pieces"}`;

const rfqWords = (rfq: Rfq) => ({ rfqNumber: rfqNumber(rfq.year, rfq.number), rfqTitle: rfq.title });
const decisionLink = (rfq: Rfq) => `${config().appUrl}/rfqs/${rfq.publicId}/decision`;

/** People of the person's organisation who may approve; without that person where a second one is required. */
export async function readApprovers(
  person: Person,
  withoutUserId: number | null,
  transaction?: Transaction,
): Promise<User[]> {
  const roles = ROLES.filter((role) => may(role, "approve-award"));
  return User.findAll({
    where: {
      role: { [Op.in]: roles },
      disabledAt: null,
      ...(withoutUserId === null ? {} : { id: { [Op.ne]: withoutUserId } }),
    },
    order: [["name", "ASC"]],
    actor: person,
    transaction,
  });
}

export async function mailApprovers(
  person: Person,
  rfq: Rfq,
  decision: Decision,
  words: AwardWords,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const approvers = await readApprovers(person, decision.secondPerson ? decision.recommendedBy : null, transaction);
  const props = {
    ...rfqWords(rfq),
    ...words,
    recommendedBy: person.name,
    reason: decision.reason,
    link: decisionLink(rfq),
  };
  for (const approver of approvers)
    await queueMail(
      { template: "award-recommended", props },
      approver,
      `award-recommended:${decision.publicId}`,
      now,
      transaction,
    );
}

export async function mailReturned(
  person: Person,
  rfq: Rfq,
  decision: Decision,
  supplierName: string,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const recommender = await User.findByPk(decision.recommendedBy, { actor: person, transaction, rejectOnEmpty: true });
  const remark = decision.remark ?? "";
  const props = { ...rfqWords(rfq), supplierName, returnedBy: person.name, remark, link: decisionLink(rfq) };
  await queueMail(
    { template: "award-returned", props },
    recommender,
    `award-returned:${decision.publicId}`,
    now,
    transaction,
  );
}

/** The award to the winner, and a regret to every other supplier that submitted: own results and nothing of others. */
export async function mailSuppliers(
  person: Person,
  rfq: Rfq,
  decision: Decision,
  awarded: SuppliedVersion & { readonly amount: string },
  regretted: readonly SuppliedVersion[],
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const about = async (supplied: SuppliedVersion) => ({
    ...rfqWords(rfq),
    buyerName: person.organisationName,
    version: supplied.version.number,
    results: await ownResults(person, supplied.version, transaction),
    link: `${config().appUrl}/supplier/quotes/${supplied.quote.publicId}/results`,
  });
  const award = { ...(await about(awarded)), amount: awarded.amount };
  const winner = await recipientOf(awarded, transaction);
  await queueMail({ template: "award", props: award }, winner, `award:${decision.publicId}`, now, transaction);
  for (const supplied of regretted)
    await queueMail(
      { template: "regret", props: await about(supplied) },
      await recipientOf(supplied, transaction),
      `regret:${decision.publicId}:${supplied.quote.publicId}`,
      now,
      transaction,
    );
}

async function ownResults(person: Person, version: QuoteVersion, transaction: Transaction): Promise<ResultLine[]> {
  const score = (await readScores(person, [version], transaction)).get(version.id);
  const lines = await readLines(person, score?.summary.revisionId ?? version.revisionId, transaction);
  return resultLines(lines, [...(score?.lines.values() ?? [])]);
}

/** Who submitted; where that account was disabled since, the address that was invited. */
async function recipientOf({ quote, version }: SuppliedVersion, transaction: Transaction): Promise<Recipient> {
  const submitter = await User.findByPk(version.submittedBy, { actor: SYSTEM, transaction, rejectOnEmpty: true });
  if (submitter.disabledAt === null) return submitter;
  const { email } = await Invitation.findByPk(quote.invitationId, { actor: SYSTEM, transaction, rejectOnEmpty: true });
  return { email };
}
