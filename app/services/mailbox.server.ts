// The local sink's mailbox, for the page of development; absent where mail goes to a real server.
import { config } from "~/config.server";
import { readMailbox, type StoredMail } from "~/emails/mailbox";

/** Mails in the sink, newest first, or null where there is no sink. */
export async function readSinkMailbox(address?: string): Promise<StoredMail[] | null> {
  const port = config().mailPopPort;
  if (port === undefined) return null;
  return readMailbox(address ? { port, address } : { port });
}
