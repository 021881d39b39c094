// Everything a drawing shows, computed: walls, curves, stretches inside walls, names, rings and plates, in px.
import { ENVELOPE_COLUMN, envelopeOf, estimateTextWidth, type Envelope } from "./boxes";
import { sliver, stretchesInside } from "./inside-wall";
import { layoutDrawing, panelOf, tracePoints, type Box, type DrawingLayout, type PanelLayout } from "./layout";
import { limitOutline, type Point } from "./limit-outline";
import { placeNames, placePlates } from "./plates";
import type { DrawingProps, TraceSeries, WorstPoint } from "./types";
import { wallShapes, withLevel, type Pixel, type WallShape } from "./wall-shape";
import { valuePhrase, verdictPhrase } from "./words";

/** Plates on one drawing. */
const MOST_PLATES = 3;

/** How a curve is drawn. */
export interface LineStyle {
  readonly colour: "ink" | "signal" | "quiet" | "edge";
  readonly width: number;
  readonly dashes?: string;
}

export interface Curve {
  readonly series: Pick<TraceSeries, "id" | "label" | "emphasis">;
  readonly points: readonly Pixel[];
  readonly style: LineStyle;
  /** Where its name stands; absent for the thin lines behind, and where there is no room. */
  readonly name?: Box;
}

export interface Mark {
  readonly point: WorstPoint;
  readonly x: number;
  readonly y: number;
  /** px of the interval's ends, upper first. */
  readonly whisker?: readonly [number, number];
  readonly plate?: Box;
}

/** An upright line at a frequency, with a word over the frame. */
export interface FrequencySign {
  readonly x: number;
  readonly label: string;
}

export interface PanelScene {
  readonly layout: PanelLayout;
  /** Closed outlines of uncertainty bands, under the curves. */
  readonly areas?: readonly (readonly Pixel[])[];
  readonly signs?: readonly FrequencySign[];
  readonly walls: readonly WallShape[];
  readonly curves: readonly Curve[];
  readonly stretches: readonly (readonly Pixel[])[];
  readonly slivers: readonly (readonly Pixel[])[];
  readonly marks: readonly Mark[];
}

export interface DrawingScene {
  readonly layout: DrawingLayout;
  readonly panels: readonly PanelScene[];
  /** Points without a plate, told in the list. */
  readonly listed: readonly WorstPoint[];
}

export const SERIES_STYLES: readonly LineStyle[] = [
  { colour: "ink", width: 1.75 },
  { colour: "signal", width: 1.75, dashes: "7 3" },
  { colour: "quiet", width: 1.75, dashes: "14 3 2 3" },
  { colour: "ink", width: 1.75, dashes: "2 4" },
];
const OTHER_STYLE: LineStyle = { colour: "edge", width: 1 };

/** Composes a drawing; pure, the same on the server and in the browser. */
export function composeDrawing(props: DrawingProps): DrawingScene {
  const layout = layoutDrawing(props);
  const isPlated = !layout.phone && !props.compact;
  const candidates = (props.worstPoints ?? []).filter((point) => point.panel && isReached(point)).slice(0, MOST_PLATES);
  const panels = layout.panels.map((panel) => composePanel(panel, layout, props, isPlated ? candidates : []));
  const plated = new Set(panels.flatMap((panel) => panel.marks.filter((mark) => mark.plate).map((mark) => mark.point)));
  return { layout, panels, listed: (props.worstPoints ?? []).filter((point) => !plated.has(point)) };
}

function composePanel(
  panel: PanelLayout,
  layout: DrawingLayout,
  props: DrawingProps,
  plated: readonly WorstPoint[],
): PanelScene {
  const curves = curvesOf(panel, layout, props.traces ?? []);
  const envelopes = curves.map((curve) => envelopeOf(curve.points, layout.width));
  const walls = wallShapes(layout, panel, envelopes);
  const pills = walls.flatMap((wall) => (wall.pill ? [wall.pill] : []));
  const cuts = cutsOf(panel, layout, props.traces ?? []);
  const marks = placeMarks(marksOf(panel, layout, props.worstPoints ?? []), plated, panel, {
    boxes: pills,
    curves: envelopes,
  });
  const taken = [...pills, ...marks.flatMap((mark) => (mark.plate ? [mark.plate] : []))];
  return { layout: panel, walls, curves: nameCurves(curves, envelopes, walls, taken, panel, layout), marks, ...cuts };
}

function curvesOf(panel: PanelLayout, layout: DrawingLayout, traces: readonly TraceSeries[]): Curve[] {
  const here = traces.filter((trace) => panelOf(trace.parameter) === panel.panel && trace.frequency.length > 0);
  const many = here.some((trace) => trace.emphasis === "other");
  const reported = here.filter((trace) => trace.emphasis === "worst");
  // The sweeps of one measurement bear one label, and are drawn as one curve.
  const labels = [...new Set(reported.map(({ label }) => label))];
  // Thin lines first: the reported ones lie over them.
  return [...here.filter((trace) => trace.emphasis === "other"), ...reported].map((series) => ({
    series,
    points: toPixels(visiblePoints(tracePoints(series), layout), panel, layout),
    style: series.emphasis === "other" ? OTHER_STYLE : seriesStyle(labels.indexOf(series.label), many),
  }));
}

function seriesStyle(index: number, many: boolean): LineStyle {
  const style = SERIES_STYLES[index] ?? OTHER_STYLE;
  return many ? { ...style, width: 2 } : style;
}

/** The points within the window, and one beyond on either side. */
export function visiblePoints(points: readonly Point[], { window }: Pick<DrawingLayout, "window">): Point[] {
  return points.filter((point, index) => {
    const before = points[index - 1]?.[0] ?? point[0];
    const after = points[index + 1]?.[0] ?? point[0];
    return after >= window[0] && before <= window[1];
  });
}

function toPixels(points: readonly Point[], panel: PanelLayout, layout: DrawingLayout): Pixel[] {
  const bend = panel.level.breakLevel;
  const bent = bend === undefined ? points : withLevel(points, bend);
  return bent.map(([frequency, level]) => ({ x: tenth(layout.toX(frequency)), y: tenth(panel.level.toPixel(level)) }));
}

const tenth = (value: number) => Math.round(value * 10) / 10;

function cutsOf(panel: PanelLayout, layout: DrawingLayout, traces: readonly TraceSeries[]) {
  const stretches: Pixel[][] = [];
  const slivers: Pixel[][] = [];
  for (const wall of layout.walls.filter((candidate) => candidate.panel === panel.panel)) {
    const outline = limitOutline(wall.limit, wall.band);
    for (const trace of traces.filter((series) => wall.parameters.includes(series.parameter))) {
      for (const stretch of stretchesInside(tracePoints(trace), outline, wall.side)) {
        const points = visiblePoints(stretch.points, layout);
        if (points.length < 2) continue;
        stretches.push(toPixels(points, panel, layout));
        slivers.push(toPixels(sliver(stretch), panel, layout));
      }
    }
  }
  return { stretches, slivers };
}

function marksOf(panel: PanelLayout, layout: DrawingLayout, points: readonly WorstPoint[]): Mark[] {
  return points
    .filter((point) => point.panel === panel.panel && isReached(point))
    .filter(({ frequency }) => frequency >= layout.window[0] && frequency <= layout.window[1])
    .map((point) => {
      const wall = layout.walls.find((candidate) => candidate.lineNumbers.includes(point.lineNumber));
      const toY = (value: number) =>
        Math.min(Math.max(panel.level.toPixel(value + (wall?.reference ?? 0)), panel.top), panel.bottom);
      return {
        point,
        x: layout.toX(point.frequency),
        y: toY(point.value),
        ...(point.interval ? { whisker: [toY(point.interval[0]), toY(point.interval[1])] as const } : {}),
      };
    });
}

export function placeMarks(
  marks: readonly Mark[],
  plated: readonly WorstPoint[],
  panel: PanelLayout,
  obstacles: { readonly boxes: readonly Box[]; readonly curves: readonly Envelope[] },
): Mark[] {
  const bounds = { left: panel.left + 6, right: panel.right - 6, top: panel.top + 6, bottom: panel.bottom - 6 };
  const wanted = marks.filter((mark) => plated.includes(mark.point));
  const places = placePlates(
    wanted.map((mark) => ({ x: mark.x, y: mark.y, width: plateWidth(mark.point), bounds })),
    obstacles,
  );
  return marks.map((mark) => {
    const plate = places[wanted.indexOf(mark)];
    return plate ? { ...mark, plate } : mark;
  });
}

/** Whether a point has a place on a drawing. */
export function isReached(point: WorstPoint): boolean {
  return Number.isFinite(point.frequency) && Number.isFinite(point.value);
}

function plateWidth(point: WorstPoint): number {
  const phrase = estimateTextWidth(verdictPhrase(point), 12, 650) + 22;
  return Math.ceil(Math.max(phrase, estimateTextWidth(valuePhrase(point), 12)) + 24);
}

const isNamedAs = (one: Curve["series"], other: Curve["series"]): boolean =>
  one.label === other.label && one.emphasis === other.emphasis;

/** Gives the reported curves their names, where there is room. */
export function nameCurves(
  curves: readonly Curve[],
  envelopes: readonly Envelope[],
  walls: readonly WallShape[],
  taken: readonly Box[],
  panel: PanelLayout,
  layout: Pick<DrawingLayout, "width">,
  others: readonly Envelope[] = [],
): Curve[] {
  const areas = walls.flatMap((wall) => wall.parts.map((part) => envelopeOf(part.area, layout.width)));
  const bounds = { left: panel.left + 4, right: panel.right - 4, top: panel.top + 4, bottom: panel.bottom - 4 };
  const reported = curves.flatMap((curve, index) => {
    const envelope = envelopes[index];
    const isFirst = curves.findIndex(({ series }) => isNamedAs(series, curve.series)) === index;
    return isFirst && curve.series.emphasis === "worst" && envelope ? [{ curve, envelope }] : [];
  });
  const places = placeNames(
    reported.map(({ curve, envelope }) => ({
      width: estimateTextWidth(curve.series.label, 12, 600) + 4,
      bounds,
      curve: envelope,
      column: ENVELOPE_COLUMN,
    })),
    { boxes: taken, curves: [...envelopes, ...areas, ...others] },
  );
  return curves.map((curve) => {
    const name = places[reported.findIndex((candidate) => candidate.curve === curve)];
    return name ? { ...curve, name } : curve;
  });
}
