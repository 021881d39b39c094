// What freezes a revision and what begins the next one.
import type { Transaction } from "sequelize";
import { RequirementRow, Specification, SpecificationRevision } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { invalid, ok, type Result } from "~/forms/form";
import { isMeasured, measuredRequirements, type SpecificationLine } from "~/rf/line-definition";
import { nextRevisionLetter } from "~/rf/line-numbers";
import { checkMask, describeContradiction } from "~/rf/mask-check";
import { specificationNumber } from "~/workflow/numbers";
import { specificationRefusal } from "~/workflow/specification";
import { recordEvent } from "./audit.server";
import { once } from "./idempotency.server";
import { sha256 } from "./identifiers.server";
import type { Person } from "./person.server";
import { readLines } from "./specification-lines.server";
import { draftVersion } from "./specifications.server";

type Revised = Result<{ readonly letter: string }>;

/**
 * Releases the draft and supersedes the revision released before. Refused for a mask that contradicts itself, one without a
 * measured line, and a draft saved since `version` of it was shown. Null where the person does not see the specification.
 */
export async function releaseRevision(
  person: Person,
  publicId: string,
  request: { readonly idempotencyKey: string; readonly version: string },
): Promise<Revised | null> {
  const found = await Specification.findOne({ where: { publicId }, actor: person });
  if (!found) return null;
  const isFinal = (outcome: Revised) => outcome.ok;
  return once(person, request.idempotencyKey, ["release", publicId, request.version], isFinal, async (transaction) => {
    const { specification, revisions } = await lockRevisions(person, found.id, transaction);
    const draft = revisions.find(({ status }) => status === "draft");
    if (!draft) return invalid({ form: [specificationRefusal("release", "released") ?? ""] });
    if (draftVersion(draft) !== request.version)
      return invalid({ form: ["This draft was saved since you opened this page. Read it again, then release it."] });
    const lines = await readLines(person, draft.id, transaction);
    const problems = releaseProblems(lines);
    if (problems.length > 0) return invalid({ form: problems });
    const now = await databaseNow(transaction);
    const contentHash = contentHashOf(specification, draft, lines);
    for (const earlier of revisions.filter(({ status }) => status === "released"))
      await earlier.update({ status: "superseded" }, { transaction });
    const released = { status: "released" as const, releasedAt: now, releasedBy: person.userId, contentHash };
    await draft.update({ ...released, lockVersion: draft.lockVersion + 1 }, { transaction });
    await specification.update({ title: draft.title }, { transaction });
    const detail = { letter: draft.letter, lines: lines.length, contentHash: contentHash.toString("hex") };
    await record(person, now, specification, "released", detail, transaction);
    return ok({ letter: draft.letter });
  });
}

/** Why the lines cannot be released; empty where they can. */
export function releaseProblems(lines: readonly SpecificationLine[]): string[] {
  if (!lines.some(({ definition }) => isMeasured(definition)))
    return ["A specification needs at least one measured line before it is released."];
  const numbers = new Map(lines.map(({ lineKey, lineNumber }) => [lineKey, lineNumber]));
  return checkMask(measuredRequirements(lines)).map((contradiction) =>
    describeContradiction(contradiction, (id) => numbers.get(id) ?? id),
  );
}

/** Begins the next revision as a draft with the released one's lines under their keys. */
export async function reviseSpecification(
  person: Person,
  publicId: string,
  idempotencyKey: string,
): Promise<Revised | null> {
  const found = await Specification.findOne({ where: { publicId }, actor: person });
  if (!found) return null;
  const isFinal = (outcome: Revised) => outcome.ok;
  return once(person, idempotencyKey, ["revise", publicId], isFinal, async (transaction) => {
    const { specification, revisions } = await lockRevisions(person, found.id, transaction);
    const draft = revisions.find(({ status }) => status === "draft");
    const released = revisions.find(({ status }) => status === "released");
    if (draft && released) return invalid({ form: [`Revision ${draft.letter} is a draft already. Edit that one.`] });
    if (!released) return invalid({ form: [specificationRefusal("revise", "draft") ?? ""] });
    const now = await databaseNow(transaction);
    const letter = nextRevisionLetter(released.letter);
    const next = await SpecificationRevision.create(
      {
        buyerOrganisationId: released.buyerOrganisationId,
        specificationId: released.specificationId,
        letter,
        title: released.title,
        impedance1: released.impedance1,
        impedance2: released.impedance2,
        ambient: released.ambient,
        temperatureFrom: released.temperatureFrom,
        temperatureTo: released.temperatureTo,
        lowestTestFrequency: released.lowestTestFrequency,
        savedAt: now,
        createdAt: now,
      },
      { transaction },
    );
    const rows = await RequirementRow.findAll({ where: { revisionId: released.id }, actor: person, transaction });
    await RequirementRow.bulkCreate(
      rows.map(({ ordinal, lineKey, lineNumber, kind, definition }) => ({
        buyerOrganisationId: released.buyerOrganisationId,
        revisionId: next.id,
        ordinal,
        lineKey,
        lineNumber,
        kind,
        definition,
        createdAt: now,
      })),
      { transaction },
    );
    await record(person, now, specification, "revised", { letter, from: released.letter }, transaction);
    return ok({ letter });
  });
}

/** The specification, held until the transaction ends, and its revisions. */
async function lockRevisions(person: Person, id: number, transaction: Transaction) {
  const lock = transaction.LOCK.UPDATE;
  const specification = await Specification.findByPk(id, { actor: person, transaction, lock, rejectOnEmpty: true });
  const where = { specificationId: id };
  const revisions = await SpecificationRevision.findAll({ where, actor: person, transaction, lock });
  return { specification, revisions };
}

function record(
  person: Person,
  now: Date,
  specification: Specification,
  action: "released" | "revised",
  detail: Record<string, unknown>,
  transaction: Transaction,
): Promise<void> {
  const { id: specificationId, buyerOrganisationId } = specification;
  const event = { subject: "specification", action, buyerOrganisationId, specificationId, detail };
  return recordEvent(person, now, event, transaction);
}

/** SHA-256 of what the revision says, as JSON with its keys in order: the same content gives the same hash a year later. */
export function contentHashOf(
  { number }: { readonly number: number },
  revision: SpecificationRevision,
  lines: readonly SpecificationLine[],
): Buffer {
  const { letter, title, impedance1, impedance2, ambient, temperatureFrom, temperatureTo } = revision;
  return sha256(
    canonicalJson({
      number: specificationNumber(number),
      letter,
      title,
      impedances: [impedance1, impedance2],
      ambient,
      temperatureRange: [temperatureFrom, temperatureTo],
      lowestTestFrequency: revision.lowestTestFrequency,
      lines: lines.map(({ lineKey, lineNumber, definition }) => ({ lineKey, lineNumber, definition })),
    }),
  );
}

/** JSON with the keys of every object in the order of their characters, and nothing for what is undefined. */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, part: unknown) => {
    if (typeof part !== "object" || part === null || Array.isArray(part)) return part;
    return Object.fromEntries(Object.entries(part).sort(([a], [b]) => (a < b ? -1 : 1)));
  });
}
