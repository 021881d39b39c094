// Mail goes into the outbox in the transaction of what it tells; the worker sends it after the commit.
import { randomUUID } from "node:crypto";
import type { Transaction } from "sequelize";
import { config } from "~/config.server";
import { OutboxEmail } from "~/db/models";
import type { MailEvent } from "~/emails/index";

export interface Recipient {
  readonly email: string;
  readonly name?: string | null;
}

/** Queues one mail to one person. A second mail for the same event and address is refused by the table's unique key. */
export async function queueMail(
  event: MailEvent,
  recipient: Recipient,
  eventKey: string,
  at: Date,
  transaction: Transaction,
): Promise<void> {
  await OutboxEmail.create(
    {
      eventKey,
      recipient: recipient.email,
      recipientName: recipient.name ?? null,
      messageId: `<${randomUUID()}@${new URL(config().appUrl).hostname}>`,
      template: event.template,
      props: event.props,
      nextAt: at,
      createdAt: at,
    },
    { transaction },
  );
}
