// Results as stored and sent: numbers as they are, null for NaN, "inf" and "-inf" for the infinities that JSON loses.
import type { Band, Cell, Result, Verdict } from "./contract.ts";

export type StoredNumber = number | null | "inf" | "-inf";

export interface StoredResult {
  readonly id: string;
  readonly verdict: Verdict;
  readonly value: StoredNumber;
  readonly frequency: StoredNumber;
  readonly limit: StoredNumber;
  readonly margin: StoredNumber;
  readonly interval: readonly [StoredNumber, StoredNumber];
  readonly marginInterval: readonly [StoredNumber, StoredNumber];
  readonly decidingFrequency: StoredNumber;
  readonly covered?: readonly Band[];
  readonly reason?: string;
  readonly assumed?: boolean;
  readonly bound?: "at-least" | "at-most";
}

export interface StoredCell {
  readonly unit: string;
  readonly temperature: number;
  readonly sweepId: string;
  readonly predicted: boolean;
  readonly scored: boolean;
  readonly result: StoredResult;
}

export function storeNumber(value: number): StoredNumber {
  if (Number.isNaN(value)) return null;
  if (value === Infinity) return "inf";
  return value === -Infinity ? "-inf" : value;
}

export function readNumber(value: StoredNumber): number {
  if (value === null) return NaN;
  if (value === "inf") return Infinity;
  return value === "-inf" ? -Infinity : value;
}

const storePair = (pair: readonly [number, number]): [StoredNumber, StoredNumber] => [
  storeNumber(pair[0]),
  storeNumber(pair[1]),
];
const readPair = (pair: readonly [StoredNumber, StoredNumber]): [number, number] => [
  readNumber(pair[0]),
  readNumber(pair[1]),
];

export function storeResult(result: Result): StoredResult {
  return {
    ...result,
    value: storeNumber(result.value),
    frequency: storeNumber(result.frequency),
    limit: storeNumber(result.limit),
    margin: storeNumber(result.margin),
    interval: storePair(result.interval),
    marginInterval: storePair(result.marginInterval),
    decidingFrequency: storeNumber(result.decidingFrequency),
  };
}

export function readResult(stored: StoredResult): Result {
  return {
    ...stored,
    value: readNumber(stored.value),
    frequency: readNumber(stored.frequency),
    limit: readNumber(stored.limit),
    margin: readNumber(stored.margin),
    interval: readPair(stored.interval),
    marginInterval: readPair(stored.marginInterval),
    decidingFrequency: readNumber(stored.decidingFrequency),
  };
}

export const storeCell = (cell: Cell): StoredCell => ({ ...cell, result: storeResult(cell.result) });
export const readCell = (cell: StoredCell): Cell => ({ ...cell, result: readResult(cell.result) });
