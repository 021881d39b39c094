// The temperature outlook: each line's worst margin at the ends of the range and at ambient, measured or predicted, and the drift observed.
import type { ReactNode } from "react";
import { complies, type Cell as ResultCell, type PlaceOutlook, type TemperaturePlace } from "~/rf/index";
import type { StatedDrift } from "~/rf/stated-measurement";
import { celsiusWords } from "./compliance-words";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { formatFrequency, formatMargin, formatNumber } from "./format";
import type { OutlookLineView } from "./outlook-production";
import { driftWords, lineWords } from "./outlook-words";
import { Section } from "./page";
import { VerdictMark, verdictColour, verdictTint } from "./verdict-mark";

interface TemperatureProps {
  lines: readonly OutlookLineView[];
  places: readonly TemperaturePlace[];
  temperatures: readonly { readonly lineKey: string; readonly places: readonly PlaceOutlook[] }[];
  rule: "simple" | "guarded";
  range: readonly [number, number] | null;
  statedDrift: StatedDrift | null;
  drift: DriftView;
  lowestTestFrequency: number | null;
}

export interface DriftView {
  readonly lineNumber: string | null;
  readonly measuredThroughout: number;
  readonly units: readonly {
    readonly unit: string;
    readonly centres: readonly { readonly celsius: number; readonly centre: number }[];
    readonly drift: { readonly below: number; readonly above: number; readonly whole: number };
  }[];
}

export function OutlookTemperature(props: TemperatureProps) {
  const { lines, places, temperatures, range, statedDrift } = props;
  const outlooks = new Map(temperatures.map((line) => [line.lineKey, line.places]));
  return (
    <Section title="Temperature outlook" note={noteOf(range, statedDrift)}>
      <Table label="Temperature outlook" rows="two-line">
        <thead>
          <tr role="row">
            <HeadCell className="w-11">Line</HeadCell>
            <HeadCell className="max-tablet:hidden">Requirement</HeadCell>
            {places.map(({ celsius, name }) => (
              <HeadCell key={celsius} figure parted className="w-36 pr-2">
                {celsiusWords(celsius)}
                <span className="block">{PLACE_WORDS[name]}</span>
              </HeadCell>
            ))}
          </tr>
        </thead>
        <tbody>
          {lines.map((line) => (
            <LineRow key={line.lineKey} line={line} outlook={outlooks.get(line.lineKey) ?? []} {...props} />
          ))}
        </tbody>
      </Table>
      <Drift {...props} />
    </Section>
  );
}

const PLACE_WORDS: Record<TemperaturePlace["name"], string> = {
  low: "low end",
  ambient: "ambient",
  high: "high end",
  other: "also measured",
};

function noteOf(range: TemperatureProps["range"], stated: StatedDrift | null): string {
  const worst = "The worst margin of all units at each temperature, and the unit that has it.";
  if (range === null) return `${worst} The specification gives no temperature range.`;
  if (stated === null) return `${worst} No drift is stated: nothing is predicted.`;
  return `${worst} Where a unit was not measured at an end, its ambient data moved by the stated ${statedWords(stated)} is shown as predicted.`;
}

function statedWords({ ppmPerKelvin, either, lossPerKelvin }: StatedDrift): string {
  const drift = either
    ? `± ${formatNumber(Math.abs(ppmPerKelvin), 1)} ppm/K, the worse of both signs,`
    : `${driftWords(ppmPerKelvin)} ppm/K`;
  if (lossPerKelvin === undefined) return drift;
  return `${drift} and a conductors' resistance that rises by ${formatNumber(lossPerKelvin * 100, 2)} % a kelvin`;
}

interface LineRowProps extends Pick<TemperatureProps, "rule" | "lowestTestFrequency"> {
  line: OutlookLineView;
  outlook: readonly PlaceOutlook[];
}

function LineRow({ line, outlook, rule, lowestTestFrequency }: LineRowProps) {
  const { requirement, condition, scale, unit } = lineWords(line.definition, lowestTestFrequency);
  return (
    <Row>
      <RowHead className="max-tablet:max-w-36 max-tablet:min-w-36 max-tablet:py-1 max-tablet:pr-2!">
        {line.lineNumber}
        <span className="font-normal tablet:hidden"> {requirement}</span>
        <span className="block text-12 font-normal text-quiet tablet:hidden">{condition}</span>
      </RowHead>
      <Cell className="py-1 max-tablet:hidden">
        <TwoLines upper={requirement} lower={condition} />
      </Cell>
      {outlook.map(({ place, measured, predicted }) => (
        <Cell key={place.celsius} figure parted className={`py-1 pr-2! ${tintOf(measured ?? predicted, rule)}`}>
          {measured ? <Worst cell={measured} scale={scale} unit={unit} /> : null}
          {predicted ? <Worst cell={predicted} scale={scale} unit={unit} isPredicted /> : null}
          {measured || predicted ? null : <span className="text-quiet">not measured</span>}
        </Cell>
      ))}
    </Row>
  );
}

const tintOf = (cell: ResultCell | undefined, rule: "simple" | "guarded"): string =>
  cell?.scored ? verdictTint(cell.result.verdict, complies(cell.result.verdict, rule)) : "";

interface WorstProps {
  cell: ResultCell;
  scale: number;
  unit: string;
  isPredicted?: boolean;
}

function Worst({ cell: { unit: serial, scored, result }, scale, unit, isPredicted = false }: WorstProps) {
  const margin = result.margin * scale;
  const colour = !scored
    ? "text-quiet"
    : result.verdict === "pass"
      ? ""
      : `font-semibold ${verdictColour(result.verdict)}`;
  return (
    <span className="block">
      <span className={`inline-flex items-center gap-1.5 ${colour}`}>
        <VerdictMark verdict={result.verdict} size={12} />
        {Number.isNaN(margin) ? "no value" : `${formatMargin(margin)}${unit === "" ? "" : ` ${unit}`}`}
      </span>
      <span className="block text-12 text-quiet">
        {isPredicted ? "predicted, " : ""}
        {serial}
        {scored ? "" : ", not scored"}
      </span>
    </span>
  );
}

function Drift({ drift, range }: TemperatureProps) {
  const { lineNumber, units, measuredThroughout } = drift;
  if (range === null || lineNumber === null) return null;
  if (units.length === 0)
    return (
      <p className="mt-4 text-13 text-quiet">
        No drift observed: no unit was measured at both ends of the range and at ambient.
      </p>
    );
  const left = measuredThroughout - units.length;
  return (
    <>
      <h3 className="mt-6 pb-1">Drift observed</h3>
      <Table label="Drift observed">
        <thead>
          <tr role="row">
            <HeadCell>Unit</HeadCell>
            {(units[0]?.centres ?? []).map(({ celsius }, index) => (
              <HeadCell key={celsius} figure className="w-44">
                Centre, {CENTRE_PLACES[index]}
              </HeadCell>
            ))}
            <HeadCell figure className="w-36">
              Low end to ambient
            </HeadCell>
            <HeadCell figure className="w-36">
              Ambient to high end
            </HeadCell>
            <HeadCell figure className="w-36">
              Over the range
            </HeadCell>
          </tr>
        </thead>
        <tbody>
          {units.map(({ unit, centres, drift: found }) => (
            <Row key={unit}>
              <RowHead className="whitespace-nowrap">{unit}</RowHead>
              {centres.map(({ celsius, centre }) => (
                <Cell key={celsius} figure>
                  {Number.isNaN(centre) ? "none" : formatFrequency(centre, { decimals: 5 })}
                  <span className="text-quiet"> at {celsiusWords(celsius)}</span>
                </Cell>
              ))}
              {[found.below, found.above, found.whole].map((figure, index) => (
                <Cell key={index} figure>
                  {Number.isNaN(figure) ? "–" : `${driftWords(figure)} ppm/K`}
                </Cell>
              ))}
            </Row>
          ))}
        </tbody>
      </Table>
      <Method>
        Measured, not predicted: apparent drift of the centre, the mean of the first 3 dB crossings on both sides of the
        peak in the passband of line {lineNumber}, against the centre at ambient. A response that changes its shape with
        temperature moves it too; the measurement&rsquo;s uncertainty is not in it.
        {left > 0 ? ` ${left} more ${left === 1 ? "unit was" : "units were"} measured at all three.` : ""}
      </Method>
    </>
  );
}

const CENTRE_PLACES = ["low end", "ambient", "high end"] as const;

function Method({ children }: { children: ReactNode }) {
  return <p className="mt-3 max-w-180 text-13 text-quiet">{children}</p>;
}
