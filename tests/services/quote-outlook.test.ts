// The outlook of a measured quote, against scipy, numpy and scikit-rf on the same files, and who may read it.
import { readFile } from "node:fs/promises";
import { expect, test } from "vitest";
import { sequelize } from "~/db/connection.server";
import {
  MeasurementRow,
  QuoteLineResult,
  QuoteVersion,
  SpecificationRevision,
  StoredFile,
  VersionMeasurement,
} from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { readOutlookQuery } from "~/forms/outlook";
import { packChunks, storeChunks } from "~/services/file-bytes.server";
import { newPublicId, sha256 } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";
import { readQuoteOutlook, type OutlookFigures } from "~/services/quote-outlook.server";
import { rescoreVersion, scoreVersion } from "~/services/scoring.server";
import { buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";
import { expectedSupplier, JOURNEY_LINES, journeyKey } from "../support/journey";
import { runPython } from "../support/python";
import { moveToRevision } from "../support/rescoring";
import { buildKestrelQuote, buildSubmittedQuote } from "../support/scored-quote";

useDatabase();

const FOLDER = "db/seeds/demo-data/kestrel-cavity-filters";
const UNITS = ["KCF-0205", "KCF-0206", "KCF-0207"];

const read = async (person: Person, quotePublicId: string, search = ""): Promise<OutlookFigures> => {
  const found = await readQuoteOutlook(person, quotePublicId, readOutlookQuery(new URLSearchParams(search)));
  if (!found?.outlook) throw new Error("no outlook");
  return found.outlook;
};

const outlookOf = ({ production }: OutlookFigures, lineNumber: string, celsius: number) =>
  production
    .find(({ place }) => place.celsius === celsius)
    ?.lines.find(({ lineKey }) => lineKey === journeyKey(lineNumber))?.outlook;

interface TrueSpread {
  readonly value: number;
  readonly frequency: number;
  readonly units: readonly number[];
}

test(
  "shares are scipy's for the stored margins, matching is numpy's and scikit-rf's for the files, the drift is the one they were made with",
  { timeout: 120_000 },
  async () => {
    const { engineer, quote, person } = await buildKestrelQuote();
    const outlook = await read(engineer, quote.publicId);

    // Production: ten measured lines at three temperatures, three units each.
    expect(outlook.production.map(({ place, lines }) => [place.name, place.celsius, lines.length])).toEqual([
      ["low", -30, 10],
      ["ambient", 25, 10],
      ["high", 70, 10],
    ]);
    const found = outlook.production.flatMap(({ lines }) =>
      lines.flatMap((line) => (line.outlook.kind === "found" ? [line.outlook] : [])),
    );
    expect(found).toHaveLength(30);
    // Beyond what is told apart, "at least" is capped; scipy's own series gives out there.
    const within = found.filter(({ conforming }) => conforming < 0.99999);
    expect(within.length).toBeGreaterThan(15);
    const { shares } = runPython("noncentral_t.py", [], {
      shares: within.map(({ margins }) => {
        const values = margins.map(({ margin }) => margin);
        const mean = values.reduce((sum, value) => sum + value) / 3;
        return [3, mean / Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / 2), 0.95];
      }),
    }) as { shares: number[] };
    within.forEach(({ conforming }, index) => expect(conforming).toBeCloseTo(shares[index] ?? NaN, 8));

    // The least of a line's margins is the margin that the independent figures report as its worst.
    for (const { id, worst } of expectedSupplier("Kestrel Cavity Filters").lines) {
      const margins = outlookOf(outlook, id, worst.temperature)?.margins ?? [];
      expect(margins.map(({ unit }) => unit)).toEqual(UNITS);
      expect(Math.min(...margins.map(({ margin }) => margin))).toBeCloseTo(worst.margin, 6);
      const places = outlook.temperatures.find(({ lineKey }) => lineKey === journeyKey(id))?.places ?? [];
      const shown = places.find(({ place }) => place.celsius === worst.temperature)?.measured;
      expect([shown?.unit, shown?.temperature]).toEqual([worst.unit, worst.temperature]);
    }
    // By hand: what the ten lines leave open at the low end, added up.
    const [low] = outlook.production;
    const open = (low?.lines ?? []).map((line) => (line.outlook.kind === "found" ? 1 - line.outlook.conforming : NaN));
    expect(low?.joint).toBeCloseTo(1 - open.reduce((sum, share) => sum + share), 12);

    // The recipe of the demo's files moves this supplier's units by −6 ppm/K.
    expect(outlook.drift).toMatchObject({ lineNumber: "2.1", measuredThroughout: 3 });
    expect(outlook.drift.units.map(({ unit }) => unit)).toEqual(UNITS);
    for (const { drift } of outlook.drift.units)
      for (const figure of [drift.below, drift.above, drift.whole]) expect(Math.abs(figure + 6)).toBeLessThan(0.1);

    // Matching at the high end, both ways of taking phase, over the passband of line 2.1.
    const files = UNITS.map((unit) => readFile(`${FOLDER}/${unit}_+70C.s2p`, "latin1"));
    const truth = runPython("match_units.py", [], {
      units: await Promise.all(files),
      band: [1.92e9, 1.98e9],
    }) as Record<"level" | "measured" | "removed", TrueSpread>;
    for (const phase of ["measured", "removed"] as const) {
      const { chosen, result } = (await read(engineer, quote.publicId, `line=2.1&temperature=70&phase=${phase}`))
        .matching;
      expect(chosen).toEqual({ lineNumber: "2.1", celsius: 70, phase });
      if (result.kind !== "found") throw new Error(result.kind);
      expect(result).toMatchObject({ units: UNITS, copies: [], missing: [] });
      for (const [spread, wanted] of [
        [result.level, truth.level],
        [result.phase, truth[phase]],
      ] as const) {
        expect(spread.value).toBeCloseTo(wanted.value, 6);
        expect(spread.frequency).toBeCloseTo(wanted.frequency, 0);
        expect([...spread.units].sort()).toEqual(wanted.units.map((index) => UNITS[index]));
      }
    }
    // What the address names and the quote does not have counts as absent.
    const unknown = (await read(engineer, quote.publicId, "line=9.9&temperature=85&phase=other")).matching;
    expect(unknown.chosen).toEqual({ lineNumber: "2.1", celsius: 25, phase: "removed" });

    for (const reader of [person, await buildPerson(await buildOrganisation("buyer"), "admin")])
      expect(await readQuoteOutlook(reader, quote.publicId, readOutlookQuery(new URLSearchParams()))).toBeNull();
  },
);

test(
  "a unit's data under a second serial, in a file that differs by a comment, counts once and is named",
  { timeout: 60_000 },
  async () => {
    const { engineer, quote, version } = await buildKestrelQuote();
    const before = await read(engineer, quote.publicId);
    await addCopy(version, "KCF-0206_+25C.s2p", "KCF-0299", "25.0");
    await scoreVersion(version.id);
    const outlook = await read(engineer, quote.publicId);
    expect(outlook.copies).toEqual([{ unit: "KCF-0299", original: "KCF-0206" }]);
    expect(outlookOf(outlook, "2.1", 25)).toEqual(outlookOf(before, "2.1", 25));
    expect(outlook.matching.result).toMatchObject({ units: UNITS, copies: ["KCF-0299"] });
  },
);

test(
  "a unit that holds another one's data in one of its sweeps alone counts as that one, though their figures differ",
  { timeout: 60_000 },
  async () => {
    const { engineer, quote, version } = await buildKestrelQuote();
    // Unit KCF-0299: a sweep of its own, which decides its figures, and one that is another unit's.
    await addCopy(version, "HR2-0411_25C.s2p", "KCF-0299", "25.0", "db/seeds/demo-data/halden-resonator-works");
    await addCopy(version, "KCF-0206_+25C.s2p", "KCF-0299", "25.0");
    await scoreVersion(version.id);
    const outlook = await read(engineer, quote.publicId);
    expect(outlook.copies).toEqual([{ unit: "KCF-0299", original: "KCF-0206" }]);
    expect(outlookOf(outlook, "2.1", 25)?.margins.map(({ unit }) => unit)).toEqual(UNITS);
  },
);

test(
  "after an amendment the outlook speaks of the revision that its figures were scored against",
  { timeout: 60_000 },
  async () => {
    const { engineer, quote, version, rfq } = await buildKestrelQuote();
    const amended = JOURNEY_LINES.map((line) => ({ ...line, lineNumber: `9${line.lineNumber}` }));
    const revisionId = await moveToRevision(rfq, "B", amended);
    await SpecificationRevision.update({ temperatureFrom: -31 }, { where: { id: revisionId }, actor: SYSTEM });
    await rescoreVersion({ versionId: version.id, revisionId });
    const { range, places, production, drift, matching } = await read(engineer, quote.publicId);
    expect(range).toEqual([-31, 70]);
    expect(places.map(({ celsius }) => celsius)).toEqual([-31, 25, 70]);
    expect(production.map(({ place }) => place.celsius)).toEqual([-31, 25, 70]);
    expect([drift.lineNumber, matching.chosen.lineNumber]).toEqual(["92.1", "92.1"]);
  },
);

async function addCopy(
  version: QuoteVersion,
  name: string,
  serial: string,
  temperature: string,
  folder = FOLDER,
): Promise<void> {
  const bytes = Buffer.concat([Buffer.from(`! unit ${serial}\n`), await readFile(`${folder}/${name}`)]);
  const link = await VersionMeasurement.findOne({
    where: { versionId: version.id },
    actor: SYSTEM,
    rejectOnEmpty: true,
  });
  const original = await MeasurementRow.findByPk(link.measurementId, { actor: SYSTEM, rejectOnEmpty: true });
  const { buyerOrganisationId, supplierOrganisationId, quoteId, sharedAt, createdAt } = original;
  const tenants = { buyerOrganisationId, supplierOrganisationId };
  const shared = { ...tenants, quoteId, sharedAt, createdAt };
  const chunks = await packChunks(bytes);
  const file = await sequelize.transaction(async (transaction) => {
    const columns = { name, mediaType: "application/octet-stream", size: bytes.length, sha256: sha256(bytes) };
    const stored = await StoredFile.create({ ...shared, publicId: newPublicId(), ...columns }, { transaction });
    await storeChunks(stored.id, chunks, transaction);
    return stored;
  });
  const { points, frequencyFrom, frequencyTo, impedance1, impedance2, notes } = original;
  const measurement = await MeasurementRow.create({
    ...shared,
    publicId: newPublicId(),
    fileId: file.id,
    serial,
    temperature,
    points,
    frequencyFrom,
    frequencyTo,
    impedance1,
    impedance2,
    notes,
  });
  await VersionMeasurement.create({ ...tenants, versionId: version.id, measurementId: measurement.id });
}

test(
  "predicted cells are shown as predicted and are no sample; data of a similar part has no production outlook",
  { timeout: 60_000 },
  async () => {
    const { engineer, quote, version } = await buildKestrelQuote();
    const row = await QuoteLineResult.findOne({
      where: { versionId: version.id, lineKey: journeyKey("2.1") },
      actor: SYSTEM,
      rejectOnEmpty: true,
    });
    const cells = row.cells.map((cell) => ({ ...cell, predicted: cell.temperature === 70 && cell.unit !== UNITS[0] }));
    await QuoteLineResult.update(
      { cells },
      { where: { versionId: version.id, lineKey: journeyKey("2.1") }, actor: SYSTEM },
    );
    const outlook = await read(engineer, quote.publicId);
    expect(outlookOf(outlook, "2.1", 70)).toMatchObject({ kind: "none", reason: "predicted" });
    expect(outlookOf(outlook, "2.2", 70)).toMatchObject({ kind: "found" });
    const places = outlook.temperatures.find(({ lineKey }) => lineKey === journeyKey("2.1"))?.places ?? [];
    expect(places.map(({ measured, predicted }) => [measured?.unit, predicted?.unit])).toEqual([
      ["KCF-0206", undefined],
      ["KCF-0207", undefined],
      ["KCF-0205", "KCF-0207"],
    ]);

    await QuoteVersion.update({ basis: "similar" }, { where: { id: version.id }, actor: SYSTEM });
    expect((await read(engineer, quote.publicId)).production).toEqual([]);
  },
);

test("a quote that is not scored yet has no outlook", async () => {
  const engineer = await buildPerson(await buildOrganisation("buyer"));
  const { rfq } = await buildRfq(engineer);
  const { quote } = await buildSubmittedQuote(rfq, []);
  const found = await readQuoteOutlook(engineer, quote.publicId, readOutlookQuery(new URLSearchParams()));
  expect(found).toMatchObject({ head: { verdict: null }, outlook: null });
});

test("an address is read strictly: what is no line, temperature or phase counts as absent", () => {
  const query = (search: string) => readOutlookQuery(new URLSearchParams(search));
  expect(query("line=2.1&temperature=-30&phase=measured")).toEqual({
    line: "2.1",
    temperature: -30,
    phase: "measured",
  });
  for (const search of ["", "line=2&temperature=warm&phase=1", "line=2.1%27&temperature=1e9&phase="])
    expect(query(search)).toEqual({ line: null, temperature: null, phase: "removed" });
});
