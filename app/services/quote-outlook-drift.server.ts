// Drift observed: the centre of the passband at both ends of the range and at ambient, of units measured at all three.
import type { MeasurementRow } from "~/db/models";
import type { Band, Measurement } from "~/rf/index";
import { observedDrift, passbandCentre, placeOf, type ObservedDrift, type TemperaturePlace } from "~/rf/index";
import { readNetworks } from "./measured-networks.server";
import { passbandsOf } from "./passbands.server";
import type { Person } from "./person.server";
import type { ScoringFrame } from "./scoring-sweeps.server";

/** Points of the files that a page reads without being asked; the first unit is read whatever it holds. */
const MOST_POINTS = 300_000;
const MOST_UNITS = 12;

export interface UnitDrift {
  readonly unit: string;
  /** °C as measured and the centre there, Hz (NaN where there is none): low end, ambient, high end. */
  readonly centres: readonly { readonly celsius: number; readonly centre: number }[];
  readonly drift: ObservedDrift;
}

export interface DriftObservations {
  /** The line in whose passband the peak was searched; null where the specification has none or gives no range. */
  readonly lineNumber: string | null;
  readonly units: readonly UnitDrift[];
  /** How many units were measured at both ends and at ambient. */
  readonly measuredThroughout: number;
}

export async function readObservedDrift(
  person: Person,
  frame: ScoringFrame,
  sweeps: readonly MeasurementRow[],
): Promise<DriftObservations> {
  const [passband] = passbandsOf(frame);
  if (!passband || frame.range === undefined) return { lineNumber: null, units: [], measuredThroughout: 0 };
  const throughout = unitsThroughout(sweeps, frame);
  const units: UnitDrift[] = [];
  for (const unit of withinPoints(throughout)) units.push(await driftOf(person, unit, passband.band, frame));
  return { lineNumber: passband.lineNumber, units, measuredThroughout: throughout.length };
}

interface ThroughoutUnit {
  readonly unit: string;
  /** Low end, ambient, high end: the sweeps nearest to each. */
  readonly groups: readonly { readonly celsius: number; readonly sweeps: readonly MeasurementRow[] }[];
}

const ENDS = ["low", "ambient", "high"] as const satisfies readonly TemperaturePlace["name"][];

function unitsThroughout(sweeps: readonly MeasurementRow[], frame: ScoringFrame): ThroughoutUnit[] {
  const units = [...new Set(sweeps.map(({ serial }) => serial ?? ""))];
  return units.flatMap((unit) => {
    const own = sweeps.filter(({ serial }) => (serial ?? "") === unit);
    const groups = ENDS.flatMap((name) => nearestGroup(own, name, frame));
    return groups.length === ENDS.length ? [{ unit, groups }] : [];
  });
}

/** The sweeps at the one temperature that is nearest to a place, if any speaks for it. */
function nearestGroup(sweeps: readonly MeasurementRow[], name: TemperaturePlace["name"], frame: ScoringFrame) {
  const there = [...new Set(sweeps.map(({ temperature }) => Number(temperature)))]
    .map((celsius) => ({ celsius, place: placeOf(celsius, frame) }))
    .filter(({ place }) => place.name === name);
  there.sort((a, b) => Math.abs(a.celsius - a.place.celsius) - Math.abs(b.celsius - b.place.celsius));
  const [nearest] = there;
  if (!nearest) return [];
  const { celsius } = nearest;
  return [{ celsius, sweeps: sweeps.filter(({ temperature }) => Number(temperature) === celsius) }];
}

function withinPoints(units: readonly ThroughoutUnit[]): ThroughoutUnit[] {
  let points = 0;
  return units.slice(0, MOST_UNITS).filter(({ groups }, index) => {
    points += groups.flatMap(({ sweeps }) => sweeps).reduce((sum, sweep) => sum + sweep.points, 0);
    return index === 0 || points <= MOST_POINTS;
  });
}

async function driftOf(
  person: Person,
  { unit, groups }: ThroughoutUnit,
  within: Band,
  { impedance }: ScoringFrame,
): Promise<UnitDrift> {
  const centres: UnitDrift["centres"][number][] = [];
  for (const { celsius, sweeps } of groups) {
    const networks = await readNetworks(
      person,
      sweeps.map(({ id }) => id),
    );
    const measurement: Measurement = {
      unit,
      temperature: celsius,
      sweeps: networks.map(({ network, measurement: { publicId } }) => ({ id: publicId, network })),
    };
    centres.push({ celsius, centre: passbandCentre(measurement, { within, impedance }) });
  }
  const [low, ambient, high] = centres as [
    UnitDrift["centres"][number],
    UnitDrift["centres"][number],
    UnitDrift["centres"][number],
  ];
  return { unit, centres, drift: observedDrift(low, ambient, high) };
}
