// The mails that tell a submitted version's results, to who submitted it and to the RFQ's owner.
import type { Transaction } from "sequelize";
import { config } from "~/config.server";
import { Invitation, Organisation, Supplier, User, type Quote, type QuoteVersion, type Rfq } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import type { ResultLine } from "~/emails/index";
import { rfqNumber } from "~/workflow/numbers";
import { queueMail } from "./outbox.server";
import { receiptOf } from "./quote-submission.server";
import type { Summary } from "./scoring-summary.server";

interface Scored {
  readonly version: QuoteVersion;
  readonly quote: Quote;
  readonly rfq: Rfq;
}

/** Once a version: when it is scored for the first time. */
export async function mailResults(
  { version, quote, rfq }: Scored,
  summary: Summary,
  results: ResultLine[],
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const system = { actor: SYSTEM, transaction, rejectOnEmpty: true } as const;
  const submitter = await User.findByPk(version.submittedBy, system);
  const owner = await User.findByPk(rfq.ownerId, system);
  const invitation = await Invitation.findByPk(quote.invitationId, system);
  // By the buyer's directory, as on every page: what a supplier calls itself may be another's name.
  const supplier = await Supplier.findByPk(invitation.supplierId, system);
  const buyer = await Organisation.findByPk(quote.buyerOrganisationId, system);
  const { appUrl } = config();
  const shared = {
    rfqNumber: rfqNumber(rfq.year, rfq.number),
    rfqTitle: rfq.title,
    version: version.number,
    submittedAt: version.submittedAt.toISOString(),
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    outcome: outcomeWords(summary, rfq.decisionRule, results),
    results,
  };
  const toSupplier = {
    ...shared,
    buyerName: buyer.name,
    receipt: receiptOf(version.contentHash),
    link: `${appUrl}/supplier/quotes/${quote.publicId}/results`,
  };
  const toBuyer = { ...shared, supplierName: supplier.name, link: `${appUrl}/quotes/${quote.publicId}` };
  await queueMail(
    { template: "quote-received-supplier", props: toSupplier },
    submitter,
    `quote-received-supplier:${version.id}`,
    now,
    transaction,
  );
  await queueMail(
    { template: "quote-received-buyer", props: toBuyer },
    owner,
    `quote-received-buyer:${version.id}`,
    now,
    transaction,
  );
}

/** "fail; does not comply under simple acceptance", with the lines an exception is taken to. */
function outcomeWords(summary: Summary, rule: Rfq["decisionRule"], results: readonly ResultLine[]): string {
  const exceptions = results.filter(({ verdict }) => verdict === "exception").map(({ line }) => line);
  const taken = exceptions.length === 0 ? "" : `; exception to ${exceptions.join(", ")}`;
  const outcome = summary.conforming ? "complies" : "does not comply";
  return `${summary.verdict.replaceAll("-", " ")}; ${outcome} under ${rule} acceptance${taken}`;
}
