// Worst points on the drawing: ring, interval whisker, leader and plate.
import { VerdictShape, verdictColour } from "~/components/verdict-mark";
import { leaderOf, PLATE_HEIGHT } from "./plates";
import type { Mark, PanelScene } from "./scene";
import { pathOf } from "./svg-path";
import { valuePhrase, verdictPhrase } from "./words";

/** Worst points of a panel; the most severe, given first, lies on top. */
export function PanelMarks({ scene }: { scene: PanelScene }) {
  const marks = [...scene.marks].reverse();
  return (
    <g>
      {marks.map((mark) => (
        <g key={`${mark.point.lineNumber} ${mark.x}`} className={verdictColour(mark.point.verdict)}>
          <Leader mark={mark} />
          <Ring mark={mark} />
          <Plate mark={mark} />
        </g>
      ))}
    </g>
  );
}

function Ring({ mark: { x, y, whisker } }: { mark: Mark }) {
  return (
    <g fill="none" stroke="currentColor">
      {whisker ? (
        <path
          strokeWidth={1.25}
          d={`M${x} ${whisker[0]}V${whisker[1]}M${x - 4} ${whisker[0]}h8M${x - 4} ${whisker[1]}h8`}
        />
      ) : null}
      <circle cx={x} cy={y} r={4} strokeWidth={2} fill="var(--color-leaf)" />
    </g>
  );
}

function Leader({ mark }: { mark: Mark }) {
  if (!mark.plate) return null;
  const { from, shoulder, to } = leaderOf(mark, mark.plate);
  return <path d={pathOf([from, shoulder, to])} fill="none" stroke="currentColor" />;
}

function Plate({ mark: { plate, point } }: { mark: Mark }) {
  if (!plate) return null;
  return (
    <g>
      <rect
        x={plate.left}
        y={plate.top}
        width={plate.right - plate.left}
        height={PLATE_HEIGHT}
        fill="var(--color-leaf)"
        stroke="currentColor"
      />
      <svg x={plate.left + 10} y={plate.top + 7} width={14} height={14} viewBox="0 0 16 16">
        <VerdictShape verdict={point.verdict} />
      </svg>
      <text x={plate.left + 30} y={plate.top + 18} fill="currentColor" fontWeight={650}>
        {verdictPhrase(point)}
      </text>
      <text x={plate.left + 11} y={plate.top + 35} fill="var(--color-ink)">
        {valuePhrase(point)}
      </text>
    </g>
  );
}
