// From requirements to walls: which lines have one, in which panel, from which side, and which share one.
import type { Band, Limit } from "~/rf/index";
import { limitExtent } from "./limit-outline";
import type { NumberedRequirement, Wall } from "./types";

/**
 * Walls of a specification, in line order. Insertion loss stands on the floor of the S21 panel, rejection and reverse
 * isolation hang from its ceiling, return loss hangs in the match panel; other kinds have no wall. Lines with the same
 * limit over the same band on the same side are one wall with several numbers.
 */
export function wallsFromRequirements(requirements: readonly NumberedRequirement[]): Wall[] {
  const walls = new Map<string, Wall>();
  for (const requirement of requirements) {
    const wall = wallOf(requirement);
    if (!wall) continue;
    const key = JSON.stringify([wall.panel, wall.side, wall.band, wall.limit, wall.relativeTo ?? null]);
    const same = walls.get(key);
    walls.set(key, same ? join(same, wall) : wall);
  }
  return [...walls.values()];
}

function wallOf(requirement: NumberedRequirement): Wall | undefined {
  const line = { ids: [requirement.id], lineNumbers: [requirement.lineNumber] };
  switch (requirement.kind) {
    case "insertion-loss":
      return {
        ...line,
        parameters: ["s21"],
        panel: "transmission",
        side: "floor",
        band: requirement.band,
        limit: requirement.max,
      };
    case "rejection":
      return {
        ...line,
        parameters: ["s21"],
        panel: "transmission",
        side: "ceiling",
        band: requirement.band,
        limit: requirement.min,
        ...(requirement.relativeTo ? { relativeTo: requirement.relativeTo } : {}),
      };
    case "reverse-isolation":
      return {
        ...line,
        parameters: ["s12"],
        panel: "transmission",
        side: "ceiling",
        band: requirement.band,
        limit: requirement.min,
      };
    case "return-loss":
      return {
        ...line,
        parameters: [requirement.port === 1 ? "s11" : "s22"],
        panel: "match",
        side: "ceiling",
        band: requirement.band,
        limit: requirement.min,
      };
    default:
      return undefined;
  }
}

function join(wall: Wall, other: Wall): Wall {
  return {
    ...wall,
    ids: [...wall.ids, ...other.ids],
    lineNumbers: [...wall.lineNumbers, ...other.lineNumbers],
    parameters: [...new Set([...wall.parameters, ...other.parameters])],
  };
}

/** Passbands the drawing marks: the bands of insertion-loss walls, overlapping ones as their union, ascending. */
export function passbands(walls: readonly Wall[]): Band[] {
  const bands = walls.filter((wall) => wall.side === "floor").map((wall) => wall.band);
  const merged: [number, number][] = [];
  for (const [from, to] of bands.sort((one, other) => one[0] - other[0])) {
    const last = merged[merged.length - 1];
    if (last && from <= last[1]) last[1] = Math.max(last[1], to);
    else merged.push([from, to]);
  }
  return merged;
}

/** dB a relative limit counts from: the least loss within its reference band; 0 where no curve tells it. */
export function shiftLimit(limit: Limit, reference: number): Limit {
  if (reference === 0) return limit;
  if (typeof limit === "number") return limit + reference;
  return { scale: limit.scale, points: limit.points.map(([frequency, level]) => [frequency, level + reference]) };
}

/** Largest limit among walls of one side of a panel, dB; undefined where there is none. */
export function largestLimit(walls: readonly Wall[], panel: Wall["panel"], side?: Wall["side"]): number | undefined {
  const levels = walls
    .filter((wall) => wall.panel === panel && (side === undefined || wall.side === side))
    .map((wall) => limitExtent(wall.limit, wall.band)[1]);
  return levels.length > 0 ? Math.max(...levels) : undefined;
}
