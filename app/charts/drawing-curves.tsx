// Measured curves, their stretches inside walls, and their names.
import { curveLinear } from "@visx/curve";
import { LinePath } from "@visx/shape";
import type { Curve, PanelScene } from "./scene";
import { pathOf } from "./svg-path";
import type { Pixel } from "./wall-shape";

/** Curves of a panel, cut off at its frame; what runs inside a wall in the colour of a fail. */
export function PanelCurves({ scene, clipId }: { scene: PanelScene; clipId: string }) {
  return (
    <g clipPath={`url(#${clipId})`} fill="none" strokeLinejoin="round">
      {scene.curves.map((curve) => (
        <CurveLine key={curve.series.id} curve={curve} />
      ))}
      <path
        d={scene.slivers.map((points) => pathOf(points, true)).join("")}
        fill="var(--color-fail)"
        fillOpacity={0.3}
      />
      <path
        d={scene.stretches.map((points) => pathOf(points)).join("")}
        stroke="var(--color-fail)"
        strokeWidth={2.75}
        strokeLinecap="butt"
      />
    </g>
  );
}

function CurveLine({ curve }: { curve: Curve }) {
  return (
    <LinePath<Pixel>
      data={[...curve.points]}
      x={(point) => point.x}
      y={(point) => point.y}
      defined={(point) => !Number.isNaN(point.y)}
      curve={curveLinear}
      stroke={`var(--color-${curve.style.colour})`}
      strokeWidth={curve.style.width}
      {...(curve.style.dashes ? { strokeDasharray: curve.style.dashes } : {})}
    />
  );
}

/** Each reported curve's name at its line. */
export function CurveNames({ scene }: { scene: PanelScene }) {
  return (
    <g fontWeight={600}>
      {scene.curves.map(({ name, series, style }) =>
        name ? (
          <text key={series.id} x={name.left + 2} y={name.bottom - 4} fill={`var(--color-${style.colour})`}>
            {series.label}
          </text>
        ) : null,
      )}
    </g>
  );
}

/** Uncertainty bands: between the ends of each reading, cut off at the frame. */
export function UncertaintyAreas({ scene, clipId }: { scene: PanelScene; clipId: string }) {
  if (!scene.areas || scene.areas.length === 0) return null;
  return (
    <path
      clipPath={`url(#${clipId})`}
      d={scene.areas.map((points) => pathOf(points, true)).join("")}
      fill="var(--color-ink)"
      fillOpacity={0.14}
      stroke="var(--color-quiet)"
      strokeWidth={1}
      strokeLinejoin="round"
    />
  );
}
