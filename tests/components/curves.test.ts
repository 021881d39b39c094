// What the sheet of curves looks at, and which delay limits stand in its plot.
import { expect, test } from "vitest";
import type { ComplianceLine } from "~/components/compliance-words";
import { chosenCurves, lineOfKind } from "~/components/curves-chosen";
import { delayPanel } from "~/components/curves-delay-panel";
import { hasMarginCurve } from "~/components/curves-margin";
import { reportedPoints, unscoredWords } from "~/components/curves-words";
import { readCurvesQuery } from "~/forms/curves";
import type { Cell, RequirementDefinition, Verdict } from "~/rf/index";

const cell = (unit: string, temperature: number, verdict: Verdict, scored = true): Cell => ({
  unit,
  temperature,
  sweepId: "sweep",
  predicted: false,
  scored,
  result: {
    id: "",
    verdict,
    value: 1,
    frequency: 1.98e9,
    limit: 1.2,
    margin: 0.2,
    interval: [0.9, 1.1],
    marginInterval: [0.1, 0.3],
    decidingFrequency: 1.98e9,
  },
});

const line = (lineNumber: string, definition: RequirementDefinition, cells: readonly Cell[]): ComplianceLine => ({
  lineKey: `key ${lineNumber}`,
  lineNumber,
  definition,
  verdict: "pass",
  unit: cells[0]?.unit ?? null,
  temperature: cells[0]?.temperature ?? null,
  creditedMargin: 1,
  cells,
  reason: null,
  declaration: null,
});

const PASSBAND = [1.92e9, 1.98e9] as const;
const loss = line("2.1", { kind: "insertion-loss", band: PASSBAND, max: 1.2 }, [
  cell("U-1", 25, "pass"),
  cell("U-2", 70, "fail"),
]);
const ripple = line("2.2", { kind: "ripple", band: PASSBAND, max: 0.8 }, [
  cell("U-1", 25, "conditional-pass"),
  cell("U-2", 70, "conditional-fail", false),
]);
const declared = line("6.1", { kind: "declared", name: "Power", limit: "20 W" }, []);
const results = {
  lines: [loss, ripple, declared],
  units: [
    { unit: "U-1", temperatures: [{ celsius: 25, predicted: false }] },
    {
      unit: "U-2",
      temperatures: [
        { celsius: 70, predicted: false },
        { celsius: 85, predicted: true },
      ],
    },
  ],
  worstLineKey: loss.lineKey,
};

const query = (search: string) => readCurvesQuery(new URLSearchParams(search));

test("without an address the measurement and the line that decide are looked at", () => {
  const chosen = chosenCurves(results, query(""));
  expect(chosen).toMatchObject({ place: { unit: "U-1", celsius: 25 }, isNearest: false });
  expect(chosen?.selected?.line).toBe(loss);
  expect(chosen?.lines.map((placed) => placed.line.lineNumber)).toEqual(["2.1", "2.2"]);
});

test("an address names unit, temperature and line; a temperature that was only predicted leads to the nearest measured", () => {
  const chosen = chosenCurves(results, query("unit=U-2&temperature=85&line=2.2"));
  expect(chosen).toMatchObject({ place: { unit: "U-2", celsius: 70 }, isNearest: true });
  expect(chosen?.selected?.line).toBe(ripple);
  expect(chosenCurves(results, query("unit=U-9&temperature=85"))?.place).toEqual({ unit: "U-1", celsius: 25 });
  expect(chosenCurves({ ...results, units: [] }, query(""))).toBeNull();
});

test("the selected line stands first among the points, then what does not pass; what is not asked there is named", () => {
  const chosen = chosenCurves(results, query("unit=U-1&temperature=25&line=2.1"));
  if (!chosen) throw new Error("nothing chosen");
  expect(reportedPoints(chosen.lines, chosen.selected).map(({ lineNumber }) => lineNumber)).toEqual(["2.1", "2.2"]);
  const hot = chosenCurves(results, query("unit=U-2&temperature=70"));
  expect(unscoredWords(hot?.lines ?? [])).toBe("Line 2.2 is not asked at this temperature and not drawn");
});

test("a margin is drawn of the selected line where it has one at each frequency, else of the first that has", () => {
  const chosen = chosenCurves(results, query("unit=U-1&temperature=25&line=2.2"));
  expect(chosen && lineOfKind(chosen, hasMarginCurve)?.line).toBe(loss);
});

const data = {
  aperture: [1e6, 1e6] as const,
  uncertainty: null,
  stretches: [{ sweepId: "a", frequency: [1.9e9, 1.95e9, 2e9], delay: [50e-9, 20e-9, 60e-9] }],
};
const variation = { id: "v", lineNumber: "5.2", kind: "group-delay-variation", band: PASSBAND, max: 20e-9 } as const;

test("a largest delay is a wall at its limit, a variation one above the least delay of its band", () => {
  const largest = { id: "d", lineNumber: "5.1", kind: "group-delay", band: PASSBAND, max: 45e-9 } as const;
  const { walls } = delayPanel(data, [largest, variation], undefined);
  expect(walls?.map(({ lineNumber, side }) => [lineNumber, side])).toEqual([
    ["5.1", "above"],
    ["5.2", "above"],
  ]);
  // Least delay 20 ns at 1.95 GHz.
  expect(walls?.[0]?.limit).toBeCloseTo(45, 9);
  expect(walls?.[1]?.limit).toBeCloseTo(40, 9);
});

test("a variation in a sliding window, over another aperture or of several sweeps is no wall", () => {
  const wallsOf = (one: Parameters<typeof delayPanel>[1][number], from = data) =>
    delayPanel(from, [one], undefined).walls ?? [];
  expect(wallsOf(variation)).toHaveLength(1);
  expect(wallsOf({ ...variation, window: 1e7 })).toEqual([]);
  expect(wallsOf({ ...variation, aperture: 2e6 })).toEqual([]);
  const stretches = [...data.stretches, ...data.stretches.map((stretch) => ({ ...stretch, sweepId: "b" }))];
  expect(wallsOf(variation, { ...data, stretches })).toEqual([]);
});
