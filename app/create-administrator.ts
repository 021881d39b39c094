// Makes the first administrator of a database that is not the demo's: `npm run admin:create -- EMAIL "ORGANISATION"`.
import { randomBytes } from "node:crypto";
import { z } from "zod";
import { config, ConfigurationError } from "./config.server";

/** The command mails nobody and signs nobody in: what only the pages need may stay unset. */
process.env.SMTP_URL ??= "smtp://127.0.0.1:25";
process.env.APP_URL ??= `http://127.0.0.1:${process.env.PORT ?? "5180"}`;
process.env.SESSION_SECRET ??= randomBytes(32).toString("base64url");

async function createAdministrator(email: string, organisationName: string): Promise<string> {
  const { sequelize } = await import("~/db/connection.server");
  const { makeFirstAdministrator } = await import("./services/first-administrator.server");
  try {
    return await makeFirstAdministrator(email, organisationName);
  } finally {
    await sequelize.close();
  }
}

const [email, organisationName = "Our organisation"] = process.argv.slice(2);
try {
  config();
  const address = z.email().safeParse(email?.toLowerCase());
  if (!address.success) throw new ConfigurationError('Usage: npm run admin:create -- EMAIL ["ORGANISATION"]');
  console.log(await createAdministrator(address.data, organisationName));
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
}
