// Password hashing: argon2id, four at a time, the same work for an account that does not exist.
import { hash, verify } from "@node-rs/argon2";

// The package declares its algorithms as a const enum, which this compiler setting cannot read: 2 is argon2id.
const ARGON2ID = 2;
/** OWASP Password Storage Cheat Sheet: 19 MiB, two passes, one lane. */
const PARAMETERS = {
  algorithm: ARGON2ID,
  memoryCost: 19_456,
  timeCost: 2,
  parallelism: 1,
} as const;
const AT_ONCE = 4;

let running = 0;
const waiting: (() => void)[] = [];

async function limited<T>(work: () => Promise<T>): Promise<T> {
  if (running >= AT_ONCE) await new Promise<void>((resolve) => waiting.push(resolve));
  else running += 1;
  try {
    return await work();
  } finally {
    const next = waiting.shift();
    if (next) next();
    else running -= 1;
  }
}

export const hashPassword = (password: string): Promise<string> => limited(() => hash(password, PARAMETERS));

let decoy: Promise<string> | undefined;

/** Whether the password fits. Takes the same time where there is no hash, so that nothing tells which addresses exist. */
export async function passwordFits(stored: string | null | undefined, password: string): Promise<boolean> {
  decoy ??= hashPassword("no account has this password");
  const against = stored ?? (await decoy);
  const fits = await limited(() => verify(against, password));
  return fits && stored !== null && stored !== undefined;
}
