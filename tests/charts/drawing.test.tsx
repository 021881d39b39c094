// Proves what a drawing shows without script: walls, numbers, names, plates off the curves, and its words.
import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";
import { envelopeOf, meetsEnvelope, overlaps } from "~/charts/boxes";
import { DecisionStrip } from "~/charts/decision-strip";
import { Drawing } from "~/charts/drawing";
import { MarginStrip } from "~/charts/margin-strip";
import { composeDrawing } from "~/charts/scene";
import { stripPlace, valueScale } from "~/charts/strip-scale";
import { TraceFigure } from "~/charts/trace-figure";
import type { WorstPoint } from "~/charts/types";
import { wallsFromRequirements } from "~/charts/walls";
import { valuePhrase, verdictPhrase } from "~/charts/words";
import { many, requirements, single, worstPoints } from "../screens/charts/invented";

const walls = wallsFromRequirements(requirements);

test("the server draws both variants with every line number, named for those who cannot see them", () => {
  const markup = renderToStaticMarkup(<Drawing walls={walls} title="Drawing of an invented specification" />);
  expect(markup.match(/<svg role="img"/g)).toHaveLength(2);
  for (const number of ["2.1", "3.1", "3.2", "3.3", "3.4", "4.1, 4.2"])
    expect(markup.split(`>${number}</text>`).length, number).toBeGreaterThanOrEqual(3);
  expect(markup).toContain("line 2.1 loss at most 0.95 dB");
  expect(markup).toContain("passband part stretched, 0 to 2 dB");
  expect(markup).not.toContain("<mask");
  expect(markup).not.toContain("NaN");
});

test("plates keep off curves, numbers and one another, and what has none is listed", () => {
  for (const traces of [single, many]) {
    const scene = composeDrawing({ walls, traces, worstPoints, title: "" });
    const plates = scene.panels.flatMap((panel) =>
      panel.marks.flatMap((mark) => (mark.plate ? [{ panel, plate: mark.plate }] : [])),
    );
    expect(plates.length).toBe(2);
    for (const { panel, plate } of plates) {
      for (const curve of panel.curves) expect(meetsEnvelope(plate, envelopeOf(curve.points, 860), 1)).toBe(false);
      for (const wall of panel.walls) if (wall.pill) expect(overlaps(plate, wall.pill)).toBe(false);
    }
    expect(scene.listed.map((point) => point.lineNumber)).toEqual(["2.2"]);
  }
});

test("three plates at most, and on phones none: there every point is listed", () => {
  const five = Array.from({ length: 5 }, (_, index): WorstPoint => {
    return {
      lineNumber: `3.${index}`,
      verdict: "pass",
      frequency: 1.8e9 + index * 2e7,
      value: 56,
      margin: 1,
      unit: "dB",
      panel: "transmission",
    };
  });
  const desk = composeDrawing({ walls, worstPoints: five, title: "" });
  expect(desk.panels.flatMap((panel) => panel.marks.filter((mark) => mark.plate))).toHaveLength(3);
  expect(desk.listed).toHaveLength(2);
  expect(composeDrawing({ walls, worstPoints: five, title: "", phone: true }).listed).toHaveLength(5);
});

test("the curve's part inside a wall is drawn again as a stretch with its sliver", () => {
  const scene = composeDrawing({ walls, traces: single, title: "" });
  const panel = scene.panels[0];
  const right = scene.layout.toX(1.98e9);
  const ends = panel?.stretches.map((points) => points.at(-1)?.x ?? 0) ?? [];
  expect(ends.some((x) => Math.abs(x - right) < 0.1)).toBe(true);
  expect(panel?.slivers).toHaveLength(panel?.stretches.length ?? -1);
});

test("a figure stands with its walls while the curves are on their way, and takes no readout yet", () => {
  const markup = renderToStaticMarkup(<TraceFigure walls={walls} title="Measured traces" />);
  expect(markup).toContain("Loading curves");
  expect(markup).toContain(">3.2</text>");
  expect(markup).not.toContain('role="slider"');
});

test("phrases tell verdict, value, interval and place, and a failing value never reads as its limit", () => {
  const point: WorstPoint = {
    lineNumber: "2.1",
    verdict: "fail",
    frequency: 1.98e9,
    value: 0.9501,
    margin: -0.0001,
    unit: "dB",
    limit: 0.95,
  };
  expect(verdictPhrase(point)).toBe("2.1 fails by 0.0001 dB");
  expect(valuePhrase(point)).toMatch(/^0\.9501 dB at 1\.9800\sGHz$/);
  expect(valuePhrase({ ...point, value: 1.01, margin: -0.06, interval: [0.96, 1.06] })).toMatch(/^1\.01 ± 0\.05 dB at/);
  expect(valuePhrase({ ...point, value: 16.4, margin: 0.4, interval: [15.7, 17.2], limit: 16 })).toMatch(
    /^16\.4 dB \(15\.7 to 17\.2\) at/,
  );
  expect(verdictPhrase({ ...point, verdict: "conditional-pass", margin: 0.06 })).toBe(
    "2.1 passes conditionally, +0.06 dB",
  );
  expect(valuePhrase({ ...point, value: Number.NaN })).toBe("no value");
});

test("a margin beyond the scale stands at its end as a chevron", () => {
  expect(stripPlace(-40, [-12, 22], 240)).toEqual({ x: 10, beyond: "left" });
  expect(stripPlace(48, [-12, 22], 240)).toEqual({ x: 230, beyond: "right" });
  expect(stripPlace(5, [-12, 22], 240)).toEqual({ x: 120 });
  expect(stripPlace(Infinity, [-12, 22], 240).beyond).toBe("right");
});

test("the strips say in words what they show", () => {
  const margins = [
    { lineNumber: "2.1", margin: -6.3, verdict: "fail" as const },
    { lineNumber: "3.1", margin: 5, verdict: "pass" as const },
  ];
  const strip = renderToStaticMarkup(<MarginStrip margins={margins} unit="% of limit" label="Tolvane Filters" />);
  expect(strip).toContain("Tolvane Filters: 2 lines, least margin line 2.1 −6.3 % of limit, fail");
  const decision = renderToStaticMarkup(
    <DecisionStrip
      value={1.012}
      interval={[0.962, 1.062]}
      limit={0.95}
      sense="max"
      verdict="fail"
      unit="dB"
      label="Line 2.1"
    />,
  );
  expect(decision).toContain("Line 2.1: 1.01 ± 0.05 dB, max 0.95 dB, fail");
});

test("a decision's scale holds limit, value and interval between round ends", () => {
  const scale = valueScale(0.95, 1.012, [0.962, 1.062]);
  expect(scale.from).toBeLessThan(0.95);
  expect(scale.to).toBeGreaterThan(1.062);
  expect(scale.decimals).toBe(2);
  expect(valueScale(55, 61, [59, Infinity]).ticks.every(Number.isFinite)).toBe(true);
});
