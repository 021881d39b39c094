// Results of a measured quote, against figures an independent tool computed for the same files.
import { expect, test } from "vitest";
import { Quote } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { readQuoteResults } from "~/services/quote-results.server";
import { readQuoteFiles, readQuoteTerms } from "~/services/quote-terms-view.server";
import { readQuoteTraces } from "~/services/quote-traces.server";
import { buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { expectedSupplier, JOURNEY_LINES, JOURNEY_SETUP, journeyKey } from "../support/journey";
import { buildSubmittedQuote, measureAndScore } from "../support/scored-quote";
import { useDatabase } from "../support/database";

useDatabase();

async function kestrel() {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  const { rfq } = await buildRfq(engineer, { assumedSetup: JOURNEY_SETUP }, JOURNEY_LINES);
  const submitted = await buildSubmittedQuote(rfq, JOURNEY_LINES, { name: "Kestrel Cavity Filters" });
  await measureAndScore(submitted.quote, submitted.version, "kestrel-cavity-filters");
  return { engineer, rfq, ...submitted };
}

test(
  "the matrix of a measured quote has every line's worst value, place, margin and verdict of the independent figures",
  { timeout: 60_000 },
  async () => {
    const { engineer, quote, person } = await kestrel();
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
