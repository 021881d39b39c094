// A revision of a specification as it is shown, to the buyer and to a supplier who was invited to quote on it.
import { Specification, SpecificationRevision, User } from "~/db/models";
import type { SpecificationLine } from "~/rf/line-definition";
import { specificationNumber } from "~/workflow/numbers";
import type { RevisionState } from "~/workflow/specification";
import type { Person } from "./person.server";
import { readLines } from "./specification-lines.server";

/** Plain data: `requirementLines` and `numberedRequirements` of `~/components/requirement-words` make table rows and walls of it. */
export interface SpecificationView {
  readonly publicId: string;
  /** "SPEC-0007" */
  readonly number: string;
  readonly letter: string;
  readonly status: RevisionState;
  readonly title: string;
  /** Null for a supplier, who does not see the buyer's people. */
  readonly ownerName: string | null;
  /** Ohm, port 1 and port 2. */
  readonly impedances: readonly [number, number];
  /** °C. */
  readonly ambient: number;
  /** °C, lower end first; null where no range is given. */
  readonly temperatureRange: readonly [number, number] | null;
  /** Hz: where a band from DC is taken to start. */
  readonly lowestTestFrequency: number | null;
  /** ISO 8601, UTC; null for a draft. */
  readonly releasedAt: string | null;
  readonly savedAt: string;
  /** Measured and declared, in their order. */
  readonly lines: readonly SpecificationLine[];
}

/** The revision with its lines, or null where the person does not see it. */
export async function readSpecificationView(person: Person, revisionId: number): Promise<SpecificationView | null> {
  const revision = await SpecificationRevision.findByPk(revisionId, { actor: person });
  const specification = revision && (await Specification.findByPk(revision.specificationId, { actor: person }));
  if (!specification) return null;
  const [owner, lines] = await Promise.all([
    User.findByPk(specification.ownerId, { actor: person }),
    readLines(person, revision.id),
  ]);
  const { temperatureFrom, temperatureTo } = revision;
  return {
    publicId: specification.publicId,
    number: specificationNumber(specification.number),
    letter: revision.letter,
    status: revision.status,
    title: revision.title,
    ownerName: owner?.name ?? null,
    impedances: [revision.impedance1, revision.impedance2],
    ambient: revision.ambient,
    temperatureRange: temperatureFrom === null || temperatureTo === null ? null : [temperatureFrom, temperatureTo],
    lowestTestFrequency: revision.lowestTestFrequency,
    releasedAt: revision.releasedAt?.toISOString() ?? null,
    savedAt: revision.savedAt.toISOString(),
    lines,
  };
}
