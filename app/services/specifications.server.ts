// Specifications of a buyer: the list, one with its revisions, and the draft as it is begun and saved.
import { Op, type Transaction } from "sequelize";
import { RequirementRow, Rfq, Specification, SpecificationRevision, User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { takeNumber } from "~/db/queries/number-series";
import { formValues, type FormValues } from "~/forms/fields";
import type { FormState } from "~/forms/form";
import {
  fromDefinition,
  parseSpecificationForm,
  specificationToValues,
  toDefinition,
  type SpecificationDraft,
} from "~/forms/specification";
import { numberRevision } from "~/rf/line-numbers";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import { rfqState } from "~/workflow/rfq";
import { specificationRefusal } from "~/workflow/specification";
import { recordEvent } from "./audit.server";
import { once } from "./idempotency.server";
import { newLineKey, newPublicId } from "./identifiers.server";
import type { Person } from "./person.server";
import { readLines } from "./specification-lines.server";

/** What became of a posted draft: its address, or the form to show again. */
export type SavedDraft =
  | { readonly ok: true; readonly value: { readonly publicId: string } }
  | { readonly ok: false; readonly state: FormState };

const refused = (values: FormValues, errors: FormState["errors"]): SavedDraft => ({
  ok: false,
  state: { values, errors },
});

/** Rows of a page of the list. */
export const PAGE_SIZE = 25;

export const LIST_SORTS = ["number", "title", "status", "saved"] as const;

export interface SpecificationListQuery {
  readonly status?: "draft" | "released";
  /** @default "number" */
  readonly sort?: (typeof LIST_SORTS)[number];
  readonly descending?: boolean;
  /** From 1; one beyond the last shows the last. */
  readonly page?: number;
}

const COLUMN_OF = { number: "specificationId", title: "title", status: "status", saved: "savedAt" } as const;

/** A page of the buyer's specifications, each by its latest revision, and how many there are in each status. */
export async function listSpecifications(person: Person, query: SpecificationListQuery = {}) {
  const { status, sort = "number", descending = true } = query;
  // The latest revision is the draft where there is one, else the one released: at most one of each stands at a time.
  const drafts = await SpecificationRevision.findAll({
    where: { status: "draft" },
    attributes: ["specificationId"],
    raw: true,
    actor: person,
  });
  const isDraft = { status: "draft" as const };
  const draftOf = drafts.map(({ specificationId }) => specificationId);
  const isReleased = { status: "released" as const, specificationId: { [Op.notIn]: draftOf } };
  const released = await SpecificationRevision.count({ where: isReleased, actor: person });
  const counts = { all: drafts.length + released, draft: drafts.length, released };
  const total = status === undefined ? counts.all : counts[status];
  const pages = Math.max(1, Math.ceil(total / PAGE_SIZE));
  const page = Math.min(Math.max(1, query.page ?? 1), pages);
  const direction = descending ? "DESC" : "ASC";
  const revisions = await SpecificationRevision.findAll({
    where: status === undefined ? { [Op.or]: [isDraft, isReleased] } : status === "draft" ? isDraft : isReleased,
    order: [
      [COLUMN_OF[sort], direction],
      ["specificationId", direction],
    ],
    limit: PAGE_SIZE,
    offset: (page - 1) * PAGE_SIZE,
    actor: person,
  });
  return { rows: await listRows(person, revisions), counts, total, page, pages };
}

async function listRows(person: Person, revisions: readonly SpecificationRevision[]) {
  const specifications = await Specification.findAll({
    where: { id: revisions.map(({ specificationId }) => specificationId) },
    actor: person,
  });
  const owners = await userNames(
    person,
    specifications.map(({ ownerId }) => ownerId),
  );
  const byId = new Map(specifications.map((specification) => [specification.id, specification]));
  return revisions.flatMap((revision) => {
    const specification = byId.get(revision.specificationId);
    if (!specification) return [];
    return {
      publicId: specification.publicId,
      number: specificationNumber(specification.number),
      title: revision.title,
      letter: revision.letter,
      status: revision.status,
      ownerName: owners.get(specification.ownerId) ?? "",
      savedAt: revision.savedAt.toISOString(),
    };
  });
}

async function userNames(person: Person, ids: readonly number[]): Promise<Map<number, string>> {
  const users = await User.findAll({ where: { id: [...new Set(ids)] }, actor: person });
  return new Map(users.map(({ id, name }) => [id, name]));
}

/** A specification's revisions, latest first, and where it is used; null where the person does not see it. */
export async function readSpecification(person: Person, publicId: string) {
  const specification = await Specification.findOne({ where: { publicId }, actor: person });
  if (!specification) return null;
  const [revisions, rfqs, now] = await Promise.all([
    SpecificationRevision.findAll({
      where: { specificationId: specification.id },
      order: [["id", "DESC"]],
      actor: person,
    }),
    Rfq.findAll({ where: { specificationId: specification.id }, order: [["id", "DESC"]], actor: person }),
    databaseNow(),
  ]);
  const releasers = await userNames(
    person,
    revisions.flatMap(({ releasedBy }) => releasedBy ?? []),
  );
  const letterOf = new Map(revisions.map(({ id, letter }) => [id, letter]));
  return {
    publicId: specification.publicId,
    number: specificationNumber(specification.number),
    revisions: revisions.map((revision) => ({
      id: revision.id,
      letter: revision.letter,
      status: revision.status,
      version: draftVersion(revision),
      savedAt: revision.savedAt.toISOString(),
      releasedAt: revision.releasedAt?.toISOString() ?? null,
      releasedByName: revision.releasedBy === null ? null : (releasers.get(revision.releasedBy) ?? null),
      contentHash: revision.contentHash?.toString("hex") ?? null,
      rfqCount: rfqs.filter(({ revisionId }) => revisionId === revision.id).length,
    })),
    rfqs: rfqs.map((rfq) => ({
      publicId: rfq.publicId,
      number: rfqNumber(rfq.year, rfq.number),
      title: rfq.title,
      letter: letterOf.get(rfq.revisionId) ?? "",
      state: rfqState(rfq, now),
      dueAt: rfq.dueAt.toISOString(),
    })),
  };
}

/** The draft as its form shows it; null where the person does not see the specification or it has no draft. */
export async function readDraft(person: Person, publicId: string) {
  const specification = await Specification.findOne({ where: { publicId }, actor: person });
  const revision = specification && (await findDraft(person, specification.id));
  if (!specification || !revision) return null;
  const [lines, released] = await Promise.all([
    readLines(person, revision.id),
    readReleasedNumbers(person, specification.id),
  ]);
  const { temperatureFrom, temperatureTo } = revision;
  const draft: SpecificationDraft = {
    title: revision.title,
    z1: revision.impedance1,
    z2: revision.impedance2,
    temperatureRange: temperatureFrom === null || temperatureTo === null ? null : [temperatureFrom, temperatureTo],
    ambient: revision.ambient,
    lowestTestFrequency: revision.lowestTestFrequency,
    requirements: lines.map(({ lineKey, definition }) => fromDefinition(lineKey, definition)),
  };
  return {
    publicId: specification.publicId,
    number: specificationNumber(specification.number),
    letter: revision.letter,
    savedAt: revision.savedAt.toISOString(),
    values: { ...specificationToValues(draft), lockVersion: draftVersion(revision) } as FormValues,
    releasedNumbers: [...released],
  };
}

const findDraft = (person: Person, specificationId: number, transaction?: Transaction) =>
  SpecificationRevision.findOne({ where: { specificationId, status: "draft" }, actor: person, transaction });

/**
 * Numbers that released revisions gave, by line key. A line that once had another number keeps that one taken too, under a key
 * no line has.
 */
export async function readReleasedNumbers(
  person: Person,
  specificationId: number,
  transaction?: Transaction,
): Promise<Map<string, string>> {
  const revisions = await SpecificationRevision.findAll({
    where: { specificationId, status: { [Op.ne]: "draft" } },
    attributes: ["id"],
    actor: person,
    transaction,
  });
  const rows = await RequirementRow.findAll({
    where: { revisionId: revisions.map(({ id }) => id) },
    order: [["revisionId", "ASC"]],
    actor: person,
    transaction,
  });
  const numbers = new Map<string, string>();
  for (const { lineKey, lineNumber } of rows) {
    const earlier = numbers.get(lineKey);
    if (earlier !== undefined && earlier !== lineNumber) numbers.set(`${lineKey} as ${earlier}`, earlier);
    numbers.set(lineKey, lineNumber);
  }
  return numbers;
}

/** Begins a specification as draft A, with the buyer's next number. */
export async function createSpecification(person: Person, form: FormData): Promise<SavedDraft> {
  const parsed = parseSpecificationForm(form, { newLineKey });
  if (!parsed.ok) return refused(parsed.values, parsed.errors);
  const draft = parsed.value;
  return once<SavedDraft>(person, key(form), ["create", posted(form)], isSaved, async (transaction, now) => {
    const number = await takeNumber(person.organisationId, "specification", transaction);
    const buyerOrganisationId = person.organisationId;
    const specification = await Specification.create(
      {
        publicId: newPublicId(),
        buyerOrganisationId,
        number,
        title: draft.title,
        ownerId: person.userId,
        createdAt: now,
      },
      { transaction },
    );
    const revision = await SpecificationRevision.create(
      {
        ...draftColumns(draft),
        buyerOrganisationId,
        specificationId: specification.id,
        letter: "A",
        savedAt: now,
        createdAt: now,
      },
      { transaction },
    );
    await writeLines(revision, draft, new Map(), now, transaction);
    await recordEvent(
      person,
      now,
      {
        subject: "specification",
        action: "created",
        buyerOrganisationId,
        specificationId: specification.id,
        detail: { number: specificationNumber(number), title: draft.title, lines: draft.requirements.length },
      },
      transaction,
    );
    return { ok: true, value: { publicId: specification.publicId } };
  });
}

/**
 * Saves the draft over the one the form was opened on. A draft saved by somebody else meanwhile is not replaced: the form comes
 * back with what was typed, and `overLockVersion` for one who then means to. Null where the person does not see the specification.
 */
export async function saveDraft(person: Person, publicId: string, form: FormData): Promise<SavedDraft | null> {
  const specification = await Specification.findOne({ where: { publicId }, actor: person });
  if (!specification) return null;
  const released = await readReleasedNumbers(person, specification.id);
  const parsed = parseSpecificationForm(form, { newLineKey, released });
  if (!parsed.ok) return refused(parsed.values, parsed.errors);
  const values = formValues(form);
  return once<SavedDraft>(person, key(form), ["save", publicId, posted(form)], isSaved, async (transaction) => {
    const lock = transaction.LOCK.UPDATE;
    await Specification.findByPk(specification.id, { actor: person, transaction, lock });
    const revision = await findDraft(person, specification.id, transaction);
    if (!revision) return refused(values, { form: [specificationRefusal("edit", "released") ?? ""] });
    const expected = values.intent === "save-over" ? values.overLockVersion : values.lockVersion;
    if (draftVersion(revision) !== expected) return staleDraft(values, revision);
    const now = await databaseNow(transaction);
    await revision.update(
      { ...draftColumns(parsed.value), lockVersion: revision.lockVersion + 1, savedAt: now },
      { transaction },
    );
    if (released.size === 0) await specification.update({ title: parsed.value.title }, { transaction });
    const before = await RequirementRow.findAll({ where: { revisionId: revision.id }, actor: person, transaction });
    for (const row of before) await row.destroy({ transaction });
    await writeLines(revision, parsed.value, released, now, transaction);
    await recordEvent(
      person,
      now,
      {
        subject: "specification",
        action: "saved",
        buyerOrganisationId: person.organisationId,
        specificationId: specification.id,
        detail: { letter: revision.letter, lines: parsed.value.requirements.length },
      },
      transaction,
    );
    return { ok: true, value: { publicId } };
  });
}

function staleDraft(values: FormValues, revision: SpecificationRevision): SavedDraft {
  const sentence =
    "This draft was saved after you opened it. Your entries are kept here and not saved: open the draft in a second tab to see what changed.";
  return refused({ ...values, overLockVersion: draftVersion(revision) }, { form: [sentence] });
}

/** Names one saved state of one revision: the same count of another letter is another draft. */
export const draftVersion = ({ letter, lockVersion }: SpecificationRevision): string => `${letter}-${lockVersion}`;

const isSaved = (outcome: SavedDraft): boolean => outcome.ok;

function key(form: FormData): string {
  const value = form.get("idempotencyKey");
  return typeof value === "string" ? value : "";
}

const posted = (form: FormData) => Object.entries(formValues(form)).sort(([a], [b]) => (a < b ? -1 : 1));

function draftColumns(draft: SpecificationDraft) {
  return {
    title: draft.title,
    impedance1: draft.z1,
    impedance2: draft.z2,
    ambient: draft.ambient,
    temperatureFrom: draft.temperatureRange?.[0] ?? null,
    temperatureTo: draft.temperatureRange?.[1] ?? null,
    lowestTestFrequency: draft.lowestTestFrequency,
  };
}

async function writeLines(
  revision: SpecificationRevision,
  draft: SpecificationDraft,
  released: ReadonlyMap<string, string>,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const lines = draft.requirements.map(toDefinition);
  const kinds = lines.map(({ lineKey, definition }) => ({ lineKey, kind: definition.kind }));
  const numbers = numberRevision(kinds, released);
  await RequirementRow.bulkCreate(
    lines.map(({ lineKey, definition }, ordinal) => ({
      buyerOrganisationId: revision.buyerOrganisationId,
      revisionId: revision.id,
      ordinal,
      lineKey,
      lineNumber: numbers[ordinal] ?? "",
      kind: definition.kind,
      definition,
      createdAt: now,
    })),
    { transaction },
  );
}
