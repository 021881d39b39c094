// Margin against frequency of one line at one measurement, with the band between the ends of each reading.
import { useMemo, useState } from "react";
import { href } from "react-router";
import type { WorstPoint } from "~/charts/types";
import { ValueFigure } from "~/charts/value-figure";
import type { ValuePanel, ValueSeries } from "~/charts/value-plot";
import { quantile } from "~/charts/value-scale";
import { verdictPhrase } from "~/charts/words";
import { curveDataSearch } from "~/forms/curves";
import { readNumber, type Band } from "~/rf/index";
import type { MarginData } from "~/rf/curve-data";
import { isPointwise } from "~/rf/margin-curve";
import { shownResult, type ComplianceLine } from "./compliance-words";
import { lineOfKind, type PlacedLine } from "./curves-chosen";
import { useCurves } from "./curves-fetch";
import type { CurvesViewProps } from "./curves-view";
import { placeWords, reportedPoint } from "./curves-words";
import { formatBand, formatFrequency, formatMargin } from "./format";
import { Notice } from "./notice";
import { describeDefinition, requirementUnit } from "./requirement-words";

export interface MarginAnswer {
  readonly view: "margin";
  readonly margin: MarginData | null;
}

/** A line that each frequency has a margin for. */
export const hasMarginCurve = ({ definition }: Pick<ComplianceLine, "definition">): boolean =>
  definition.kind !== "declared" && isPointwise({ ...definition, id: "" });

export function CurvesMargin(props: CurvesViewProps<MarginAnswer>) {
  const { selected } = props.chosen;
  const drawn = lineOfKind(props.chosen, hasMarginCurve);
  if (!drawn) return <Notice>No line of this specification has a margin at each frequency.</Notice>;
  return (
    <>
      {selected && selected !== drawn ? (
        <Notice className="mb-4">
          Line {selected.line.lineNumber}, {describeDefinition(selected.line.definition).requirement.toLowerCase()}, is
          one figure over its band and has no margin at a frequency. Line {drawn.line.lineNumber} is drawn.
        </Notice>
      ) : null}
      <MarginOfLine {...props} drawn={drawn} key={drawn.line.lineKey} />
    </>
  );
}

function MarginOfLine({
  quoteId,
  chosen,
  values,
  table,
  drawn,
}: CurvesViewProps<MarginAnswer> & { drawn: PlacedLine }) {
  const { place } = chosen;
  const { lineNumber, definition } = drawn.line;
  const [window, setWindow] = useState<Band>();
  const query = { view: "margin", unit: place.unit, temperature: place.celsius, line: lineNumber } as const;
  const address = `${href("/api/v1/quotes/:quoteId/curves", { quoteId })}${curveDataSearch(query)}`;
  const data = useCurves<MarginAnswer>(address, window, values)?.margin ?? undefined;
  const panel = useMemo(() => (data ? marginPanel(data, drawn) : undefined), [data, drawn]);
  const full = roomAbout(data?.band ?? bandOf(drawn.line));
  const deciding = drawn.cell.result.decidingFrequency;
  const title = `Margin of line ${lineNumber}, ${placeWords(place)}`;
  if (data?.stretches.length === 0)
    return (
      <Notice tone="near">{drawn.cell.result.reason ?? "Nothing of this line was reached by this measurement."}</Notice>
    );
  return (
    <ValueFigure
      panels={panel && [panel]}
      full={full}
      parts={Number.isFinite(deciding) ? [{ name: "Deciding point", window: closeTo(deciding, full) }] : []}
      title={title}
      description={describe(drawn)}
      unit={shownResult(definition, drawn.cell).unit}
      format={(value) => formatMargin(value)}
      caption={<Caption data={data} drawn={drawn} />}
      table={table}
      onWindowChange={setWindow}
    />
  );
}

const bandOf = ({ definition }: ComplianceLine): Band => ("band" in definition ? definition.band : [1e9, 2e9]);

/** A little room on either side, so that the ends of the wall are seen; more about a spot. */
function roomAbout([from, to]: Band): Band {
  const room = Math.max((to - from) * 0.03, to * 1e-4);
  return [Math.max(0, from - room), to + room];
}

function closeTo(frequency: number, [from, to]: Band): Band {
  const half = (to - from) * 0.06;
  const start = Math.min(Math.max(frequency - half, from), to - 2 * half);
  return [start, start + 2 * half];
}

function marginPanel(data: MarginData, drawn: PlacedLine): ValuePanel {
  const { line, cell } = drawn;
  const shown = shownResult(line.definition, cell);
  const scale = line.definition.kind === "declared" ? 1 : requirementUnit(line.definition.kind).scale;
  const stretches = data.stretches.map(({ sweepId, frequency, margin, lower, upper }, index) => {
    const figures = (stored: typeof margin) => stored.map((value) => readNumber(value) * scale);
    return {
      id: `${sweepId} ${index}`,
      label: "Margin",
      frequency,
      value: figures(margin),
      lower: figures(lower),
      upper: figures(upper),
    };
  });
  const deciding = cell.result.decidingFrequency;
  return {
    id: "margin",
    title: `Margin, ${shown.unit}`,
    series: stretches,
    bands: stretches,
    walls: [{ id: line.lineKey, lineNumber: line.lineNumber, band: data.band, limit: 0, side: "below" }],
    marks: [markOf(drawn, stretches)],
    signs: Number.isFinite(deciding) ? [{ frequency: deciding, label: `decided at ${formatFrequency(deciding)}` }] : [],
    extent: (window) => marginExtent(stretches, window),
  };
}

type Stretch = ValueSeries & { readonly lower: readonly number[]; readonly upper: readonly number[] };

/** The reported point with the ends of its margin as drawn there. */
function markOf(drawn: PlacedLine, stretches: readonly Stretch[]) {
  const point: WorstPoint = reportedPoint(drawn);
  const value = point.margin;
  const ends = stretches.flatMap(({ frequency, lower, upper }) =>
    frequency.flatMap((hz, index) =>
      Math.abs(hz - point.frequency) < 1 ? [[lower[index] ?? value, upper[index] ?? value] as const] : [],
    ),
  );
  return { point, value, interval: ends[0] ?? ([value, value] as const) };
}

/** Zero with some of the wall, the least lower end, and nine tenths of the margins: nulls run off the top. */
function marginExtent(stretches: readonly Stretch[], window: Band): readonly [number, number] {
  const seen = stretches.flatMap(({ frequency, value, lower }) =>
    frequency.flatMap((hz, index) =>
      hz >= window[0] && hz <= window[1] ? [{ margin: value[index] ?? NaN, lower: lower[index] ?? NaN }] : [],
    ),
  );
  const finite = seen.filter(({ margin, lower }) => Number.isFinite(margin) && Number.isFinite(lower));
  if (finite.length === 0) return [-1, 1];
  const least = Math.min(0, ...finite.map(({ lower }) => lower));
  const most = Math.max(
    quantile(
      finite.map(({ margin }) => margin),
      0.9,
    ),
    Math.min(...finite.map(({ margin }) => margin)),
    0,
  );
  const span = most - least || 1;
  return [least - 0.14 * span, most + 0.08 * span];
}

function describe({ line, cell }: PlacedLine): string {
  const words = describeDefinition(line.definition);
  const deciding = cell.result.decidingFrequency;
  const decided = Number.isFinite(deciding) ? ` Decided at ${formatFrequency(deciding)}.` : "";
  return `Margin against frequency of ${words.requirement.toLowerCase()}, ${words.limit}, ${words.band}. Line ${verdictPhrase(reportedPoint({ line, cell }))}.${decided} Below zero is hatched.`;
}

function Caption({ data, drawn }: { data: MarginData | undefined; drawn: PlacedLine }) {
  const words = describeDefinition(drawn.line.definition);
  const missing = data?.missing ?? [];
  return (
    <>
      <span>
        Line {drawn.line.lineNumber}, {words.requirement.toLowerCase()}, {words.limit}
      </span>
      <span>
        {drawn.cell.scored ? "" : "Shown, not scored: not asked at this temperature. "}
        Above zero complies; grey between the ends of each reading (k = 2)
      </span>
      {missing.length === 0 ? null : <span>Not covered: {missing.map((band) => formatBand(band)).join(", ")}</span>}
    </>
  );
}
