// Curves of one measurement of a quote: margins with the minima that were scored, reflections, delay, impedance; the buyer's alone.
import { readFile } from "node:fs/promises";
import { expect, test } from "vitest";
import { readNumber } from "~/rf/index";
import { parseTouchstone } from "~/rf/touchstone";
import { readCurvePlaces, readQuoteCurves, type QuoteCurves } from "~/services/quote-curves.server";
import { readQuoteResults } from "~/services/quote-results.server";
import { buildOrganisation, buildPerson } from "../support/factories";
import { buildKestrelQuote } from "../support/scored-quote";
import { useDatabase } from "../support/database";

useDatabase();

const UNIT = "KCF-0207";
const PLACE = { unit: UNIT, temperature: 70 } as const;

function marginOf(curves: QuoteCurves | null) {
  if (curves?.view !== "margin" || !curves.margin) throw new Error("no margin");
  return curves.margin;
}

test(
  "every drawn margin has the least margin, ends and frequency that were scored; other views answer for the measurement",
  { timeout: 90_000 },
  async () => {
    const { engineer, quote, person } = await buildKestrelQuote();
    const results = await readQuoteResults(engineer, quote.publicId);
    let drawn = 0;
    for (const { lineNumber, definition, cells } of results?.lines ?? []) {
      const cell = cells.find(({ unit, temperature }) => unit === UNIT && temperature === 70);
      if (!cell) continue;
      const curves = await readQuoteCurves(engineer, quote.publicId, { view: "margin", ...PLACE, line: lineNumber });
      if (definition.kind === "ripple") {
        expect(curves).toMatchObject({ view: "margin", margin: null });
        continue;
      }
      const { stretches, missing } = marginOf(curves);
      const points = stretches.flatMap(({ frequency, margin, lower, upper }) =>
        frequency.map((hz, index) => ({
          hz,
          margin: readNumber(margin[index] ?? null),
          lower: readNumber(lower[index] ?? null),
          upper: readNumber(upper[index] ?? null),
        })),
      );
      const least = Math.min(...points.map(({ margin }) => margin));
      // Sent to a hundred-thousandth of a dB.
      expect(least, lineNumber).toBeCloseTo(cell.result.margin, 4);
      expect(Math.min(...points.map(({ lower }) => lower)), lineNumber).toBeCloseTo(cell.result.marginInterval[0], 4);
      expect(Math.min(...points.map(({ upper }) => upper)), lineNumber).toBeCloseTo(cell.result.marginInterval[1], 4);
      expect(points.find(({ margin }) => margin === least)?.hz, lineNumber).toBe(Math.round(cell.result.frequency));
      expect(missing, lineNumber).toEqual([]);
      drawn += 1;
    }
    expect(drawn).toBe(9);

    const smith = await readQuoteCurves(engineer, quote.publicId, { view: "smith", ...PLACE });
    const file = `db/seeds/demo-data/kestrel-cavity-filters/${UNIT}_+70C.s2p`;
    const network = parseTouchstone(await readFile(file));
    if (smith?.view !== "smith") throw new Error("no reflections");
    expect(smith.loci.map(({ port, reference }) => [port, reference])).toEqual([
      [1, 50],
      [2, 50],
    ]);
    const [first] = smith.loci;
    const at = first?.frequency.findIndex((hz) => hz > 1.95e9) ?? -1;
    const sample = network.frequency.findIndex((hz) => Math.round(hz) === first?.frequency[at]);
    expect(first?.re[at]).toBeCloseTo(network.s11.re[sample] ?? NaN, 5);
    expect(first?.im[at]).toBeCloseTo(network.s11.im[sample] ?? NaN, 5);
    expect(smith.files).toEqual([{ sweepId: first?.sweepId, name: `${UNIT}_+70C.s2p` }]);

    const delay = await readQuoteCurves(engineer, quote.publicId, { view: "delay", ...PLACE });
    if (delay?.view !== "delay") throw new Error("no delay");
    // Steps of 0.5 MHz, so two of them, and no delay line that states another aperture.
    expect(delay.delay.aperture).toEqual([1e6, 1e6]);
    const window = [1.94e9, 1.945e9] as const;
    const impedance = await readQuoteCurves(engineer, quote.publicId, { view: "impedance", ...PLACE, port: 2, window });
    if (impedance?.view !== "impedance") throw new Error("no impedance");
    expect(impedance.impedances[0]).toMatchObject({ port: 2, termination: 50, absent: { terminated: 0, open: 0 } });
    expect(impedance.impedances[0]?.frequency.filter((hz) => hz >= window[0] && hz <= window[1])).toHaveLength(10);

    const asked = { view: "smith", ...PLACE } as const;
    expect(await readQuoteCurves(engineer, quote.publicId, { ...asked, temperature: 71 })).toBeNull();
    expect(await readQuoteCurves(engineer, quote.publicId, { ...asked, unit: "KCF-0999" })).toBeNull();
    // The supplier has pages of its own; these are the buyer's.
    for (const reader of [person, await buildPerson(await buildOrganisation("buyer"), "admin")]) {
      expect(await readQuoteCurves(reader, quote.publicId, asked)).toBeNull();
      expect(await readCurvePlaces(reader, quote.publicId)).toBeNull();
    }
    const places = await readCurvePlaces(engineer, quote.publicId);
    expect(places).toHaveLength(9);
    expect(places).toContainEqual(PLACE);
  },
);
