// Impedance at a port of one measurement, with the far port terminated and open: two different figures, both told.
import { useMemo, useState } from "react";
import { href, Link } from "react-router";
import { fullRange, passbandWindow } from "~/charts/frequency-range";
import { ValueFigure } from "~/charts/value-figure";
import type { ValuePanel, ValueSeries } from "~/charts/value-plot";
import { quantile } from "~/charts/value-scale";
import { passbands, wallsFromRequirements } from "~/charts/walls";
import { curveDataSearch, curvesSearch, type CurvesQuery } from "~/forms/curves";
import type { ImpedanceData, ImpedanceParts } from "~/rf/curve-data";
import type { Band } from "~/rf/index";
import { formatQuantity } from "~/rf/quantity";
import { formatNumber } from "./format";
import { useCurves } from "./curves-fetch";
import type { CurvesViewProps } from "./curves-view";
import { placeWords, scoredRequirements } from "./curves-words";
import { Notice } from "./notice";
import { Section, Split } from "./page";

export interface ImpedanceAnswer {
  readonly view: "impedance";
  readonly impedances: readonly ImpedanceData[];
}

export function CurvesImpedance(props: CurvesViewProps<ImpedanceAnswer> & { query: CurvesQuery }) {
  const { quoteId, chosen, values, table, query } = props;
  const { place, lines } = chosen;
  const { port } = query;
  const [window, setWindow] = useState<Band>();
  const asked = { view: "impedance", unit: place.unit, temperature: place.celsius, port } as const;
  const address = `${href("/api/v1/quotes/:quoteId/curves", { quoteId })}${curveDataSearch(asked)}`;
  const data = useCurves<ImpedanceAnswer>(address, window, values)?.impedances;
  const walls = useMemo(() => wallsFromRequirements(scoredRequirements(lines)), [lines]);
  const bands = useMemo(() => passbands(walls), [walls]);
  const panels = useMemo(() => data && impedancePanels(data, bands), [data, bands]);
  const full = fullOf(data) ?? fullRange(walls) ?? [1e9, 2e9];
  const passband = passbandWindow(walls, full);
  return (
    <Split>
      <div className="min-w-0">
        <PortLinks query={query} />
        <ValueFigure
          panels={panels}
          full={full}
          initialWindow={passband}
          parts={passband ? [{ name: "Passband", window: passband }] : []}
          passbands={bands}
          title={`Impedance at port ${port}, ${placeWords(place)}`}
          description={`Magnitude, resistance and reactance at port ${port} against frequency; above with the far port terminated, below with it open.`}
          unit="Ω"
          format={(value) => formatNumber(value, 1)}
          caption={<span>{placeWords(place)}. Peaks run off the frame.</span>}
          aspect={0.86}
          phoneHeight={520}
          table={table}
          onWindowChange={setWindow}
        />
      </div>
      {data ? <ImpedanceWords data={data} port={port} /> : null}
    </Split>
  );
}

function PortLinks({ query }: { query: CurvesQuery }) {
  return (
    <nav aria-label="Port" className="flex gap-x-5 pb-1 text-13 print-hidden">
      {([1, 2] as const).map((port) => (
        <Link
          key={port}
          to={curvesSearch({ ...query, port })}
          preventScrollReset
          aria-current={query.port === port ? "true" : undefined}
          className="border-b-2 border-transparent py-1 text-quiet no-underline hover:text-ink aria-[current=true]:border-signal aria-[current=true]:font-semibold aria-[current=true]:text-ink"
        >
          Port {port}
        </Link>
      ))}
    </nav>
  );
}

function fullOf(data: readonly ImpedanceData[] | undefined): Band | undefined {
  const first = Math.min(...(data ?? []).map(({ frequency }) => frequency[0] ?? Infinity));
  const last = Math.max(...(data ?? []).map(({ frequency }) => frequency.at(-1) ?? -Infinity));
  return first < last ? [first, last] : undefined;
}

function impedancePanels(data: readonly ImpedanceData[], bands: readonly Band[]): ValuePanel[] {
  const panelOf = (id: "terminated" | "open", title: string): ValuePanel => {
    const series = data.flatMap((sweep) => seriesOf(sweep, sweep[id]));
    return { id, title, columnSuffix: `, ${id}`, series, extent: (window) => impedanceExtent(series, bands, window) };
  };
  return [panelOf("terminated", "Far port terminated, Ω"), panelOf("open", "Far port open, Ω")];
}

function seriesOf({ sweepId, frequency }: ImpedanceData, { re, im }: ImpedanceParts): ValueSeries[] {
  const resistance = re.map((value) => value ?? NaN);
  const reactance = im.map((value) => value ?? NaN);
  const magnitude = resistance.map((value, index) => Math.hypot(value, reactance[index] ?? NaN));
  return [
    { id: `${sweepId} magnitude`, label: "Magnitude", frequency, value: magnitude },
    { id: `${sweepId} resistance`, label: "Resistance", frequency, value: resistance },
    { id: `${sweepId} reactance`, label: "Reactance", frequency, value: reactance },
  ];
}

/**
 * What the passbands in sight show, without them all that is in sight; zero included. The outermost hundredths are left
 * out: poles run off the frame.
 */
function impedanceExtent(
  series: readonly ValueSeries[],
  bands: readonly Band[],
  window: Band,
): readonly [number, number] {
  const within = (parts: readonly Band[]) =>
    series.flatMap(({ frequency, value }) =>
      value.filter((figure, index) => {
        const hz = frequency[index] ?? NaN;
        const isSeen = hz >= window[0] && hz <= window[1] && Number.isFinite(figure);
        return isSeen && parts.some(([from, to]) => hz >= from && hz <= to);
      }),
    );
  const inBands = within(bands);
  const finite = inBands.length > 0 ? inBands : within([window]);
  if (finite.length === 0) return [0, 100];
  const [least, most] = [Math.min(0, quantile(finite, 0.03)), Math.max(0, quantile(finite, 0.97))];
  const room = 0.1 * (most - least || 1);
  return [least < 0 ? least - room : 0, most + room];
}

/** What each of the two figures is, and where it does not exist. */
function ImpedanceWords({ data, port }: { data: readonly ImpedanceData[]; port: 1 | 2 }) {
  const far = port === 1 ? 2 : 1;
  const own = `S${port}${port}`;
  const termination = data[0]?.termination ?? 50;
  return (
    <Section title={`What port ${port} shows`} className="mt-0 max-desktop:mt-9">
      <dl className="grid grid-cols-[auto_minmax(0,1fr)] gap-x-5 gap-y-2 text-13">
        <dt className="font-semibold">Terminated</dt>
        <dd>
          What port {port} shows while port {far} is terminated in {formatQuantity(termination, "impedance")}:{" "}
          <span className="whitespace-nowrap">{`Z0 (1 + ${own}) / (1 − ${own})`}</span>. What a source sees of the
          filter in use.
        </dd>
        <dt className="font-semibold">Open</dt>
        <dd>
          Z{port}
          {port} of the impedance matrix: what port {port} shows while port {far} is left open. Another figure wherever
          anything passes through.
        </dd>
      </dl>
      {data.map((sweep) => (
        <Absent key={sweep.sweepId} sweep={sweep} />
      ))}
    </Section>
  );
}

function Absent({ sweep: { absent, points } }: { sweep: ImpedanceData }) {
  const sentences = [
    absent.terminated === points
      ? "The port's reflection was not measured: there is no impedance."
      : absent.terminated > 0
        ? `At ${absent.terminated} of ${points} samples the port reflects all in phase, an open circuit: no finite impedance exists there.`
        : "",
    absent.open === points
      ? "No open-circuit impedance: an S-parameter was not measured, or the two-port has no impedance matrix."
      : absent.open > 0
        ? `At ${absent.open} of ${points} samples no open-circuit impedance exists: 1 − S is singular there.`
        : "",
  ].filter((sentence) => sentence !== "");
  if (sentences.length === 0) return null;
  return (
    <Notice tone="near" className="mt-4">
      {sentences.join(" ")}
    </Notice>
  );
}
