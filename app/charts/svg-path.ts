// Path data from pixels.
import type { Pixel } from "./wall-shape";

const short = (value: number) => Math.round(value * 10) / 10;

/** "M1 2L3 4", closed with "Z" where asked. */
export function pathOf(points: readonly Pixel[], closed = false): string {
  if (points.length === 0) return "";
  return `M${points.map(({ x, y }) => `${short(x)} ${short(y)}`).join("L")}${closed ? "Z" : ""}`;
}
