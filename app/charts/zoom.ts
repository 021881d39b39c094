// The part of the frequency axis a figure shows, as it is zoomed and moved; undefined is all of it.
import type { Band } from "~/rf/index";

/** Narrowest window, as a share of all. */
const NARROWEST = 1e-4;

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
