// What the RFQ asks of the measured data, and how much of it has been delivered.
import { VerdictMark } from "./verdict-mark";

/** As `listMeasurements` counts it. */
export interface DataAskedFacts {
  readonly units: number;
  readonly unitsAsked: number;
  readonly overRange: { readonly units: number; readonly asked: number } | null;
  readonly withoutSerial: number;
  readonly withoutTemperature: number;
}

interface AskedRow {
  readonly words: string;
  readonly isThere: boolean;
}

const counted = (count: number, noun: string): string => `${count} ${noun}${count === 1 ? "" : "s"}`;

/** What is asked, in words, each with whether it is there. */
export function askedRows({
  units,
  unitsAsked,
  overRange,
  withoutSerial,
  withoutTemperature,
}: DataAskedFacts): AskedRow[] {
  return [
    { words: `${counted(units, "unit")}, ${unitsAsked} asked`, isThere: units >= unitsAsked },
    ...(overRange === null
      ? []
      : [
          {
            words: `${counted(overRange.units, "unit")} over temperature, ${overRange.asked} asked: ambient and both ends of the range`,
            isThere: overRange.units >= overRange.asked,
          },
        ]),
    ...(withoutSerial > 0 ? [{ words: `${counted(withoutSerial, "file")} without a unit`, isThere: false }] : []),
    ...(withoutTemperature > 0
      ? [{ words: `${counted(withoutTemperature, "file")} without a temperature`, isThere: false }]
      : []),
  ];
}

export function DataAsked({ asked }: { asked: DataAskedFacts }) {
  return (
    <ul className="flex flex-wrap gap-x-7 gap-y-1 text-13">
      {askedRows(asked).map(({ words, isThere }) => (
        <li key={words} className={`flex items-start gap-2 ${isThere ? "" : "text-bare"}`}>
          <span className="flex h-5 items-center">
            <VerdictMark verdict={isThere ? "pass" : "not-covered"} silent />
          </span>
          <span>
            {words}
            <span className="sr-only">{isThere ? ", delivered" : ", missing"}</span>
          </span>
        </li>
      ))}
    </ul>
  );
}
