// Curves at two scales: a part enlarged, and under it the whole with that part marked; both with walls and worst points.
import { useMemo, useRef, useState } from "react";
import { formatBand } from "~/components/format";
import type { Band } from "~/rf/index";
import { DrawingSvg } from "./drawing-svg";
import { FigureBox } from "./figure-box";
import { FigureDownload, FigureSwitch, FigureToolbar } from "./figure-tools";
import { useFigureWidths } from "./figure-size";
import { fullRange, passbandWindow } from "./frequency-range";
import { DESK_WIDTH, PHONE_WIDTH, panelOf, type DrawingLayout } from "./layout";
import { PlotSurface } from "./plot-surface";
import { readoutWords } from "./readout";
import { composeDrawing, type DrawingScene } from "./scene";
import { LEVEL_SCALES } from "./trace-figure";
import { TraceTable } from "./trace-table";
import type { TraceFigureProps } from "./types";
import { WindowMarker } from "./window-marker";
import { describeDrawing, scaleWords } from "./words";
import { WorstPointList } from "./worst-point-list";
import { roundedWindow } from "./zoom";

/** Heights as shares of the width on a desk, px on phones: the enlarged part, what joins the two, the wide view. */
const DESK = { zoom: 0.62, join: 0.03, wide: 0.27 };
const PHONE = { zoom: 400, join: 22, wide: 210 };

interface TwoScaleProps extends TraceFigureProps {
  /** The table stands open from the start. @default false */
  readonly table?: boolean | undefined;
}

interface Pair {
  readonly zoom: DrawingScene;
  readonly wide: DrawingScene;
  /** px between the two. */
  readonly join: number;
}

export function TwoScaleFigure(props: TwoScaleProps) {
  const { walls, traces } = props;
  const { widths, deskRef, phoneRef } = useFigureWidths();
  const figure = useRef<HTMLElement>(null);
  const full = fullRange(walls, traces);
  const passband = full ? passbandWindow(walls, full) : undefined;
  const [zoomed, setZoomed] = useState<Band | "all">();
  const [stretched, setStretched] = useState<boolean>();
  const [readout, setReadout] = useState<number>();
  const [tableOpen, setTableOpen] = useState(props.table ?? false);
  const window = zoomed === "all" ? undefined : (zoomed ?? passband);
  const desk = usePair(props, window, stretched, { phone: false, width: widths.desk || DESK_WIDTH });
  const phone = usePair(props, window, stretched, { phone: true, width: widths.phone || PHONE_WIDTH });
  const zoom = (next: Band | undefined) => {
    setZoomed(next ?? "all");
    props.onWindowChange?.(next);
  };
  const words = { title: props.title, description: props.description ?? describeDrawing(props) };
  const picture = ({ zoom: enlarged, wide, join }: Pair) => (
    <>
      <div className="relative" style={{ height: enlarged.layout.height }}>
        <DrawingSvg scene={enlarged} {...words} selectedId={props.selectedId} handles={false} />
        {traces ? (
          <PlotSurface layout={enlarged.layout} readout={readout} onReadout={setReadout} onWindow={zoom} />
        ) : null}
      </div>
      <Join layout={wide.layout} window={enlarged.layout.window} height={join} />
      <div className="relative" style={{ height: wide.layout.height }}>
        <DrawingSvg
          scene={wide}
          title={`${props.title}, wide view`}
          description={`The whole of the sweeps; ${formatBand(roundedWindow(enlarged.layout.window))} is shown enlarged.`}
          selectedId={props.selectedId}
          handles={false}
        />
        {traces ? <WindowMarker layout={wide.layout} window={enlarged.layout.window} onWindow={zoom} /> : null}
      </div>
    </>
  );
  const level = desk.zoom.panels[0]?.layout.level;
  return (
    <figure ref={figure} className="m-0" aria-busy={traces === undefined}>
      <FigureToolbar
        readout={readoutLine(props, readout, desk.zoom.layout.window)}
        waiting={!traces}
        parts={[...(passband ? [{ name: "Passband", window: passband }] : []), { name: "Full", window: undefined }]}
        onWindow={zoom}
        tableOpen={tableOpen}
        onTable={setTableOpen}
      >
        <FigureSwitch
          label="Level scale"
          choices={LEVEL_SCALES}
          value={level?.breakLevel !== undefined}
          onChange={setStretched}
        />
      </FigureToolbar>
      <FigureBox
        widths={widths}
        deskRef={deskRef}
        phoneRef={phoneRef}
        aspect={DESK.zoom + DESK.join + DESK.wide}
        phoneHeight={PHONE.zoom + PHONE.join + PHONE.wide}
        desk={picture(desk)}
        phone={picture(phone)}
      />
      <figcaption className="flex flex-wrap gap-x-6 pt-2 text-13 text-quiet">
        {props.caption ? <span>{props.caption}</span> : null}
        <span>{scaleWords(level?.breakLevel)}</span>
        <FigureDownload figure={figure} name={props.title} waiting={!traces} />
      </figcaption>
      <WorstPointList points={desk.zoom.listed} className="max-tablet:hidden" />
      <WorstPointList points={phone.zoom.listed} className="tablet:hidden" />
      {tableOpen && traces ? <TraceTable traces={traces} window={desk.zoom.layout.window} /> : null}
    </figure>
  );
}

function usePair(
  { walls, traces, worstPoints, title }: TwoScaleProps,
  window: Band | undefined,
  stretched: boolean | undefined,
  { phone, width }: { readonly phone: boolean; readonly width: number },
): Pair {
  return useMemo(() => {
    const px = (share: number, fixed: number) => (phone ? fixed : Math.round(width * share));
    const shared = { stretched, title, phone, width };
    return {
      join: px(DESK.join, PHONE.join),
      zoom: composeDrawing({ walls, traces, worstPoints, window, ...shared, height: px(DESK.zoom, PHONE.zoom) }),
      wide: composeDrawing({
        walls: walls.filter(({ panel }) => panel === "transmission"),
        traces: traces?.filter(({ parameter }) => panelOf(parameter) === "transmission"),
        worstPoints,
        ...shared,
        compact: true,
        height: px(DESK.wide, PHONE.wide),
      }),
    };
  }, [walls, traces, worstPoints, window, stretched, title, phone, width]);
}

/** From the ends of the marked stretch to the ends of the enlarged part, as a detail is drawn out. */
function Join({ layout, window, height }: { layout: DrawingLayout; window: Band; height: number }) {
  const panel = layout.panels[0];
  if (!panel) return null;
  const [from, to] = [layout.toX(window[0]), layout.toX(window[1])];
  return (
    <svg
      viewBox={`0 0 ${layout.width} ${height}`}
      width="100%"
      height={height}
      overflow="visible"
      aria-hidden
      data-figure=""
      className="block"
    >
      <path
        d={`M${panel.left} 0L${from} ${height + panel.top}M${panel.right} 0L${to} ${height + panel.top}`}
        stroke="var(--color-edge)"
        fill="none"
      />
    </svg>
  );
}

function readoutLine({ traces }: TwoScaleProps, readout: number | undefined, window: Band): string {
  if (!traces) return "Loading curves";
  if (readout !== undefined && readout >= window[0] && readout <= window[1]) return readoutWords(traces, readout);
  return `${formatBand(roundedWindow(window))}; point at a curve, or use the arrow keys`;
}
