// All lines' margins on one strip: the wall at zero, hatched to its left, a tick a line, the worst with its mark.
import { useId } from "react";
import { VerdictShape, verdictColour, verdictWord } from "~/components/verdict-mark";
import { formatMargin } from "~/components/format";
import { HatchPattern } from "./drawing-walls";
import { MARGIN_SCALE, STRIP_INSET, stripPlace, stripTicks } from "./strip-scale";
import type { MarginStripProps, StripMargin } from "./types";

const HEIGHT = 36;
const MIDDLE = HEIGHT / 2;
const DEFAULT_WIDTH = 240;

/** One quote's margins; every strip under one head has the same scale and width. */
export function MarginStrip({ margins, scale = MARGIN_SCALE, unit, width = DEFAULT_WIDTH, label }: MarginStripProps) {
  const id = useId();
  const zero = stripPlace(0, scale, width).x;
  const worst = worstOf(margins);
  const others = margins.filter((margin) => margin !== worst);
  return (
    <svg
      role="img"
      aria-label={stripWords(margins, worst, unit, label)}
      width={width}
      height={HEIGHT}
      viewBox={`0 0 ${width} ${HEIGHT}`}
      className="block"
    >
      <defs>
        <HatchPattern id={`${id}-hatch`} />
      </defs>
      <rect x={0} y={6} width={zero} height={24} fill={`url(#${id}-hatch)`} opacity={0.7} />
      <line x1={zero} x2={width} y1={MIDDLE} y2={MIDDLE} stroke="var(--color-rule)" strokeWidth={1.5} />
      <line x1={zero} x2={zero} y1={3} y2={33} stroke="var(--color-ink)" strokeWidth={2.25} />
      {others.map((margin) => (
        <LineTick key={margin.lineNumber} margin={margin} scale={scale} width={width} />
      ))}
      {worst ? <WorstMark margin={worst} scale={scale} width={width} /> : null}
    </svg>
  );
}

interface PlacedProps {
  readonly margin: StripMargin;
  readonly scale: readonly [number, number];
  readonly width: number;
}

function LineTick({ margin, scale, width }: PlacedProps) {
  const place = stripPlace(margin.margin, scale, width);
  const colour = margin.verdict === "pass" ? "text-ink" : verdictColour(margin.verdict);
  if (Number.isNaN(margin.margin)) return null;
  return (
    <g className={colour}>
      {place.beyond ? (
        <path d={chevron(place.x, place.beyond)} fill="none" stroke="currentColor" strokeWidth={1.75} />
      ) : (
        <line x1={place.x} x2={place.x} y1={MIDDLE - 6} y2={MIDDLE + 6} stroke="currentColor" strokeWidth={1.75} />
      )}
    </g>
  );
}

/** The worst margin's verdict mark on a patch of the page; a chevron beside it where it lies beyond the scale. */
function WorstMark({ margin, scale, width }: PlacedProps) {
  const place = stripPlace(margin.margin, scale, width);
  const inward = place.beyond === "left" ? 14 : place.beyond === "right" ? -14 : 0;
  const x = place.x + inward;
  return (
    <g className={verdictColour(margin.verdict)}>
      {place.beyond ? (
        <>
          <circle cx={place.x} cy={MIDDLE} r={8} fill="var(--color-sheet)" />
          <path d={chevron(place.x, place.beyond)} fill="none" stroke="currentColor" strokeWidth={1.75} />
        </>
      ) : null}
      <circle cx={x} cy={MIDDLE} r={9} fill="var(--color-sheet)" />
      <svg x={x - 8} y={MIDDLE - 8} width={16} height={16} viewBox="0 0 16 16">
        <VerdictShape verdict={margin.verdict} />
      </svg>
    </g>
  );
}

function chevron(x: number, beyond: "left" | "right"): string {
  return beyond === "right" ? `M${x - 3} ${MIDDLE - 5}l6 5l-6 5` : `M${x + 3} ${MIDDLE - 5}l-6 5l6 5`;
}

function worstOf(margins: readonly StripMargin[]): StripMargin | undefined {
  return margins
    .filter((margin) => !Number.isNaN(margin.margin))
    .reduce<StripMargin | undefined>(
      (worst, margin) => (worst && worst.margin <= margin.margin ? worst : margin),
      undefined,
    );
}

function stripWords(
  margins: readonly StripMargin[],
  worst: StripMargin | undefined,
  unit: string,
  label: string,
): string {
  if (!worst) return `${label}: no margins`;
  const least = `line ${worst.lineNumber} ${formatMargin(worst.margin, { decimals: 1 })} ${unit}`;
  const count = margins.length === 1 ? "1 line" : `${margins.length} lines`;
  return `${label}: ${count}, least margin ${least}, ${verdictWord(worst.verdict)}`;
}

/** The scale over a column of strips. */
export function MarginStripScale({
  scale = MARGIN_SCALE,
  width = DEFAULT_WIDTH,
}: {
  scale?: readonly [number, number];
  width?: number;
}) {
  const ticks = stripTicks(scale[0], scale[1], Math.max(2, Math.floor((width - 2 * STRIP_INSET) / 48)));
  return (
    <svg width={width} height={16} viewBox={`0 0 ${width} 16`} aria-hidden fontSize={12} className="block tabular-nums">
      {ticks.map((tick) => (
        <text key={tick} x={stripPlace(tick, scale, width).x} y={12} textAnchor="middle" fill="var(--color-quiet)">
          {tick === 0 ? "0" : formatMargin(tick, { decimals: 0 })}
        </text>
      ))}
    </svg>
  );
}
