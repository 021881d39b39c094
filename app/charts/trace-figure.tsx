// Measured curves over the drawing, to be explored: readout, zoom, even or stretched scale, a table of the values.
import { useMemo, useState } from "react";
import { Button } from "~/components/button";
import { formatBand } from "~/components/format";
import type { Band } from "~/rf/index";
import { DrawingSvg } from "./drawing-svg";
import { FigureBox } from "./figure-box";
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

/** A figure that keeps its height while its curves are on their way, and works as a drawing without script. */
export function TraceFigure(props: TraceFigureProps) {
  const { walls, traces } = props;
  const { widths, deskRef, phoneRef } = useFigureWidths();
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
    <figure className="m-0" aria-busy={traces === undefined}>
      <div className="mb-2 flex flex-wrap items-center gap-x-1 gap-y-2 print-hidden">
        <output
          aria-live="polite"
          className="min-h-11 content-center text-13 tabular-nums max-tablet:w-full tablet:min-w-0 tablet:flex-1"
        >
          {readoutLine(props, readout, window)}
        </output>
        {passband ? (
          <Button kind="plain" type="button" disabled={!traces} onClick={() => zoom(passband)}>
            Passband
          </Button>
        ) : null}
        <Button kind="plain" type="button" disabled={!traces} onClick={() => zoom(undefined)}>
          Full
        </Button>
        <Button
          kind="plain"
          type="button"
          disabled={!traces}
          aria-expanded={tableOpen}
          onClick={() => setTableOpen(!tableOpen)}
        >
          Table
        </Button>
        <ScaleSwitch stretched={level?.breakLevel !== undefined} onChange={setStretched} />
      </div>
      <FigureBox widths={widths} deskRef={deskRef} phoneRef={phoneRef} desk={picture(desk)} phone={picture(phone)} />
      <figcaption className="flex flex-wrap gap-x-6 pt-2 text-13 text-quiet">
        {props.caption ? <span>{props.caption}</span> : null}
        <span>{scaleWords(level?.breakLevel)}</span>
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

/** "Stretched | Even": the level scale of the S21 panel. */
function ScaleSwitch({ stretched, onChange }: { stretched: boolean; onChange: (stretched: boolean) => void }) {
  const choices = [
    { name: "Stretched", value: true },
    { name: "Even", value: false },
  ];
  return (
    <div role="group" aria-label="Level scale" className="inline-flex rounded-field tablet:ms-2 border border-edge">
      {choices.map(({ name, value }) => (
        <button
          key={name}
          type="button"
          aria-pressed={stretched === value}
          onClick={() => onChange(value)}
          className={`min-h-7 px-3 text-13 pointer-coarse:min-h-11 ${
            stretched === value ? "bg-ink font-semibold text-leaf" : "text-quiet"
          }`}
        >
          {name}
        </button>
      ))}
    </div>
  );
}
