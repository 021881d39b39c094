// Plots of values against frequency: axis, wall, stretches below zero, marks, readout and table; windows moved and stretched.
import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";
import { TwoScaleFigure } from "~/charts/two-scale-figure";
import { ValueFigure } from "~/charts/value-figure";
import { composeValuePlot, type ValuePanel } from "~/charts/value-plot";
import { valueColumns, valueReadout } from "~/charts/value-reading";
import { createValueScale } from "~/charts/value-scale";
import { wallsFromRequirements } from "~/charts/walls";
import { moveEnd, moveWindow, roundedWindow } from "~/charts/zoom";
import { requirements, single, worstPoints } from "../screens/charts/invented";

const full = [1e9, 2e9] as const;

const margin: ValuePanel = {
  id: "margin",
  title: "Margin, dB",
  series: [{ id: "a", label: "Margin", frequency: [1e9, 1.5e9, 2e9], value: [2, -1, Infinity] }],
  bands: [{ frequency: [1e9, 1.5e9, 2e9], lower: [1.8, -1.2, 5], upper: [2.2, -0.8, Infinity] }],
  walls: [{ id: "line", lineNumber: "2.1", band: full, limit: 0, side: "below" }],
  marks: [
    {
      point: { lineNumber: "2.1", verdict: "fail", frequency: 1.5e9, value: 1.5, margin: -1, unit: "dB" },
      value: -1,
      interval: [-1.2, -0.8],
    },
  ],
  signs: [{ frequency: 1.5e9, label: "decided at 1.5000 GHz" }],
  extent: () => [-1.5, 2.5],
};

test("the axis grows upwards, ends on ticks, and holds what it was asked for", () => {
  const scale = createValueScale([-1.5, 2.5], [10, 310]);
  expect(scale.toPixel(2)).toBeLessThan(scale.toPixel(-1));
  expect(scale.bottom).toBeLessThanOrEqual(-1.5);
  expect(scale.ticks.map(({ label }) => label)).toContain("−1");
  expect(scale.toPixel(Infinity)).toBeLessThan(10);
  expect(scale.toPixel(-Infinity)).toBeGreaterThan(310);
  for (const extent of [
    [0, 0],
    [5, 5],
    [-1e-9, 1e-9],
    [0, 12_345],
  ] as const) {
    const { ticks } = createValueScale(extent, [0, 300]);
    expect(ticks.length).toBeGreaterThanOrEqual(2);
    expect(ticks.length).toBeLessThan(12);
  }
});

test("what runs below zero is cut at the crossing and drawn as failing; the mark stands there with its plate", () => {
  const { panels, listed } = composeValuePlot({ panels: [margin], full, height: 400, phone: false });
  const [panel] = panels;
  const zero = panel?.layout.level.toPixel(0) ?? NaN;
  expect(panel?.stretches).toHaveLength(1);
  const ends = [panel?.stretches[0]?.[0], panel?.stretches[0]?.at(-1)];
  // 2 to -1 passes zero two thirds of the way, at 1.3333 GHz; towards a null it crosses at once.
  expect(ends[0]?.y).toBeCloseTo(zero, 0);
  expect(panel?.marks[0]?.y).toBeGreaterThan(zero);
  expect(panel?.marks[0]?.plate).toBeDefined();
  expect(listed).toEqual([]);
  expect(panel?.walls[0]?.label).toBe("2.1");
});

test("readout and table tell the value and both ends, an infinite one by its word", () => {
  const format = (value: number) => (Number.isFinite(value) ? value.toFixed(1) : "infinite");
  expect(valueReadout([margin], 1.25e9, "dB", format)).toBe(
    "1.2500\u00a0GHz: Margin 0.5 dB, Lower end 0.3 dB, Upper end 0.7 dB",
  );
  expect(valueReadout([margin], 2e9, "dB", format)).toContain("Upper end infinite");
  expect(valueColumns([margin])[0]?.at(3e9)).toBeNaN();
});

test("with its data a figure is drawn whole by the server, table and picture; without it keeps its place", () => {
  const shared = { full, title: "Margin of line 2.1", description: "", unit: "dB", caption: null };
  const format = (value: number) => value.toFixed(2);
  const markup = renderToStaticMarkup(<ValueFigure {...shared} panels={[margin]} format={format} table />);
  expect(markup.match(/<svg role="img"/g)).toHaveLength(2);
  expect(markup).toContain("decided at 1.5000 GHz");
  expect(markup).toContain("<table");
  expect(markup).not.toContain("NaN");
  const waiting = renderToStaticMarkup(<ValueFigure {...shared} panels={undefined} format={format} />);
  expect(waiting).toContain('aria-busy="true"');
  expect(waiting).toContain("Loading curves");
});

test("both scales show walls and worst points; the wide one marks what is enlarged", () => {
  const walls = wallsFromRequirements(requirements);
  const markup = renderToStaticMarkup(
    <TwoScaleFigure walls={walls} traces={single} worstPoints={worstPoints} title="Curves" />,
  );
  expect(markup.match(/<svg role="img"/g)).toHaveLength(4);
  expect(markup).toContain("Curves, wide view");
  // 1.92 to 1.98 GHz with a width of it on either side.
  expect(markup).toContain('aria-valuetext="1.8600 to 2.0400\u00a0GHz"');
  expect(markup.split(">3.3</text>").length - 1).toBe(4);
  expect(markup.match(/aria-label="(Lower end of the p|Upper end of the p|P)art shown enlarged"/g)).toHaveLength(6);
});

test("a window moves within the whole and keeps its width; an end stops before the other", () => {
  expect(moveWindow([1.2e9, 1.4e9], 1e9, full)).toEqual([1.8e9, 2e9]);
  expect(moveWindow([1.2e9, 1.4e9], -1e9, full)).toEqual([1e9, 1.2e9]);
  expect(moveEnd([1.2e9, 1.4e9], "lower", 1e9, full)).toEqual([1.4e9 - 2e6, 1.4e9]);
  expect(moveEnd([1.2e9, 1.4e9], "upper", -1e9, full)).toEqual([1.2e9, 1.2e9 + 2e6]);
  expect(moveEnd([1.2e9, 1.4e9], "upper", 9e9, full)).toEqual([1.2e9, 2e9]);
  expect(roundedWindow([1.23456789e9, 1.33456789e9])).toEqual([1.2346e9, 1.3346e9]);
});
