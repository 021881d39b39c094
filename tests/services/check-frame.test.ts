// What a supplier's browser checks files against: of its own quote alone, the same as the server scores with.
import { expect, test } from "vitest";
import { Quote } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { parseTouchstone, type StoredResult } from "~/rf/index";
import { MeasurementResult } from "~/db/models";
import { readCheckFrame } from "~/services/check-frame.server";
import { addMeasurement } from "~/services/measurements.server";
import { Checker } from "~/workers/checker";
import { useDatabase } from "../support/database";
import { JOURNEY_LINES, JOURNEY_SETUP } from "../support/journey";
import { addSupplier, buildJourneyQuote, journeyFiles, type NamedBytes } from "../support/supplier-journey";

useDatabase();

const [orme] = journeyFiles("orme-microwave") as [NamedBytes];

test("the frame has the measured lines, what the RFQ assumes and asks, and what the draft states", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave", { decisionRule: "guarded", unitsAsked: 5 });
  const values = { ...quote.draft.values, "setup.transmission": "0.05 dB", "drift.ppmPerKelvin": "±2 ppm/K" };
  await quote.update({ draft: { values }, basis: "similar" });
  const frame = await readCheckFrame(person, quote.publicId);
  expect(frame).toMatchObject({
    assumedSetup: JOURNEY_SETUP,
    statedSetup: { transmission: 0.05 },
    statedDrift: { ppmPerKelvin: 2, either: true },
    basis: "similar",
    decisionRule: "guarded",
    unitsAsked: 5,
    unitsOverRange: 1,
    range: [-30, 70],
  });
  const measured = JOURNEY_LINES.filter(({ definition }) => definition.kind !== "declared");
  expect(frame?.lines).toEqual(measured);
  expect(frame?.requirements.map(({ id }) => id)).toEqual(measured.map(({ lineKey }) => lineKey));
});

test("steps that the RFQ plans are asked of the file before it is sent too", async () => {
  const measurementPlan = { sweeps: [{ band: [1.7e9, 2.2e9], maxStep: 1e5 }] } as const;
  const { person, quote } = await buildJourneyQuote("Orme Microwave", { measurementPlan });
  const frame = await readCheckFrame(person, quote.publicId);
  expect(frame?.requirements.every(({ maxStep }) => maxStep === 1e5)).toBe(true);
});

test("another supplier of the same RFQ, and the buyer, get nothing", async () => {
  const { engineer, rfq, quote } = await buildJourneyQuote("Orme Microwave");
  const rival = await addSupplier(rfq, "Kestrel Cavity Filters");
  expect(await readCheckFrame(rival.person, quote.publicId)).toBeNull();
  expect(await readCheckFrame(engineer, quote.publicId)).toBeNull();
});

test("nothing in the frame names the buyer, the rows of tables or anybody else", async () => {
  const { person, quote, rfq, buyer } = await buildJourneyQuote("Orme Microwave");
  const text = JSON.stringify(await readCheckFrame(person, quote.publicId));
  for (const secret of [buyer.name, rfq.publicId, "revisionId", "OrganisationId"]) expect(text).not.toContain(secret);
});

test("what is checked with the frame is what the server stores of the same bytes, with a setup stated", async () => {
  const { person, quote } = await buildJourneyQuote("Orme Microwave");
  const values = { ...quote.draft.values, "setup.transmission": "0.03 dB", "setup.directivity": "44 dB" };
  await quote.update({ draft: { values } });
  const frame = await readCheckFrame(person, quote.publicId);
  if (!frame) throw new Error("no frame");
  const outcome = new Checker(frame).check(1, orme.name, orme.bytes);
  if (!outcome.ok) throw new Error(outcome.refusal.sentence);
  await addMeasurement(person, quote.publicId, orme);
  const stored = await MeasurementResult.findOne({ where: {}, actor: SYSTEM, rejectOnEmpty: true });
  expect(outcome.checked.results as StoredResult[]).toEqual(stored.results); // one engine here: to the bit
  expect(outcome.checked.verdict).toBe(stored.verdict);
  expect(outcome.checked.points).toBe(parseTouchstone(orme.bytes).frequency.length);
  expect(await Quote.count({ actor: SYSTEM })).toBe(1);
});
