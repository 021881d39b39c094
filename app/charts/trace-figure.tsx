// Measured curves over the drawing, to be explored: readout, zoom, even or stretched scale, a table of the values.
import { useMemo, useRef, useState } from "react";
import { formatBand } from "~/components/format";
import type { Band } from "~/rf/index";
import { DrawingSvg } from "./drawing-svg";
import { FigureBox } from "./figure-box";
import { FigureDownload, FigureSwitch, FigureToolbar } from "./figure-tools";
import { useFigureWidths } from "./figure-size";
import { fullRange, passbandWindow } from "./frequency-range";
import { PHONE_HEIGHT } from "./layout";
import { PlotSurface } from "./plot-surface";
import { readoutWords } from "./readout";
import { composeDrawing, type DrawingScene } from "./scene";
import { TraceTable } from "./trace-table";
import type { DrawingProps, TraceFigureProps } from "./types";
import { describeDrawing, scaleWords } from "./words";
import { WorstPointList } from "./worst-point-list";

/** "Stretched | Even": the level scale of the S21 panel. */
export const LEVEL_SCALES = [
  { name: "Stretched", value: true },
  { name: "Even", value: false },
] as const;

/** A figure that keeps its height while its curves are on their way, and works as a drawing without script. */
export function TraceFigure(props: TraceFigureProps) {
  const { walls, traces } = props;
  const { widths, deskRef, phoneRef } = useFigureWidths();
  const figure = useRef<HTMLElement>(null);
  const all = fullRange(walls, traces);
  const passband = all ? passbandWindow(walls, all) : undefined;
  const [window, setWindow] = useState<Band | undefined>(props.initialView === "passband" ? passband : undefined);
  const [stretched, setStretched] = useState<boolean>();
  const [readout, setReadout] = useState<number>();
  const [tableOpen, setTableOpen] = useState(false);
  const shown = { ...props, window, stretched };
  const desk = useScene(shown, false, widths.desk || undefined);
  const phone = useScene(shown, true, widths.phone || undefined);
  const zoom = (next: Band | undefined) => {
    setWindow(next);
    props.onWindowChange?.(next);
  };
  const picture = (scene: DrawingScene) => (
    <>
      <DrawingSvg
        scene={scene}
        title={props.title}
        description={props.description ?? describeDrawing(props)}
        selectedId={props.selectedId}
      />
      {traces ? <PlotSurface layout={scene.layout} readout={readout} onReadout={setReadout} onWindow={zoom} /> : null}
    </>
  );
  const level = desk.panels[0]?.layout.level;
  return (
    <figure ref={figure} className="m-0" aria-busy={traces === undefined}>
      <FigureToolbar
        readout={readoutLine(props, readout, window)}
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
      <FigureBox widths={widths} deskRef={deskRef} phoneRef={phoneRef} desk={picture(desk)} phone={picture(phone)} />
      <figcaption className="flex flex-wrap gap-x-6 pt-2 text-13 text-quiet">
        {props.caption ? <span>{props.caption}</span> : null}
        <span>{scaleWords(level?.breakLevel)}</span>
        <FigureDownload figure={figure} name={props.title} waiting={!traces} />
      </figcaption>
      <WorstPointList points={desk.listed} className="max-tablet:hidden" />
      <WorstPointList points={phone.listed} className="tablet:hidden" />
      {tableOpen && traces ? <TraceTable traces={traces} window={desk.layout.window} /> : null}
    </figure>
  );
}

function useScene(props: DrawingProps, phone: boolean, width: number | undefined): DrawingScene {
  const { walls, traces, worstPoints, stretched, window, title } = props;
  return useMemo(
    () =>
      composeDrawing({
        walls,
        traces,
        worstPoints,
        stretched,
        window,
        title,
        phone,
        width,
        height: phone ? PHONE_HEIGHT : undefined,
      }),
    [walls, traces, worstPoints, stretched, window, title, phone, width],
  );
}

function readoutLine({ traces }: TraceFigureProps, readout: number | undefined, window: Band | undefined): string {
  if (!traces) return "Loading curves";
  if (readout !== undefined) return readoutWords(traces, readout);
  return window ? formatBand(window) : "Point at a curve, or use the arrow keys";
}
