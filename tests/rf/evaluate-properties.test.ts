// What holds for any sweep, limit and setup: properties checked on random input.
import fc from "fast-check";
import { expect, test } from "vitest";
import type { Requirement, Setup } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { evaluateLot } from "~/rf/lot";
import { complies, verdictRank, worstVerdict } from "~/rf/verdict";
import { cut, item, sweepOf } from "./sweep-of";

const level = fc.double({ min: 0, max: 60, noNaN: true });

/** 12 samples on an uneven grid from 1 GHz up, losses from 0 to 60 dB. */
const sweeps = fc
  .record({
    steps: fc.array(fc.integer({ min: 1, max: 9 }), { minLength: 11, maxLength: 11 }),
    loss: fc.array(level, { minLength: 12, maxLength: 12 }),
    reverse: fc.array(level, { minLength: 12, maxLength: 12 }),
    returnLoss: fc.array(fc.double({ min: 0.1, max: 40, noNaN: true }), { minLength: 12, maxLength: 12 }),
  })
  .map(({ steps, ...columns }) => {
    const frequency = steps.reduce((grid, step) => [...grid, (grid.at(-1) as number) + step * 1e7], [1e9]);
    return { frequency, ...columns };
  });

const setups: fc.Arbitrary<Setup> = fc.record(
  {
    transmission: fc.double({ min: 0, max: 1, noNaN: true }),
    noiseFloor: fc.double({ min: 20, max: 100, noNaN: true }),
    directivity: fc.double({ min: 20, max: 50, noNaN: true }),
    sourceMatch: fc.double({ min: 15, max: 50, noNaN: true }),
    loadMatch: fc.double({ min: 15, max: 50, noNaN: true }),
    tracking: fc.double({ min: 0, max: 0.5, noNaN: true }),
  },
  { requiredKeys: [] },
);

const POINTWISE = ["insertion-loss", "rejection", "return-loss", "reverse-isolation"] as const;
const KINDS = [...POINTWISE, "ripple"] as const;

function lineOf(kind: (typeof KINDS)[number], band: readonly [number, number], limit: number): Requirement {
  switch (kind) {
    case "insertion-loss":
      return { id: kind, kind, band, max: limit };
    case "ripple":
      return { id: kind, kind, band, max: limit, window: 5e7 };
    case "return-loss":
      return { id: kind, kind, port: 1, band, min: limit };
    default:
      return { id: kind, kind, band, min: limit };
  }
}

/** A band within the sweep, from two shares of its width. */
function bandOf(frequency: readonly number[], shares: readonly [number, number]): [number, number] {
  const [low, high] = [frequency[0] as number, frequency.at(-1) as number];
  const edges = shares.map((share) => low + share * (high - low)).sort((a, b) => a - b);
  return [edges[0] as number, edges[1] as number];
}

const share = fc.double({ min: 0, max: 1, noNaN: true });
const shares = fc.tuple(share, share);
const kinds = fc.constantFrom(...KINDS);

test("tightening a limit never improves a verdict", () => {
  fc.assert(
    fc.property(
      sweeps,
      setups,
      kinds,
      shares,
      level,
      fc.double({ min: 0, max: 10, noNaN: true }),
      (text, setup, kind, edges, limit, step) => {
        const network = sweepOf(text);
        const band = bandOf(text.frequency, edges);
        const isMax = kind === "insertion-loss" || kind === "ripple";
        const tight = isMax ? Math.max(0, limit - step) : limit + step;
        const loose = item(evaluate(network, [lineOf(kind, band, limit)], { setup }));
        const tightened = item(evaluate(network, [lineOf(kind, band, tight)], { setup }));
        expect(verdictRank(tightened.verdict)).toBeLessThanOrEqual(verdictRank(loose.verdict));
      },
    ),
  );
});

test("widening an uncertainty never gains compliance under either rule", () => {
  const wider = (setup: Setup, by: number): Setup => ({
    transmission: (setup.transmission ?? 0) + by / 10,
    noiseFloor: Math.max(0, (setup.noiseFloor ?? 120) - by),
    directivity: Math.max(0, (setup.directivity ?? 60) - by),
    sourceMatch: Math.max(0, (setup.sourceMatch ?? 60) - by),
    loadMatch: Math.max(0, (setup.loadMatch ?? 60) - by),
    tracking: (setup.tracking ?? 0) + by / 20,
  });
  fc.assert(
    fc.property(
      sweeps,
      setups,
      kinds,
      shares,
      level,
      fc.double({ min: 0, max: 10, noNaN: true }),
      (text, setup, kind, edges, limit, by) => {
        const network = sweepOf(text);
        const line = lineOf(kind, bandOf(text.frequency, edges), limit);
        const before = item(evaluate(network, [line], { setup })).verdict;
        const after = item(evaluate(network, [line], { setup: wider(setup, by) })).verdict;
        for (const rule of ["simple", "guarded"] as const) {
          expect(complies(after, rule) && !complies(before, rule), `${before} became ${after}`).toBe(false);
        }
      },
    ),
  );
});

test("adding samples on the interpolated line changes nothing for point-wise kinds", () => {
  fc.assert(
    fc.property(
      sweeps,
      setups,
      fc.constantFrom(...POINTWISE),
      shares,
      level,
      // Not nearer to a sample than 1e-9 of the frequency: within that, two frequencies are one.
      fc.double({ min: 0.01, max: 0.99, noNaN: true }),
      (text, setup, kind, edges, limit, place) => {
        const between = (column: readonly number[]) =>
          column.flatMap((value, index) => {
            const next = column[index + 1];
            return next === undefined ? [value] : [value, value + place * (next - value)];
          });
        const dense = {
          frequency: [...new Set(between(text.frequency))],
          loss: between(text.loss),
          reverse: between(text.reverse),
          returnLoss: between(text.returnLoss),
        };
        fc.pre(dense.frequency.length === dense.loss.length);
        // The ends of a return loss hold a term of S21 S12 too and need not be least at a sample: its verdict is left out.
        const line = lineOf(kind, bandOf(text.frequency, edges), limit);
        const thin = item(evaluate(sweepOf(text), [line], { setup }));
        const thick = item(evaluate(sweepOf(dense), [line], { setup }));
        expect(Math.abs(thick.margin - thin.margin)).toBeLessThan(1e-8);
        expect(Math.abs(thick.value - thin.value)).toBeLessThan(1e-8);
        if (kind !== "return-loss") expect(thick.verdict).toBe(thin.verdict);
      },
    ),
  );
});

test("splitting a band gives the worse of its halves", () => {
  fc.assert(
    fc.property(
      sweeps,
      setups,
      fc.constantFrom(...POINTWISE),
      shares,
      share,
      level,
      (text, setup, kind, edges, place, limit) => {
        const network = sweepOf(text);
        const [from, to] = bandOf(text.frequency, edges);
        const middle = from + place * (to - from);
        const line = (band: [number, number]) => lineOf(kind, band, limit);
        const over = (band: [number, number]) => item(evaluate(network, [line(band)], { setup }));
        const [whole, low, high] = [over([from, to]), over([from, middle]), over([middle, to])];
        const least = Math.min(low.margin, high.margin);
        // The dividing line adds one interpolated point, whose reading lies between its neighbours'.
        expect(whole.margin).toBeLessThanOrEqual(least + 1e-9);
        expect(least).toBeLessThanOrEqual(whole.margin + 1e-9);
        if (kind !== "return-loss") expect(whole.verdict).toBe(worstVerdict([low.verdict, high.verdict]));
      },
    ),
  );
});

test("two sweeps cut from one at a shared sample give what the whole gives", () => {
  fc.assert(
    fc.property(
      sweeps,
      setups,
      fc.constantFrom(...POINTWISE),
      shares,
      level,
      fc.integer({ min: 1, max: 10 }),
      (text, setup, kind, edges, limit, at) => {
        const network = sweepOf(text);
        const line = lineOf(kind, bandOf(text.frequency, edges), limit);
        const lot = (sweeps: { id: string; network: typeof network }[]) =>
          item(
            item(
              evaluateLot(
                [{ unit: "1", temperature: 25, sweeps: sweeps.map((sweep) => ({ ...sweep, setup })) }],
                [line],
              ),
            ).cells,
          );
        const whole = lot([{ id: "whole", network }]).result;
        const { result, sweepId } = lot([
          { id: "low", network: cut(network, 0, at) },
          { id: "high", network: cut(network, at, 11) },
        ]);
        expect(result.verdict).toBe(whole.verdict);
        expect(result.frequency).toBeCloseTo(whole.frequency, 3);
        expect(result.margin).toBeCloseTo(whole.margin, 9);
        expect(result.marginInterval[0]).toBeCloseTo(whole.marginInterval[0], 9);
        expect(["low", "high"]).toContain(sweepId);
        expect(result.covered).toBeUndefined();
      },
    ),
  );
});

test("a margin lies within its ends, and a value within its own", () => {
  fc.assert(
    fc.property(sweeps, setups, kinds, shares, level, (text, setup, kind, edges, limit) => {
      const line = lineOf(kind, bandOf(text.frequency, edges), limit);
      const { value, interval, margin, marginInterval } = item(evaluate(sweepOf(text), [line], { setup }));
      expect(interval[0]).toBeLessThanOrEqual(value + 1e-9);
      expect(interval[1]).toBeGreaterThanOrEqual(value - 1e-9);
      expect(marginInterval[0]).toBeLessThanOrEqual(margin + 1e-9);
      expect(marginInterval[1]).toBeGreaterThanOrEqual(margin - 1e-9);
    }),
  );
});

test("scaling frequency by a factor divides delays and their variation by it", () => {
  const phaseSteps = fc.array(fc.double({ min: -170, max: 170, noNaN: true }), { minLength: 11, maxLength: 11 });
  const factor = fc.double({ min: -3, max: 3, noNaN: true }).map((exponent) => 10 ** exponent);
  const width = fc.option(fc.double({ min: 1e6, max: 2e8, noNaN: true }), { nil: undefined });
  const kind = fc.constantFrom("group-delay", "group-delay-variation");
  fc.assert(
    fc.property(
      sweeps,
      phaseSteps,
      factor,
      kind,
      shares,
      width,
      width,
      (text, steps, by, kind, edges, aperture, window) => {
        const phase = steps.reduce((grid, step) => [...grid, (grid.at(-1) as number) + step], [0]);
        const [from, to] = bandOf(text.frequency, edges);
        const lineAt = (scale: number): Requirement => ({
          ...{ id: "1", kind, band: [from * scale, to * scale], max: 1e-6 / scale },
          ...(aperture !== undefined && { aperture: aperture * scale }),
          ...(window !== undefined && kind === "group-delay-variation" && { window: window * scale }),
        });
        const networkAt = (scale: number) =>
          sweepOf({ ...text, phase, frequency: text.frequency.map((hz) => hz * scale) });
        const one = item(evaluate(networkAt(1), [lineAt(1)]));
        const scaled = item(evaluate(networkAt(by), [lineAt(by)]));
        expect(Number.isNaN(scaled.value)).toBe(Number.isNaN(one.value));
        // 170 degrees in 10 MHz are 47 ns: what the values are rounded against.
        if (!Number.isNaN(one.value)) expect(Math.abs(scaled.value * by - one.value)).toBeLessThan(1e-9 * 47e-9);
      },
    ),
  );
});
