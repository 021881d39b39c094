// A plot of values against frequency, to be explored: readout, zoom, a table of the values, the picture as a file.
import { useMemo, useRef, useState, type ReactNode } from "react";
import { formatBand } from "~/components/format";
import type { Band } from "~/rf/index";
import { DrawingSvg } from "./drawing-svg";
import { FigureBox } from "./figure-box";
import { FigureDownload, FigureToolbar } from "./figure-tools";
import { useFigureWidths } from "./figure-size";
import { DESK_WIDTH } from "./layout";
import { PlotSurface } from "./plot-surface";
import type { DrawingScene } from "./scene";
import { composeValuePlot, type ValuePanel } from "./value-plot";
import { valueReadout } from "./value-reading";
import { ValueTable } from "./value-table";
import { WorstPointList } from "./worst-point-list";
import { roundedWindow } from "./zoom";

export interface ValueFigureProps {
  /** Absent while their curves are fetched: the height stays. */
  readonly panels: readonly ValuePanel[] | undefined;
  /** Hz that the curves span. */
  readonly full: Band;
  /** Parts of it by name, for the buttons over the figure. */
  readonly parts?: readonly { readonly name: string; readonly window: Band }[];
  /** Where the figure begins. @default all */
  readonly initialWindow?: Band | undefined;
  readonly passbands?: readonly Band[] | undefined;
  readonly title: string;
  readonly description: string;
  /** Of the values in readout and table. */
  readonly unit: string;
  /** A value without its unit. */
  readonly format: (value: number) => string;
  readonly caption: ReactNode;
  /** Height of the desk's figure as a share of its width. @default 0.56 */
  readonly aspect?: number | undefined;
  /** px. @default 400 */
  readonly phoneHeight?: number | undefined;
  /** The table stands open from the start. @default false */
  readonly table?: boolean | undefined;
  /** Told after each zoom, so that the page can fetch finer data. */
  readonly onWindowChange?: ((window: Band | undefined) => void) | undefined;
}

export function ValueFigure(props: ValueFigureProps) {
  const { panels, parts = [], initialWindow, aspect = 0.56, phoneHeight = 400 } = props;
  const { widths, deskRef, phoneRef } = useFigureWidths();
  const figure = useRef<HTMLElement>(null);
  const [zoomed, setZoomed] = useState<Band | "all">();
  const [readout, setReadout] = useState<number>();
  const [tableOpen, setTableOpen] = useState(props.table ?? false);
  const window = zoomed === "all" ? undefined : (zoomed ?? initialWindow);
  const desk = useScene(props, window, { phone: false, width: widths.desk || undefined, height: aspect });
  const phone = useScene(props, window, { phone: true, width: widths.phone || undefined, height: phoneHeight });
  const zoom = (next: Band | undefined) => {
    setZoomed(next ?? "all");
    props.onWindowChange?.(next);
  };
  const picture = (scene: DrawingScene) => (
    <>
      <DrawingSvg scene={scene} title={props.title} description={props.description} />
      {panels ? <PlotSurface layout={scene.layout} readout={readout} onReadout={setReadout} onWindow={zoom} /> : null}
    </>
  );
  return (
    <figure ref={figure} className="m-0" aria-busy={panels === undefined}>
      <FigureToolbar
        readout={readoutLine(props, readout, desk.layout.window)}
        waiting={!panels}
        parts={[...parts, { name: "Full", window: undefined }]}
        onWindow={zoom}
        tableOpen={tableOpen}
        onTable={setTableOpen}
      />
      <FigureBox
        widths={widths}
        deskRef={deskRef}
        phoneRef={phoneRef}
        aspect={aspect}
        phoneHeight={phoneHeight}
        desk={picture(desk)}
        phone={picture(phone)}
      />
      <figcaption className="flex flex-wrap gap-x-6 pt-2 text-13 text-quiet">
        {props.caption}
        <FigureDownload figure={figure} name={props.title} waiting={!panels} />
      </figcaption>
      <WorstPointList points={desk.listed} className="max-tablet:hidden" />
      <WorstPointList points={phone.listed} className="tablet:hidden" />
      {tableOpen && panels ? (
        <ValueTable panels={panels} window={desk.layout.window} unit={props.unit} format={props.format} />
      ) : null}
    </figure>
  );
}

interface Size {
  readonly phone: boolean;
  readonly width: number | undefined;
  /** px on a phone, a share of the width on a desk. */
  readonly height: number;
}

function useScene({ panels, full, passbands }: ValueFigureProps, window: Band | undefined, size: Size): DrawingScene {
  const { phone, width, height } = size;
  return useMemo(
    () =>
      composeValuePlot({
        panels: panels ?? [],
        full,
        window,
        passbands,
        phone,
        width,
        height: phone ? height : Math.round((width ?? DESK_WIDTH) * height),
      }),
    [panels, full, window, passbands, phone, width, height],
  );
}

function readoutLine(props: ValueFigureProps, readout: number | undefined, window: Band): string {
  const { panels, unit, format } = props;
  if (!panels) return "Loading curves";
  const isSeen = readout !== undefined && readout >= window[0] && readout <= window[1];
  if (!isSeen) return `${formatBand(roundedWindow(window))}; point at a curve, or use the arrow keys`;
  return valueReadout(panels, readout, unit, format);
}
