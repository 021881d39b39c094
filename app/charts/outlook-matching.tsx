// How units differ over a passband: loss and phase of each against the mean of all, over one frequency axis.
import { useId } from "react";
import { scaleLinear } from "@visx/scale";
import { formatFrequency, formatNumber, frequencyUnit } from "~/components/format";
import { decimalsOf } from "./level-scale";
import { stripTicks } from "./strip-scale";

type Points = readonly (readonly [hz: number, figure: number])[];

export interface MatchingCurveView {
  readonly unit: string;
  /** dB. */
  readonly level: Points;
  /** Degree. */
  readonly phase: Points;
}

interface MatchingFigureProps {
  readonly curves: readonly MatchingCurveView[];
  /** Hz. */
  readonly band: readonly [number, number];
  /** The two units that differ most, and where. */
  readonly level: { readonly units: readonly [string, string]; readonly frequency: number };
  readonly phase: { readonly units: readonly [string, string]; readonly frequency: number };
}

interface Size {
  readonly width: number;
  readonly height: number;
  readonly left: number;
  readonly right: number;
}

const DESK: Size = { width: 860, height: 400, left: 60, right: 20 };
const PHONE: Size = { width: 358, height: 380, left: 48, right: 12 };
const TOP = 26;
const GAP = 40;
const BOTTOM = 46;

/** Drawn for wide pages and for phones; the page shows the one that fits. */
export function OutlookMatching(props: MatchingFigureProps) {
  return (
    <figure>
      <Drawn {...props} size={DESK} className="max-tablet:hidden" />
      <Drawn {...props} size={PHONE} className="tablet:hidden" />
    </figure>
  );
}

function Drawn({
  curves,
  band,
  level,
  phase,
  size,
  className,
}: MatchingFigureProps & { size: Size; className: string }) {
  const { width, height, left, right } = size;
  const panelHeight = (height - TOP - GAP - BOTTOM) / 2;
  const toX = scaleLinear<number>({ domain: [...band], range: [left, width - right] });
  const shared = { toX, size, height: panelHeight };
  return (
    <svg
      role="img"
      aria-label={`Difference of ${curves.length} units from their mean over the passband: loss, and phase under it`}
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      style={{ maxWidth: width }}
      fontSize={12}
      className={`tabular-nums ${className}`}
    >
      <Panel
        {...shared}
        top={TOP}
        title="Loss S21 less the mean, dB"
        growsDown
        series={curves.map((curve) => ({ unit: curve.unit, points: curve.level }))}
        worst={level}
      />
      <Panel
        {...shared}
        top={TOP + panelHeight + GAP}
        title="Phase S21 less the mean, degrees"
        series={curves.map((curve) => ({ unit: curve.unit, points: curve.phase }))}
        worst={phase}
      />
      <FrequencyAxis toX={toX} band={band} y={height - BOTTOM} count={size === PHONE ? 3 : 7} />
    </svg>
  );
}

interface PanelProps {
  toX: (hz: number) => number;
  size: Size;
  top: number;
  height: number;
  title: string;
  /** Loss does, as in the drawing. */
  growsDown?: boolean;
  series: readonly { readonly unit: string; readonly points: Points }[];
  worst: MatchingFigureProps["level"];
}

function Panel({
  toX,
  size: { width, left, right },
  top,
  height,
  title,
  growsDown = false,
  series,
  worst,
}: PanelProps) {
  const clipId = useId();
  const figures = series.flatMap(({ points }) => points.map(([, figure]) => figure));
  const most = Math.max(1e-9, ...figures.map(Math.abs)) * 1.12;
  const toY = (figure: number) => top + (height * (1 + (growsDown ? figure : -figure) / most)) / 2;
  const ticks = stripTicks(-most, most, 6);
  const decimals = Math.max(...ticks.map(decimalsOf));
  const pathOf = (points: Points) =>
    points.map(([hz, y], index) => `${index === 0 ? "M" : "L"}${toX(hz).toFixed(1)} ${toY(y).toFixed(1)}`).join("");
  const [high, low] = worst.units;
  const pair = [
    { unit: high, stroke: "var(--color-ink)", dash: undefined },
    { unit: low, stroke: "var(--color-signal)", dash: "7 3" },
  ];
  const x = toX(worst.frequency);
  return (
    <g>
      <text x={left} y={top - 9} fill="var(--color-quiet)">
        {title}
      </text>
      {ticks.map((tick) => (
        <g key={tick}>
          <line x1={left} x2={width - right} y1={toY(tick)} y2={toY(tick)} stroke="var(--color-rule)" />
          <line x1={left - 5} x2={left} y1={toY(tick)} y2={toY(tick)} stroke="var(--color-ink)" />
          <text x={left - 9} y={toY(tick) + 4} textAnchor="end" fill="var(--color-ink)">
            {formatNumber(tick, decimals)}
          </text>
        </g>
      ))}
      <clipPath id={clipId}>
        <rect x={left} y={top} width={width - left - right} height={height} />
      </clipPath>
      <g clipPath={`url(#${clipId})`} fill="none" strokeLinejoin="round">
        <line x1={x} x2={x} y1={top} y2={top + height} stroke="var(--color-edge)" strokeDasharray="14 3 2 3" />
        {series
          .filter(({ unit }) => unit !== high && unit !== low)
          .map(({ unit, points }) => (
            <path key={unit} d={pathOf(points)} stroke="var(--color-edge)" />
          ))}
        {pair.map(({ unit, stroke, dash }) => (
          <path
            key={unit}
            d={pathOf(series.find((one) => one.unit === unit)?.points ?? [])}
            stroke={stroke}
            strokeWidth={1.75}
            strokeDasharray={dash}
          />
        ))}
      </g>
      <rect x={left} y={top} width={width - left - right} height={height} fill="none" stroke="var(--color-ink)" />
    </g>
  );
}

function FrequencyAxis({
  toX,
  band,
  y,
  count,
}: {
  toX: (hz: number) => number;
  band: readonly [number, number];
  y: number;
  count: number;
}) {
  const unit = frequencyUnit(band[1]);
  const scale = { GHz: 1e9, MHz: 1e6, kHz: 1e3, Hz: 1 }[unit];
  const ticks = stripTicks(band[0] / scale, band[1] / scale, count);
  const decimals = Math.max(...ticks.map(decimalsOf));
  const [from, to] = [toX(band[0]), toX(band[1])];
  return (
    <g textAnchor="middle" fill="var(--color-ink)">
      {ticks.map((tick) => (
        <g key={tick}>
          <line x1={toX(tick * scale)} x2={toX(tick * scale)} y1={y} y2={y + 5} stroke="var(--color-ink)" />
          <text x={toX(tick * scale)} y={y + 19}>
            {formatNumber(tick, decimals)}
          </text>
        </g>
      ))}
      <text x={(from + to) / 2} y={y + 38} fill="var(--color-quiet)">
        Frequency, {unit}
      </text>
    </g>
  );
}

/** "KCF-0205 has 0.12 dB more loss than …" stands beside; here the keys of the two lines. */
export function OutlookMatchingKey({ units, frequency }: MatchingFigureProps["level"]) {
  const [high, low] = units;
  return (
    <span className="inline-flex flex-wrap items-center gap-x-4 text-12">
      <KeyLine name={high} stroke="var(--color-ink)" />
      <KeyLine name={low} stroke="var(--color-signal)" dash="7 3" />
      <span className="text-quiet">at {formatFrequency(frequency)}</span>
    </span>
  );
}

function KeyLine({ name, stroke, dash }: { name: string; stroke: string; dash?: string }) {
  return (
    <span className="inline-flex items-center gap-1.75">
      <svg aria-hidden width={24} height={8} viewBox="0 0 24 8" className="mark-beside-text">
        <path d="M0 4h24" stroke={stroke} strokeWidth={1.75} strokeDasharray={dash} />
      </svg>
      {name}
    </span>
  );
}
