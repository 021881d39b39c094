// Line numbers of requirements: a group per kind, the same in every specification, and the letters of revisions.
import type { Requirement } from "./contract.ts";

/** Kinds that carry a line number: requirements, and the two facts of group 1. */
export type LineKind = Requirement["kind"] | "declared" | "reference-impedance" | "temperature";

export interface LineGroup {
  readonly number: number;
  readonly title: string;
}

export const LINE_GROUPS: readonly LineGroup[] = [
  { number: 1, title: "General" },
  { number: 2, title: "Passband" },
  { number: 3, title: "Stopband" },
  { number: 4, title: "Match" },
  { number: 5, title: "Delay and phase" },
  { number: 6, title: "Declared" },
];

const GROUP_OF: Record<LineKind, number> = {
  "reference-impedance": 1,
  temperature: 1,
  "insertion-loss": 2,
  ripple: 2,
  "centre-frequency": 2,
  bandwidth: 2,
  rejection: 3,
  "reverse-isolation": 3,
  "shape-factor": 3,
  "return-loss": 4,
  "group-delay": 5,
  "group-delay-variation": 5,
  "phase-linearity": 5,
  declared: 6,
};

/** The group a kind belongs to, 1 to 6. */
export const groupOfKind = (kind: LineKind): number => GROUP_OF[kind];

/** Numbers of a draft's lines, in their order: "2.1", "3.1", "2.2" … */
export function numberLines(kinds: readonly LineKind[]): string[] {
  const used = new Map<number, number>();
  return kinds.map((kind) => nextNumber(GROUP_OF[kind], used));
}

/**
 * Numbers of a later revision's lines. A line that was released keeps its number; a new one follows the highest its group ever had.
 *
 * @param lines in their order
 * @param released numbers given by all released revisions, by line key, withdrawn lines included
 */
export function numberRevision(
  lines: readonly { readonly lineKey: string; readonly kind: LineKind }[],
  released: ReadonlyMap<string, string>,
): string[] {
  const used = new Map<number, number>();
  for (const number of released.values()) {
    const [group = 0, ordinal = 0] = number.split(".").map(Number);
    used.set(group, Math.max(used.get(group) ?? 0, ordinal));
  }
  return lines.map(({ lineKey, kind }) => {
    const kept = released.get(lineKey);
    // A line whose kind moved it to another group is a new line there.
    return kept?.startsWith(`${GROUP_OF[kind]}.`) ? kept : nextNumber(GROUP_OF[kind], used);
  });
}

function nextNumber(group: number, used: Map<number, number>): string {
  const ordinal = (used.get(group) ?? 0) + 1;
  used.set(group, ordinal);
  return `${group}.${ordinal}`;
}

/** Orders line numbers as a reader does: 3.2 before 3.10. */
export function compareLineNumbers(a: string, b: string): number {
  const [groupA = 0, ordinalA = 0] = a.split(".").map(Number);
  const [groupB = 0, ordinalB = 0] = b.split(".").map(Number);
  return groupA - groupB || ordinalA - ordinalB;
}

/** I, O, Q, S, X and Z are skipped: they are misread. */
const REVISION_LETTERS = "ABCDEFGHJKLMNPRTUVWY";

/**
 * The letter after `letter`: A for null, B for A, J for H, AA for Y, AB for AA.
 * @throws RangeError for what is not a revision letter
 */
export function nextRevisionLetter(letter: string | null): string {
  if (letter === null) return "A";
  const places = Array.from(letter, (character) => REVISION_LETTERS.indexOf(character));
  if (places.length === 0 || places.includes(-1)) throw new RangeError(`“${letter}” is not a revision letter`);
  for (let place = places.length - 1; place >= 0; place -= 1) {
    const next = (places[place] ?? 0) + 1;
    places[place] = next % REVISION_LETTERS.length;
    if (next < REVISION_LETTERS.length) return places.map((index) => REVISION_LETTERS[index]).join("");
  }
  return "A" + places.map((index) => REVISION_LETTERS[index]).join("");
}
