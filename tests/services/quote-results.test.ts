// Results of a measured quote, against figures an independent tool computed for the same files.
import { expect, test } from "vitest";
import { MeasurementRow, Quote, QuoteSummary, StoredFile, VersionMeasurement } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import type { Note } from "~/rf/contract";
import type { LotNote } from "~/rf/lot-notes";
import { newPublicId, sha256 } from "~/services/identifiers.server";
import { readQuoteResults } from "~/services/quote-results.server";
import { readQuoteFiles, readQuoteTerms } from "~/services/quote-terms-view.server";
import { readQuoteTraces } from "~/services/quote-traces.server";
import { buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { expectedSupplier, JOURNEY_LINES, JOURNEY_SETUP, journeyKey } from "../support/journey";
import { buildKestrelQuote, buildSubmittedQuote, storeScore } from "../support/scored-quote";
import { useDatabase } from "../support/database";

useDatabase();

test(
  "the matrix of a measured quote has every line's worst value, place, margin and verdict of the independent figures",
  { timeout: 60_000 },
  async () => {
    const { engineer, quote, person } = await buildKestrelQuote();
    const results = await readQuoteResults(engineer, quote.publicId);
    const expected = expectedSupplier("Kestrel Cavity Filters");
    expect(results?.head).toMatchObject({ supplierName: "Kestrel Cavity Filters", verdict: "fail", conforming: false });
    expect(results?.head.transmission).toEqual({ uncertainty: 0.1, assumed: true });
    expect(results?.worstLineKey).toBe(journeyKey(expected.worstLine));
    expect(expected.lines).toHaveLength(10);
    for (const { id, verdict, worst } of expected.lines) {
      const line = results?.lines.find(({ lineNumber }) => lineNumber === id);
      expect([id, line?.verdict, line?.unit, line?.temperature]).toEqual([id, verdict, worst.unit, worst.temperature]);
      const cell = line?.cells.find(
        ({ unit, temperature }) => unit === worst.unit && temperature === worst.temperature,
      );
      expect(cell?.result.value).toBeCloseTo(worst.value, 6);
      expect(cell?.result.margin).toBeCloseTo(worst.margin, 6);
      expect(cell?.result.marginInterval[0]).toBeCloseTo(worst.marginInterval[0], 6);
      expect(cell?.result.frequency).toBe(worst.frequency);
    }
    expect(results?.units).toEqual(
      ["KCF-0205", "KCF-0206", "KCF-0207"].map((unit) => ({
        unit,
        temperatures: [-30, 25, 70].map((celsius) => ({ celsius, predicted: false })),
      })),
    );
    expect(results?.lines.filter(({ verdict }) => verdict === "declared")).toHaveLength(2);

    // The curves: the deciding sweep stands out; a zoom is finer inside its window and as long as before outside.
    const traces = await readQuoteTraces(engineer, quote.publicId, { reverse: true });
    const worst = traces?.filter(({ emphasis }) => emphasis === "worst") ?? [];
    expect(worst.map(({ parameter }) => parameter).sort()).toEqual(["s11", "s12", "s21", "s22"]);
    expect(traces?.filter(({ emphasis }) => emphasis === "other")).toHaveLength(8 * 3);
    const window = [1.97e9, 1.99e9] as const;
    const zoomed = await readQuoteTraces(engineer, quote.publicId, { window });
    const [before, after] = [traces, zoomed].map((all) => all?.find(({ parameter }) => parameter === "s21")?.frequency);
    expect([after?.[0], after?.at(-1)]).toEqual([before?.[0], before?.at(-1)]);
    const within = (frequency: readonly number[] | undefined) =>
      (frequency ?? []).filter((hz) => hz >= window[0] && hz <= window[1]).length;
    expect(within(after)).toBeGreaterThan(within(before));
    expect(after?.every((hz, index) => index === 0 || hz > (after[index - 1] ?? 0))).toBe(true);

    const files = await readQuoteFiles(engineer, quote.publicId);
    expect(files).toHaveLength(9);
    for (const { path, unit, temperature, points } of expected.files) {
      const file = files?.find(({ name }) => path.endsWith(`/${name}`));
      expect(file?.sweep).toMatchObject({ unit, celsius: temperature, points });
    }

    // The supplier has pages of its own; these are the buyer's.
    for (const reader of [person, await buildPerson(await buildOrganisation("buyer"), "admin")]) {
      expect(await readQuoteResults(reader, quote.publicId)).toBeNull();
      expect(await readQuoteTraces(reader, quote.publicId, {})).toBeNull();
      expect(await readQuoteFiles(reader, quote.publicId)).toBeNull();
      expect(await readQuoteTerms(reader, quote.publicId)).toBeNull();
    }
  },
);

test("the evidence grid counts what was delivered against the RFQ's plan, and the lot's notes name unit and files", async () => {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const plan = { temperatures: [50], sweeps: [{ band: [1.9e9, 2e9] as const, maxStep: 0.1e6 }] };
  const asked = { assumedSetup: JOURNEY_SETUP, measurementPlan: plan, unitsAsked: 2, unitsOverRange: 1 };
  const { rfq } = await buildRfq(engineer, asked, JOURNEY_LINES);
  const { quote, version } = await buildSubmittedQuote(rfq, JOURNEY_LINES);
  await storeScore(version, JOURNEY_LINES, {}, false);
  const { buyerOrganisationId, supplierOrganisationId } = version;
  const tenants = { buyerOrganisationId, supplierOrganisationId };
  const sweeps = [
    { serial: "A", temperature: "25.0", steps: [[1.9e9, 2e9, 0.1e6]] as const, name: "a-ambient.s2p" },
    { serial: "B", temperature: "25.0", steps: [[1.9e9, 2e9, 0.1e6]] as const, name: "b-ambient.s2p" },
    { serial: "A", temperature: "50.0", steps: [[1.9e9, 2e9, 1e6]] as const, name: "a-warm.s2p" },
    { serial: "A", temperature: "25.0", steps: [[1.9e9, 2e9, 1e6]] as const, name: "a-wide.s2p" },
  ];
  const coarse: Note = {
    code: "wide-step",
    severity: "doubtful",
    message: "A step of 1 MHz, wider than 600 kHz.",
    requirementId: journeyKey("2.1"),
  };
  const publicIds: string[] = [];
  for (const [place, { name, ...columns }] of sweeps.entries()) {
    const stored = { ...tenants, quoteId: quote.id, sharedAt: version.createdAt, createdAt: version.createdAt };
    const file = await StoredFile.create({
      ...{ ...stored, publicId: newPublicId(), name, mediaType: "application/octet-stream", size: 1 },
      sha256: sha256(name),
    });
    const reach = { points: 1001, frequencyFrom: 1.9e9, frequencyTo: 2e9, impedance1: 50, impedance2: 50 };
    const notes = place < 2 ? [] : [coarse];
    const publicId = newPublicId();
    const { id } = await MeasurementRow.create({ ...stored, ...columns, ...reach, notes, publicId, fileId: file.id });
    await VersionMeasurement.create({ ...tenants, versionId: version.id, measurementId: id });
    publicIds.push(publicId);
  }
  const note: LotNote = {
    code: "identical-data",
    severity: "doubtful",
    message: "Units A and B have the same data to the bit in one sweep, at +25 °C: they count as one unit.",
    unit: "A",
    units: ["A", "B"],
    sweepIds: publicIds.slice(0, 2),
  };
  await QuoteSummary.update({ notes: [note] }, { where: { versionId: version.id }, actor: SYSTEM });

  const results = await readQuoteResults(engineer, quote.publicId);
  const grid = results?.evidence?.grid;
  expect(grid?.columns.map(({ celsius }) => celsius)).toEqual([-30, 25, 50, 70]);
  expect(grid?.rows.map(({ unit, copies, cells }) => [unit, copies, ...cells.map(({ state }) => state)])).toEqual([
    ["A", ["B"], "missing", "delivered", "partly", "missing"],
    [null, [], "not-asked", "missing", "not-asked", "not-asked"],
  ]);
  expect(grid?.missing).toContain("Unit A at +50 °C: 1.9000 to 2.0000 GHz in steps of up to 1.00 MHz, 100 kHz asked.");
  expect(grid?.missing).toContain("2 units asked, 1 measured.");
  expect(results?.notes[0]).toEqual({
    code: "identical-data",
    severity: "doubtful",
    lineNumber: null,
    places: [{ unit: "A", celsius: null, message: note.message, files: ["a-ambient.s2p", "b-ambient.s2p"] }],
  });
  // The wide sweep at ambient has a fine one beside it, the warm one has none.
  expect(results?.notes.slice(1)).toEqual([
    { code: "wide-step", severity: "doubtful", lineNumber: "2.1", places: [expect.objectContaining({ celsius: 50 })] },
  ]);
});

test("a quote that is not scored yet has no verdict and no lines, and a draft is not there", async () => {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer);
  const { quote } = await buildSubmittedQuote(rfq, []);
  const results = await readQuoteResults(engineer, quote.publicId);
  expect(results).toMatchObject({ head: { verdict: null, conforming: null }, lines: [], evidence: null });
  await Quote.update({ state: "draft", sharedAt: null }, { where: { id: quote.id }, actor: SYSTEM });
  expect(await readQuoteResults(engineer, quote.publicId)).toBeNull();
});

test("terms show every break, what the asked quantity costs, and each declared line's answer", async () => {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, {}, JOURNEY_LINES);
  const { quote } = await buildSubmittedQuote(rfq, JOURNEY_LINES, { exceptions: [journeyKey("6.2")] });
  const terms = await readQuoteTerms(engineer, quote.publicId);
  expect(terms?.prices.map(({ quantity, unitPrice }) => [quantity, unitPrice])).toEqual([
    [100, "140.0000"],
    [500, "121.0000"],
    [1000, "110.0000"],
  ]);
  // By hand: 500 × 121 + 4,000 = 64,500.
  expect(terms?.cost?.total).toBe("64500");
  expect(terms?.declarations.map(({ lineNumber, answer, text }) => [lineNumber, answer, text])).toEqual([
    ["6.1", "comply", null],
    ["6.2", "exception", "SMA male at port 2"],
  ]);
});
