// One Smith chart, computed in px: its grid, the locus with its stretches in a band and beyond the limit, the marks of the band.
import type { Band } from "~/rf/index";
import { radiusOf, smithGrid, type Circle, type SmithGrid } from "./smith-grid";
import type { Pixel } from "./wall-shape";

/** A reflection against frequency, as it is sent. */
export interface SmithLocus {
  readonly id: string;
  /** Ω that Γ is normalised to. */
  readonly reference: number;
  /** Hz, ascending. */
  readonly frequency: readonly number[];
  readonly re: readonly number[];
  readonly im: readonly number[];
}

/** A return-loss limit over its band. */
export interface SmithLimit {
  readonly lineNumber: string;
  /** dB */
  readonly returnLoss: number;
  readonly band: Band;
}

export interface SmithPlotProps {
  readonly loci: readonly SmithLocus[];
  /** Hz; emphasised. */
  readonly bands: readonly Band[];
  readonly limits: readonly SmithLimit[];
  /** |Γ| at the rim. @default 1 */
  readonly reach?: number | undefined;
  /** px, of the square it stands in. */
  readonly size: number;
}

export interface SmithScene {
  readonly size: number;
  readonly reach: number;
  readonly rim: Circle;
  readonly grid: SmithGrid;
  readonly whole: readonly (readonly Pixel[])[];
  readonly inBand: readonly (readonly Pixel[])[];
  readonly beyond: readonly (readonly Pixel[])[];
  readonly limits: readonly { readonly lineNumber: string; readonly circle: Circle }[];
  readonly ends: readonly { readonly frequency: number; readonly at: Pixel }[];
  readonly toPixel: (x: number, y: number) => Pixel;
  readonly toCircle: (circle: Circle) => Circle;
  /** Γ under a place. */
  readonly toReflection: (at: Pixel) => { readonly x: number; readonly y: number };
}

/** px between the rim and the edge of the figure, for the values of the reactance. */
const MARGIN = 40;

export function composeSmith({ loci, bands, limits, reach = 1, size }: SmithPlotProps): SmithScene {
  const centre = size / 2;
  const scale = (centre - MARGIN) / reach;
  const toPixel = (x: number, y: number): Pixel => ({ x: centre + x * scale, y: centre - y * scale });
  const toCircle = ({ x, y, radius }: Circle): Circle => ({ ...toPixel(x, y), radius: radius * scale });
  const inPixels = (points: readonly LocusPoint[]) => points.map(({ x, y }) => toPixel(x, y));
  const points = loci.map(pointsOf);
  return {
    size,
    reach,
    rim: { ...toPixel(0, 0), radius: reach * scale },
    grid: smithGrid(reach),
    whole: points.map(inPixels),
    inBand: points.flatMap((locus) => bands.map((band) => inPixels(within(locus, band)))),
    beyond: points.flatMap((locus) => limits.flatMap((limit) => stretchesBeyond(locus, limit).map(inPixels))),
    limits: limits.map(({ lineNumber, returnLoss }) => ({
      lineNumber,
      circle: toCircle({ x: 0, y: 0, radius: radiusOf(returnLoss) }),
    })),
    ends: points.flatMap((locus) =>
      bandEnds(locus, bands).map(({ hz, x, y }) => ({ frequency: hz, at: toPixel(x, y) })),
    ),
    toPixel,
    toCircle,
    toReflection: (at) => ({ x: (at.x - centre) / scale, y: (centre - at.y) / scale }),
  };
}

interface LocusPoint {
  readonly hz: number;
  readonly x: number;
  readonly y: number;
}

/** Γ of a locus at a frequency, straight between its samples; undefined beyond its ends. */
export const reflectionAt = (locus: SmithLocus, hz: number) => pointAt(pointsOf(locus), hz);

const pointsOf = ({ frequency, re, im }: SmithLocus): LocusPoint[] =>
  frequency.map((hz, index) => ({ hz, x: re[index] ?? NaN, y: im[index] ?? NaN }));

/** The part of a locus inside a band, its ends interpolated. */
function within(locus: readonly LocusPoint[], [from, to]: Band): LocusPoint[] {
  const inside = locus.filter(({ hz }) => hz >= from && hz <= to);
  const [first, last] = [pointAt(locus, from), pointAt(locus, to)];
  return [
    ...(first && inside[0]?.hz !== from ? [first] : []),
    ...inside,
    ...(last && inside.at(-1)?.hz !== to ? [last] : []),
  ];
}

function pointAt(locus: readonly LocusPoint[], hz: number): LocusPoint | undefined {
  const above = locus.findIndex((point) => point.hz >= hz);
  const [left, right] = [locus[above - 1], locus[above]];
  if (right?.hz === hz) return right;
  return left && right ? between(left, right, (hz - left.hz) / (right.hz - left.hz)) : undefined;
}

function between(left: LocusPoint, right: LocusPoint, part: number): LocusPoint {
  const mix = (one: number, other: number) => one + (other - one) * part;
  return { hz: mix(left.hz, right.hz), x: mix(left.x, right.x), y: mix(left.y, right.y) };
}

/** Stretches of a locus within the limit's band where |Γ| is larger than the limit allows, cut at the circle. */
function stretchesBeyond(locus: readonly LocusPoint[], { returnLoss, band }: SmithLimit): LocusPoint[][] {
  const radius = radiusOf(returnLoss);
  const part = within(locus, band);
  const excess = (point: LocusPoint) => Math.hypot(point.x, point.y) - radius;
  const stretches: LocusPoint[][] = [];
  let open: LocusPoint[] = [];
  part.forEach((point, index) => {
    const before = part[index - 1];
    const [was, is] = [before ? excess(before) : -1, excess(point)];
    if (before && was > 0 !== is > 0) open.push(between(before, point, was / (was - is)));
    if (is > 0) open.push(point);
    else if (open.length > 0) {
      stretches.push(open);
      open = [];
    }
  });
  return [...stretches, open].filter((stretch) => stretch.length > 1);
}

function bandEnds(locus: readonly LocusPoint[], bands: readonly Band[]): LocusPoint[] {
  return bands.flatMap(([from, to]) => [pointAt(locus, from) ?? [], pointAt(locus, to) ?? []].flat());
}
