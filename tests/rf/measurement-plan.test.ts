// The measurement plan: the sweeps proposed for a specification, and what they ask of its lines.
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { evaluate, parseTouchstone, type Requirement, type Setup } from "~/rf/index";
import { leastPoints, MOST_PLANNED_SWEEPS, proposeSweeps, withPlannedSteps } from "~/rf/measurement-plan";
import { item, sweepOf } from "./sweep-of";

type WithoutId<R> = R extends { readonly id: string } ? Omit<R, "id"> : never;
const lines = (...definitions: WithoutId<Requirement>[]): Requirement[] =>
  definitions.map((definition, index) => ({ ...definition, id: String(index + 1) }));

const passband = [1.92e9, 1.98e9] as const;
const loss = { kind: "insertion-loss", band: passband, max: 1.2 } as const;
const rejection = (from: number, to: number) => ({ kind: "rejection", band: [from, to], min: 40 }) as const;

// The shares of a width, a hundredth in passbands and a tenth elsewhere, are common practice without a source; figures by hand.
test("a passband is swept in a hundredth of its width, all edges in a tenth of the narrowest other band", () => {
  const proposed = proposeSweeps(
    lines(
      loss,
      { kind: "ripple", band: passband, max: 0.8 },
      rejection(1.76e9, 1.87e9),
      rejection(1.87e9, 1.895e9),
      { kind: "rejection", band: [2.01e9, 2.03e9], min: 28, relativeTo: passband },
      { kind: "reverse-isolation", band: [2.06e9, 2.14e9], min: 50 },
      { kind: "return-loss", port: 1, band: passband, min: 15 },
    ),
  );
  expect(proposed).toEqual([
    { band: [1.76e9, 2.14e9], maxStep: 2e6 },
    { band: [1.92e9, 1.98e9], maxStep: 600e3 },
  ]);
  expect(proposed.map(leastPoints)).toEqual([191, 101]);
});

test("a specification of one passband asks for one sweep, two passbands for two, overlapping ones for the finer of both", () => {
  expect(proposeSweeps(lines(loss))).toEqual([{ band: passband, maxStep: 600e3 }]);
  const second = { kind: "ripple", band: [2.11e9, 2.17e9], max: 0.5 } as const;
  expect(proposeSweeps(lines(second, loss)).map(({ band }) => band)).toEqual([passband, [2.11e9, 2.17e9]]);
  const beside = { kind: "ripple", band: [1.97e9, 2.01e9], max: 0.5 } as const;
  expect(proposeSweeps(lines(loss, beside))).toEqual([{ band: [1.92e9, 2.01e9], maxStep: 400e3 }]);
});

test("a match over more than the passband is no passband of its own, one apart from all is", () => {
  const match = (from: number, to: number) => ({ kind: "return-loss", port: 1, band: [from, to], min: 15 }) as const;
  expect(proposeSweeps(lines(loss, match(1.9e9, 2e9)))).toEqual([
    { band: [1.9e9, 2e9], maxStep: 10e6 },
    { band: passband, maxStep: 600e3 },
  ]);
  expect(proposeSweeps(lines(loss, match(3e9, 3.1e9)))).toEqual([
    { band: passband, maxStep: 600e3 },
    { band: [3e9, 3.1e9], maxStep: 1e6 },
  ]);
});

test("a band from DC stays from DC, and the sweep over all reaches single frequencies and search bands", () => {
  const proposed = proposeSweeps(
    lines(loss, rejection(0, 1.8e9), rejection(3.9e9, 3.9e9), {
      kind: "bandwidth",
      level: 3,
      min: 60e6,
      within: [1.9e9, 4e9],
    }),
  );
  expect(proposed[0]).toEqual({ band: [0, 4e9], maxStep: 180e6 });
});

test("nothing is proposed where nothing has a width, and a passband no finer than the whole is part of it", () => {
  expect(proposeSweeps([])).toEqual([]);
  expect(proposeSweeps(lines(rejection(3e9, 3e9), { kind: "shape-factor", levels: [3, 30], max: 2 }))).toEqual([]);
  expect(proposeSweeps(lines(loss, rejection(2.1e9, 2.105e9)))).toEqual([{ band: [1.92e9, 2.105e9], maxStep: 500e3 }]);
});

test("a delay over an aperture is swept half an aperture beyond its band, so that a file that keeps to it is covered", () => {
  const delay = { kind: "group-delay", band: passband, max: 50e-9, aperture: 4e6 } as const;
  const [sweep] = proposeSweeps(lines(delay));
  expect(sweep).toEqual({ band: [1.918e9, 1.982e9], maxStep: 600e3 });
  const frequency = Array.from({ length: 108 }, (_, k) => 1.918e9 + k * 600e3);
  // A delay of 20 ns, written as phase: 360° × 20e-9 s for each hertz.
  const network = sweepOf({
    frequency,
    loss: frequency.map(() => 1),
    phase: frequency.map((hz) => -360 * 20e-9 * (hz - 1.918e9)),
  });
  const planned = withPlannedSteps(lines(delay), { sweeps: sweep ? [sweep] : [] });
  expect(item(evaluate(network, planned))).toMatchObject({ verdict: "pass" });
});

test("a plan never proposes more sweeps than it can hold", () => {
  const many = Array.from({ length: 30 }, (_, k) => ({ ...loss, band: [(k + 1) * 1e8, (k + 1) * 1e8 + 1e7] as const }));
  const proposed = proposeSweeps(lines(...many, rejection(5e9, 6e9)));
  expect(proposed.length).toBeLessThanOrEqual(MOST_PLANNED_SWEEPS);
  expect(proposed).toContainEqual({ band: [1e8, 3.01e9], maxStep: 1e5 });
});

test("a line takes the step of the narrowest sweep that holds its band, and keeps one of its own", () => {
  const sweeps = [
    { band: [1.76e9, 2.14e9], maxStep: 2e6 },
    { band: passband, maxStep: 600e3 },
  ] as const;
  const asked = withPlannedSteps(
    lines(loss, rejection(2e9, 2.1e9), { ...rejection(2e9, 2.1e9), maxStep: 1e5 }, rejection(3e9, 3.1e9)),
    { sweeps },
  );
  expect(asked.map(({ maxStep }) => maxStep)).toEqual([600e3, 2e6, 1e5, undefined]);
});

test("a band that only several sweeps hold takes the widest of their steps, one with a hole between them takes none", () => {
  const sweeps = [
    { band: [1e9, 1.5e9], maxStep: 1e6 },
    { band: [1.5e9, 2e9], maxStep: 3e6 },
    { band: [2.2e9, 3e9], maxStep: 5e6 },
  ] as const;
  const asked = withPlannedSteps(lines(rejection(1.4e9, 1.6e9), rejection(1.9e9, 2.3e9), rejection(0.9e9, 1.2e9)), {
    sweeps,
  });
  expect(asked.map(({ maxStep }) => maxStep)).toEqual([3e6, undefined, undefined]);
});

test("a sweep from the lowest test frequency holds a band from DC", () => {
  const sweeps = [{ band: [9e3, 2e9], maxStep: 1e6 }] as const;
  expect(item(withPlannedSteps(lines(rejection(0, 1.8e9)), { sweeps }, 9e3)).maxStep).toBe(1e6);
  expect(item(withPlannedSteps(lines(rejection(0, 1.8e9)), { sweeps })).maxStep).toBeUndefined();
});

test("the aperture of the plan is that of delay lines that state none, and of no other line", () => {
  const delay = { kind: "group-delay", band: passband, max: 50e-9 } as const;
  const asked = withPlannedSteps(lines(delay, { ...delay, aperture: 5e6 }, loss), { delayAperture: 1e6 });
  expect(asked).toEqual(lines({ ...delay, aperture: 1e6 }, { ...delay, aperture: 5e6 }, loss));
});

interface ScenarioFiles {
  readonly suppliers: readonly { readonly files: readonly { readonly path: string }[] }[];
}

test("the scenario's 19 files keep to the proposed plan: every figure stands as without it", () => {
  const read = (name: string): unknown => JSON.parse(readFileSync(`tests/reference/journey/${name}`, "utf8"));
  const { requirements, assumedSetup } = read("specification.json") as {
    requirements: Requirement[];
    assumedSetup: Setup;
  };
  const planned = withPlannedSteps(requirements, { sweeps: proposeSweeps(requirements) });
  expect(planned.every(({ maxStep }) => maxStep !== undefined)).toBe(true);
  const files = (read("expected.json") as ScenarioFiles).suppliers.flatMap((supplier) => supplier.files);
  expect(files).toHaveLength(19);
  for (const { path } of files) {
    const network = parseTouchstone(readFileSync(path), path);
    const options = { setup: assumedSetup };
    expect(evaluate(network, planned, options), path).toEqual(evaluate(network, requirements, options));
  }
});
