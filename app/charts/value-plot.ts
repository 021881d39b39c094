// A plot of values against frequency in the drawing's manner: panels, walls, uncertainty bands, marks, computed in px.
import type { Band } from "~/rf/index";
import { envelopeOf } from "./boxes";
import { sliver, stretchesInside } from "./inside-wall";
import {
  DESK_WIDTH,
  frequencyAxis,
  marginsOf,
  PHONE_WIDTH,
  type DrawingLayout,
  type DrawnWall,
  type PanelLayout,
} from "./layout";
import { limitOutline, type Point } from "./limit-outline";
import {
  isReached,
  nameCurves,
  placeMarks,
  SERIES_STYLES,
  visiblePoints,
  type Curve,
  type DrawingScene,
  type Mark,
  type PanelScene,
} from "./scene";
import type { WorstPoint } from "./types";
import { createValueScale } from "./value-scale";
import { wallShapes, type Pixel } from "./wall-shape";

/** One curve; a NaN breaks its line, an infinity runs off the panel. */
export interface ValueSeries {
  readonly id: string;
  /** Named at its line; those of one name are drawn alike, the name once. */
  readonly label: string;
  /** Hz, ascending. */
  readonly frequency: readonly number[];
  readonly value: readonly number[];
}

export interface ValueBand {
  /** Hz, ascending. */
  readonly frequency: readonly number[];
  readonly lower: readonly number[];
  readonly upper: readonly number[];
}

export interface ValueWall {
  readonly id: string;
  readonly lineNumber: string;
  readonly band: Band;
  readonly limit: number;
  /** Where the wall is: below a least value, above a largest one. */
  readonly side: "below" | "above";
}

/** A reported point, drawn at `value` of the axis; its plate says what the point says. */
export interface ValueMark {
  readonly point: WorstPoint;
  readonly value: number;
  readonly interval: readonly [number, number];
}

export interface ValuePanel {
  readonly id: string;
  /** Beside the axis, "Margin, dB". */
  readonly title: string;
  /** Added to the names of its curves in readout and table where two panels show the like. */
  readonly columnSuffix?: string;
  readonly series: readonly ValueSeries[];
  readonly bands?: readonly ValueBand[];
  readonly walls?: readonly ValueWall[];
  readonly marks?: readonly ValueMark[];
  readonly signs?: readonly { readonly frequency: number; readonly label: string }[];
  /** Least and most value the axis has to show while this window is. */
  readonly extent: (window: Band) => readonly [number, number];
}

export interface ValuePlotProps {
  readonly panels: readonly ValuePanel[];
  /** Hz that the curves span. */
  readonly full: Band;
  readonly window?: Band | undefined;
  readonly passbands?: readonly Band[] | undefined;
  readonly width?: number | undefined;
  readonly height: number;
  readonly phone: boolean;
}

const PANEL_GAP = { desk: 26, phone: 34 };

/** Composes a plot; pure, the same on the server and in the browser. */
export function composeValuePlot(props: ValuePlotProps): DrawingScene {
  const layout = layoutOf(props);
  const panels = props.panels.flatMap((panel, index) => {
    const place = layout.panels[index];
    return place ? [composePanel(panel, place, layout)] : [];
  });
  const plated = new Set(panels.flatMap(({ marks }) => marks.filter(({ plate }) => plate).map(({ point }) => point)));
  const points = props.panels.flatMap(({ marks = [] }) => marks.map(({ point }) => point));
  return { layout, panels, listed: points.filter((point) => !plated.has(point)) };
}

function layoutOf({
  panels,
  full,
  window = full,
  passbands = [],
  width,
  height,
  phone,
}: ValuePlotProps): DrawingLayout {
  const whole = width ?? (phone ? PHONE_WIDTH : DESK_WIDTH);
  const margins = marginsOf(phone);
  const axis = frequencyAxis(window, whole, margins);
  const gap = phone ? PANEL_GAP.phone : PANEL_GAP.desk;
  const each = (height - margins.top - margins.bottom - gap * (panels.length - 1)) / panels.length;
  const places = panels.map(({ id, title, extent }, index): PanelLayout => {
    const top = Math.round(margins.top + index * (each + gap));
    const bottom = Math.round(top + each);
    const level = createValueScale(extent(window), [top, bottom]);
    return { panel: id, title, left: axis.left, right: axis.right, top, bottom, level };
  });
  const walls = panels.flatMap(({ id, walls: drawn = [] }) => drawn.map((wall) => drawnWall(id, wall)));
  const { frequency, toX, toFrequency } = axis;
  return { width: whole, height, phone, window, full, panels: places, frequency, walls, passbands, toX, toFrequency };
}

function drawnWall(panel: string, { id, lineNumber, band, limit, side }: ValueWall): DrawnWall {
  const place = side === "below" ? ("floor" as const) : ("ceiling" as const);
  return { ids: [id], lineNumbers: [lineNumber], parameters: [], panel, side: place, band, limit, reference: 0 };
}

function composePanel(panel: ValuePanel, place: PanelLayout, layout: DrawingLayout): PanelScene {
  const curves = curvesOf(panel, place, layout);
  const envelopes = curves.map(({ points }) => envelopeOf(points, layout.width));
  const areas = (panel.bands ?? []).map((band) => areaOf(band, place, layout));
  const areaEnvelopes = areas.map((points) => envelopeOf(points, layout.width));
  const walls = wallShapes(layout, place, envelopes);
  const pills = walls.flatMap(({ pill }) => pill ?? []);
  const marks = placeMarks(
    marksOf(panel, place, layout),
    layout.phone ? [] : (panel.marks ?? []).map(({ point }) => point),
    place,
    { boxes: pills, curves: [...envelopes, ...areaEnvelopes] },
  );
  const taken = [...pills, ...marks.flatMap(({ plate }) => plate ?? [])];
  return {
    layout: place,
    walls,
    curves: nameCurves(curves, envelopes, walls, taken, place, layout, areaEnvelopes),
    marks,
    areas,
    signs: signsOf(panel, layout),
    ...cutsOf(panel, place, layout),
  };
}

const pointsOf = ({ frequency, value }: ValueSeries): Point[] =>
  frequency.map((hz, index) => [hz, value[index] ?? Number.NaN]);

function curvesOf({ series }: ValuePanel, place: PanelLayout, layout: DrawingLayout): Curve[] {
  const labels = [...new Set(series.map(({ label }) => label))];
  return series.map((one) => {
    const isNamed = series.find(({ label }) => label === one.label) === one;
    return {
      series: { id: one.id, label: one.label, emphasis: isNamed ? "worst" : "other" },
      points: toPixels(visiblePoints(pointsOf(one), layout), place, layout),
      style: SERIES_STYLES[labels.indexOf(one.label) % SERIES_STYLES.length] ?? { colour: "ink", width: 1.75 },
    };
  });
}

function toPixels(points: readonly Point[], place: PanelLayout, layout: DrawingLayout): Pixel[] {
  return points.map(([hz, value]) => ({ x: tenth(layout.toX(hz)), y: tenth(place.level.toPixel(value)) }));
}

const tenth = (value: number) => Math.round(value * 10) / 10;

function areaOf({ frequency, lower, upper }: ValueBand, place: PanelLayout, layout: DrawingLayout): Pixel[] {
  const edge = (values: readonly number[]) =>
    toPixels(
      visiblePoints(
        frequency.map((hz, index): Point => [hz, values[index] ?? NaN]),
        layout,
      ),
      place,
      layout,
    );
  return [...edge(upper), ...edge(lower).reverse()];
}

function signsOf({ signs = [] }: ValuePanel, { window, toX }: DrawingLayout) {
  return signs
    .filter(({ frequency }) => frequency >= window[0] && frequency <= window[1])
    .map(({ frequency, label }) => ({ x: toX(frequency), label }));
}

function marksOf({ marks = [] }: ValuePanel, place: PanelLayout, { window, toX }: DrawingLayout): Mark[] {
  const toY = (value: number) => Math.min(Math.max(place.level.toPixel(value), place.top), place.bottom);
  return marks
    .filter(({ point, value }) => isReached(point) && Number.isFinite(value))
    .filter(({ point: { frequency } }) => frequency >= window[0] && frequency <= window[1])
    .map(({ point, value, interval: [low, high] }) => ({
      point,
      x: toX(point.frequency),
      y: toY(value),
      whisker: [toY(high), toY(low)],
    }));
}

/** Values grow upwards here: inside a wall below is less than the limit. */
function cutsOf({ walls = [], series }: ValuePanel, place: PanelLayout, layout: DrawingLayout) {
  const stretches: Pixel[][] = [];
  const slivers: Pixel[][] = [];
  for (const { band, limit, side } of walls) {
    const outline = limitOutline(limit, band);
    for (const one of series) {
      for (const stretch of stretchesInside(pointsOf(one), outline, side === "below" ? "ceiling" : "floor")) {
        const points = visiblePoints(stretch.points, layout);
        if (points.length < 2) continue;
        stretches.push(toPixels(points, place, layout));
        slivers.push(toPixels(sliver(stretch), place, layout));
      }
    }
  }
  return { stretches, slivers };
}
