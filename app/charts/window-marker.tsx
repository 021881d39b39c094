// The stretch of a wide view that a zoom shows: marked, to be moved and stretched by pointer or keys.
import { useState, type KeyboardEvent, type PointerEvent } from "react";
import { formatBand, formatFrequency } from "~/components/format";
import type { Band } from "~/rf/index";
import type { DrawingLayout } from "./layout";
import { moveEnd, moveWindow, roundedWindow, type WindowPart } from "./zoom";

const HANDLE = 9;
/** px that a handle can be pressed within. */
const TARGET = 24;

interface WindowMarkerProps {
  /** Of the wide view. */
  readonly layout: DrawingLayout;
  /** Hz, what the zoom shows. */
  readonly window: Band;
  readonly onWindow: (window: Band) => void;
}

interface Drag {
  readonly part: WindowPart;
  /** Hz under the pointer when it was pressed, and the window then. */
  readonly from: number;
  readonly window: Band;
}

/** Three sliders over the wide view: lower end, the whole, upper end. A press beside the stretch brings its middle there. */
export function WindowMarker({ layout, window, onWindow }: WindowMarkerProps) {
  const [drag, setDrag] = useState<Drag>();
  const change = (part: WindowPart, start: Band, by: number) =>
    onWindow(part === "whole" ? moveWindow(start, by, layout.full) : moveEnd(start, part, by, layout.full));
  const onPress = (event: PointerEvent) => {
    if (event.button === 0) change("whole", window, frequencyUnder(event, layout) - (window[0] + window[1]) / 2);
  };
  const parts = (["whole", "lower", "upper"] as const).map((part) => (
    <MarkerSlider
      key={part}
      part={part}
      layout={layout}
      window={window}
      onMove={(by) => change(part, window, by)}
      onPointerDown={(event) => {
        if (event.button !== 0) return;
        event.stopPropagation();
        event.currentTarget.setPointerCapture(event.pointerId);
        setDrag({ part, from: frequencyUnder(event, layout), window });
      }}
      onPointerMove={(event) => {
        if (drag) change(drag.part, drag.window, frequencyUnder(event, layout) - drag.from);
      }}
      onPointerUp={() => setDrag(undefined)}
      onPointerCancel={() => setDrag(undefined)}
    />
  ));
  return (
    <div data-wide-view className="absolute inset-0 touch-pan-y select-none print-hidden" onPointerDown={onPress}>
      <MarkedStretch layout={layout} window={window} />
      {parts}
    </div>
  );
}

/** Hz under the pointer, in the wide view's own scale. */
function frequencyUnder(event: PointerEvent, layout: DrawingLayout): number {
  const box = event.currentTarget.closest("[data-wide-view]")?.getBoundingClientRect();
  return layout.toFrequency(box ? ((event.clientX - box.left) / box.width) * layout.width : 0);
}

/** The marked stretch itself: tinted, with upright edges and square handles. */
function MarkedStretch({ layout, window }: Pick<WindowMarkerProps, "layout" | "window">) {
  const panel = layout.panels[0];
  if (!panel) return null;
  const [from, to] = [layout.toX(window[0]), layout.toX(window[1])];
  const middle = (panel.top + panel.bottom) / 2;
  return (
    <svg
      viewBox={`0 0 ${layout.width} ${layout.height}`}
      width="100%"
      height="100%"
      aria-hidden
      data-figure=""
      className="pointer-events-none block"
    >
      <g stroke="var(--color-signal)" strokeWidth={1.5}>
        <rect
          x={from}
          width={Math.max(to - from, 1)}
          y={panel.top}
          height={panel.bottom - panel.top}
          fill="var(--color-signal)"
          fillOpacity={0.1}
        />
        {[from, to].map((x, index) => (
          <rect
            key={index}
            x={x - HANDLE / 2}
            y={middle - HANDLE / 2}
            width={HANDLE}
            height={HANDLE}
            fill="var(--color-leaf)"
            strokeWidth={1.75}
          />
        ))}
      </g>
    </svg>
  );
}

interface MarkerSliderProps {
  readonly part: WindowPart;
  readonly layout: DrawingLayout;
  readonly window: Band;
  /** Hz. */
  readonly onMove: (by: number) => void;
  readonly onPointerDown: (event: PointerEvent) => void;
  readonly onPointerMove: (event: PointerEvent) => void;
  readonly onPointerUp: () => void;
  readonly onPointerCancel: () => void;
}

const NAMES: Record<WindowPart, string> = {
  whole: "Part shown enlarged",
  lower: "Lower end of the part shown enlarged",
  upper: "Upper end of the part shown enlarged",
};

function MarkerSlider({ part, layout, window, onMove, ...pointer }: MarkerSliderProps) {
  const panel = layout.panels[0];
  const [from, to] = [layout.toX(window[0]), layout.toX(window[1])];
  const [left, width] = part === "whole" ? [from, to - from] : [(part === "lower" ? from : to) - TARGET / 2, TARGET];
  const value = part === "lower" ? window[0] : part === "upper" ? window[1] : (window[0] + window[1]) / 2;
  const percent = (px: number, of: number) => `${(100 * px) / of}%`;
  return (
    <div
      role="slider"
      tabIndex={0}
      aria-label={NAMES[part]}
      aria-valuemin={layout.full[0]}
      aria-valuemax={layout.full[1]}
      aria-valuenow={value}
      aria-valuetext={part === "whole" ? formatBand(roundedWindow(window)) : formatFrequency(value)}
      className={`absolute ${part === "whole" ? "cursor-grab" : "cursor-ew-resize touch-none"}`}
      style={{
        left: percent(left, layout.width),
        width: percent(Math.max(width, 1), layout.width),
        top: percent(panel?.top ?? 0, layout.height),
        height: percent((panel?.bottom ?? 0) - (panel?.top ?? 0), layout.height),
      }}
      onKeyDown={(event) => {
        const by = stepOf(event, layout);
        if (by === undefined) return;
        event.preventDefault();
        onMove(by);
      }}
      {...pointer}
    />
  );
}

/** Hz that a key moves by: a pixel, with Shift ten, Home and End all the way. */
function stepOf(event: KeyboardEvent, layout: DrawingLayout): number | undefined {
  if (event.ctrlKey || event.metaKey || event.altKey) return undefined;
  const step = (layout.toFrequency(1) - layout.toFrequency(0)) * (event.shiftKey ? 10 : 1);
  const span = layout.full[1] - layout.full[0];
  const steps: Record<string, number> = {
    ArrowLeft: -step,
    ArrowDown: -step,
    ArrowRight: step,
    ArrowUp: step,
    Home: -span,
    End: span,
  };
  return steps[event.key];
}
