// The evidence grid: which of the asked units, temperatures and sweeps were delivered, which are missing, which came besides.
import { gapsOf, lackOf } from "./evidence-gaps.ts";
import type {
  DeliveredSweep,
  Evidence,
  EvidenceAsked,
  EvidenceCell,
  EvidenceColumn,
  EvidenceRow,
  PlacedSweep,
  TemperatureRole,
} from "./evidence-types.ts";
import { inWords } from "./evidence-words.ts";
import { coversRange, endsWithoutMeasurement, isAmbient } from "./lot-temperature.ts";

export type * from "./evidence-types.ts";

/** °C about a temperature that the plan adds. */
const PLAN_TOLERANCE = 2;
const SAME_TEMPERATURE = 0.05;

/**
 * Asked against delivered. A measurement speaks for an end of the range up to 3 °C beyond and 2 °C inside it, for ambient
 * within 5 °C, for a temperature of the plan within 2 °C. Of the units that came, those with the most over temperature are
 * the ones asked over temperature. Sweeps of one unit at one temperature deliver together.
 *
 * @param sameAs units whose data is another's to the bit, each with the unit it counts as
 */
export function evidenceOf(
  asked: EvidenceAsked,
  delivered: readonly DeliveredSweep[],
  sameAs: ReadonlyMap<string, string> = new Map(),
): Evidence {
  const sweeps = delivered.flatMap((sweep): PlacedSweep[] => {
    const { unit, temperature } = sweep;
    return unit === null || unit === "" || temperature === null ? [] : [{ ...sweep, unit, temperature }];
  });
  const countedAs = ({ unit }: PlacedSweep) => sameAs.get(unit) ?? unit;
  const columns = columnsOf(asked, sweeps);
  const own = [...new Set(sweeps.map(countedAs))].sort(byName).map((unit) => {
    const ofUnit = sweeps.filter((sweep) => countedAs(sweep) === unit);
    const copies = [...new Set(ofUnit.map((sweep) => sweep.unit))].filter((name) => name !== unit).sort(byName);
    return { unit, copies, sweeps: ofUnit, cells: columns.map((column) => cellOf(column, ofUnit, asked)) };
  });
  const rank = new Map(mostOverTemperature(asked, columns, own).map((unit, place) => [unit, place]));
  const named = own.map(({ unit, copies, cells }): EvidenceRow => {
    const place = rank.get(unit) ?? Infinity;
    return { unit, copies, overRange: place < asked.unitsOverRange, cells: askedOf(cells, columns, asked, place) };
  });
  const rows = [...named, ...absentRows(asked, columns, named.length)];
  const unplaced = delivered.length - sweeps.length;
  const isMeasured = (asked.basis ?? "measured") === "measured";
  const covering = own.filter((unit) => isMeasured && coversRange(unit.sweeps.map(temperatureOf), asked)).length;
  return { columns, rows, missing: inWords({ asked, columns, rows, unplaced, covering }) };
}

const names = new Intl.Collator("en", { numeric: true });
const byName = (a: string, b: string): number => names.compare(a, b);
const temperatureOf = ({ temperature }: PlacedSweep): number => temperature;

/** Asked temperatures and those measured besides, ascending. */
function columnsOf(asked: EvidenceAsked, sweeps: readonly PlacedSweep[]): EvidenceColumn[] {
  const { range, ambient, plan } = asked;
  const roles: [number, TemperatureRole][] = [
    [ambient, "ambient"],
    ...(range === undefined || asked.unitsOverRange === 0
      ? []
      : ([
          [range[0], "low-end"],
          [range[1], "high-end"],
        ] as [number, TemperatureRole][])),
  ];
  const isKnown = (celsius: number) => roles.some(([known]) => isSame(known, celsius));
  for (const celsius of plan.temperatures ?? []) if (!isKnown(celsius)) roles.push([celsius, "plan"]);
  const columns: EvidenceColumn[] = [];
  for (const [celsius, role] of roles) {
    const at = columns.findIndex((column) => isSame(column.celsius, celsius));
    if (at < 0) columns.push({ celsius, roles: [role] });
    else columns[at] = { celsius, roles: [...(columns[at] as EvidenceColumn).roles, role] };
  }
  const others = [...new Set(sweeps.map(temperatureOf))].filter(
    (celsius) => !columns.some((column) => speaksFor(celsius, column, asked)),
  );
  return [...columns, ...others.map((celsius): EvidenceColumn => ({ celsius, roles: [] }))].sort(
    (a, b) => a.celsius - b.celsius,
  );
}

const isSame = (one: number, other: number): boolean => Math.abs(one - other) <= SAME_TEMPERATURE;

/** Whether a measurement at a temperature is one that the column stands for. */
function speaksFor(celsius: number, column: EvidenceColumn, asked: EvidenceAsked): boolean {
  if (column.roles.length === 0) return celsius === column.celsius;
  const { range } = asked;
  return column.roles.every((role) => {
    if (role === "ambient") return isAmbient(celsius, asked);
    if (role === "plan") return Math.abs(celsius - column.celsius) <= PLAN_TOLERANCE;
    const end = role === "low-end" ? 0 : 1;
    return range !== undefined && !endsWithoutMeasurement([celsius], range).includes(range[end]);
  });
}

/** The cell of a unit, as if the column were asked of it. */
function cellOf(column: EvidenceColumn, ofUnit: readonly PlacedSweep[], asked: EvidenceAsked): EvidenceCell {
  const sweeps = ofUnit.filter(({ temperature }) => speaksFor(temperature, column, asked));
  if (sweeps.length === 0) return { state: "missing", sweeps, gaps: [] };
  const measurements = measurementsOf(sweeps);
  const gaps = measurements
    .map((one) => gapsOf(one, asked))
    .reduce((least, one) => (lackOf(one) < lackOf(least) ? one : least));
  if (gaps.length === 0) return { state: "delivered", sweeps, gaps };
  const isWholeTogether = measurements.length > 1 && gapsOf(sweeps, asked).length === 0;
  const apart = [...new Set(sweeps.map(temperatureOf))].sort((a, b) => a - b);
  return { state: "partly", sweeps, gaps, ...(isWholeTogether ? { apart } : {}) };
}

/** Sweeps of one unit, as it was named, at one temperature are one measurement. */
function measurementsOf(sweeps: readonly PlacedSweep[]): PlacedSweep[][] {
  const measurements = new Map<string, PlacedSweep[]>();
  for (const sweep of sweeps) {
    const key = `${sweep.temperature} ${sweep.unit}`;
    measurements.set(key, [...(measurements.get(key) ?? []), sweep]);
  }
  return [...measurements.values()];
}

/** The units that came, those first that were measured most over temperature. */
function mostOverTemperature(
  asked: EvidenceAsked,
  columns: readonly EvidenceColumn[],
  units: readonly { unit: string; sweeps: readonly PlacedSweep[]; cells: readonly EvidenceCell[] }[],
): string[] {
  const points = { delivered: 2, partly: 1, missing: 0, extra: 0, "not-asked": 0 } as const;
  const standing = units.map(({ unit, sweeps, cells }) => {
    const asAsked = cells.reduce(
      (sum, { state }, at) => sum + (columns[at]?.roles.length === 0 ? 0 : points[state]),
      0,
    );
    const covers = coversRange(sweeps.map(temperatureOf), asked);
    return { unit, standing: asAsked + (covers ? 2 * columns.length + 1 : 0) };
  });
  return standing.toSorted((a, b) => b.standing - a.standing).map(({ unit }) => unit);
}

/** The cells of the unit at a place among those over temperature: what is not asked of it is extra, or nothing. */
function askedOf(
  cells: readonly EvidenceCell[],
  columns: readonly EvidenceColumn[],
  asked: EvidenceAsked,
  place: number,
): EvidenceCell[] {
  return cells.map((cell, at) => {
    if (isAsked(columns[at] as EvidenceColumn, asked, place)) return cell;
    return { state: cell.sweeps.length > 0 ? "extra" : "not-asked", sweeps: cell.sweeps, gaps: [] };
  });
}

/** Ambient is asked of every unit, the rest of those over temperature; of one at least what the plan adds. */
function isAsked({ roles }: EvidenceColumn, { unitsOverRange: over }: EvidenceAsked, place: number): boolean {
  if (roles.length === 0) return false;
  if (roles.includes("ambient")) return true;
  return place < (roles.includes("plan") ? Math.max(1, over) : over);
}

/** Rows for units that were asked and did not come. */
function absentRows(asked: EvidenceAsked, columns: readonly EvidenceColumn[], came: number): EvidenceRow[] {
  const wanted = Math.max(asked.units, asked.unitsOverRange);
  const nothing = columns.map((): EvidenceCell => ({ state: "missing", sweeps: [], gaps: [] }));
  return Array.from({ length: Math.max(0, wanted - came) }, (_, index): EvidenceRow => {
    const place = came + index;
    return {
      unit: null,
      copies: [],
      overRange: place < asked.unitsOverRange,
      cells: askedOf(nothing, columns, asked, place),
    };
  });
}
