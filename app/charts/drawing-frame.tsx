// Frame, grid, axes and drawing signs: what stands around and behind walls and curves.
import { AxisBottom, AxisLeft, type TickRendererProps } from "@visx/axis";
import { scaleLinear } from "@visx/scale";
import type { Band } from "~/rf/index";
import { estimateTextWidth } from "./boxes";
import type { DrawingLayout, PanelLayout } from "./layout";
import type { PanelScene } from "./scene";
import { formatWidth } from "./words";

const TICK_LENGTH = 5;
const ARROWHEAD_LENGTH = 9;

/** Grid lines at every tick of both axes. */
export function Grid({ layout, panel }: { layout: DrawingLayout; panel: PanelLayout }) {
  return (
    <g stroke="var(--color-rule)" shapeRendering="crispEdges">
      {layout.frequency.ticks.map(({ frequency, label }) => (
        <line key={label} x1={layout.toX(frequency)} x2={layout.toX(frequency)} y1={panel.top} y2={panel.bottom} />
      ))}
      {panel.level.ticks.map(({ level, label }) => (
        <line
          key={label}
          x1={panel.left}
          x2={panel.right}
          y1={panel.level.toPixel(level)}
          y2={panel.level.toPixel(level)}
        />
      ))}
    </g>
  );
}

export function Frame({ panel }: { panel: PanelLayout }) {
  return (
    <rect
      x={panel.left}
      y={panel.top}
      width={panel.right - panel.left}
      height={panel.bottom - panel.top}
      fill="none"
      stroke="var(--color-ink)"
      shapeRendering="crispEdges"
    />
  );
}

/** Level ticks of a panel, outward, and the axis title: upright beside it, or above it on phones. */
export function LevelAxis({ layout, panel }: { layout: DrawingLayout; panel: PanelLayout }) {
  const labels = new Map(panel.level.ticks.map((tick) => [tick.level, tick.label]));
  const middle = (panel.top + panel.bottom) / 2;
  return (
    <g>
      <AxisLeft
        left={panel.left}
        scale={panel.level.scale}
        tickValues={panel.level.ticks.map((tick) => tick.level)}
        tickFormat={(level) => labels.get(Number(level)) ?? ""}
        tickLength={TICK_LENGTH}
        tickStroke="var(--color-ink)"
        hideAxisLine
        tickComponent={LevelLabel}
      />
      {layout.phone ? (
        <text x={8} y={panel.top - (panel === layout.panels[0] ? 19 : 8)} fill="var(--color-quiet)">
          {panel.title}
        </text>
      ) : (
        <text transform={`translate(16 ${middle}) rotate(-90)`} textAnchor="middle" fill="var(--color-quiet)">
          {panel.title}
        </text>
      )}
    </g>
  );
}

function LevelLabel({ x, y, formattedValue }: TickRendererProps) {
  return (
    <text x={x - 4} y={y + 4} textAnchor="end" fill="var(--color-ink)">
      {formattedValue}
    </text>
  );
}

/** The one frequency axis, under the lowest panel. */
export function FrequencyAxis({ layout }: { layout: DrawingLayout }) {
  const panel = layout.panels[layout.panels.length - 1];
  if (!panel) return null;
  const labels = new Map(layout.frequency.ticks.map((tick) => [tick.frequency, tick.label]));
  return (
    <g>
      <AxisBottom
        top={panel.bottom}
        scale={scaleLinear<number>({ domain: [...layout.window], range: [panel.left, panel.right] })}
        tickValues={layout.frequency.ticks.map((tick) => tick.frequency)}
        tickFormat={(frequency) => labels.get(Number(frequency)) ?? ""}
        tickLength={TICK_LENGTH}
        tickStroke="var(--color-ink)"
        hideAxisLine
        tickComponent={FrequencyLabel}
      />
      <text x={(panel.left + panel.right) / 2} y={panel.bottom + 39} textAnchor="middle" fill="var(--color-quiet)">
        Frequency, {layout.frequency.unit.name}
      </text>
    </g>
  );
}

function FrequencyLabel({ x, y, formattedValue }: TickRendererProps) {
  return (
    <text x={x} y={y + 6} textAnchor="middle" fill="var(--color-ink)">
      {formattedValue}
    </text>
  );
}

/** Zigzag at both ends of the line where the level scale bends. */
export function BreakMarks({ panel }: { panel: PanelLayout }) {
  if (panel.level.breakLevel === undefined) return null;
  const y = panel.level.toPixel(panel.level.breakLevel);
  const zigzag = "h5l5 -6l5 12l4 -6";
  return (
    <g fill="none" stroke="var(--color-ink)" strokeWidth={1.25} strokeLinejoin="round">
      <path d={`M${panel.left} ${y}${zigzag}`} />
      <path transform={`translate(${panel.right} ${y}) scale(-1 1)`} d={`M0 0${zigzag}`} />
    </g>
  );
}

/** Passband widths above the figure, and the centre of each as a chain line through both panels. */
export function PassbandSigns({ layout }: { layout: DrawingLayout }) {
  const first = layout.panels[0];
  const last = layout.panels[layout.panels.length - 1];
  if (!first || !last) return null;
  const bands = layout.passbands.filter(
    ([from, to]) => to > from && from >= layout.window[0] && to <= layout.window[1],
  );
  return (
    <g>
      {bands.map((band) => (
        <DimensionLine key={band[0]} band={band} layout={layout} y={first.top - 12} />
      ))}
      {bands
        .filter((band) => hasCentre(band, layout))
        .map(([from, to]) => {
          const x = layout.toX((from + to) / 2);
          return (
            <line
              key={from}
              x1={x}
              x2={x}
              y1={first.top - 4}
              y2={last.bottom}
              stroke="var(--color-edge)"
              strokeDasharray="14 3 2 3"
            />
          );
        })}
    </g>
  );
}

/** A low-pass or a high-pass has no centre: a centre line needs a stopband on both sides, or none at all. */
function hasCentre([from, to]: Band, layout: DrawingLayout): boolean {
  const stopbands = layout.walls.filter((wall) => wall.panel === "transmission" && wall.side === "ceiling");
  if (stopbands.length === 0) return from > 0;
  return stopbands.some((wall) => wall.band[1] <= from) && stopbands.some((wall) => wall.band[0] >= to);
}

/** Upright chain lines at frequencies that are told over the frame. */
export function FrequencySigns({ scene }: { scene: PanelScene }) {
  const { top, bottom, left, right } = scene.layout;
  return (
    <g>
      {(scene.signs ?? []).map(({ x, label }) => {
        const width = estimateTextWidth(label, 12);
        const middle = Math.min(Math.max(x, left + width / 2), right - width / 2);
        return (
          <g key={label}>
            <line x1={x} x2={x} y1={top - 6} y2={bottom} stroke="var(--color-edge)" strokeDasharray="14 3 2 3" />
            <text x={middle} y={top - 10} textAnchor="middle" fill="var(--color-ink)">
              {label}
            </text>
          </g>
        );
      })}
    </g>
  );
}

function DimensionLine({ band, layout, y }: { band: Band; layout: DrawingLayout; y: number }) {
  const from = layout.toX(band[0]);
  const to = layout.toX(band[1]);
  const text = formatWidth(band[1] - band[0]);
  const inside = to - from >= 28;
  const textWidth = estimateTextWidth(text, 12);
  const fits = to - from >= textWidth || inside;
  // A word wider than what lies between the arrowheads goes up, clear of them and of the lines they point at.
  const isClear = inside && to - from >= textWidth + 2 * ARROWHEAD_LENGTH;
  const [lineTop, textBase] = isClear ? [y - 6, y - 5] : [y - 4, y - 8];
  return (
    <g stroke="var(--color-quiet)" fill="var(--color-quiet)">
      <path d={`M${from} ${lineTop}V${y + 8}M${to} ${lineTop}V${y + 8}`} fill="none" />
      {inside ? (
        <>
          <path d={`M${from} ${y}H${to}`} fill="none" />
          <Arrowhead x={from} y={y} direction={1} />
          <Arrowhead x={to} y={y} direction={-1} />
        </>
      ) : (
        <>
          <path d={`M${from - 16} ${y}H${from}M${to} ${y}H${to + 16}`} fill="none" />
          <Arrowhead x={from} y={y} direction={-1} />
          <Arrowhead x={to} y={y} direction={1} />
        </>
      )}
      {layout.phone && !fits ? null : (
        <text x={(from + to) / 2} y={textBase} textAnchor="middle" fill="var(--color-ink)" stroke="none">
          {text}
        </text>
      )}
    </g>
  );
}

function Arrowhead({ x, y, direction }: { x: number; y: number; direction: 1 | -1 }) {
  return <path d={`M${x} ${y}l${ARROWHEAD_LENGTH * direction} -2.5v5z`} stroke="none" />;
}
