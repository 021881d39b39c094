// Assessments of centre frequency, bandwidth and shape factor from the crossings of a level below the peak.
import { adviseMargin } from "./advice.ts";
import { withAdvice } from "./assess-levels.ts";
import { unreached, type Assessment, type Frame } from "./assessment.ts";
import type { Requirement } from "./contract.ts";
import { coverageOf } from "./coverage.ts";
import type { Crossings } from "./crossings.ts";
import { formatFigure, formatLevel } from "./describe.ts";
import { bandOf } from "./frequency.ts";
import { notMeasuredReason, type Sweeping } from "./sweeping.ts";
import { levelUncertainty, type Ends } from "./uncertainty.ts";

type Line<K extends Requirement["kind"]> = Extract<Requirement, { readonly kind: K }>;
type CrossingLine = Line<"centre-frequency"> | Line<"bandwidth"> | Line<"shape-factor">;

/** Crossings of a level as read, and of the level moved by the uncertainty towards and away from the peak. */
interface MovedCrossings {
  readonly read: Crossings;
  readonly inner: Crossings;
  readonly outer: Crossings;
}

const RELATIVE_TOLERANCE = 1e-9;

export function assessCentre(line: Line<"centre-frequency">, sweeping: Sweeping): Assessment {
  return assessCrossings(line, [line.level], line.tolerance, sweeping, (frame, crossings) => {
    const centre = middle(crossings.read);
    const { inner, outer } = crossings;
    // Any pairing: either edge may stand anywhere between its two places.
    const interval: Ends = [open((outer[0] + inner[1]) / 2, -Infinity), open((inner[0] + outer[1]) / 2, Infinity)];
    const distance = Math.abs(centre - line.nominal);
    const farthest = Math.max(line.nominal - interval[0], interval[1] - line.nominal);
    const nearest = Math.max(0, interval[0] - line.nominal, line.nominal - interval[1]);
    return {
      ...frame,
      tolerance: RELATIVE_TOLERANCE * centre,
      value: centre,
      frequency: centre,
      limit: line.tolerance,
      margin: line.tolerance - distance,
      interval,
      marginInterval: [line.tolerance - farthest, line.tolerance - nearest],
      marginFrequencies: [centre, centre],
    };
  });
}

export function assessBandwidth(line: Line<"bandwidth">, sweeping: Sweeping): Assessment {
  const { min, max } = line;
  const limit = min ?? max ?? NaN;
  return assessCrossings(line, [line.level], limit, sweeping, (frame, crossings) => {
    const width = widthOf(crossings.read);
    const centre = middle(crossings.read);
    const [low, high] = widthEnds(crossings);
    const above = min === undefined ? [Infinity, Infinity, Infinity] : [width - min, low - min, high - min];
    const below = max === undefined ? [Infinity, Infinity, Infinity] : [max - width, max - high, max - low];
    const [margin = NaN, lowerEnd = NaN, upperEnd = NaN] = above.map((figure, index) =>
      Math.min(figure, below[index] as number),
    );
    return {
      ...frame,
      tolerance: RELATIVE_TOLERANCE * centre,
      value: width,
      frequency: centre,
      limit: ((above[0] as number) <= (below[0] as number) ? min : max) ?? limit,
      margin,
      interval: [low, high],
      marginInterval: [lowerEnd, upperEnd],
      marginFrequencies: [centre, centre],
    };
  });
}

export function assessShapeFactor(line: Line<"shape-factor">, sweeping: Sweeping): Assessment {
  return assessCrossings(line, line.levels, line.max, sweeping, (frame, first, second) => {
    const factor = widthOf(second.read) / widthOf(first.read);
    const [firstLow, firstHigh] = widthEnds(first);
    const [secondLow, secondHigh] = widthEnds(second);
    const interval: Ends = [secondLow / firstHigh, firstLow > 0 ? secondHigh / firstLow : Infinity];
    const centre = middle(first.read);
    return {
      ...frame,
      tolerance: RELATIVE_TOLERANCE * line.max,
      value: factor,
      frequency: centre,
      limit: line.max,
      margin: line.max - factor,
      interval,
      marginInterval: [line.max - interval[1], line.max - interval[0]],
      marginFrequencies: [centre, centre],
    };
  });
}

/** Finds the peak and the crossings of each level, or says why they cannot be found. */
function assessCrossings(
  line: CrossingLine,
  levels: readonly [number] | readonly [number, number],
  limit: number,
  sweeping: Sweeping,
  assess: (frame: Frame, first: MovedCrossings, second: MovedCrossings) => Assessment,
): Assessment {
  const { curves, setup } = sweeping;
  const sweep = bandOf(curves.frequency);
  const within = line.within === undefined ? sweep : sweeping.testBand(line.within);
  const searched = within ?? line.within ?? sweep;
  const common = { band: searched, standing: false, tolerance: 0 };
  const nothing: Frame = { ...common, covered: [], missing: [searched] };
  if (!curves.isMeasured("s21")) return unreached(limit, nothing, notMeasuredReason("S21"));
  const searchStep = line.within === undefined ? undefined : line.maxStep;
  const frame: Frame = { ...common, ...coverageOf(curves.segments(searched, searchStep), searched) };
  if (within === undefined || frame.missing.length > 0) return unreached(limit, frame);

  const peak = curves.peakIndex(searched);
  if (peak < 0 || curves.lossWithin("s21", peak, peak)[peak] === Infinity)
    return unreached(limit, frame, "There is no peak within the search band.");
  const shift = levelUncertainty(setup);
  const at = (level: number) => curves.crossings(peak, level, line.maxStep);
  const crossingsOf = (level: number): MovedCrossings => {
    const read = at(level);
    return shift === 0
      ? { read, inner: read, outer: read }
      : { read, inner: at(level - shift), outer: at(level + shift) };
  };
  const [firstLevel, secondLevel = firstLevel] = levels;
  const first = crossingsOf(firstLevel);
  const second = secondLevel === firstLevel ? first : crossingsOf(secondLevel);
  if (Number.isNaN(widthOf(first.read))) return unreached(limit, frame, describeLost(firstLevel, first.read));
  if (Number.isNaN(widthOf(second.read))) return unreached(limit, frame, describeLost(secondLevel, second.read));
  const found = assess(frame, first, second);
  return withAdvice(found, () => adviseMargin(formatFigure(-found.marginInterval[0], line.kind)));
}

function describeLost(level: number, [lower]: Crossings): string {
  const side = Number.isNaN(lower) ? "below" : "above";
  return `The response does not fall by ${formatLevel(level)} ${side} its peak within the sweep.`;
}

function middle([lower, upper]: Crossings): number {
  return (lower + upper) / 2;
}

function widthOf([lower, upper]: Crossings): number {
  return upper - lower;
}

/** Least and largest width; a moved level that is never crossed leaves its end open. */
function widthEnds({ inner, outer }: MovedCrossings): Ends {
  return [open(widthOf(inner), 0), open(widthOf(outer), Infinity)];
}

function open(figure: number, end: number): number {
  return Number.isNaN(figure) ? end : figure;
}
