// Hatched walls: hatch, fade towards the inside, edge, sides, numbers, and the handles of the selected one.
import type { PanelScene } from "./scene";
import { pathOf } from "./svg-path";
import { PILL_HEIGHT, type WallPart, type WallShape } from "./wall-shape";

/** px between hatch lines. */
const HATCH_SPACING = { desk: 7, phone: 6 };
const HANDLE = 9;

/** The hatch, 45 degrees rising right, shared by all walls of a drawing. */
export function HatchPattern({ id, phone = false }: { id: string; phone?: boolean }) {
  const spacing = phone ? HATCH_SPACING.phone : HATCH_SPACING.desk;
  return (
    <pattern id={id} patternUnits="userSpaceOnUse" width={spacing} height={spacing} patternTransform="rotate(45)">
      <line
        x1={0.5}
        x2={0.5}
        y1={0}
        y2={spacing}
        stroke="var(--color-ink)"
        style={{ opacity: "var(--hatch-opacity, 0.62)" }}
      />
    </pattern>
  );
}

interface PanelWallsProps {
  readonly scene: PanelScene;
  /** Prefix of ids in this document. */
  readonly idPrefix: string;
  readonly selectedId?: string | undefined;
}

/** Areas, sides and edges of a panel's walls; curves lie over these, numbers over the curves. */
export function PanelWalls({ scene, idPrefix, selectedId }: PanelWallsProps) {
  const prefix = `${idPrefix}-${scene.layout.panel}`;
  const ordered = selectedLast(scene.walls, selectedId);
  return (
    <g>
      {scene.walls.map((shape, wall) =>
        shape.parts.map((part, index) => (
          <WallArea
            key={`${wall}-${index}`}
            part={part}
            hatchId={`${idPrefix}-hatch`}
            fadeId={`${prefix}-${wall}-${index}`}
          />
        )),
      )}
      {ordered.map((shape) => (
        <WallEdge key={shape.label + shape.wall.ids.join()} shape={shape} selected={isSelected(shape, selectedId)} />
      ))}
    </g>
  );
}

function WallArea({ part, hatchId, fadeId }: { part: WallPart; hatchId: string; fadeId: string }) {
  const area = pathOf(part.area, true);
  const { from, to } = part.fade;
  return (
    <g>
      <linearGradient id={fadeId} gradientUnits="userSpaceOnUse" x1={from.x} y1={from.y} x2={to.x} y2={to.y}>
        <stop offset={0} stopColor="var(--color-leaf)" stopOpacity={0} />
        <stop offset={1} stopColor="var(--color-leaf)" stopOpacity={0.78} />
      </linearGradient>
      <path d={area} fill={`url(#${hatchId})`} />
      <path d={area} fill={`url(#${fadeId})`} />
      <path d={area} fill="var(--color-ink)" fillOpacity={0.035} />
    </g>
  );
}

function WallEdge({ shape, selected }: { shape: WallShape; selected: boolean }) {
  const colour = selected ? "var(--color-signal)" : "var(--color-ink)";
  return (
    <g stroke={colour} fill="none">
      {shape.sides.map((side) => (
        <line key={side.outward} x1={side.x} x2={side.x} y1={side.from} y2={side.to} />
      ))}
      <path d={pathOf(shape.edge)} strokeWidth={2.25} strokeLinejoin="round" />
    </g>
  );
}

/** Line numbers of a panel's walls, in pills. */
export function WallNumbers({ scene, selectedId }: Pick<PanelWallsProps, "scene" | "selectedId">) {
  return (
    <g textAnchor="middle" fontWeight={650}>
      {scene.walls.map((shape) => {
        const { pill } = shape;
        if (!pill) return null;
        const colour = isSelected(shape, selectedId) ? "var(--color-signal)" : "var(--color-ink)";
        return (
          <g key={shape.label + shape.wall.ids.join()}>
            <rect
              x={pill.left}
              y={pill.top}
              width={pill.right - pill.left}
              height={PILL_HEIGHT}
              rx={PILL_HEIGHT / 2}
              fill="var(--color-leaf)"
              stroke={colour}
            />
            <text x={(pill.left + pill.right) / 2} y={pill.top + 14.25} fill={colour}>
              {shape.label}
            </text>
          </g>
        );
      })}
    </g>
  );
}

/** Square handles at both ends and in the middle of the selected wall's edge. */
export function WallHandles({ scene, selectedId }: Pick<PanelWallsProps, "scene" | "selectedId">) {
  const selected = scene.walls.find((shape) => isSelected(shape, selectedId));
  const first = selected?.edge[0];
  const last = selected?.edge[selected.edge.length - 1];
  if (!first || !last) return null;
  const middle = { x: (first.x + last.x) / 2, y: (first.y + last.y) / 2 };
  return (
    <g className="print-hidden" fill="var(--color-leaf)" stroke="var(--color-signal)" strokeWidth={1.75}>
      {[first, middle, last].map(({ x, y }) => (
        <rect key={x} x={x - HANDLE / 2} y={y - HANDLE / 2} width={HANDLE} height={HANDLE} />
      ))}
    </g>
  );
}

function isSelected(shape: WallShape, selectedId: string | undefined): boolean {
  return selectedId !== undefined && shape.wall.ids.includes(selectedId);
}

function selectedLast(shapes: readonly WallShape[], selectedId: string | undefined): WallShape[] {
  return [...shapes].sort((one, other) => Number(isSelected(one, selectedId)) - Number(isSelected(other, selectedId)));
}
