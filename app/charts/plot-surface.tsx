// The surface over a drawing that takes pointer and keys: readout line, zoom by drag, wheel and keys.
import { useEffect, useRef, useState, type KeyboardEvent, type PointerEvent } from "react";
import { formatFrequency } from "~/components/format";
import type { Band } from "~/rf/index";
import type { DrawingLayout } from "./layout";
import { zoomAbout, zoomTo } from "./zoom";

/** px a press may wander and still be no drag. */
const DRAG_THRESHOLD = 6;
const KEY_FACTOR = 0.6;

interface PlotSurfaceProps {
  readonly layout: DrawingLayout;
  /** Hz of the readout line. */
  readonly readout: number | undefined;
  readonly onReadout: (frequency: number) => void;
  readonly onWindow: (window: Band | undefined) => void;
}

/** A slider along the frequency axis, as large as the figure. */
export function PlotSurface({ layout, readout, onReadout, onWindow }: PlotSurfaceProps) {
  const surface = useRef<HTMLDivElement>(null);
  const [drag, setDrag] = useState<{ readonly from: number; readonly to: number }>();
  const frequencyAt = (clientX: number) => {
    const box = surface.current?.getBoundingClientRect();
    const x = box ? ((clientX - box.left) / box.width) * layout.width : 0;
    return clamp(layout.toFrequency(x), layout.window);
  };
  useWheelZoom(surface, (clientX, factor) =>
    onWindow(zoomAbout(layout.window, frequencyAt(clientX), factor, layout.full)),
  );

  const onPointerDown = (event: PointerEvent) => {
    if (event.button !== 0) return;
    const frequency = frequencyAt(event.clientX);
    setDrag({ from: frequency, to: frequency });
    onReadout(frequency);
    surface.current?.setPointerCapture(event.pointerId);
  };
  const onPointerMove = (event: PointerEvent) => {
    const frequency = frequencyAt(event.clientX);
    if (drag) setDrag({ ...drag, to: frequency });
    onReadout(frequency);
  };
  const onPointerUp = () => {
    if (drag && Math.abs(layout.toX(drag.to) - layout.toX(drag.from)) >= DRAG_THRESHOLD) {
      onWindow(zoomTo(drag.from, drag.to, layout.full));
    }
    setDrag(undefined);
  };
  const at = readout === undefined ? (layout.window[0] + layout.window[1]) / 2 : clamp(readout, layout.window);
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const taken = actOnKey(event.key, event.shiftKey, { layout, at, onReadout, onWindow });
    if (taken) event.preventDefault();
  };

  return (
    <div
      ref={surface}
      role="slider"
      tabIndex={0}
      aria-label="Readout frequency; plus and minus zoom, 0 shows all"
      aria-valuemin={layout.window[0]}
      aria-valuemax={layout.window[1]}
      aria-valuenow={at}
      aria-valuetext={formatFrequency(at)}
      className="absolute inset-0 cursor-crosshair touch-pan-y select-none print-hidden"
      onMouseDown={(event) => {
        // A double press would select the words under the figure.
        if (event.detail > 1) event.preventDefault();
      }}
      onPointerDown={onPointerDown}
      onPointerMove={onPointerMove}
      onPointerUp={onPointerUp}
      onPointerCancel={() => setDrag(undefined)}
      onDoubleClick={() => onWindow(undefined)}
      onKeyDown={onKeyDown}
    >
      <svg viewBox={`0 0 ${layout.width} ${layout.height}`} width="100%" height="100%" aria-hidden className="block">
        {drag ? <DragArea layout={layout} from={drag.from} to={drag.to} /> : null}
        {readout === undefined ? null : <ReadoutLine layout={layout} frequency={readout} />}
      </svg>
    </div>
  );
}

interface KeyContext extends Pick<PlotSurfaceProps, "layout" | "onReadout" | "onWindow"> {
  readonly at: number;
}

/** Moves the readout by a pixel, with Shift by ten; zooms about it. True where the key meant something. */
function actOnKey(key: string, shift: boolean, { layout, at, onReadout, onWindow }: KeyContext): boolean {
  const step = (layout.toFrequency(1) - layout.toFrequency(0)) * (shift ? 10 : 1);
  const move = (frequency: number) => onReadout(clamp(frequency, layout.window));
  const actions: Record<string, () => void> = {
    ArrowLeft: () => move(at - step),
    ArrowRight: () => move(at + step),
    ArrowDown: () => move(at - step),
    ArrowUp: () => move(at + step),
    Home: () => move(layout.window[0]),
    End: () => move(layout.window[1]),
    "+": () => onWindow(zoomAbout(layout.window, at, KEY_FACTOR, layout.full)),
    "=": () => onWindow(zoomAbout(layout.window, at, KEY_FACTOR, layout.full)),
    "-": () => onWindow(zoomAbout(layout.window, at, 1 / KEY_FACTOR, layout.full)),
    "0": () => onWindow(undefined),
    Escape: () => onWindow(undefined),
  };
  const action = actions[key];
  action?.();
  return action !== undefined;
}

/**
 * Zooms with the wheel once the figure has focus, or with Ctrl: a page scrolled past it is not caught. React's own wheel
 * handler is passive and could not keep the page still.
 */
function useWheelZoom(
  surface: React.RefObject<HTMLDivElement | null>,
  onZoom: (clientX: number, factor: number) => void,
) {
  const latest = useRef(onZoom);
  useEffect(() => {
    latest.current = onZoom;
  });
  useEffect(() => {
    const element = surface.current;
    if (!element) return;
    const onWheel = (event: WheelEvent) => {
      if (event.deltaY === 0 || (document.activeElement !== element && !event.ctrlKey)) return;
      event.preventDefault();
      latest.current(event.clientX, event.deltaY > 0 ? 1.25 : 0.8);
    };
    element.addEventListener("wheel", onWheel, { passive: false });
    return () => element.removeEventListener("wheel", onWheel);
  }, [surface]);
}

function ReadoutLine({ layout, frequency }: { layout: DrawingLayout; frequency: number }) {
  if (frequency < layout.window[0] || frequency > layout.window[1]) return null;
  const x = layout.toX(frequency);
  return (
    <g stroke="var(--color-signal)">
      {layout.panels.map((panel) => (
        <line key={panel.panel} x1={x} x2={x} y1={panel.top} y2={panel.bottom} />
      ))}
    </g>
  );
}

function DragArea({ layout, from, to }: { layout: DrawingLayout; from: number; to: number }) {
  const left = Math.min(layout.toX(from), layout.toX(to));
  const width = Math.abs(layout.toX(to) - layout.toX(from));
  return (
    <g fill="var(--color-signal)" fillOpacity={0.12} stroke="var(--color-signal)">
      {layout.panels.map((panel) => (
        <rect key={panel.panel} x={left} width={width} y={panel.top} height={panel.bottom - panel.top} />
      ))}
    </g>
  );
}

function clamp(frequency: number, window: Band): number {
  return Math.min(Math.max(frequency, window[0]), window[1]);
}
