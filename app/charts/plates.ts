// Finds places for plates and line names: inside their panel, off every curve, clear of one another.
import { contains, meetsEnvelope, overlaps, type Envelope } from "./boxes";
import type { Box } from "./layout";

export const PLATE_HEIGHT = 44;
/** Level end of the leader at its plate. */
export const SHOULDER_LENGTH = 14;
/** px a plate keeps from curves and from other things. */
const CLEARANCE = 5;

export interface PlateRequest {
  /** px of the ring's centre. */
  readonly x: number;
  readonly y: number;
  readonly width: number;
  /** Where the plate may stand. */
  readonly bounds: Box;
}

/** What plates and names keep off. */
export interface Obstacles {
  readonly boxes: readonly Box[];
  readonly curves: readonly Envelope[];
}

const ASIDE = [34, 46, 60, 76, 94, 114, 136, 160, 190, 225, 265, 310, 360, 420];
const RISES = Array.from({ length: 41 }, (_, index) => (index % 2 === 1 ? 1 : -1) * Math.ceil(index / 2) * 12);

/**
 * Places plates one after the other, each as near to its ring as there is room, right of it before left of it.
 *
 * @returns a box per request, undefined where there is no room: that point is told in the list alone
 */
export function placePlates(requests: readonly PlateRequest[], obstacles: Obstacles): (Box | undefined)[] {
  const rings = requests.map(({ x, y }) => ({ left: x - 7, right: x + 7, top: y - 7, bottom: y + 7 }));
  const taken: Box[] = [...obstacles.boxes, ...rings];
  return requests.map((request) => {
    const place = nearestPlace(request, taken, obstacles.curves);
    if (place) taken.push(place);
    return place;
  });
}

function nearestPlace(request: PlateRequest, taken: readonly Box[], curves: readonly Envelope[]): Box | undefined {
  const { x, y, width, bounds } = request;
  const places: { box: Box; cost: number }[] = [];
  for (const aside of ASIDE) {
    for (const rise of RISES) {
      const top = y + rise + 10 - PLATE_HEIGHT / 2;
      const cost = aside + 1.2 * Math.abs(rise);
      places.push({ box: { left: x + aside, right: x + aside + width, top, bottom: top + PLATE_HEIGHT }, cost });
      places.push({
        box: { left: x - aside - width, right: x - aside, top, bottom: top + PLATE_HEIGHT },
        cost: cost + 40,
      });
    }
  }
  places.sort((one, other) => one.cost - other.cost);
  return places.find(({ box }) => isFree(box, bounds, taken, curves))?.box;
}

function isFree(box: Box, bounds: Box, taken: readonly Box[], curves: readonly Envelope[]): boolean {
  return (
    contains(bounds, box) &&
    !taken.some((other) => overlaps(box, other, CLEARANCE)) &&
    !curves.some((curve) => meetsEnvelope(box, curve, CLEARANCE))
  );
}

/** Where a leader bends: the outer end of its shoulder and the plate's side it meets, px. */
export function leaderOf(ring: { readonly x: number; readonly y: number }, plate: Box) {
  const onRight = plate.left > ring.x;
  const side = onRight ? plate.left : plate.right;
  const y = (plate.top + plate.bottom) / 2;
  const shoulder = onRight ? side - SHOULDER_LENGTH : side + SHOULDER_LENGTH;
  const length = Math.hypot(shoulder - ring.x, y - ring.y) || 1;
  return {
    from: { x: ring.x + ((shoulder - ring.x) * 5) / length, y: ring.y + ((y - ring.y) * 5) / length },
    shoulder: { x: shoulder, y },
    to: { x: side, y },
  };
}

export interface NameRequest {
  readonly width: number;
  readonly bounds: Box;
  /** The curve it names. */
  readonly curve: Envelope;
  /** px per column of the envelope. */
  readonly column: number;
}

const NAME_HEIGHT = 16;

/**
 * Places names beside their curves, from the right end inwards: 6 px off their own curve, clear of all else.
 *
 * @returns a box per name, undefined where there is no room
 */
export function placeNames(requests: readonly NameRequest[], obstacles: Obstacles): (Box | undefined)[] {
  const taken = [...obstacles.boxes];
  return requests.map((request) => {
    const place = namePlaces(request).find((box) => {
      return (
        contains(request.bounds, box) &&
        !taken.some((other) => overlaps(box, other, 3)) &&
        !obstacles.curves.some((curve) => meetsEnvelope(box, curve, 2))
      );
    });
    if (place) taken.push(place);
    return place;
  });
}

function namePlaces({ width, bounds, curve, column }: NameRequest): Box[] {
  const places: Box[] = [];
  for (let right = bounds.right - 8; right - width > bounds.left; right -= 8) {
    const left = right - width;
    const tops = curve.top.slice(Math.floor(left / column), Math.floor(right / column) + 1);
    const bottoms = curve.bottom.slice(Math.floor(left / column), Math.floor(right / column) + 1);
    const highest = Math.min(...tops);
    const lowest = Math.max(...bottoms);
    if (!Number.isFinite(highest) || !Number.isFinite(lowest)) continue;
    places.push({ left, right, top: highest - 6 - NAME_HEIGHT, bottom: highest - 6 });
    places.push({ left, right, top: lowest + 6, bottom: lowest + 6 + NAME_HEIGHT });
  }
  return places;
}
