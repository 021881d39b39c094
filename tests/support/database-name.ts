// The name of a test worker's own database: other migrations, other name, so that a kept one is never out of date.
import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync } from "node:fs";
import path from "node:path";

const migrations = path.resolve("db/migrations");

/** `tenderband_test_<digest of the migrations>_<worker>`; a worker runs one test file at a time. */
export function databaseName(): string {
  return `tenderband_test_${migrationsDigest()}_${process.env.VITEST_POOL_ID ?? "1"}`;
}

function migrationsDigest(): string {
  const hash = createHash("sha256");
  const files = existsSync(migrations) ? readdirSync(migrations).sort() : [];
  for (const file of files) hash.update(file).update(readFileSync(path.join(migrations, file)));
  return hash.digest("hex").slice(0, 8);
}
