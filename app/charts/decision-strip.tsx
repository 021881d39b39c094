// One decision: the value and its interval against the wall of its limit.
import { useId } from "react";
import { AxisBottom, type TickRendererProps } from "@visx/axis";
import { scaleLinear } from "@visx/scale";
import { VerdictShape, verdictColour, verdictWord } from "~/components/verdict-mark";
import { formatNumber } from "~/components/format";
import { HatchPattern } from "./drawing-walls";
import { valueScale } from "./strip-scale";
import type { DecisionStripProps } from "./types";
import { valueWithInterval } from "./words";

const HEIGHT = 84;
const AXIS = 56;
const MIDDLE = 30;
const INSET = 24;
const DEFAULT_WIDTH = 420;

export function DecisionStrip(props: DecisionStripProps) {
  const { value, interval, limit, sense, verdict, width = DEFAULT_WIDTH } = props;
  const id = useId();
  const scale = valueScale(limit, value, interval);
  const toX = scaleLinear<number>({ domain: [scale.from, scale.to], range: [INSET, width - INSET], clamp: true });
  const wall = toX(limit);
  const [from, to] = sense === "max" ? [wall, width - INSET] : [INSET, wall];
  return (
    <svg
      role="img"
      aria-label={decisionWords(props)}
      width="100%"
      viewBox={`0 0 ${width} ${HEIGHT}`}
      style={{ maxWidth: width }}
      fontSize={12}
      className="block tabular-nums"
    >
      <defs>
        <HatchPattern id={`${id}-hatch`} />
        <linearGradient id={`${id}-fade`} x1={sense === "max" ? 0 : 1} x2={sense === "max" ? 1 : 0}>
          <stop offset={0.3} stopColor="var(--color-leaf)" stopOpacity={0} />
          <stop offset={1} stopColor="var(--color-leaf)" stopOpacity={0.78} />
        </linearGradient>
      </defs>
      <rect x={from} y={4} width={to - from} height={AXIS - 4} fill={`url(#${id}-hatch)`} />
      <rect x={from} y={4} width={to - from} height={AXIS - 4} fill={`url(#${id}-fade)`} />
      <line x1={wall} x2={wall} y1={0} y2={AXIS} stroke="var(--color-ink)" strokeWidth={2.25} />
      <AxisBottom
        top={AXIS}
        scale={toX}
        tickValues={[...scale.ticks]}
        tickFormat={(tick) => formatNumber(Number(tick), scale.decimals)}
        tickLength={5}
        stroke="var(--color-ink)"
        tickStroke="var(--color-ink)"
        tickComponent={TickLabel}
      />
      <IntervalMark value={toX(value)} interval={[toX(interval[0]), toX(interval[1])]} verdict={verdict} />
    </svg>
  );
}

function TickLabel({ x, y, formattedValue }: TickRendererProps) {
  return (
    <text x={x} y={y + 5} textAnchor="middle" fill="var(--color-quiet)">
      {formattedValue}
    </text>
  );
}

interface IntervalMarkProps extends Pick<DecisionStripProps, "verdict"> {
  /** px, as is the interval. */
  readonly value: number;
  readonly interval: readonly [number, number];
}

function IntervalMark({ value, interval, verdict }: IntervalMarkProps) {
  const [from, to] = interval;
  return (
    <g className={verdictColour(verdict)}>
      <path
        d={`M${from} ${MIDDLE}H${to}M${from} ${MIDDLE - 5}v10M${to} ${MIDDLE - 5}v10`}
        fill="none"
        stroke="currentColor"
        strokeWidth={1.75}
      />
      <circle cx={value} cy={MIDDLE} r={9} fill="var(--color-leaf)" />
      <svg x={value - 8} y={MIDDLE - 8} width={16} height={16} viewBox="0 0 16 16">
        <VerdictShape verdict={verdict} />
      </svg>
    </g>
  );
}

function decisionWords({ value, interval, limit, sense, verdict, unit, label }: DecisionStripProps): string {
  const margin = sense === "max" ? limit - value : value - limit;
  const figure = Number.isNaN(value) ? "no value" : valueWithInterval({ value, interval, unit, limit, margin });
  return `${label}: ${figure}, ${sense} ${limit} ${unit}, ${verdictWord(verdict)}`;
}
