// The log: one JSON line an entry, without secrets, bodies or query parameters of statements.
import { pino } from "pino";
import { config } from "~/config.server";

/** Sequelize errors carry the statement's parameters, a password hash among them: only name, number and message go out. */
function errorFacts(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { message: String(error) };
  const number =
    "original" in error && error.original instanceof Object && "errno" in error.original
      ? error.original.errno
      : undefined;
  return {
    name: error.name,
    message: error.message.slice(0, 500),
    errno: number,
    stack: error.stack?.split("\n").slice(1, 9),
  };
}

export const log = pino({ level: config().logLevel, base: undefined, serializers: { err: errorFacts } });
