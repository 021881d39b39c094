// Random identifiers and secrets, and the hash under which a secret is kept.
import { createHash, randomBytes, randomInt } from "node:crypto";

const ALPHABET = "0123456789abcdefghjkmnpqrstvwxyz";

/** 16 characters of 32, 80 random bits: names a row in an address. */
export function newPublicId(): string {
  return Array.from({ length: 16 }, () => ALPHABET[randomInt(ALPHABET.length)]).join("");
}

/** Short key that names a line of a specification through its revisions. */
export function newLineKey(): string {
  return Array.from({ length: 10 }, () => ALPHABET[randomInt(ALPHABET.length)]).join("");
}

/** 32 random bytes in base64url: a session or a single-use link. Only its hash is stored. */
export const newSecret = (): string => randomBytes(32).toString("base64url");

export const sha256 = (value: string | Uint8Array): Buffer => createHash("sha256").update(value).digest();

/** The key a form carries so that it counts once; made by the loader that shows the form. */
export const newIdempotencyKey = (): string => randomBytes(18).toString("base64url");
