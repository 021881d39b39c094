// The drawing: limits as hatched walls in two panels, with curves and worst points where they are given.
import { useMemo } from "react";
import { DrawingSvg } from "./drawing-svg";
import { FigureBox } from "./figure-box";
import { useFigureWidths } from "./figure-size";
import { PHONE_HEIGHT } from "./layout";
import { composeDrawing } from "./scene";
import type { DrawingProps } from "./types";
import { describeDrawing, scaleWords } from "./words";
import { WorstPointList } from "./worst-point-list";

export { WorstPointList } from "./worst-point-list";
export { wallsFromRequirements } from "./walls";

/**
 * The drawing with its words and the list of points that have no plate. By itself it fits its column, 5 to 4 on a desk,
 * 470 px high under 720 px; with `phone` and sizes given it is the bare picture of that size.
 */
export function Drawing(props: DrawingProps) {
  return props.phone === undefined && props.width === undefined ? (
    <FittingDrawing {...props} />
  ) : (
    <FixedDrawing {...props} />
  );
}

function FixedDrawing(props: DrawingProps) {
  const scene = useMemo(() => composeDrawing(props), [props]);
  return (
    <div style={{ width: scene.layout.width, height: scene.layout.height }} className="bg-leaf">
      <DrawingSvg {...svgWords(props)} scene={scene} />
    </div>
  );
}

function FittingDrawing(props: DrawingProps) {
  const { widths, deskRef, phoneRef } = useFigureWidths();
  const desk = useMemo(
    () => composeDrawing({ ...props, phone: false, width: widths.desk || undefined }),
    [props, widths.desk],
  );
  const phone = useMemo(
    () => composeDrawing({ ...props, phone: true, width: widths.phone || undefined, height: PHONE_HEIGHT }),
    [props, widths.phone],
  );
  const words = svgWords(props);
  return (
    <figure className="m-0">
      <FigureBox
        widths={widths}
        deskRef={deskRef}
        phoneRef={phoneRef}
        desk={<DrawingSvg {...words} scene={desk} />}
        phone={<DrawingSvg {...words} scene={phone} />}
      />
      <figcaption className="pt-2 text-13 text-quiet">{scaleWords(desk.panels[0]?.layout.level.breakLevel)}</figcaption>
      <WorstPointList points={desk.listed} className="max-tablet:hidden" />
      <WorstPointList points={phone.listed} className="tablet:hidden" />
    </figure>
  );
}

function svgWords(props: DrawingProps) {
  return {
    title: props.title,
    description: props.description ?? describeDrawing(props),
    selectedId: props.selectedId,
  };
}
