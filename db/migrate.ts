// Brings a database to the current schema.
import { migrator } from "./umzug";

/** Runs every migration that is missing and returns their names. The account needs the right to change tables. */
export async function migrate(url: string): Promise<string[]> {
  const { umzug, close } = migrator(url);
  try {
    return (await umzug.up()).map((migration) => migration.name);
  } catch (error) {
    // The runner's own error drags the connection along, password included.
    throw new Error(error instanceof Error ? error.message : String(error));
  } finally {
    await close();
  }
}
