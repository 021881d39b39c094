// A wall on the sheet: its outline, edge, sides, fade and the place of its number, all in px.
import { clipOutline, limitOutline, type Point } from "./limit-outline";
import type { Box, DrawingLayout, DrawnWall, PanelLayout } from "./layout";
import { estimateTextWidth, meetsEnvelope, overlaps, type Envelope } from "./boxes";
import type { Wall } from "./types";

/** px inward over which the hatch fades. */
const FADE_LENGTH = 72;
/** px from the edge to the middle of the number. */
const NUMBER_DEPTH = 24;
export const PILL_HEIGHT = 20;
/** px a spot requirement is drawn wide. */
const SPOT_WIDTH = 3;

export interface Pixel {
  readonly x: number;
  readonly y: number;
}

/** One straight part of the wall: the area from edge to panel end, and the vector along which its hatch fades. */
export interface WallPart {
  readonly area: readonly Pixel[];
  readonly fade: { readonly from: Pixel; readonly to: Pixel };
}

export interface WallSide {
  readonly x: number;
  /** px at the edge, and at the panel's end or where a neighbour's edge meets it. */
  readonly from: number;
  readonly to: number;
  /** Which way the wall ends: -1 to lower frequencies, 1 to higher ones. */
  readonly outward: -1 | 1;
}

export interface WallShape {
  readonly wall: DrawnWall;
  readonly parts: readonly WallPart[];
  readonly edge: readonly Pixel[];
  readonly sides: readonly WallSide[];
  readonly label: string;
  /** Absent where the window leaves too little of the wall to number. */
  readonly pill?: Box;
}

/**
 * Shapes of all walls of a panel that reach into the window.
 *
 * @param curves what the numbers keep off
 */
export function wallShapes(layout: DrawingLayout, panel: PanelLayout, curves: readonly Envelope[]): WallShape[] {
  const drawn = layout.walls
    .filter((wall) => wall.panel === panel.panel)
    .map((wall) => ({ wall, edge: edgeOf(wall, layout, panel) }))
    .filter(({ edge }) => edge.length > 1);
  const shapes: WallShape[] = [];
  for (const { wall, edge } of drawn) {
    const end = wall.side === "floor" ? panel.bottom : panel.top;
    const neighbours = drawn.filter((other) => other.wall !== wall && other.wall.side === wall.side);
    const sides = sidesOf(edge, end, layout, panel, wall).flatMap((side) =>
      withoutShared(
        side,
        neighbours.map((other) => other.edge),
      ),
    );
    const label = wall.lineNumbers.join(", ");
    const taken = shapes.flatMap((shape) => (shape.pill ? [shape.pill] : []));
    const isTaken = (box: Box) =>
      taken.some((other) => overlaps(box, other, 3)) || curves.some((curve) => meetsEnvelope(box, curve, 2));
    const pill = placePill({ edge, sides, end, side: wall.side, label, panel, isTaken, isCut: isCut(wall, layout) });
    shapes.push({ wall, edge, label, sides, parts: partsOf(edge, end, wall.side), ...(pill ? { pill } : {}) });
  }
  return shapes;
}

function isCut(wall: DrawnWall, { window }: DrawingLayout): boolean {
  return wall.band[0] < window[0] || wall.band[1] > window[1];
}

/** The limit in px within the window, with a corner where the level scale bends. */
function edgeOf(wall: DrawnWall, layout: DrawingLayout, panel: PanelLayout): Pixel[] {
  const outline = clipOutline(limitOutline(wall.limit, wall.band), layout.window);
  const bent = panel.level.breakLevel === undefined ? outline : withLevel(outline, panel.level.breakLevel);
  const edge = bent.map(([frequency, level]) => ({
    x: layout.toX(frequency),
    y: Math.min(Math.max(panel.level.toPixel(level), panel.top), panel.bottom),
  }));
  const first = edge[0];
  const last = edge[edge.length - 1];
  if (!first || !last || last.x > first.x) return edge;
  // Only a spot requirement has no width; a band that touches the window from outside is not in it.
  if (wall.band[1] > wall.band[0]) return [];
  const half = SPOT_WIDTH / 2;
  return [
    { x: Math.max(first.x - half, panel.left), y: first.y },
    { x: Math.min(first.x + half, panel.right), y: last.y },
  ];
}

/** A polyline with a point wherever it passes a level, so that it stays true on a scale that bends there. */
export function withLevel(points: readonly Point[], level: number): Point[] {
  const split: Point[] = [];
  for (const [index, point] of points.entries()) {
    const before = points[index - 1];
    if (before && (before[1] - level) * (point[1] - level) < 0) {
      const part = (level - before[1]) / (point[1] - before[1]);
      if (Number.isFinite(part)) split.push([before[0] + part * (point[0] - before[0]), level]);
    }
    split.push(point);
  }
  return split;
}

function partsOf(edge: readonly Pixel[], end: number, side: Wall["side"]): WallPart[] {
  const parts: WallPart[] = [];
  for (const run of straightRuns(edge)) {
    const first = run[0];
    const last = run[run.length - 1];
    if (!first || !last || last.x <= first.x) continue;
    parts.push({
      area: [...run, { x: last.x, y: end }, { x: first.x, y: end }],
      fade: fadeOf(first, last, side),
    });
  }
  return parts;
}

/** Neighbouring pieces of like slope as one, so that a limit curved by its scale has one fade. */
function straightRuns(edge: readonly Pixel[]): Pixel[][] {
  const runs: Pixel[][] = [];
  for (let index = 1; index < edge.length; index += 1) {
    const from = edge[index - 1];
    const to = edge[index];
    if (!from || !to || to.x <= from.x) continue;
    const run = runs[runs.length - 1];
    const last = run?.[run.length - 1];
    const before = run?.[run.length - 2];
    const alike = last === from && before !== undefined && Math.abs(angle(before, last) - angle(from, to)) < 0.12;
    if (run && alike) run.push(to);
    else runs.push([from, to]);
  }
  return runs;
}

function angle(from: Pixel, to: Pixel): number {
  return Math.atan2(to.y - from.y, to.x - from.x);
}

/** The fade measures its 72 px straight up or down from the edge, so that walls of different slope fade alike. */
function fadeOf(first: Pixel, last: Pixel, side: Wall["side"]): WallPart["fade"] {
  const slope = (last.y - first.y) / (last.x - first.x);
  const length = FADE_LENGTH / (1 + slope * slope);
  const sign = side === "floor" ? 1 : -1;
  return { from: first, to: { x: first.x - sign * slope * length, y: first.y + sign * length } };
}

/** Upright sides; none where the wall is cut off by the frame. */
function sidesOf(
  edge: readonly Pixel[],
  end: number,
  layout: DrawingLayout,
  panel: PanelLayout,
  wall: DrawnWall,
): WallSide[] {
  const first = edge[0];
  const last = edge[edge.length - 1];
  const sides: WallSide[] = [];
  if (first && wall.band[0] >= layout.window[0] && first.x > panel.left + 0.5) {
    sides.push({ x: first.x, from: first.y, to: end, outward: -1 });
  }
  if (last && wall.band[1] <= layout.window[1] && last.x < panel.right - 0.5) {
    sides.push({ x: last.x, from: last.y, to: end, outward: 1 });
  }
  return sides;
}

/** What is left of a side where neighbours continue the wall beyond it: the part that sticks out past their edges. */
function withoutShared(side: WallSide, neighbours: readonly (readonly Pixel[])[]): WallSide[] {
  const covered = neighbours.flatMap((edge) => edgeLevelsAt(edge, side.x + side.outward * 0.5));
  const hanging = side.to < side.from;
  const reach = hanging ? Math.max(...covered) : Math.min(...covered);
  if (covered.length === 0) return [side];
  const exposed = hanging ? side.from - reach : reach - side.from;
  return exposed < 0.5 ? [] : [{ ...side, to: reach }];
}

function edgeLevelsAt(edge: readonly Pixel[], x: number): number[] {
  const levels: number[] = [];
  for (let index = 1; index < edge.length; index += 1) {
    const left = edge[index - 1];
    const right = edge[index];
    if (!left || !right || x < left.x - 0.01 || x > right.x + 0.01 || right.x === left.x) continue;
    levels.push(left.y + ((right.y - left.y) * (x - left.x)) / (right.x - left.x));
  }
  return levels;
}

interface PillRequest {
  readonly edge: readonly Pixel[];
  readonly sides: readonly WallSide[];
  /** px of the panel's end the wall reaches to. */
  readonly end: number;
  readonly side: Wall["side"];
  readonly label: string;
  readonly panel: PanelLayout;
  readonly isTaken: (box: Box) => boolean;
  /** Whether the window cuts the wall off. */
  readonly isCut: boolean;
}

/** The number stands 24 px inside the middle of the edge, deeper where something is in its way. */
function placePill(request: PillRequest): Box | undefined {
  const { edge, end, side, label, panel, isTaken } = request;
  const first = edge[0];
  const last = edge[edge.length - 1];
  if (!first || !last) return undefined;
  const text = estimateTextWidth(label, 12, 650);
  const room = last.x - first.x;
  const width = Math.min(text + 16, Math.max(text + 8, room - 6));
  if (request.isCut && room < width) return undefined;
  const x = pillCentre(first.x, last.x, width, request);
  const y = edgeLevelsAt(edge, (first.x + last.x) / 2)[0] ?? first.y;
  const sign = side === "floor" ? 1 : -1;
  const slope = room > 0 ? Math.abs((last.y - first.y) / room) : 0;
  const depth = NUMBER_DEPTH + Math.min((slope * width) / 2, 40);
  const deepest = Math.max(depth, Math.abs(end - y) - NUMBER_DEPTH);
  for (let reach = depth; reach <= deepest; reach += 12) {
    const box = pillBox(x, y + sign * reach, width, panel);
    if (!isTaken(box)) return box;
  }
  return pillBox(x, y + sign * depth, width, panel);
}

/** The middle of the wall; in a narrow one moved over the neighbouring wall, away from an open side. */
function pillCentre(from: number, to: number, width: number, { sides, panel }: PillRequest): number {
  const open = (outward: -1 | 1) => sides.some((side) => side.outward === outward);
  const middle = (from + to) / 2;
  const least = open(-1) ? from + 3 + width / 2 : panel.left + width / 2 + 3;
  const most = open(1) ? to - 3 - width / 2 : panel.right - width / 2 - 3;
  if (least > most) return Math.min(Math.max(middle, panel.left + width / 2 + 2), panel.right - width / 2 - 2);
  return Math.min(Math.max(middle, least), most);
}

function pillBox(x: number, y: number, width: number, panel: PanelLayout): Box {
  const half = PILL_HEIGHT / 2;
  const centre = Math.min(Math.max(y, panel.top + half + 2), panel.bottom - half - 2);
  return { left: x - width / 2, right: x + width / 2, top: centre - half, bottom: centre + half };
}
