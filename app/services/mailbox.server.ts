// The local sink's mailbox, for the page of development; absent where mail goes to a real server.
import { config } from "~/config.server";
import { readMailbox, type StoredMail } from "~/emails/mailbox";

const LOOPBACK = new Set(["127.0.0.1", "::1", "localhost"]);

/** Mails in the sink, newest first, or null where there is no sink. */
export async function readSinkMailbox(address?: string): Promise<StoredMail[] | null> {
  const { mailPopPort: port, host } = config();
  // The mails hold live links: they are shown to nobody but the machine's own user.
  if (port === undefined || !LOOPBACK.has(host)) return null;
  return readMailbox(address ? { port, address } : { port });
}
