// The part of the frequency axis a figure shows, as it is zoomed and moved; undefined is all of it.
import type { Band } from "~/rf/index";

/** Narrowest window, as a share of all. */
const NARROWEST = 1e-4;
/** Narrowest window that is still to be seen and pressed in the wide view. */
const NARROWEST_MARKED = 2e-3;

/** A window kept within the full range; undefined once it spans it. */
export function keepWithin(window: Band, full: Band): Band | undefined {
  const span = full[1] - full[0];
  const width = Math.max(window[1] - window[0], span * NARROWEST);
  if (width >= span * (1 - 1e-9)) return undefined;
  const from = Math.min(Math.max(window[0], full[0]), full[1] - width);
  return [from, from + width];
}

/**
 * A window narrowed (factor < 1) or widened about a frequency, which keeps its place in it.
 */
export function zoomAbout(window: Band, frequency: number, factor: number, full: Band): Band | undefined {
  const from = frequency - (frequency - window[0]) * factor;
  const to = frequency + (window[1] - frequency) * factor;
  return keepWithin([from, to], full);
}

/** The window of a drag between two frequencies, in either direction. */
export function zoomTo(one: number, other: number, full: Band): Band | undefined {
  return keepWithin([Math.min(one, other), Math.max(one, other)], full);
}

/** What of a marked window is moved. */
export type WindowPart = "whole" | "lower" | "upper";

/** A window moved by so many Hz; it stops at the ends of the full range and keeps its width. */
export function moveWindow(window: Band, by: number, full: Band): Band {
  const width = Math.min(window[1] - window[0], full[1] - full[0]);
  const from = Math.min(Math.max(window[0] + by, full[0]), full[1] - width);
  return [from, from + width];
}

/** A window with one end moved by so many Hz, within the full range and never narrower than the narrowest. */
export function moveEnd(window: Band, end: "lower" | "upper", by: number, full: Band): Band {
  const least = (full[1] - full[0]) * NARROWEST_MARKED;
  return end === "lower"
    ? [Math.max(full[0], Math.min(window[0] + by, window[1] - least)), window[1]]
    : [window[0], Math.min(full[1], Math.max(window[1] + by, window[0] + least))];
}

/** A window to about a five-hundredth of its width, to be told in words. */
export function roundedWindow([from, to]: Band): Band {
  const step = 10 ** Math.floor(Math.log10(Math.max(to - from, 500) / 500));
  return [Math.round(from / step) * step, Math.round(to / step) * step];
}
