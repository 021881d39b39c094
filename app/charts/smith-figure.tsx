// Smith charts of both ports side by side: the whole or the passband enlarged, one readout for both, tables of the values.
import { useMemo, useRef, useState, type KeyboardEvent, type PointerEvent, type ReactNode } from "react";
import { formatFrequency } from "~/components/format";
import type { Band } from "~/rf/index";
import { FigureTable } from "./figure-table";
import { FigureDownload, FigureSwitch, FigureToolbar } from "./figure-tools";
import { useBoxWidth } from "./figure-size";
import { composeSmith, type SmithLimit, type SmithLocus, type SmithScene } from "./smith-plot";
import { smithReading, smithTable, smithWords } from "./smith-reading";
import { SmithSvg } from "./smith-svg";
import { radiusOf } from "./smith-grid";

export interface SmithPort {
  readonly port: 1 | 2;
  readonly loci: readonly SmithLocus[];
  readonly limits: readonly SmithLimit[];
}

interface SmithFigureProps {
  /** Absent while they are fetched. */
  readonly ports: readonly SmithPort[] | undefined;
  /** Hz; emphasised. */
  readonly bands: readonly Band[];
  readonly title: string;
  readonly caption: ReactNode;
  /** The tables stand open from the start. @default false */
  readonly table?: boolean | undefined;
}

const WAITING: readonly SmithPort[] = [
  { port: 1, loci: [], limits: [] },
  { port: 2, loci: [], limits: [] },
];

/** What an enlarged chart shows around a return-loss limit: this many times the |Γ| it allows. */
const ROOM_ABOUT_LIMIT = 2.4;
const LEAST_REACH = 0.1;
const REACH_WITHOUT_LIMIT = 0.4;

export function SmithFigure({ ports, bands, title, caption, table = false }: SmithFigureProps) {
  const figure = useRef<HTMLElement>(null);
  const [enlarged, setEnlarged] = useState(false);
  const [readout, setReadout] = useState<number>();
  const [tableOpen, setTableOpen] = useState(table);
  const shown = ports ?? WAITING;
  const reach = enlarged ? enlargedReach(shown) : 1;
  return (
    <figure ref={figure} className="m-0" aria-busy={ports === undefined}>
      <FigureToolbar
        readout={readoutLine(ports, readout)}
        waiting={!ports}
        tableOpen={tableOpen}
        onTable={setTableOpen}
      >
        <FigureSwitch
          label="Part of the chart"
          choices={[
            { name: "Whole", value: false },
            { name: "Enlarged", value: true },
          ]}
          value={enlarged}
          onChange={setEnlarged}
        />
      </FigureToolbar>
      <div className="grid grid-cols-1 gap-6 tablet:grid-cols-2">
        {shown.map((one) => (
          <SmithChart
            key={one.port}
            {...one}
            bands={bands}
            reach={reach}
            title={`${title}, port ${one.port}`}
            readout={readout}
            onReadout={ports ? setReadout : undefined}
          />
        ))}
      </div>
      <figcaption className="flex flex-wrap gap-x-6 pt-2 text-13 text-quiet">
        {caption}
        <FigureDownload figure={figure} name={title} waiting={!ports} />
      </figcaption>
      {tableOpen && ports ? (
        <div className="grid grid-cols-1 gap-x-6 desktop:grid-cols-2">
          {ports.map(({ port, loci }) => (
            <PortTable key={port} port={port} loci={loci} bands={bands} />
          ))}
        </div>
      ) : null}
    </figure>
  );
}

function enlargedReach(ports: readonly SmithPort[]): number {
  const radii = ports.flatMap(({ limits }) => limits.map(({ returnLoss }) => radiusOf(returnLoss)));
  if (radii.length === 0) return REACH_WITHOUT_LIMIT;
  return Math.min(1, Math.max(LEAST_REACH, ROOM_ABOUT_LIMIT * Math.max(...radii)));
}

function readoutLine(ports: readonly SmithPort[] | undefined, readout: number | undefined): string {
  if (!ports) return "Loading curves";
  if (readout === undefined) return "Point at a curve, or use the arrow keys on a chart";
  return formatFrequency(readout);
}

interface SmithChartProps extends SmithPort {
  readonly bands: readonly Band[];
  readonly reach: number;
  readonly title: string;
  readonly readout: number | undefined;
  readonly onReadout: ((frequency: number) => void) | undefined;
}

const DRAWN_SIZE = 560;

function SmithChart({ port, loci, limits, bands, reach, title, readout, onReadout }: SmithChartProps) {
  const { ref, width } = useBoxWidth();
  const size = width ?? DRAWN_SIZE;
  const scene = useMemo(() => composeSmith({ loci, bands, limits, reach, size }), [loci, bands, limits, reach, size]);
  const reading = readout === undefined ? undefined : smithReading(loci, readout);
  return (
    <div className="min-w-0">
      <h2 className="pb-1 text-15">{`Port ${port}, S${port}${port}`}</h2>
      <div ref={ref} className="relative aspect-square border border-rule bg-leaf">
        <SmithSvg scene={scene} title={title} description={describe(port, limits, bands)} />
        {onReadout && loci.length > 0 ? (
          <SmithSurface port={port} scene={scene} loci={loci} bands={bands} readout={readout} onReadout={onReadout} />
        ) : null}
      </div>
      <p className="min-h-10 pt-1 tablet:min-h-6 text-13 tabular-nums">
        {reading ? smithWords(reading) : emptyWords(loci, readout)}
      </p>
    </div>
  );
}

const emptyWords = (loci: readonly SmithLocus[], readout: number | undefined): string =>
  loci.length > 0 && readout !== undefined ? "No data at this frequency" : "";

function describe(port: 1 | 2, limits: readonly SmithLimit[], bands: readonly Band[]): string {
  const wanted = limits.map(({ lineNumber, returnLoss }) => `line ${lineNumber} return loss at least ${returnLoss} dB`);
  const emphasised = bands.length > 0 ? " The stretch within the passband is drawn strong." : "";
  const circles = wanted.length > 0 ? ` Circles: ${wanted.join(", ")}; outside is hatched.` : "";
  return `Reflection of port ${port} in the plane of Γ with circles of constant resistance and reactance.${emphasised}${circles}`;
}

interface SurfaceProps extends Pick<SmithChartProps, "port" | "loci" | "bands" | "readout"> {
  readonly scene: SmithScene;
  readonly onReadout: (frequency: number) => void;
}

/** A slider along the locus: the pointer takes the nearest sample, keys step from one to the next. */
function SmithSurface({ port, scene, loci, bands, readout, onReadout }: SurfaceProps) {
  const surface = useRef<HTMLDivElement>(null);
  const samples = useMemo(() => samplesOf(loci), [loci]);
  const at = readout ?? middleOf(bands, samples);
  const reading = smithReading(loci, at);
  const onPoint = (event: PointerEvent) => {
    const box = surface.current?.getBoundingClientRect();
    if (!box) return;
    const scale = scene.size / box.width;
    const place = { x: (event.clientX - box.left) * scale, y: (event.clientY - box.top) * scale };
    const nearest = nearestSample(samples, scene.toReflection(place));
    if (nearest !== undefined) onReadout(nearest);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const next = steppedTo(event, samples, at);
    if (next === undefined) return;
    event.preventDefault();
    onReadout(next);
  };
  const mark = readout === undefined || !reading ? undefined : scene.toPixel(reading.x, reading.y);
  return (
    <div
      ref={surface}
      role="slider"
      tabIndex={0}
      aria-label={`Readout frequency of port ${port}`}
      aria-valuemin={samples[0]?.hz ?? 0}
      aria-valuemax={samples.at(-1)?.hz ?? 0}
      aria-valuenow={at}
      aria-valuetext={reading ? smithWords(reading) : formatFrequency(at)}
      className="absolute inset-0 cursor-crosshair touch-pan-y select-none print-hidden"
      onPointerMove={onPoint}
      onPointerDown={onPoint}
      onKeyDown={onKeyDown}
    >
      <svg viewBox={`0 0 ${scene.size} ${scene.size}`} width="100%" height="100%" aria-hidden className="block">
        {mark ? (
          <g stroke="var(--color-signal)" fill="none">
            <line x1={scene.rim.x} y1={scene.rim.y} x2={mark.x} y2={mark.y} />
            <circle cx={mark.x} cy={mark.y} r={5} strokeWidth={2} fill="var(--color-leaf)" />
          </g>
        ) : null}
      </svg>
    </div>
  );
}

interface Sample {
  readonly hz: number;
  readonly x: number;
  readonly y: number;
}

const samplesOf = (loci: readonly SmithLocus[]): Sample[] =>
  loci
    .flatMap(({ frequency, re, im }) =>
      frequency.map((hz, index) => ({ hz, x: re[index] ?? NaN, y: im[index] ?? NaN })),
    )
    .sort((one, other) => one.hz - other.hz);

const middleOf = (bands: readonly Band[], samples: readonly Sample[]): number => {
  const band = bands[0];
  return band ? (band[0] + band[1]) / 2 : (samples[Math.floor(samples.length / 2)]?.hz ?? 0);
};

function nearestSample(
  samples: readonly Sample[],
  { x, y }: { readonly x: number; readonly y: number },
): number | undefined {
  let nearest: Sample | undefined;
  let least = Infinity;
  for (const sample of samples) {
    const distance = (sample.x - x) ** 2 + (sample.y - y) ** 2;
    if (distance >= least) continue;
    least = distance;
    nearest = sample;
  }
  return nearest?.hz;
}

/** The next sample along the sweep, with Shift the tenth, Home and End the ends. */
function steppedTo(event: KeyboardEvent, samples: readonly Sample[], at: number): number | undefined {
  const step = event.shiftKey ? 10 : 1;
  const above = samples.findIndex(({ hz }) => hz > at);
  const next = above < 0 ? samples.length : above;
  const below = samples.findLastIndex(({ hz }) => hz < at);
  const places: Record<string, number> = {
    ArrowRight: next + step - 1,
    ArrowUp: next + step - 1,
    ArrowLeft: below - step + 1,
    ArrowDown: below - step + 1,
    Home: 0,
    End: samples.length - 1,
  };
  const place = places[event.key];
  return place === undefined ? undefined : samples[Math.min(Math.max(place, 0), samples.length - 1)]?.hz;
}

function PortTable({ port, loci, bands }: Pick<SmithChartProps, "port" | "loci" | "bands">) {
  const { heads, rows } = smithTable(loci, bands);
  const where = bands.length === 0 ? "" : " within the passband";
  return (
    <FigureTable
      label={`Values of port ${port}`}
      caption={`Port ${port}: ${rows.length} samples${where}`}
      heads={heads}
      rows={rows}
    />
  );
}
