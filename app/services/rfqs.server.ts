// An RFQ's life up to its opening: proposed from a released revision, written, edited while a draft, opened.
import type { Transaction } from "sequelize";
import { Invitation, Organisation, Rfq, RfqQuantity, Specification, SpecificationRevision } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { takeNumber } from "~/db/queries/number-series";
import { invalid, ok, type Result } from "~/forms/form";
import type { FormValues } from "~/forms/fields";
import { DEFAULT_UNITS_ASKED, DEFAULT_UNITS_OVER_RANGE, rfqToValues, type RfqInput } from "~/forms/rfq";
import { PROPOSED_SETUP } from "~/forms/setup";
import { zonedTimeToText } from "~/forms/zoned-time";
import { measuredRequirements, type SpecificationLine } from "~/rf/line-definition";
import { proposeSweeps, type MeasurementPlan } from "~/rf/measurement-plan";
import { rfqNumber, specificationNumber } from "~/workflow/numbers";
import { canRfq, rfqRefusal, rfqState } from "~/workflow/rfq";
import { canSpecification, specificationRefusal } from "~/workflow/specification";
import { recordEvent } from "./audit.server";
import { once } from "./idempotency.server";
import { newPublicId } from "./identifiers.server";
import { sendInvitation } from "./invitations.server";
import type { Person } from "./person.server";
import { findRfq, lockRfq } from "./rfq-head.server";
import { readLines } from "./specification-lines.server";
import { blockedRefusal } from "./suppliers.server";
import { inTransaction } from "./transaction.server";

const DAY_MS = 24 * 60 * 60 * 1000;
const PROPOSED_DAYS = 21;
const PAST = "The due date lies in the past. Choose a later one.";

/** What a form of an RFQ says of the revision it is written for. */
export interface RfqSubject {
  readonly publicId: string;
  readonly number: string;
  readonly letter: string;
  readonly title: string;
}

/** The fields of the RFQ; invitations are made on their own sheet. */
export type RfqFields = Omit<RfqInput, "invitations">;

export interface RfqProposal {
  readonly specification: RfqSubject;
  /** Why no RFQ can be written for it; null where one can. */
  readonly refusal: string | null;
  readonly values: FormValues;
}

/** Specifications an RFQ can be written for, by number. */
export async function listReleasedSpecifications(person: Person): Promise<RfqSubject[]> {
  const revisions = await SpecificationRevision.findAll({ where: { status: "released" }, actor: person });
  const byId = new Map(revisions.map((revision) => [revision.specificationId, revision]));
  const specifications = await Specification.findAll({
    where: { id: [...byId.keys()] },
    order: [["number", "DESC"]],
    actor: person,
  });
  return specifications.flatMap((specification) => {
    const revision = byId.get(specification.id);
    return revision ? [subjectOf(specification, revision)] : [];
  });
}

/** A new RFQ as the form first shows it, or null where the person does not see the specification. */
export async function proposeRfq(person: Person, specificationPublicId: string): Promise<RfqProposal | null> {
  const found = await findSubject(person, specificationPublicId);
  if (!found) return null;
  const [organisation, lines, now] = await Promise.all([
    Organisation.findByPk(person.organisationId, { actor: person, rejectOnEmpty: true }),
    readLines(person, found.revision.id),
    databaseNow(),
  ]);
  const due = zonedTimeToText(new Date(now.getTime() + PROPOSED_DAYS * DAY_MS), organisation.timeZone);
  const proposed = rfqToValues({
    title: found.revision.title,
    breaks: [],
    askedQuantity: 0,
    dueAt: now,
    dueZone: organisation.timeZone,
    decisionRule: organisation.decisionRule,
    currency: organisation.currency,
    text: "",
    unitsAsked: DEFAULT_UNITS_ASKED,
    unitsOverRange: DEFAULT_UNITS_OVER_RANGE,
    measurementPlan: proposedPlan(lines),
    assumedSetup: PROPOSED_SETUP,
    invitations: [],
  });
  return {
    specification: subjectOf(found.specification, found.revision),
    refusal: specificationRefusal("open-rfq", found.revision.status),
    values: { ...proposed, askedQuantity: "", dueDate: due.date, dueTime: "17:00", dueOffset: "" },
  };
}

function proposedPlan(lines: readonly SpecificationLine[]): MeasurementPlan {
  const sweeps = proposeSweeps(measuredRequirements(lines));
  return sweeps.length === 0 ? {} : { sweeps };
}

const subjectOf = (specification: Specification, revision: SpecificationRevision): RfqSubject => ({
  publicId: specification.publicId,
  number: specificationNumber(specification.number),
  letter: revision.letter,
  title: revision.title,
});

/** The specification with its released revision, else its latest one. */
async function findSubject(person: Person, publicId: string) {
  const specification = await Specification.findOne({ where: { publicId }, actor: person });
  if (!specification) return null;
  const revisions = await SpecificationRevision.findAll({
    where: { specificationId: specification.id },
    order: [["id", "DESC"]],
    actor: person,
  });
  const revision = revisions.find(({ status }) => canSpecification("open-rfq", status)) ?? revisions[0];
  return revision ? { specification, revision } : null;
}

/** Writes an RFQ as a draft under the next number of the year. Null where the person does not see the specification. */
export async function createRfq(
  person: Person,
  idempotencyKey: string,
  specificationPublicId: string,
  input: RfqFields,
): Promise<Result<{ publicId: string }> | null> {
  const found = await findSubject(person, specificationPublicId);
  if (!found) return null;
  const organisation = await Organisation.findByPk(person.organisationId, { actor: person, rejectOnEmpty: true });
  const request = { create: specificationPublicId, input };
  return once<Result<{ publicId: string }>>(
    person,
    idempotencyKey,
    request,
    ({ ok: made }) => made,
    async (transaction, now) => {
      const revision = await SpecificationRevision.findByPk(found.revision.id, {
        actor: person,
        transaction,
        lock: transaction.LOCK.UPDATE,
        rejectOnEmpty: true,
      });
      const refusal = specificationRefusal("open-rfq", revision.status);
      if (refusal) return invalid({ form: [refusal] });
      if (input.dueAt <= now) return invalid({ dueDate: [PAST] });
      const year = Number(zonedTimeToText(now, organisation.timeZone).date.slice(0, 4));
      const rfq = await Rfq.create(
        {
          publicId: newPublicId(),
          buyerOrganisationId: person.organisationId,
          year,
          number: await takeNumber(person.organisationId, `rfq-${year}`, transaction),
          specificationId: found.specification.id,
          revisionId: revision.id,
          ownerId: person.userId,
          currency: organisation.currency,
          createdAt: now,
          ...columns(input),
        },
        { transaction },
      );
      await writeBreaks(person, rfq.id, input.breaks, transaction);
      const detail = { number: rfqNumber(rfq.year, rfq.number) };
      await recordEvent(person, now, { subject: "rfq", action: "created", ...about(rfq), detail }, transaction);
      return ok({ publicId: rfq.publicId });
    },
  );
}

const columns = (input: RfqFields) => ({
  title: input.title,
  dueAt: input.dueAt,
  dueZone: input.dueZone,
  decisionRule: input.decisionRule,
  quantity: input.askedQuantity,
  text: input.text === "" ? null : input.text,
  unitsAsked: input.unitsAsked,
  unitsOverRange: input.unitsOverRange,
  measurementPlan: input.measurementPlan,
  assumedSetup: input.assumedSetup,
});

const about = (rfq: Rfq) => ({ buyerOrganisationId: rfq.buyerOrganisationId, rfqId: rfq.id });

async function writeBreaks(person: Person, rfqId: number, breaks: readonly number[], transaction: Transaction) {
  const before = await RfqQuantity.findAll({ where: { rfqId }, actor: person, transaction });
  for (const row of before) await row.destroy({ transaction });
  const rows = breaks.map((quantity) => ({ buyerOrganisationId: person.organisationId, rfqId, quantity }));
  await RfqQuantity.bulkCreate(rows, { transaction });
}

export async function readBreaks(person: Person, rfqId: number): Promise<number[]> {
  const rows = await RfqQuantity.findAll({ where: { rfqId }, order: [["quantity", "ASC"]], actor: person });
  return rows.map(({ quantity }) => quantity);
}

export interface RfqDraft {
  readonly values: FormValues;
  /** Sent back with the form: a draft changed meanwhile is not overwritten. */
  readonly lockVersion: number;
  /** Why it cannot be edited; null where it can. */
  readonly refusal: string | null;
}

/** A draft as its form shows it, or null where the person does not see the RFQ. */
export async function readRfqDraft(person: Person, rfqPublicId: string): Promise<RfqDraft | null> {
  const rfq = await findRfq(person, rfqPublicId);
  if (!rfq) return null;
  const [breaks, now] = await Promise.all([readBreaks(person, rfq.id), databaseNow()]);
  const values = rfqToValues({
    title: rfq.title,
    breaks,
    askedQuantity: rfq.quantity,
    dueAt: rfq.dueAt,
    dueZone: rfq.dueZone,
    decisionRule: rfq.decisionRule,
    currency: rfq.currency,
    text: rfq.text ?? "",
    unitsAsked: rfq.unitsAsked,
    unitsOverRange: rfq.unitsOverRange,
    measurementPlan: rfq.measurementPlan,
    assumedSetup: rfq.assumedSetup,
    invitations: [],
  });
  return { values, lockVersion: rfq.lockVersion, refusal: rfqRefusal("edit", rfqState(rfq, now)) };
}

/** Saves a draft. Null where the person does not see the RFQ. */
export async function editRfq(
  person: Person,
  rfqPublicId: string,
  lockVersion: number,
  input: RfqFields,
): Promise<Result<null> | null> {
  return inTransaction(async (transaction) => {
    const rfq = await lockRfq(person, rfqPublicId, transaction);
    if (!rfq) return null;
    const now = await databaseNow(transaction);
    const refusal = rfqRefusal("edit", rfqState(rfq, now));
    if (refusal) return invalid({ form: [refusal] });
    if (rfq.lockVersion !== lockVersion)
      return invalid({
        form: ["This draft was saved meanwhile by somebody else. Reload the page to see how it stands."],
      });
    if (input.dueAt <= now) return invalid({ dueDate: [PAST] });
    await rfq.update({ ...columns(input), lockVersion: rfq.lockVersion + 1 }, { transaction });
    await writeBreaks(person, rfq.id, input.breaks, transaction);
    await recordEvent(person, now, { subject: "rfq", action: "edited", ...about(rfq) }, transaction);
    return ok(null);
  });
}

/**
 * Opens a draft: from now on suppliers accept and quote until the due date. Each invitation goes out with a link of its own,
 * in the same transaction. Null where the person does not see the RFQ.
 */
export async function openRfq(
  person: Person,
  idempotencyKey: string,
  rfqPublicId: string,
): Promise<Result<{ mailed: number }> | null> {
  return once<Result<{ mailed: number }> | null>(
    person,
    idempotencyKey,
    { open: rfqPublicId },
    (outcome) => outcome?.ok === true,
    async (transaction) => {
      const rfq = await lockRfq(person, rfqPublicId, transaction);
      if (!rfq) return null;
      const now = await databaseNow(transaction);
      const state = rfqState(rfq, now);
      if (!canRfq("open", state)) return invalid({ form: [rfqRefusal("open", state) ?? ""] });
      if (rfq.dueAt <= now) return invalid({ form: ["The due date has passed. Edit the draft and set a later one."] });
      const superseded = await supersededRefusal(person, rfq, transaction);
      if (superseded) return invalid({ form: [superseded] });
      const invitations = await Invitation.findAll({
        where: { rfqId: rfq.id, state: "draft" },
        order: [["id", "ASC"]],
        actor: person,
        transaction,
      });
      if (invitations.length === 0) return invalid({ form: ["Invite at least one supplier first."] });
      const blocked = await blockedRefusal(person, invitations, transaction);
      if (blocked) return invalid({ form: [`${blocked} Remove its invitation first.`] });
      await rfq.update({ status: "open", openedAt: now, lockVersion: rfq.lockVersion + 1 }, { transaction });
      const detail = { invitations: invitations.length, dueAt: rfq.dueAt.toISOString() };
      await recordEvent(person, now, { subject: "rfq", action: "opened", ...about(rfq), detail }, transaction);
      for (const invitation of invitations) await sendInvitation(person, rfq, invitation, now, transaction);
      return ok({ mailed: invitations.length });
    },
  );
}

/** Why an RFQ on a revision that a later one has replaced is not opened, or null; the revision is locked. */
async function supersededRefusal(person: Person, rfq: Rfq, transaction: Transaction): Promise<string | null> {
  const lock = transaction.LOCK.SHARE;
  const where = { id: rfq.revisionId };
  const revision = await SpecificationRevision.findOne({
    where,
    actor: person,
    transaction,
    lock,
    rejectOnEmpty: true,
  });
  if (canSpecification("open-rfq", revision.status)) return null;
  return `Revision ${revision.letter} has been replaced by a later one. Write a new RFQ from the specification.`;
}
