// What holds for any sweep of the kinds that take more than one point: ripple, relative rejection, delay, phase, crossings.
import fc from "fast-check";
import { expect, test } from "vitest";
import type { Band, Requirement, Setup } from "~/rf/contract";
import { evaluate } from "~/rf/evaluate";
import { complies, verdictRank } from "~/rf/verdict";
import { item, sweepOf, type SweepText } from "./sweep-of";

const KINDS = [
  "ripple",
  "ripple-window",
  "relative-rejection",
  "group-delay",
  "group-delay-variation",
  "phase-linearity",
  "centre-frequency",
  "bandwidth-least",
  "bandwidth-most",
  "shape-factor",
] as const;
type Kind = (typeof KINDS)[number];
/** Kinds whose figure depends on the curve of |S21| alone. */
const LEVEL_KINDS = KINDS.filter((kind) => !kind.startsWith("group-delay") && kind !== "phase-linearity");

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const POINTS = 14;
/** dB, not a whole number of hundredths: no level runs along a flat stretch. */
const LEVEL = 6.0037;

/** Hundredths of a decibel: where neighbours differ by next to nothing, rounding alone decides where a level is crossed. */
const hundredths = (most: number) => fc.integer({ min: 0, max: most }).map((part) => part / 100);

/** 14 samples on an uneven grid from 1 GHz: losses with a valley of random depth, so that levels are crossed, and any phase. */
const sweeps = fc
  .record({
    steps: fc.array(fc.integer({ min: 1, max: 9 }), { minLength: POINTS - 1, maxLength: POINTS - 1 }),
    uneven: fc.array(hundredths(200), { minLength: POINTS, maxLength: POINTS }),
    turns: fc.array(number(-120, 120), { minLength: POINTS, maxLength: POINTS }),
    slope: hundredths(970),
    middle: fc.integer({ min: 3, max: POINTS - 4 }),
  })
  .map(({ steps, uneven, turns, slope, middle }): SweepText => {
    const frequency = steps.reduce((grid, step) => [...grid, (grid.at(-1) as number) + step * 1e7], [1e9]);
    const phase = turns.reduce<number[]>((sum, turn) => [...sum, (sum.at(-1) ?? 0) + turn], []);
    return { frequency, phase, loss: uneven.map((part, k) => part + slope * Math.abs(k - middle)) };
  });

const setups: fc.Arbitrary<Setup> = fc.record(
  {
    transmission: number(0, 0.5),
    transmissionRelative: number(0, 0.5),
    noiseFloor: number(40, 100),
    groupDelay: number(0, 5e-9),
    phase: number(0, 20),
  },
  { requiredKeys: [] },
);

/** Shares of the sweep's width in which bands lie, and of a kind's usual range in which its limit lies. */
const share = fc.integer({ min: 0, max: 1009 }).map((part) => part / 1009);
const places = fc.record({ edges: fc.tuple(share, share), beside: number(0, 0.8), limit: number(0, 1) });
type Places = typeof places extends fc.Arbitrary<infer Value> ? Value : never;

function bandsOf({ frequency }: SweepText, { edges, beside }: Places): { band: Band; relativeTo: Band } {
  const [low, high] = [frequency[0] as number, frequency.at(-1) as number];
  const at = (share: number) => low + share * (high - low);
  const [from, to] = [Math.min(...edges), Math.max(...edges)];
  return { band: [at(from), at(to)], relativeTo: [at(beside), at(beside + 0.2)] };
}

/** A line of a kind; `tight` from 0 (loose) to 1 moves its limit from one end of its range to the other. */
function lineOf(kind: Kind, text: SweepText, at: Places, tight: number): Requirement {
  const { band, relativeTo } = bandsOf(text, at);
  const upper = (range: number) => range * (1 - tight);
  switch (kind) {
    case "ripple":
      return { id: kind, kind, band, max: upper(60) };
    case "ripple-window":
      return { id: kind, kind: "ripple", band, max: upper(30), window: 1.3e8 };
    case "relative-rejection":
      return { id: kind, kind: "rejection", band, min: -40 + 80 * tight, relativeTo };
    case "group-delay":
      return { id: kind, kind, band, max: upper(6e-8) - 2e-8 };
    case "group-delay-variation":
      return { id: kind, kind, band, max: upper(6e-8) };
    case "phase-linearity":
      return { id: kind, kind, band, max: upper(300) };
    case "centre-frequency":
      return { id: kind, kind, level: LEVEL, nominal: 1.3e9, tolerance: upper(3e8) };
    case "bandwidth-least":
      return { id: kind, kind: "bandwidth", level: LEVEL, min: 1 + 5e8 * tight };
    case "bandwidth-most":
      return { id: kind, kind: "bandwidth", level: LEVEL, max: 1 + upper(5e8) };
    case "shape-factor":
      return { id: kind, kind, levels: [LEVEL / 2, 2 * LEVEL], max: 1 + upper(6) };
  }
}

/** The line's result; undefined where its limit would be malformed (none of a maximum below zero is). */
function resultOf(text: SweepText, line: Requirement, setup: Setup) {
  return item(evaluate(sweepOf(text), [line], { setup }));
}

const legal = (kind: Kind, tight: number) => kind !== "group-delay" || 6e-8 * (1 - tight) - 2e-8 > 0;

test("tightening a limit never improves a verdict, in any of these kinds", () => {
  fc.assert(
    fc.property(sweeps, setups, fc.constantFrom(...KINDS), places, number(0, 1), (text, setup, kind, at, more) => {
      const tight = at.limit + more * (1 - at.limit);
      fc.pre(legal(kind, tight));
      const loose = resultOf(text, lineOf(kind, text, at, at.limit), setup);
      const tightened = resultOf(text, lineOf(kind, text, at, tight), setup);
      expect(verdictRank(tightened.verdict)).toBeLessThanOrEqual(verdictRank(loose.verdict));
    }),
    { numRuns: 400 },
  );
});

test("widening an uncertainty never gains compliance under either rule, in any of these kinds", () => {
  // A stated relative uncertainty stays stated, an absent one stays absent: stating one changes what is taken, not only how much.
  const wider = (setup: Setup, by: number): Setup => ({
    transmission: (setup.transmission ?? 0) + by / 5,
    noiseFloor: Math.max(0, (setup.noiseFloor ?? 120) - 10 * by),
    groupDelay: (setup.groupDelay ?? 0) + by * 1e-9,
    phase: (setup.phase ?? 0) + by * 5,
    ...(setup.transmissionRelative === undefined ? {} : { transmissionRelative: setup.transmissionRelative + by / 5 }),
  });
  fc.assert(
    fc.property(sweeps, setups, fc.constantFrom(...KINDS), places, number(0, 3), (text, setup, kind, at, by) => {
      fc.pre(legal(kind, at.limit));
      const line = lineOf(kind, text, at, at.limit);
      const before = resultOf(text, line, setup).verdict;
      const after = resultOf(text, line, wider(setup, by)).verdict;
      for (const rule of ["simple", "guarded"] as const)
        expect(complies(after, rule) && !complies(before, rule), `${kind}: ${before} became ${after}`).toBe(false);
    }),
    { numRuns: 400 },
  );
});

test("adding samples on the interpolated line changes no figure of a kind without delay or phase", () => {
  fc.assert(
    fc.property(sweeps, fc.constantFrom(...LEVEL_KINDS), places, number(0.05, 0.95), (text, kind, at, place) => {
      const between = (column: readonly number[]) =>
        column.flatMap((value, index) => {
          const next = column[index + 1];
          return next === undefined ? [value] : [value, value + place * (next - value)];
        });
      const dense: SweepText = { frequency: between(text.frequency), loss: between(text.loss) };
      const line = lineOf(kind, text, at, at.limit);
      const thin = resultOf({ frequency: text.frequency, loss: text.loss }, line, {});
      const thick = resultOf(dense, line, {});
      expect(Number.isNaN(thick.value)).toBe(Number.isNaN(thin.value));
      if (Number.isNaN(thin.value)) return;
      // dB and ratios to 1e-8; frequencies to 1e-8 of a gigahertz, the rounding of a level between two samples.
      const scale = Math.max(1, Math.abs(thin.value));
      expect(Math.abs(thick.value - thin.value) / scale).toBeLessThan(1e-8);
      expect(Math.abs(thick.margin - thin.margin) / scale).toBeLessThan(1e-8);
    }),
    { numRuns: 400 },
  );
});

test("most random sweeps reach a figure: the properties speak of something", () => {
  for (const kind of KINDS) {
    const reached = fc
      .sample(fc.tuple(sweeps, places), { numRuns: 200, seed: 7 })
      .filter(([text, at]) => !Number.isNaN(resultOf(text, lineOf(kind, text, at, 0.3), {}).value));
    expect(reached.length, kind).toBeGreaterThan(50);
  }
});
