// Finds what no filter can meet in a mask: limits that exclude each other at one frequency, and limits that are inverted.
import type { Band, Limit, Requirement } from "./contract.ts";
import { formatBand, formatQuantity } from "./quantity.ts";

/**
 * - `excluding`: a loss limit lies below a rejection limit where both hold
 * - `bandwidths`: the least bandwidth of one line lies above the largest of another at the same or a deeper level
 * - `centres`: two lines allow centre frequencies at the same level that no filter has at once
 * - `inverted`: a band, a pair of limits or the points of a slope stand in the wrong order
 */
export type ContradictionCode = "excluding" | "bandwidths" | "centres" | "inverted";

export interface Contradiction {
  readonly code: ContradictionCode;
  /** Ids of the lines: two for limits that exclude each other (the loss first), one for an inverted line. */
  readonly lines: readonly [string] | readonly [string, string];
  /** Hz: where it holds; absent where it has no place on the frequency axis. */
  readonly band?: Band;
  /** Hz: where the limits exclude each other most. */
  readonly frequency?: number;
  /** What is wrong there, without line numbers: "loss max 0.95 dB, rejection min 55 dB". */
  readonly detail: string;
}

type OfKind<K extends Requirement["kind"]> = Extract<Requirement, { readonly kind: K }>;
type Loss = OfKind<"insertion-loss">;
type Rejection = OfKind<"rejection">;

/** Margins within this of zero are zero, in dB. */
const LEVEL_TOLERANCE = 1e-9;
/** Frequencies within this, relative, are one. */
const FREQUENCY_TOLERANCE = 1e-9;

/**
 * All contradictions of a mask, inverted lines first. An inverted line takes no part in the comparison with others.
 * Both temperatures of a line count: a limit over the range holds at ambient too. Rejection relative to a passband is compared like an
 * absolute one, since the least loss of a passive filter is 0 dB or more.
 */
export function checkMask(requirements: readonly Requirement[]): Contradiction[] {
  const inverted: Contradiction[] = [];
  const sound: Requirement[] = [];
  for (const requirement of requirements) {
    const detail = inversion(requirement);
    if (detail === undefined) sound.push(requirement);
    else inverted.push({ code: "inverted", lines: [requirement.id], detail, ...place(requirement) });
  }
  return [...inverted, ...excluding(sound), ...bandwidths(sound), ...centres(sound)];
}

/** The sentence a page shows. `lineNumber` gives "2.1" for a line's id. */
export function describeContradiction(contradiction: Contradiction, lineNumber: (id: string) => string): string {
  const [first, second] = contradiction.lines;
  if (second === undefined) return `Line ${lineNumber(first)}: ${contradiction.detail}.`;
  const where = contradiction.band ? ` ${preposition(contradiction.band)} ${formatBand(contradiction.band)}` : "";
  return `Lines ${lineNumber(first)} and ${lineNumber(second)} cannot both hold${where}: ${contradiction.detail}.`;
}

const preposition = ([from, to]: Band) => (from === to ? "at" : "from");

function place(requirement: Requirement): { band?: Band } {
  if (!("band" in requirement)) return {};
  const [from, to] = requirement.band;
  return { band: from <= to ? [from, to] : [to, from] };
}

function inversion(requirement: Requirement): string | undefined {
  if ("band" in requirement && !ordered(requirement.band)) return "the lower edge lies above the upper";
  if ("within" in requirement && requirement.within && !ordered(requirement.within))
    return "its search band is inverted";
  switch (requirement.kind) {
    case "insertion-loss":
      return slopeInversion(requirement.max, requirement.band);
    case "rejection":
      if (requirement.relativeTo && !ordered(requirement.relativeTo)) return "its reference band is inverted";
      return slopeInversion(requirement.min, requirement.band);
    case "return-loss":
    case "reverse-isolation":
      return slopeInversion(requirement.min, requirement.band);
    case "bandwidth":
      return requirement.min !== undefined && requirement.max !== undefined && requirement.min > requirement.max
        ? "the least bandwidth lies above the largest"
        : undefined;
    case "shape-factor":
      if (requirement.levels[0] >= requirement.levels[1])
        return "its first level must lie above its second, in less dB";
      return requirement.max < 1 ? "a shape factor is 1 or more" : undefined;
    default:
      return undefined;
  }
}

const ordered = ([from, to]: Band) => from <= to;

function slopeInversion(limit: Limit, band: Band): string | undefined {
  if (typeof limit === "number") return undefined;
  const edges = limit.points.map(([hz]) => hz);
  if (edges.some((hz, index) => index > 0 && hz < (edges[index - 1] ?? 0)))
    return "the points of its slope run backwards";
  const [first = Infinity] = edges;
  const last = edges[edges.length - 1] ?? -Infinity;
  return band[0] < first || band[1] > last ? "its slope does not reach over its band" : undefined;
}

function excluding(requirements: readonly Requirement[]): Contradiction[] {
  const losses = requirements.filter((line): line is Loss => line.kind === "insertion-loss");
  const rejections = requirements.filter((line): line is Rejection => line.kind === "rejection");
  return losses.flatMap((loss) => rejections.flatMap((rejection) => exclusion(loss, rejection) ?? []));
}

/** The first stretch where the rejection asked for exceeds the loss allowed, and the point where it does so most. */
function exclusion(loss: Loss, rejection: Rejection): Contradiction | undefined {
  const from = Math.max(loss.band[0], rejection.band[0]);
  const to = Math.min(loss.band[1], rejection.band[1]);
  if (from > to) return undefined;
  // At a step of a limit both sides hold: a loss takes the lower, a rejection the higher.
  const excess = (hz: number) => limitAt(rejection.min, hz, Math.max) - limitAt(loss.max, hz, Math.min);
  const nodes = comparisonPoints(loss.max, rejection.min, from, to);
  const beyond = nodes.filter((hz) => excess(hz) > LEVEL_TOLERANCE);
  const [start] = beyond;
  if (start === undefined) return undefined;

  const worst = beyond.reduce((most, hz) => (excess(hz) > excess(most) + LEVEL_TOLERANCE ? hz : most), start);
  const firstIndex = nodes.indexOf(start);
  let lastIndex = firstIndex;
  while (lastIndex + 1 < nodes.length && excess(nodes[lastIndex + 1] ?? NaN) > LEVEL_TOLERANCE) lastIndex += 1;
  const band: Band = [
    crossing(excess, nodes[firstIndex - 1], start),
    crossing(excess, nodes[lastIndex + 1], nodes[lastIndex] ?? start),
  ];
  const allowed = formatQuantity(limitAt(loss.max, worst, Math.min), "level", { decimals: 2 });
  const asked = formatQuantity(limitAt(rejection.min, worst, Math.max), "level", { decimals: 2 });
  const detail = `loss max ${allowed}, rejection min ${asked}${rejection.relativeTo ? " relative" : ""}`;
  return { code: "excluding", lines: [loss.id, rejection.id], band, frequency: worst, detail };
}

/** Edges and breakpoints of both limits inside [from, to], and the point between where a straight and a logarithmic slope part most. */
function comparisonPoints(first: Limit, second: Limit, from: number, to: number): number[] {
  const breaks = [first, second].flatMap((limit) => (typeof limit === "number" ? [] : limit.points.map(([hz]) => hz)));
  const inside = breaks.filter((hz) => hz > from && hz < to);
  const nodes = [...new Set([from, ...inside, to])].sort((a, b) => a - b);
  return nodes.flatMap((hz, index) => {
    const next = nodes[index + 1];
    // Where scales differ the excess is a + b ln f − c f: its turning point is b / c, found from three values.
    return next === undefined || !mixesScales(first, second) ? [hz] : [hz, ...turningPoint(first, second, hz, next)];
  });
}

function mixesScales(first: Limit, second: Limit): boolean {
  const scales = [first, second].map((limit) => (typeof limit === "number" ? "flat" : limit.scale));
  return scales.includes("linear") && scales.includes("log");
}

function turningPoint(first: Limit, second: Limit, from: number, to: number): number[] {
  const slope = (limit: Limit) => innerValue(limit, from, to, 0.75) - innerValue(limit, from, to, 0.25);
  const [logarithmic, straight] =
    typeof first !== "number" && first.scale === "log" ? [first, second] : [second, first];
  const near = from + 0.25 * (to - from);
  const far = from + 0.75 * (to - from);
  const hz = (slope(logarithmic) / Math.log(far / near)) * ((far - near) / slope(straight));
  return hz > from && hz < to ? [hz] : [];
}

const innerValue = (limit: Limit, from: number, to: number, share: number) =>
  limitAt(limit, from + share * (to - from), Math.min);

/** Where the excess passes zero between a point outside the stretch and one inside, to 1 Hz; the inside point where nothing is outside. */
function crossing(excess: (hz: number) => number, outside: number | undefined, inside: number): number {
  if (outside === undefined) return inside;
  let [low, high] = [outside, inside];
  for (let step = 0; step < 60; step += 1) {
    const middle = low + (high - low) / 2;
    if (excess(middle) > LEVEL_TOLERANCE) high = middle;
    else low = middle;
  }
  return Math.round(high);
}

/** The limit at a frequency, dB; `pick` chooses at a step, where two values hold. */
function limitAt(limit: Limit, hz: number, pick: (a: number, b: number) => number): number {
  if (typeof limit === "number") return limit;
  let found = NaN;
  limit.points.forEach(([right, rightDb], index) => {
    if (right === hz) found = Number.isNaN(found) ? rightDb : pick(found, rightDb);
    const before = limit.points[index - 1];
    if (!before || !(before[0] < hz && hz < right)) return;
    const [left, leftDb] = before;
    const share = limit.scale === "log" ? Math.log(hz / left) / Math.log(right / left) : (hz - left) / (right - left);
    found = leftDb + share * (rightDb - leftDb);
  });
  return found;
}

/** The response crosses a deeper level farther out: its bandwidth is never less. */
function bandwidths(requirements: readonly Requirement[]): Contradiction[] {
  const lines = requirements.filter((line): line is OfKind<"bandwidth"> => line.kind === "bandwidth");
  return lines.flatMap((least) =>
    lines.flatMap((largest) => {
      if (least === largest || least.level > largest.level || !haveOnePeak(least, largest)) return [];
      if (least.min === undefined || largest.max === undefined || least.min <= largest.max) return [];
      const detail =
        least.level === largest.level
          ? `bandwidth min ${hertz(least.min)}, max ${hertz(largest.max)}`
          : `bandwidth min ${hertz(least.min)} at ${decibels(least.level)}, max ${hertz(largest.max)} at ${decibels(largest.level)}`;
      return [{ code: "bandwidths" as const, lines: [least.id, largest.id] as const, detail }];
    }),
  );
}

function centres(requirements: readonly Requirement[]): Contradiction[] {
  const lines = requirements.filter((line): line is OfKind<"centre-frequency"> => line.kind === "centre-frequency");
  return lines.flatMap((one, index) =>
    lines.slice(index + 1).flatMap((other) => {
      if (one.level !== other.level || !haveOnePeak(one, other)) return [];
      const apart = Math.abs(one.nominal - other.nominal) - one.tolerance - other.tolerance;
      if (apart <= FREQUENCY_TOLERANCE * Math.max(one.nominal, other.nominal)) return [];
      const words = ({ nominal, tolerance }: typeof one) => `${hertz(nominal)} ± ${hertz(tolerance)}`;
      return [
        {
          code: "centres" as const,
          lines: [one.id, other.id] as const,
          detail: `centre frequency ${words(one)}, ${words(other)}`,
        },
      ];
    }),
  );
}

/** Sought in different bands the peaks may be different ones, and the crossings with them. */
const haveOnePeak = ({ within: one }: { within?: Band }, { within: other }: { within?: Band }): boolean =>
  one?.[0] === other?.[0] && one?.[1] === other?.[1];

const hertz = (value: number): string => formatQuantity(value, "frequency");
const decibels = (value: number): string => formatQuantity(value, "level");
