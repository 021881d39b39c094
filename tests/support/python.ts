// Runs a recipe with Debian's Python, where scikit-rf is, and reads the JSON it prints.
import { execFileSync } from "node:child_process";
import path from "node:path";

/** Not the first python3 of the PATH: that one may have no scikit-rf. */
const PYTHON = "/usr/bin/python3";

/**
 * Runs a script and parses its standard output.
 *
 * @param script a file of tests/reference/recipes
 * @param input sent to the script's standard input as JSON
 * @returns what the script printed, as JSON; the caller states its shape
 * @throws Error if the script fails, with what it wrote to standard error
 */
export function runPython(script: string, args: readonly string[] = [], input?: unknown): unknown {
  const file = path.resolve("tests/reference/recipes", script);
  const output = execFileSync(PYTHON, [file, ...args], {
    input: input === undefined ? "" : JSON.stringify(input),
    encoding: "utf8",
    env: { ...process.env, PYTHONDONTWRITEBYTECODE: "1" },
    maxBuffer: 256 * 1024 * 1024,
    stdio: ["pipe", "pipe", "pipe"],
  });
  return JSON.parse(output) as unknown;
}
