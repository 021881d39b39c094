// Releasing freezes a revision for good; the next one begins from it and keeps its lines' identity.
import { createHash } from "node:crypto";
import { expect, test } from "vitest";
import { AuditEvent, RequirementRow, Specification, SpecificationRevision } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { newIdempotencyKey } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";
import { canonicalJson, releaseRevision, reviseSpecification } from "~/services/specification-release.server";
import { createSpecification, readDraft, saveDraft } from "~/services/specifications.server";
import { useDatabase } from "../support/database";
import { buildOrganisation, buildPerson, buildSpecification } from "../support/factories";
import { must, passband, posted, type Row } from "../support/specification-form";

useDatabase();

const LOSS = { kind: "insertion-loss", ...passband, limit: "1.2" };
const buildEngineer = async () => buildPerson(await buildOrganisation("buyer"));
const begin = async (person: Person, rows: readonly Row[] = [LOSS]) =>
  must(await createSpecification(person, posted(rows))).publicId;
const release = (person: Person, publicId: string, version: string) =>
  releaseRevision(person, publicId, { idempotencyKey: newIdempotencyKey(), version });
const revise = (person: Person, publicId: string) => reviseSpecification(person, publicId, newIdempotencyKey());
const revisionsOf = (person: Person) => SpecificationRevision.findAll({ order: [["id", "ASC"]], actor: person });
const numbersOf = async (revisionId: number) =>
  (await RequirementRow.findAll({ where: { revisionId }, order: [["ordinal", "ASC"]], actor: SYSTEM })).map(
    ({ lineNumber, kind }) => `${lineNumber} ${kind}`,
  );

test("a release freezes the draft with its time, its person and the hash of its content", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  expect(must(await release(engineer, publicId, "A-0"))).toEqual({ letter: "A" });
  const [revision] = await revisionsOf(engineer);
  expect(revision).toMatchObject({ status: "released", releasedBy: engineer.userId });
  expect(revision?.releasedAt).toBeInstanceOf(Date);
  const [line] = await RequirementRow.findAll({ actor: engineer });
  // The content written out by hand, keys in order, and hashed by Node itself.
  const content = `{"ambient":25,"impedances":[50,75],"letter":"A","lines":[{"definition":{"band":[1920000000,1980000000],"kind":"insertion-loss","max":1.2},"lineKey":"${line?.lineKey ?? ""}","lineNumber":"2.1"}],"lowestTestFrequency":null,"number":"SPEC-0001","temperatureRange":[null,null],"title":"Band-pass"}`;
  expect(revision?.contentHash?.toString("hex")).toBe(createHash("sha256").update(content).digest("hex"));
  const events = await AuditEvent.findAll({ where: { action: "released" }, actor: engineer });
  expect(events).toHaveLength(1);
  expect(events[0]?.detail).toMatchObject({ letter: "A", contentHash: revision?.contentHash?.toString("hex") });
});

test("canonical JSON does not depend on the order in which keys were written", () => {
  expect(canonicalJson({ b: [{ z: 1, a: undefined, c: null }], a: "x" })).toBe('{"a":"x","b":[{"c":null,"z":1}]}');
});

test("a specification without a measured line is not released", async () => {
  const engineer = await buildEngineer();
  for (const rows of [[], [{ kind: "declared", name: "Size", limit: "60 mm" }]]) {
    const refused = await release(engineer, await begin(engineer, rows), "A-0");
    expect(refused).toEqual({ ok: false, errors: { form: [expect.stringMatching(/at least one measured line/)] } });
  }
});

test("contradictory and inverted masks are refused with their lines and the place", async () => {
  const engineer = await buildEngineer();
  const loss = { kind: "insertion-loss", band: [1.92e9, 1.98e9], max: 1 } as const;
  const contradictory = await buildSpecification(engineer, {
    status: "draft",
    lines: [
      { lineKey: "loss", lineNumber: "2.1", definition: loss },
      { lineKey: "rejection", lineNumber: "3.1", definition: { kind: "rejection", band: [1.97e9, 2.1e9], min: 40 } },
    ],
  });
  const inverted = await buildSpecification(engineer, {
    status: "draft",
    lines: [{ lineKey: "loss", lineNumber: "2.1", definition: { ...loss, band: [1.98e9, 1.92e9] } }],
  });
  expect(await release(engineer, contradictory.specification.publicId, "A-0")).toEqual({
    ok: false,
    errors: {
      form: ["Lines 2.1 and 3.1 cannot both hold from 1.9700 to 1.9800 GHz: loss max 1.00 dB, rejection min 40.00 dB."],
    },
  });
  expect(await release(engineer, inverted.specification.publicId, "A-0")).toEqual({
    ok: false,
    errors: { form: ["Line 2.1: the lower edge lies above the upper."] },
  });
  expect((await revisionsOf(engineer)).map(({ status }) => status)).toEqual(["draft", "draft"]);
});

test("a draft that was saved since it was read is not released", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  must(await saveDraft(engineer, publicId, posted([LOSS], { lockVersion: "A-0" })));
  expect(await release(engineer, publicId, "A-0")).toMatchObject({ ok: false, errors: { form: [expect.any(String)] } });
  expect(await release(engineer, publicId, "A-1")).toMatchObject({ ok: true });
});

test("every way to write refuses a released revision, and none of its rows changes through the next one's life", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  must(await release(engineer, publicId, "A-0"));
  const frozen = async () => {
    const [revision] = await revisionsOf(engineer);
    const rows = await RequirementRow.findAll({ where: { revisionId: revision?.id ?? 0 }, actor: engineer });
    const { status: _status, ...content } = revision?.get({ plain: true }) ?? {};
    return { content, rows: rows.map((row) => row.get({ plain: true })) };
  };
  const before = await frozen();
  for (const version of ["A-0", "A-1"]) {
    const save = await saveDraft(engineer, publicId, posted([], { title: "Changed", lockVersion: version }));
    expect(save).toMatchObject({ ok: false, state: { errors: { form: [expect.stringMatching(/does not change/)] } } });
    const over = { lockVersion: version, overLockVersion: version, intent: "save-over" };
    expect(await saveDraft(engineer, publicId, posted([], over))).toMatchObject({ ok: false });
    expect(await release(engineer, publicId, version)).toMatchObject({ ok: false });
  }
  expect(await readDraft(engineer, publicId)).toBeNull();
  expect(await frozen()).toEqual(before);
  must(await revise(engineer, publicId));
  must(await saveDraft(engineer, publicId, posted([{ ...LOSS, limit: "2" }], { title: "B", lockVersion: "B-0" })));
  must(await release(engineer, publicId, "B-1"));
  expect(await frozen()).toEqual(before);
  expect((await revisionsOf(engineer)).map(({ letter, status }) => `${letter} ${status}`)).toEqual([
    "A superseded",
    "B released",
  ]);
  expect(await Specification.findOne({ actor: engineer })).toMatchObject({ title: "B" });
});

test("the next revision keeps keys and numbers, and a withdrawn number is not given again", async () => {
  const engineer = await buildEngineer();
  const rejection = (from: string) => ({ kind: "rejection", from, to: "3000", limit: "40" });
  const publicId = await begin(engineer, [LOSS, rejection("2040"), rejection("2100")]);
  must(await release(engineer, publicId, "A-0"));
  expect(must(await revise(engineer, publicId))).toEqual({ letter: "B" });
  const [first, second] = await revisionsOf(engineer);
  expect(await numbersOf(second?.id ?? 0)).toEqual(await numbersOf(first?.id ?? 0));
  const values: Row = (await readDraft(engineer, publicId))?.values ?? {};
  const kept = (index: number) => ({ lineKey: values[`lines.${index}.lineKey`] ?? "" });
  const rows = [rejection("2200"), { ...LOSS, ...kept(0) }, { ...rejection("2100"), ...kept(2) }];
  must(await saveDraft(engineer, publicId, posted(rows, { lockVersion: "B-0" })));
  expect(await numbersOf(second?.id ?? 0)).toEqual(["3.3 rejection", "2.1 insertion-loss", "3.2 rejection"]);
  must(await release(engineer, publicId, "B-1"));
  expect(must(await revise(engineer, publicId))).toEqual({ letter: "C" });
});

test("a draft is not revised, and a specification has one draft at a time", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  expect(await revise(engineer, publicId)).toMatchObject({ ok: false });
  must(await release(engineer, publicId, "A-0"));
  const answers = await Promise.all([revise(engineer, publicId), revise(engineer, publicId)]);
  expect(answers.filter((answer) => answer?.ok)).toHaveLength(1);
  expect(answers.find((answer) => !answer?.ok)).toMatchObject({
    errors: { form: ["Revision B is a draft already. Edit that one."] },
  });
});

test("of two releases at the same moment one counts, and a repeated post answers as the first did", async () => {
  const engineer = await buildEngineer();
  const publicId = await begin(engineer);
  const request = { idempotencyKey: newIdempotencyKey(), version: "A-0" };
  const [first, repeated, other] = await Promise.all([
    releaseRevision(engineer, publicId, request),
    releaseRevision(engineer, publicId, request),
    release(engineer, publicId, "A-0"),
  ]);
  expect(repeated).toEqual(first);
  expect(other?.ok).toBe(!first?.ok);
  expect(await AuditEvent.count({ where: { action: "released" }, actor: engineer })).toBe(1);
  expect(await SpecificationRevision.count({ where: { status: "released" }, actor: engineer })).toBe(1);
});
