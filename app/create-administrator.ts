// Makes the first administrator of a database that is not the demo's: `npm run admin:create -- EMAIL "ORGANISATION"`.
import { z } from "zod";
import { config, ConfigurationError } from "./config.server";

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
