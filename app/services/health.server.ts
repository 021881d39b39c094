// Whether this process can serve: the database answers.
import { databaseNow } from "~/db/queries/clock";

export async function isHealthy(): Promise<boolean> {
  try {
    await databaseNow();
    return true;
  } catch {
    return false;
  }
}
