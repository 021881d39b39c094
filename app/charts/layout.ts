// Where everything of a drawing stands: panels, scales and ticks, computed once from the data and the size.
import type { Band } from "~/rf/index";
import { fullRange, frequencyTicks, type FrequencyTicks } from "./frequency-range";
import { breakLevelFor, createLevelScale, roundedBottom, stretchesByDefault, type LevelScale } from "./level-scale";
import { levelOn, limitExtent, type Point } from "./limit-outline";
import type { DrawingProps, Panel, TraceSeries, Wall } from "./types";
import { largestLimit, passbands, shiftLimit } from "./walls";

export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

export interface PanelLayout extends Box {
  /** Of a drawing a `Panel`; plots of other figures name their own. */
  readonly panel: string;
  /** Beside the axis, "Loss S21, dB". */
  readonly title: string;
  readonly level: LevelScale;
}

/** A wall where it lies on this drawing: a relative limit has moved down by its reference. */
export interface DrawnWall extends Omit<Wall, "panel"> {
  readonly panel: string;
  /** dB a relative limit counts from; 0 for an absolute one. */
  readonly reference: number;
}

export interface DrawingLayout {
  readonly width: number;
  readonly height: number;
  readonly phone: boolean;
  /** Hz shown. */
  readonly window: Band;
  /** Hz that walls and curves span. */
  readonly full: Band;
  readonly panels: readonly PanelLayout[];
  readonly frequency: FrequencyTicks;
  readonly walls: readonly DrawnWall[];
  /** Hz; marked above the upper panel where they lie within the window. */
  readonly passbands: readonly Band[];
  readonly toX: (frequency: number) => number;
  readonly toFrequency: (x: number) => number;
}

export const DESK_WIDTH = 860;
export const PHONE_WIDTH = 390;
export const PHONE_HEIGHT = 470;
/** Height of a drawing on a desk, as a share of its width. */
export const DESK_ASPECT = 0.8;

const DESK_MARGINS = { left: 60, right: 20, top: 40, bottom: 46 };
const PHONE_MARGINS = { left: 44, right: 12, top: 34, bottom: 46 };
/** px over a compact drawing, which has no dimension lines. */
const COMPACT_TOP = { desk: 12, phone: 34 };
const PANEL_GAP = 26;
/** Share of the height between the margins that the S21 panel takes. */
const TRANSMISSION_SHARE = 0.7;
/** dB shown where nothing says how far. */
const EMPTY_BOTTOM = { transmission: 60, match: 30 };
const EMPTY_RANGE: Band = [1e9, 2e9];

type LayoutProps = Pick<
  DrawingProps,
  "walls" | "traces" | "stretched" | "width" | "height" | "phone" | "window" | "compact"
>;

/** Lays a drawing out; px with the origin at its upper left corner. */
export function layoutDrawing(props: LayoutProps): DrawingLayout {
  const phone = props.phone ?? false;
  const width = props.width ?? (phone ? PHONE_WIDTH : DESK_WIDTH);
  const height = props.height ?? (phone ? PHONE_HEIGHT : Math.round(width * DESK_ASPECT));
  const margins = marginsOf(phone, props.compact);
  const traces = props.traces ?? [];
  const walls = props.walls.map((wall) => atReference(wall, traces));
  const full = fullRange(walls, traces) ?? EMPTY_RANGE;
  const window = props.window ?? full;
  const boxes = panelBoxes(margins.top, height - margins.bottom, needsMatch(walls, traces));
  const axis = frequencyAxis(window, width, margins);
  const { left, right } = axis;
  return {
    width,
    height,
    phone,
    window,
    full,
    walls,
    passbands: props.compact ? [] : passbands(props.walls),
    panels: boxes.map(({ panel, top, bottom }) => ({
      panel,
      title: panelTitle(panel, phone),
      left,
      right,
      top,
      bottom,
      level: panelScale(panel, walls, traces, [top, bottom], props.stretched),
    })),
    frequency: axis.frequency,
    toX: axis.toX,
    toFrequency: axis.toFrequency,
  };
}

/** px around the panels of a figure. */
export function marginsOf(phone: boolean, compact = false) {
  const margins = phone ? PHONE_MARGINS : DESK_MARGINS;
  return compact ? { ...margins, top: phone ? COMPACT_TOP.phone : COMPACT_TOP.desk } : margins;
}

/** The frequency axis between the side margins of a figure. */
export function frequencyAxis(window: Band, width: number, margins: { readonly left: number; readonly right: number }) {
  const left = margins.left;
  const right = width - margins.right;
  return {
    left,
    right,
    frequency: frequencyTicks(window, right - left),
    toX: (frequency: number) => left + ((frequency - window[0]) / (window[1] - window[0])) * (right - left),
    toFrequency: (x: number) => window[0] + ((x - left) / (right - left)) * (window[1] - window[0]),
  };
}

function panelTitle(panel: Panel, phone: boolean): string {
  if (panel === "transmission") return "Loss S21, dB";
  return phone ? "Return loss, dB" : "Return loss S11, S22, dB";
}

/** Points of a curve in Hz and dB. */
export function tracePoints(trace: TraceSeries): Point[] {
  return trace.frequency.map((frequency, index) => [frequency, trace.level[index] ?? Number.NaN]);
}

/** Panel an S-parameter is drawn in. */
export function panelOf(parameter: TraceSeries["parameter"]): Panel {
  return parameter === "s21" || parameter === "s12" ? "transmission" : "match";
}

/** Upper and lower ends of the panels; one panel where there is nothing to show in the other. */
function panelBoxes(top: number, bottom: number, match: boolean): { panel: Panel; top: number; bottom: number }[] {
  if (!match) return [{ panel: "transmission", top, bottom }];
  const split = top + Math.round((bottom - top - PANEL_GAP) * TRANSMISSION_SHARE);
  return [
    { panel: "transmission", top, bottom: split },
    { panel: "match", top: split + PANEL_GAP, bottom },
  ];
}

function needsMatch(walls: readonly Wall[], traces: readonly TraceSeries[]): boolean {
  return walls.some((wall) => wall.panel === "match") || traces.some((trace) => panelOf(trace.parameter) === "match");
}

function panelScale(
  panel: Panel,
  walls: readonly Wall[],
  traces: readonly TraceSeries[],
  range: readonly [number, number],
  stretched: boolean | undefined,
): LevelScale {
  const height = range[1] - range[0];
  const largest = largestLimit(walls, panel);
  if (panel === "match") return createLevelScale(largest ? 2 * largest : EMPTY_BOTTOM.match, range);
  const losses = walls.filter((wall) => wall.side === "floor").map((wall) => limitExtent(wall.limit, wall.band)[1]);
  const reach = transmissionReach(largest, traces);
  // The deeper part has 64 % of the panel once the passband part is stretched: its tick step sets the lower end.
  const even = roundedBottom(reach, height);
  const stretch = losses.length > 0 && (stretched ?? stretchesByDefault(losses, even));
  if (!stretch) return createLevelScale(even, range);
  return createLevelScale(roundedBottom(reach, height * 0.64), range, breakLevelFor(Math.max(...losses)));
}

/** dB the S21 panel has to show: a quarter beyond the deepest limit, and curves up to 1.6 times that limit. */
function transmissionReach(largest: number | undefined, traces: readonly TraceSeries[]): number {
  const deepest = traces
    .filter((trace) => panelOf(trace.parameter) === "transmission")
    .flatMap((trace) => trace.level.filter(Number.isFinite))
    .reduce((most, level) => Math.max(most, level), 0);
  if (largest === undefined) return Math.min(Math.max(deepest, 1), 120) || EMPTY_BOTTOM.transmission;
  const floorOnly = largest < 10;
  const least = floorOnly ? Math.max(6 * largest, 3) : 1.25 * largest;
  const most = floorOnly ? EMPTY_BOTTOM.transmission : 1.6 * largest;
  return Math.max(least, Math.min(deepest, most));
}

/** A relative limit counts from the least loss of the reported curve within its reference band; from 0 without one. */
function atReference(wall: Wall, traces: readonly TraceSeries[]): Wall & DrawnWall {
  if (!wall.relativeTo) return { ...wall, reference: 0 };
  const reported = traces.filter((trace) => trace.parameter === "s21");
  const trace = reported.find((series) => series.emphasis === "worst") ?? reported[0];
  const least = trace ? leastLevel(tracePoints(trace), wall.relativeTo) : 0;
  const reference = Number.isFinite(least) ? least : 0;
  return { ...wall, reference, limit: shiftLimit(wall.limit, reference) };
}

function leastLevel(points: readonly Point[], band: Band): number {
  const first = points[0];
  const last = points[points.length - 1];
  if (!first || !last || first[0] > band[0] || last[0] < band[1]) return Number.NaN;
  const inside = points.filter(([frequency]) => frequency >= band[0] && frequency <= band[1]);
  return Math.min(levelOn(points, band[0]), levelOn(points, band[1]), ...inside.map((point) => point[1]));
}
