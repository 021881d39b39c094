// The password policy: length counts, composition does not; what others would guess first is refused.
import { countCharacters } from "~/forms/fields";

export const SHORTEST_PASSWORD = 12;
export const LONGEST_PASSWORD = 256;

/** Words most guessed passwords are made of: common knowledge, kept short on purpose; letters in keyboard or alphabet order included. */
const COMMON_WORDS = `
password passw0rd p@ssword p@ssw0rd passwort passwd passphrase secret welcome letmein login admin administrator root user guest default changeme master
qwertyuiop qwertzuiop qwerty qwertz azerty asdfghjkl asdfgh zxcvbnm yxcvbnm abcdefghijklmnopqrstuvwxyz abcdefghijkl abcdef
iloveyou sunshine princess dragon monkey football baseball superman batman starwars pokemon trustno whatever freedom shadow
summer winter spring autumn january february march april june july august september october november december
monday tuesday wednesday thursday friday saturday sunday company office filter microwave touchstone`
  .trim()
  .split(/\s+/);

export interface PasswordContext {
  readonly email?: string;
  readonly organisation?: string;
  readonly name?: string;
}

/**
 * Why a password is refused, or null. The password is taken as typed: not trimmed, not folded, its length in code points.
 * It is refused where little is left once common words and the person's own names are taken out of it.
 */
export function passwordProblem(password: string, context: PasswordContext = {}): string | null {
  const length = countCharacters(password);
  if (length < SHORTEST_PASSWORD) return `Use at least ${SHORTEST_PASSWORD} characters. A few unrelated words do well.`;
  if (length > LONGEST_PASSWORD) return `Use at most ${LONGEST_PASSWORD} characters.`;
  if (new Set(password.toLowerCase()).size < 4) return "Use more than a few different characters.";
  if (isRun(password)) return "Digits or letters in order are guessed first. Choose another password.";
  const own = ownWords(context);
  const folded = password.toLowerCase();
  const left = withoutWords(folded, [...own, ...COMMON_WORDS]);
  if (left === folded || letterCount(left) >= 6) return null;
  return letterCount(withoutWords(folded, own)) < 6 && withoutWords(folded, own) !== folded
    ? "This is made of your own, your company's or this product's name. Choose another password."
    : "This is one of the passwords guessed first. Choose another.";
}

function ownWords({ email = "", organisation = "", name = "" }: PasswordContext): string[] {
  const joined = organisation.toLowerCase().replace(/[^\p{L}\p{N}]/gu, "");
  const parts = [email, organisation, name].flatMap((text) => text.toLowerCase().split(/[^\p{L}\p{N}]+/u));
  return ["tenderband", "tender", joined, ...parts].filter((word) => countCharacters(word) >= 3);
}

const withoutWords = (text: string, words: readonly string[]) =>
  [...words].sort((a, b) => b.length - a.length).reduce((left, word) => left.replaceAll(word, " "), text);

const letterCount = (text: string) => (text.match(/\p{L}/gu) ?? []).length;

/** Whether every step from one character to the next is the same, as in 123456789012 or abcdefghijkl; 9 goes on to 0. */
function isRun(password: string): boolean {
  const codes = Array.from(password).map((character) => character.codePointAt(0) ?? 0);
  const steps = codes.slice(1).map((code, index) => code - (codes[index] ?? 0));
  return [1, -1].some((direction) => steps.every((step) => step === direction || step === -9 * direction));
}
