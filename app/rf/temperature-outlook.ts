// The temperature outlook of a line: its worst cell, measured and predicted, at both ends of the range and at ambient.
import type { Cell, LotOptions } from "./contract.ts";
import { endsWithoutMeasurement, isAmbient } from "./lot-temperature.ts";
import { verdictRank } from "./verdict.ts";

export type TemperatureName = "low" | "ambient" | "high" | "other";

/** A temperature the specification names, or another one that was measured at. */
export interface TemperaturePlace {
  readonly name: TemperatureName;
  /** °C, nominal. */
  readonly celsius: number;
}

type Frame = Pick<LotOptions, "range" | "ambient">;
const USUAL_AMBIENT = 25;

/**
 * The place that a temperature speaks for: ambient within 5 °C, an end of the range up to 3 °C beyond it and 2 °C inside, the nearest where it
 * speaks for two; itself otherwise.
 */
export function placeOf(celsius: number, frame: Frame): TemperaturePlace {
  const near = namedPlaces(frame).filter(({ name, celsius: nominal }) =>
    name === "ambient" ? isAmbient(celsius, frame) : speaksForEnd(celsius, nominal, frame),
  );
  near.sort((one, other) => Math.abs(one.celsius - celsius) - Math.abs(other.celsius - celsius));
  return near[0] ?? { name: "other", celsius };
}

function speaksForEnd(celsius: number, end: number, { range }: Frame): boolean {
  return range !== undefined && !endsWithoutMeasurement([celsius], range).includes(end);
}

/** Ambient, and the ends of the range where one is given, ascending. */
export function namedPlaces({ range, ambient = USUAL_AMBIENT }: Frame): TemperaturePlace[] {
  const places: TemperaturePlace[] = [{ name: "ambient", celsius: ambient }];
  if (range !== undefined && range[0] !== ambient) places.push({ name: "low", celsius: range[0] });
  if (range !== undefined && range[1] !== ambient) places.push({ name: "high", celsius: range[1] });
  return places.sort((one, other) => one.celsius - other.celsius);
}

/** The named places and the other temperatures that cells were measured at, ascending. */
export function placesOf(temperatures: readonly number[], frame: Frame): TemperaturePlace[] {
  const found = new Map(namedPlaces(frame).map((place) => [place.celsius, place]));
  for (const celsius of temperatures) {
    const place = placeOf(celsius, frame);
    if (!found.has(place.celsius)) found.set(place.celsius, place);
  }
  return [...found.values()].sort((one, other) => one.celsius - other.celsius);
}

export interface PlaceOutlook {
  readonly place: TemperaturePlace;
  /** The worst measured cell; absent where nothing was measured. */
  readonly measured?: Cell;
  /** The worst predicted cell. */
  readonly predicted?: Cell;
}

/** A line's worst cells at each of the places. */
export function temperatureOutlook(
  cells: readonly Cell[],
  places: readonly TemperaturePlace[],
  frame: Frame,
): PlaceOutlook[] {
  return places.map((place) => {
    const here = cells.filter(({ temperature }) => placeOf(temperature, frame).celsius === place.celsius);
    const measured = worstOf(here.filter(({ predicted }) => !predicted));
    const predicted = worstOf(here.filter((cell) => cell.predicted));
    return {
      place,
      ...(measured === undefined ? {} : { measured }),
      ...(predicted === undefined ? {} : { predicted }),
    };
  });
}

/** The cell with the worst verdict, of equals the one with the least margin. */
function worstOf(cells: readonly Cell[]): Cell | undefined {
  return cells.reduce<Cell | undefined>((worst, cell) => {
    if (worst === undefined) return cell;
    const difference = verdictRank(cell.result.verdict) - verdictRank(worst.result.verdict);
    return difference < 0 || (difference === 0 && cell.result.margin < worst.result.margin) ? cell : worst;
  }, undefined);
}
