// The production outlook: each line at each temperature, its units against the wall, and the share they speak for.
import { OutlookSpread, OutlookSpreadLegend } from "~/charts/outlook-spread";
import { toleranceFactor, type MeasuredDefinition, type ProductionOutlook, type TemperaturePlace } from "~/rf/index";
import { celsiusWords } from "./compliance-words";
import { Cell, GroupRow, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { formatMargin, formatNumber } from "./format";
import { Notice } from "./notice";
import { jointSentence, lineWords, listed, noOutlookWords, shareWords } from "./outlook-words";
import { Section } from "./page";

export interface OutlookLineView {
  readonly lineKey: string;
  readonly lineNumber: string;
  readonly definition: MeasuredDefinition;
}

interface PlaceView {
  readonly place: TemperaturePlace;
  readonly lines: readonly { readonly lineKey: string; readonly outlook: ProductionOutlook }[];
  readonly joint: number | null;
}

interface ProductionProps {
  lines: readonly OutlookLineView[];
  production: readonly PlaceView[];
  copies: readonly { readonly unit: string; readonly original: string }[];
  lowestTestFrequency: number | null;
  basis: "measured" | "similar" | "simulated";
}

export function OutlookProduction({ lines, production, copies, lowestTestFrequency, basis }: ProductionProps) {
  if (basis !== "measured")
    return (
      <Section title="Production outlook">
        <Notice tone="near">
          {basis === "simulated"
            ? "Simulated data is no sample of units: it says nothing of how a production spreads."
            : "Data of a similar part is no sample of the quoted one: it says nothing of how its production spreads."}
        </Notice>
      </Section>
    );
  const byKey = new Map(lines.map((line) => [line.lineKey, line]));
  return (
    <Section
      title="Production outlook"
      note="What share of a production conforms at least, line by line, with 95 % confidence, if these units are a random sample of it."
      tools={<OutlookSpreadLegend />}
    >
      <Table label="Production outlook" rows="two-line" stacks>
        <thead>
          <tr role="row">
            <HeadCell className="w-11">Line</HeadCell>
            <HeadCell>Requirement</HeadCell>
            <HeadCell figure className="w-16">
              Units
            </HeadCell>
            <HeadCell className="pl-5! desktop:w-80">Margins, wall at zero</HeadCell>
            <HeadCell figure className="w-28">
              Mean margin
            </HeadCell>
            <HeadCell figure className="w-24">
              Deviation s
            </HeadCell>
            <HeadCell figure className="w-36">
              Conform, at least
            </HeadCell>
          </tr>
        </thead>
        {production.map((place) => (
          <PlaceRows key={place.place.celsius} place={place} lines={byKey} lowestTestFrequency={lowestTestFrequency} />
        ))}
      </Table>
      <Assumptions production={production} copies={copies} />
    </Section>
  );
}

interface PlaceRowsProps {
  place: PlaceView;
  lines: ReadonlyMap<string, OutlookLineView>;
  lowestTestFrequency: number | null;
}

function PlaceRows({ place: { place, lines: here, joint }, lines, lowestTestFrequency }: PlaceRowsProps) {
  const numberOf = (key: string) => lines.get(key)?.lineNumber ?? "";
  const without = here.filter(({ outlook }) => outlook.kind === "none").map(({ lineKey }) => numberOf(lineKey));
  const withShare = here.length - without.length;
  return (
    <tbody>
      <GroupRow columns={7}>
        <span className="flex flex-wrap items-baseline gap-x-3">
          {celsiusWords(place.celsius)}
          {joint === null ? null : (
            <span className="font-normal">
              {withShare === 1 ? "The one line with a share" : `${withShare} lines together`}: {jointSentence(joint)}
              {without.length === 0 ? "." : `; without ${without.length === 1 ? "line" : "lines"} ${listed(without)}.`}
            </span>
          )}
        </span>
      </GroupRow>
      {here.map(({ lineKey, outlook }) => {
        const line = lines.get(lineKey);
        return line ? (
          <LineRow
            key={lineKey}
            line={line}
            outlook={outlook}
            celsius={place.celsius}
            lowestTestFrequency={lowestTestFrequency}
          />
        ) : null;
      })}
    </tbody>
  );
}

interface LineRowProps {
  line: OutlookLineView;
  outlook: ProductionOutlook;
  celsius: number;
  lowestTestFrequency: number | null;
}

function LineRow({ line, outlook, celsius, lowestTestFrequency }: LineRowProps) {
  const { requirement, condition, unit, scale } = lineWords(line.definition, lowestTestFrequency);
  const margins = outlook.margins.map((one) => ({ ...one, margin: one.margin * scale }));
  const withUnit = (text: string) => (unit === "" ? text : `${text} ${unit}`);
  const moments =
    outlook.kind === "found" ? { mean: outlook.mean * scale, deviation: outlook.deviation * scale } : undefined;
  const least = Math.min(...margins.map(({ margin }) => margin));
  return (
    <Row>
      <RowHead>
        {line.lineNumber}
        <span className="font-normal tablet:hidden"> {requirement}</span>
      </RowHead>
      <Cell className="min-w-44 py-1 max-tablet:order-2 max-tablet:col-span-2">
        <span className="max-tablet:hidden">
          <TwoLines upper={requirement} lower={condition} />
        </span>
        <span className="text-12 text-quiet tablet:hidden">{condition}</span>
      </Cell>
      <Cell figure className="max-tablet:order-1">
        {margins.length}
        <span className="tablet:hidden"> {margins.length === 1 ? "unit" : "units"}</span>
      </Cell>
      <Cell className="py-0! pl-5! max-tablet:order-3 max-tablet:col-span-2 max-tablet:pl-0!">
        <OutlookSpread
          margins={margins}
          {...(moments ? { moments } : {})}
          unit={unit}
          label={`Line ${line.lineNumber} at ${celsiusWords(celsius)}`}
        />
      </Cell>
      {outlook.kind === "found" && moments ? (
        <>
          <Cell figure className="max-tablet:order-4 max-tablet:text-left!" data-label="Mean margin">
            {withUnit(formatMargin(moments.mean))}
            <span className="block text-12 text-quiet">
              least {formatMargin(least)}
              <span className="tablet:hidden">, s {deviationFigure(moments.deviation)}</span>
            </span>
          </Cell>
          <Cell figure className="max-tablet:hidden!">
            {withUnit(deviationFigure(moments.deviation))}
          </Cell>
          <Cell figure className="max-tablet:order-5" data-label="Conform, at least">
            <span className="text-15 font-semibold">{shareWords(outlook.conforming)}</span>
          </Cell>
        </>
      ) : (
        <Cell
          colSpan={3}
          className="text-right! text-quiet max-tablet:order-4 max-tablet:col-span-2 max-tablet:text-left!"
        >
          {outlook.kind === "none" ? noOutlookWords(outlook.reason, margins.length) : null}
        </Cell>
      )}
    </Row>
  );
}

/** Two digits after the point, more for a small one: three that count. */
function deviationFigure(deviation: number): string {
  const decimals = deviation === 0 ? 2 : Math.min(6, Math.max(2, 2 - Math.floor(Math.log10(deviation))));
  return formatNumber(deviation, Math.min(decimals, 4));
}

/** What the figures take for granted, and how many units it would take. */
function Assumptions({ production, copies }: Pick<ProductionProps, "production" | "copies">) {
  const counts = production.flatMap(({ lines }) => lines.map(({ outlook }) => outlook.margins.length));
  const most = Math.max(0, ...counts);
  const factor = (units: number) => formatNumber(toleranceFactor(units, 0.9), 2);
  return (
    <div className="mt-4 max-w-180 space-y-1.5 text-13 text-quiet">
      <p>
        Taken for granted: the margins of a production are normally distributed, and these units were drawn from it at
        random, not chosen. The share p is the one whose exact one-sided tolerance factor k1(n, p, 0.95) is the mean
        margin over s, by the noncentral t distribution (ISO 16269-6). An error common to all units, of calibration or
        setup, is not in it.
      </p>
      {most >= 3 ? (
        <p>
          With {most} units, 90 % takes a mean margin of {factor(most)} s; with 10 units {factor(10)} s, with 30 units{" "}
          {factor(30)} s.
        </p>
      ) : null}
      <p>
        Lines together: 1 − Σ(1 − p), whatever they have to do with one another. The 95 % hold for each line by itself;
        all of them at once hold with less. Declared lines are not in it.
      </p>
      {copies.map(({ unit, original }) => (
        <p key={unit}>
          Unit {unit} holds the same data as unit {original}: the two count as one.
        </p>
      ))}
    </div>
  );
}
