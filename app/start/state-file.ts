// Small JSON files that a start leaves for the next one: ports, secrets, how far the demo got.
import { mkdir, readFile, rename, writeFile } from "node:fs/promises";
import path from "node:path";

/** Contents of a JSON object file; empty if it is missing or was cut off by a crash. */
export async function readStateFile(file: string): Promise<Record<string, unknown>> {
  try {
    const value: unknown = JSON.parse(await readFile(file, "utf8"));
    return typeof value === "object" && value !== null ? { ...value } : {};
  } catch (error) {
    if (error instanceof SyntaxError || (error instanceof Error && "code" in error && error.code === "ENOENT"))
      return {};
    throw error;
  }
}

/** Replaces a file whole, readable by its owner only: a reader never sees half of it. */
export async function writeStateFile(file: string, value: Record<string, unknown>): Promise<void> {
  await mkdir(path.dirname(file), { recursive: true, mode: 0o700 });
  await writeFile(`${file}.new`, `${JSON.stringify(value, null, 2)}\n`, { mode: 0o600 });
  await rename(`${file}.new`, file);
}
