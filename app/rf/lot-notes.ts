// Doubts about the data of a lot that no sweep shows by itself: sweeps of one measurement that differ, units with the same data.
import type { Measurement, Note, Setup } from "./contract.ts";

/** A note and what it is about. */
export interface LotNote extends Note {
  /** Serial; of several units the first. */
  readonly unit: string;
  /** °C; absent where it is about the unit at all temperatures. */
  readonly temperature?: number;
  /** Ids of the sweeps it is about, if it is about sweeps. */
  readonly sweepIds?: readonly string[];
}

export interface LotContext {
  /** Ohm, of the specification. @default [50, 50] */
  readonly impedance?: readonly [number, number];
  readonly assumedSetup?: Setup;
}

/** Notes on the lot as a whole, by unit and temperature in order of first appearance. */
export function checkLot(_measurements: readonly Measurement[], _context: LotContext = {}): LotNote[] {
  return [];
}
