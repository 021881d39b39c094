// One drawing at one size, as SVG: the tolerance scheme with its curves and worst points. Works without script.
import { memo, useId } from "react";
import { BreakMarks, Frame, FrequencyAxis, FrequencySigns, Grid, LevelAxis, PassbandSigns } from "./drawing-frame";
import { CurveNames, PanelCurves, UncertaintyAreas } from "./drawing-curves";
import { PanelMarks } from "./drawing-marks";
import { HatchPattern, PanelWalls, WallHandles, WallNumbers } from "./drawing-walls";
import type { DrawingScene, PanelScene } from "./scene";

interface DrawingSvgProps {
  readonly scene: DrawingScene;
  readonly title: string;
  readonly description: string;
  readonly selectedId?: string | undefined;
  /** The selected wall can be dragged. @default true */
  readonly handles?: boolean;
}

/** A composed drawing. Scales with its box; made at the size of its box, its type is 12 px. Kept while a readout moves over it. */
export const DrawingSvg = memo(function DrawingSvg(props: DrawingSvgProps) {
  const { scene, title, description, selectedId, handles = true } = props;
  const id = useId();
  const { layout, panels } = scene;
  return (
    <svg
      role="img"
      aria-labelledby={`${id}-title`}
      aria-describedby={`${id}-description`}
      viewBox={`0 0 ${layout.width} ${layout.height}`}
      width="100%"
      height="100%"
      fontSize={12}
      data-figure=""
      className="block tabular-nums"
    >
      <title id={`${id}-title`}>{title}</title>
      <desc id={`${id}-description`}>{description}</desc>
      <defs>
        <HatchPattern id={`${id}-hatch`} phone={layout.phone} />
        {panels.map((panel) => (
          <PanelClip key={panel.layout.panel} id={clipId(id, panel)} scene={panel} />
        ))}
      </defs>
      {panels.map((panel) => (
        <g key={panel.layout.panel}>
          <Grid layout={layout} panel={panel.layout} />
          <Frame panel={panel.layout} />
          <PanelWalls scene={panel} idPrefix={id} selectedId={selectedId} />
          <UncertaintyAreas scene={panel} clipId={clipId(id, panel)} />
          <FrequencySigns scene={panel} />
        </g>
      ))}
      <PassbandSigns layout={layout} />
      {panels.map((panel) => (
        <g key={panel.layout.panel}>
          <BreakMarks panel={panel.layout} />
          <LevelAxis layout={layout} panel={panel.layout} />
          <PanelCurves scene={panel} clipId={clipId(id, panel)} />
          <WallNumbers scene={panel} selectedId={selectedId} />
          {handles ? <WallHandles scene={panel} selectedId={selectedId} /> : null}
          <CurveNames scene={panel} />
          <PanelMarks scene={panel} />
        </g>
      ))}
      <FrequencyAxis layout={layout} />
    </svg>
  );
});

function clipId(id: string, panel: PanelScene): string {
  return `${id}-clip-${panel.layout.panel}`;
}

function PanelClip({ id, scene }: { id: string; scene: PanelScene }) {
  const { left, right, top, bottom } = scene.layout;
  return (
    <clipPath id={id}>
      <rect x={left} y={top - 1} width={right - left} height={bottom - top + 1} />
    </clipPath>
  );
}
