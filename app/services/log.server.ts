// The log: one JSON line an entry, without secrets, bodies or query parameters of statements.
import { pino } from "pino";
import { config } from "~/config.server";

/** An address as the log may hold it: a link's token, 43 characters, is left out. */
export const pathWithoutSecrets = (path: string): string => path.replace(/[\w-]{40,}/g, "…");

/**
 * Sequelize errors carry the statement's parameters, a password hash among them, and the connector's messages the statement
 * with the values its conditions name: only name, number and what went wrong go out.
 */
export function errorFacts(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { message: String(error) };
  const number =
    "original" in error && error.original instanceof Object && "errno" in error.original
      ? error.original.errno
      : undefined;
  return {
    name: error.name,
    message: error.message.split("\nsql:", 1)[0]?.slice(0, 500),
    errno: number,
    stack: error.stack
      ?.split("\n")
      .filter((line) => /^\s+at /.test(line))
      .slice(0, 8),
  };
}

export const log = pino({ level: config().logLevel, base: undefined, serializers: { err: errorFacts } });
