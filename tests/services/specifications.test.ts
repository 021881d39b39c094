// The draft of a specification: begun, saved over the right state only, listed, and seen by its own buyer alone.
import { expect, test } from "vitest";
import { AuditEvent, RequirementRow, Specification, SpecificationRevision } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { newIdempotencyKey } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";
import { releaseRevision, reviseSpecification } from "~/services/specification-release.server";
import { readSpecificationView } from "~/services/specification-view.server";
import {
  createSpecification,
  listSpecifications,
  PAGE_SIZE,
  readDraft,
  readSpecification,
  saveDraft,
} from "~/services/specifications.server";
import { useDatabase } from "../support/database";
import {
  buildInvitation,
  buildOrganisation,
  buildPerson,
  buildRfq,
  buildSpecification,
  SHORT_LINES,
} from "../support/factories";
import { must, passband, posted, type Row } from "../support/specification-form";

useDatabase();

const begin = async (person: Person, rows?: readonly Row[], fields?: Row) =>
  must(await createSpecification(person, posted(rows, fields))).publicId;
const buildEngineer = async () => buildPerson(await buildOrganisation("buyer"));
const linesOf = (revisionId: number) =>
  RequirementRow.findAll({ where: { revisionId }, order: [["ordinal", "ASC"]], actor: SYSTEM });

test("a new specification is draft A under the buyer's next number, with lines numbered by their group", async () => {
  const engineer = await buildEngineer();
  await begin(engineer);
  const publicId = await begin(engineer, [
    { kind: "rejection", from: "2040", to: "2140", limit: "50" },
    { kind: "insertion-loss", ...passband, limit: "1.2" },
    { kind: "rejection", from: "DC", to: "1.8G", limit: "55" },
    { kind: "declared", name: "Size", limit: "60 mm" },
  ]);
  const read = await readSpecification(engineer, publicId);
  expect(read?.number).toBe("SPEC-0002");
  expect(read?.revisions).toMatchObject([{ letter: "A", status: "draft", rfqCount: 0, contentHash: null }]);
  const view = await readSpecificationView(engineer, read?.revisions[0]?.id ?? 0);
  expect(view).toMatchObject({ title: "Band-pass", ownerName: engineer.name, impedances: [50, 75], ambient: 25 });
  expect(view?.lines.map(({ lineNumber }) => lineNumber)).toEqual(["3.1", "2.1", "3.2", "6.1"]);
  expect(new Set(view?.lines.map(({ lineKey }) => lineKey)).size).toBe(4);
  const events = await AuditEvent.findAll({ actor: engineer });
  expect(events.map(({ subject, action }) => `${subject} ${action}`)).toEqual([
    "specification created",
    "specification created",
  ]);
});

test("a form sent twice begins one specification", async () => {
  const engineer = await buildEngineer();
  const form = posted();
  const answers = await Promise.all([createSpecification(engineer, form), createSpecification(engineer, form)]);
  expect(answers[0]).toEqual(answers[1]);
  expect(await Specification.count({ actor: engineer })).toBe(1);
});

test("what does not read is refused at its cell, with the input kept and nothing stored", async () => {
  const engineer = await buildEngineer();
  const refused = await createSpecification(
    engineer,
    posted([{ kind: "ripple", from: "1,920", to: "1980", limit: "1" }]),
  );
  expect(refused).toMatchObject({
    ok: false,
    state: {
      values: { title: "Band-pass", "lines.0.from": "1,920" },
      errors: { "lines.0.from": [expect.any(String)] },
    },
  });
  expect(await Specification.count({ actor: engineer })).toBe(0);
});

test("a mask that contradicts itself is refused at both of its lines", async () => {
  const engineer = await buildEngineer();
  const refused = await createSpecification(
    engineer,
    posted([
      { kind: "insertion-loss", ...passband, limit: "1" },
      { kind: "rejection", from: "1970", to: "2100", limit: "40" },
    ]),
  );
  expect(refused.ok).toBe(false);
  if (refused.ok) return;
  expect(refused.state.errors["lines.0.limit"]?.[0]).toMatch(/^Lines 2\.1 and 3\.1 cannot both hold/);
  expect(refused.state.errors["lines.1.limit"]).toEqual(refused.state.errors["lines.0.limit"]);
});

test("a saved draft keeps the keys of its lines, gives new ones keys, and drops what was removed", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer, [
    { kind: "insertion-loss", ...passband, limit: "1.2" },
    { kind: "ripple", ...passband, limit: "0.5" },
  ]);
  const draft = await readDraft(engineer, publicId);
  const [loss, ripple] = [draft?.values["lines.0.lineKey"] ?? "", draft?.values["lines.1.lineKey"] ?? ""];
  const rows = [
    { kind: "rejection", from: "2040", to: "2140", limit: "50" },
    { kind: "ripple", ...passband, limit: "0.6", lineKey: ripple },
  ];
  const version = draft?.values.lockVersion ?? "";
  must(await saveDraft(engineer, publicId, posted(rows, { title: "Narrower", lockVersion: version })));
  const revision = await SpecificationRevision.findOne({ actor: engineer, rejectOnEmpty: true });
  const stored = await linesOf(revision.id);
  expect(stored.map(({ lineNumber, kind }) => `${lineNumber} ${kind}`)).toEqual(["3.1 rejection", "2.1 ripple"]);
  expect(stored[1]?.lineKey).toBe(ripple);
  expect(stored.map(({ lineKey }) => lineKey)).not.toContain(loss);
  expect(revision).toMatchObject({ title: "Narrower", lockVersion: 1 });
  expect(await Specification.findOne({ actor: engineer })).toMatchObject({ title: "Narrower" });
});

test("a draft saved by somebody else meanwhile is not replaced, and the input comes back", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  const opened = (await readDraft(engineer, publicId))?.values.lockVersion ?? "";
  must(await saveDraft(engineer, publicId, posted([], { title: "Theirs", lockVersion: opened })));
  const mine = { title: "Mine", lockVersion: opened };
  const refused = await saveDraft(engineer, publicId, posted([], mine));
  expect(refused).toMatchObject({
    ok: false,
    state: {
      values: { title: "Mine", overLockVersion: "A-1" },
      errors: { form: [expect.stringMatching(/not saved/)] },
    },
  });
  expect((await readDraft(engineer, publicId))?.values.title).toBe("Theirs");
  const meant = { ...mine, overLockVersion: "A-1", intent: "save-over" };
  must(await saveDraft(engineer, publicId, posted([], meant)));
  expect((await readDraft(engineer, publicId))?.values.title).toBe("Mine");
});

test("of two saves of one opened draft at the same moment one is kept", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  const forms = ["One", "Two"].map((title) => posted([], { title, lockVersion: "A-0" }));
  const answers = await Promise.all(forms.map((form) => saveDraft(engineer, publicId, form)));
  expect(answers.filter((answer) => answer?.ok)).toHaveLength(1);
  expect(await SpecificationRevision.findOne({ actor: engineer })).toMatchObject({ lockVersion: 1 });
});

test("a form opened on draft A does not reach draft B", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer, [{ kind: "ripple", ...passband, limit: "0.5" }]);
  must(await releaseRevision(engineer, publicId, { idempotencyKey: newIdempotencyKey(), version: "A-0" }));
  must(await reviseSpecification(engineer, publicId, newIdempotencyKey()));
  const late = await saveDraft(engineer, publicId, posted([], { lockVersion: "A-0" }));
  expect(late).toMatchObject({ ok: false, state: { errors: { form: [expect.any(String)] } } });
});

test("the list shows each specification by its latest revision, filtered, sorted, in pages, with real counts", async () => {
  const engineer = await buildEngineer();
  await buildSpecification(engineer, { title: "Beta" });
  await buildSpecification(engineer, { title: "Gamma", status: "draft" });
  await buildSpecification(engineer, { title: "Alpha" });
  const alpha = await Specification.findOne({ where: { title: "Alpha" }, actor: engineer, rejectOnEmpty: true });
  must(await reviseSpecification(engineer, alpha.publicId, newIdempotencyKey()));
  const stranger = await buildEngineer();
  await buildSpecification(stranger, { title: "Somebody else's" });

  const all = await listSpecifications(engineer, { sort: "title", descending: false });
  expect(all.rows.map(({ title, letter, status }) => `${title} ${letter} ${status}`)).toEqual([
    "Alpha B draft",
    "Beta A released",
    "Gamma A draft",
  ]);
  expect(all.counts).toEqual({ all: 3, draft: 2, released: 1 });
  expect((await listSpecifications(engineer, { status: "released" })).rows.map(({ title }) => title)).toEqual(["Beta"]);
  expect((await listSpecifications(engineer)).rows.map(({ title }) => title)).toEqual(["Alpha", "Gamma", "Beta"]);
  const empty = await listSpecifications(await buildEngineer(), { page: 7 });
  expect(empty).toMatchObject({ rows: [], total: 0, page: 1, pages: 1 });
});

test("a page beyond the last shows the last, and no row stands on two pages", async () => {
  const engineer = await buildEngineer();
  for (let made = 0; made < PAGE_SIZE + 2; made += 1) await buildSpecification(engineer, { lines: [], title: "Same" });
  const first = await listSpecifications(engineer, { sort: "title" });
  const last = await listSpecifications(engineer, { sort: "title", page: 99 });
  expect(last).toMatchObject({ page: 2, pages: 2, total: PAGE_SIZE + 2 });
  const ids = [...first.rows, ...last.rows].map(({ publicId }) => publicId);
  expect(new Set(ids).size).toBe(PAGE_SIZE + 2);
});

test("another buyer gets the answer of an unknown address from every function", async () => {
  const engineer = await buildEngineer();
  const stranger = await buildEngineer();
  const publicId = await begin(engineer);
  const [revision] = await SpecificationRevision.findAll({ actor: engineer });
  for (const address of [publicId, "0000000000000000"]) {
    expect(await readSpecification(stranger, address)).toBeNull();
    expect(await readDraft(stranger, address)).toBeNull();
    expect(await saveDraft(stranger, address, posted([], { lockVersion: "A-0" }))).toBeNull();
    const request = { idempotencyKey: newIdempotencyKey(), version: "A-0" };
    expect(await releaseRevision(stranger, address, request)).toBeNull();
    expect(await reviseSpecification(stranger, address, newIdempotencyKey())).toBeNull();
  }
  expect(await readSpecificationView(stranger, revision?.id ?? 0)).toBeNull();
});

test("an invited supplier reads the revision it quotes on, without its owner, and no other", async () => {
  const engineer = await buildEngineer();
  const supplier = await buildOrganisation("supplier");
  const person = await buildPerson(supplier);
  const { rfq, revision } = await buildRfq(engineer);
  const { revision: other } = await buildSpecification(engineer);
  expect(await readSpecificationView(person, revision.id)).toBeNull();
  await buildInvitation(rfq, supplier);
  const view = await readSpecificationView(person, revision.id);
  expect(view).toMatchObject({ ownerName: null, letter: "A", lines: SHORT_LINES });
  expect(await readSpecificationView(person, other.id)).toBeNull();
});
