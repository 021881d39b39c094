// The level axis: 0 dB on top, growing downwards, with the passband part stretched where the drawing asks for it.
import { scaleLinear } from "@visx/scale";

/** Share of the S21 panel the stretched part takes. */
export const STRETCHED_SHARE = 0.36;
/** px between level ticks, at least. */
export const LEAST_LEVEL_SPACING = 36;

/** px beyond the panel at which a level that would lie further out is drawn. */
const BEYOND = 40;

const LEVEL_STEPS = [0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 15, 20, 30, 50, 100, 200];

export interface LevelTick {
  readonly level: number;
  readonly label: string;
}

export interface LevelScale {
  /** The bare scale, dB to px, for an axis. */
  readonly scale: ReturnType<typeof scaleLinear<number>>;
  /** px of a level in dB; infinite and huge levels lie just beyond the panel. */
  readonly toPixel: (level: number) => number;
  readonly toLevel: (pixel: number) => number;
  /** dB at the panel's lower end. */
  readonly bottom: number;
  /** dB where the stretched part ends; absent on an even scale. */
  readonly breakLevel?: number;
  readonly ticks: readonly LevelTick[];
  /** px of the panel's upper and lower end. */
  readonly range: readonly [number, number];
}

/**
 * Where the stretched part ends: twice the largest loss limit, rounded up to 1, 2, 3 or 5 dB (and their tenfold).
 *
 * @param largestLossLimit dB, positive
 */
export function breakLevelFor(largestLossLimit: number): number {
  const wanted = 2 * largestLossLimit * (1 - 1e-12);
  for (let decade = 1; ; decade *= 10) {
    for (const step of [1, 2, 3, 5]) if (step * decade >= wanted) return step * decade;
  }
}

/** Whether the S21 panel is stretched by itself: the least loss limit is under a tenth of the range. */
export function stretchesByDefault(lossLimits: readonly number[], bottom: number): boolean {
  return lossLimits.some((limit) => limit < bottom / 10);
}

/**
 * Lower end of a panel: a multiple of a tick step, at or beyond the level asked.
 *
 * @param reach dB that have to fit
 * @param height px of the panel, for the step
 */
export function roundedBottom(reach: number, height: number): number {
  for (const step of LEVEL_STEPS) {
    const bottom = Math.ceil((reach * (1 - 1e-12)) / step) * step;
    if ((step / bottom) * height >= LEAST_LEVEL_SPACING) return clean(bottom);
  }
  return reach;
}

/**
 * @param bottom dB at the lower end
 * @param range px of the upper and lower end
 * @param breakLevel dB: from 0 to here is stretched over 36 % of the panel; ignored unless under half of the range
 */
export function createLevelScale(bottom: number, range: readonly [number, number], breakLevel?: number): LevelScale {
  const [top, end] = range;
  const height = end - top;
  const stretch = breakLevel !== undefined && breakLevel > 0 && breakLevel < bottom / 2 ? breakLevel : undefined;
  const domain = stretch === undefined ? [0, bottom] : [0, stretch, bottom];
  const pixels = stretch === undefined ? [top, end] : [top, top + STRETCHED_SHARE * height, end];
  const scale = scaleLinear<number>({ domain, range: pixels });
  return {
    scale,
    toPixel: (level) =>
      level === Infinity ? end + BEYOND : Math.min(Math.max(scale(level), top - BEYOND), end + BEYOND),
    toLevel: (pixel) => scale.invert(pixel),
    bottom,
    ...(stretch === undefined ? {} : { breakLevel: stretch }),
    ticks: label(stretch === undefined ? evenTicks(0, bottom, height) : stretchedTicks(stretch, bottom, height)),
    range,
  };
}

/** Multiples of the smallest step that keeps its distance where 0 to `to` dB take `height` px, from `from` on. */
function evenTicks(from: number, to: number, height: number): number[] {
  const step = stepFor(to, height);
  const ticks: number[] = [];
  for (let index = Math.ceil(from / step - 1e-9); index * step <= to * (1 + 1e-9); index += 1) {
    ticks.push(clean(index * step));
  }
  return ticks;
}

function stretchedTicks(breakLevel: number, bottom: number, height: number): number[] {
  const upperHeight = STRETCHED_SHARE * height;
  const lowerHeight = height - upperHeight;
  // Whole dB above the break: a finer step would put a decimal on the labels of the whole axis.
  const upperStep = LEVEL_STEPS.find((step) => step >= 1 && (step / breakLevel) * upperHeight >= LEAST_LEVEL_SPACING);
  const upper: number[] = [];
  const spacing = upperStep ?? breakLevel;
  for (let level = 0; level <= breakLevel; level += spacing) upper.push(level);
  const last = upper[upper.length - 1] ?? 0;
  const lastPixel = (last / breakLevel) * upperHeight;
  const lower = evenTicks(breakLevel, bottom, lowerHeight).filter((level) => {
    const pixel = upperHeight + ((level - breakLevel) / (bottom - breakLevel)) * lowerHeight;
    return level > last && pixel - lastPixel >= LEAST_LEVEL_SPACING;
  });
  return [...upper, ...lower];
}

/** The smallest step that keeps its distance, if there is one that ends on the last tick. */
function stepFor(span: number, height: number): number {
  const wide = LEVEL_STEPS.filter((step) => (step / span) * height >= LEAST_LEVEL_SPACING);
  const ending = wide.find((step) => Math.abs(span / step - Math.round(span / step)) < 1e-9);
  return ending ?? wide[0] ?? span;
}

function label(levels: readonly number[]): LevelTick[] {
  const decimals = Math.max(0, ...levels.map(decimalsOf));
  return levels.map((level) => ({ level, label: level.toFixed(decimals) }));
}

/** Digits after the point a number needs, at most 6. */
export function decimalsOf(value: number): number {
  for (let decimals = 0; decimals < 6; decimals += 1) {
    if (Math.abs(value - Number(value.toFixed(decimals))) < 1e-9 * Math.max(1, Math.abs(value))) return decimals;
  }
  return 6;
}

function clean(value: number): number {
  return Number(value.toPrecision(12));
}
