// One Smith chart as SVG: circles by thin rules, the limit as a wall around the middle, the locus and the ends of its band.
import { memo, useId } from "react";
import { formatFrequency } from "~/components/format";
import { estimateTextWidth, overlaps } from "./boxes";
import { HatchPattern } from "./drawing-walls";
import type { Box } from "./layout";
import { reactanceAtRim, type Circle } from "./smith-grid";
import type { SmithScene } from "./smith-plot";
import { pathOf } from "./svg-path";
import { PILL_HEIGHT, type Pixel } from "./wall-shape";

/** px outward over which the hatch of a limit fades away. */
const FADE_LENGTH = 56;
/** px from the limit to the middle of its number. */
const NUMBER_DEPTH = 24;

interface SmithSvgProps {
  readonly scene: SmithScene;
  readonly title: string;
  readonly description: string;
}

export const SmithSvg = memo(function SmithSvg({ scene, title, description }: SmithSvgProps) {
  const id = useId();
  const { size, rim } = scene;
  const ends = placeEnds(scene);
  return (
    <svg
      role="img"
      aria-labelledby={`${id}-title`}
      aria-describedby={`${id}-description`}
      viewBox={`0 0 ${size} ${size}`}
      width="100%"
      height="100%"
      fontSize={12}
      data-figure=""
      className="block tabular-nums"
    >
      <title id={`${id}-title`}>{title}</title>
      <desc id={`${id}-description`}>{description}</desc>
      <defs>
        <HatchPattern id={`${id}-hatch`} />
        <clipPath id={`${id}-rim`}>
          <circle cx={rim.x} cy={rim.y} r={rim.radius} />
        </clipPath>
      </defs>
      <g clipPath={`url(#${id}-rim)`}>
        <Limits scene={scene} id={id} />
        <Grid scene={scene} />
        <LimitCircles scene={scene} />
        <Locus scene={scene} />
      </g>
      <circle cx={rim.x} cy={rim.y} r={rim.radius} fill="none" stroke="var(--color-ink)" />
      <GridLabels scene={scene} taken={ends.map(({ box }) => box)} />
      <LimitNumbers scene={scene} />
      <BandEnds ends={ends} />
    </svg>
  );
});

function Grid({ scene }: { scene: SmithScene }) {
  const { grid, rim, toCircle } = scene;
  return (
    <g fill="none" stroke="var(--color-rule)">
      <path d={`M${rim.x - rim.radius} ${rim.y}H${rim.x + rim.radius}`} />
      {[...grid.resistance, ...grid.reactance].map(({ label, circle }) => {
        const { x, y, radius } = toCircle(circle);
        return <circle key={label} cx={x} cy={y} r={radius} />;
      })}
    </g>
  );
}

/** Outside the circle of a return-loss limit |Γ| is too large: hatched outwards from it. */
function Limits({ scene: { limits }, id }: { scene: SmithScene; id: string }) {
  return (
    <g>
      {limits.map(({ lineNumber, circle }) => {
        const outer = circle.radius + FADE_LENGTH;
        const ring = `${ringPath(circle, outer)}${ringPath(circle, circle.radius)}`;
        return (
          <g key={lineNumber}>
            <radialGradient
              id={`${id}-${lineNumber}`}
              gradientUnits="userSpaceOnUse"
              cx={circle.x}
              cy={circle.y}
              r={outer}
            >
              <stop offset={circle.radius / outer} stopColor="var(--color-leaf)" stopOpacity={0} />
              <stop offset={1} stopColor="var(--color-leaf)" stopOpacity={1} />
            </radialGradient>
            <path d={ring} fillRule="evenodd" fill={`url(#${id}-hatch)`} />
            <path d={ring} fillRule="evenodd" fill={`url(#${id}-${lineNumber})`} />
          </g>
        );
      })}
    </g>
  );
}

function LimitCircles({ scene: { limits } }: { scene: SmithScene }) {
  return (
    <g fill="none" stroke="var(--color-ink)" strokeWidth={2.25}>
      {limits.map(({ lineNumber, circle: { x, y, radius } }) => (
        <circle key={lineNumber} cx={x} cy={y} r={radius} />
      ))}
    </g>
  );
}

const ringPath = ({ x, y }: Circle, radius: number): string =>
  `M${x - radius} ${y}a${radius} ${radius} 0 1 0 ${2 * radius} 0a${radius} ${radius} 0 1 0 ${-2 * radius} 0z`;

function Locus({ scene: { whole, inBand, beyond } }: { scene: SmithScene }) {
  const path = (lines: SmithScene["whole"]) => lines.map((points) => pathOf(points)).join("");
  return (
    <g fill="none" strokeLinejoin="round">
      <path d={path(whole)} stroke="var(--color-edge)" />
      <path d={path(inBand)} stroke="var(--color-ink)" strokeWidth={2} />
      <path d={path(beyond)} stroke="var(--color-fail)" strokeWidth={2.75} />
    </g>
  );
}

/** Normalised resistances along the real axis, clear of what lies there, and reactances at the rim. */
function GridLabels({ scene, taken }: { scene: SmithScene; taken: readonly Box[] }) {
  const { grid, reach, rim, limits, toPixel } = scene;
  return (
    <g fill="var(--color-quiet)">
      {grid.resistance.map(({ value, label }) => {
        const at = toPixel((value - 1) / (value + 1), 0);
        const width = estimateTextWidth(label, 12);
        const box = { left: at.x + 4, right: at.x + 4 + width, top: at.y - 16, bottom: at.y - 3 };
        const isInside = limits.some(({ circle }) => Math.abs(at.x - circle.x) < circle.radius + width);
        if (isInside || box.right > rim.x + rim.radius - 4 || taken.some((other) => overlaps(box, other, 2)))
          return null;
        return (
          <text key={label} x={at.x + 4} y={at.y - 5}>
            {label}
          </text>
        );
      })}
      {grid.reactance.map(({ value, label }) => {
        const { x, y } = reactanceAtRim(value, reach);
        const at = toPixel(x, y);
        const length = Math.hypot(at.x - rim.x, at.y - rim.y) || 1;
        const [outX, outY] = [(at.x - rim.x) / length, (at.y - rim.y) / length];
        const anchor = outX < -0.25 ? "end" : outX > 0.25 ? "start" : "middle";
        return (
          <text key={label} x={at.x + outX * 8} y={at.y + outY * 10 + 4} textAnchor={anchor}>
            {label}
          </text>
        );
      })}
    </g>
  );
}

/** Numbers of limits in pills, straight under the middle. */
function LimitNumbers({ scene: { limits, rim } }: { scene: SmithScene }) {
  return (
    <g textAnchor="middle" fontWeight={650}>
      {limits.map(({ lineNumber, circle }) => {
        const width = estimateTextWidth(lineNumber, 12, 650) + 16;
        const y = Math.min(circle.y + circle.radius + NUMBER_DEPTH, rim.y + rim.radius - PILL_HEIGHT);
        return (
          <g key={lineNumber}>
            <rect
              x={circle.x - width / 2}
              y={y - PILL_HEIGHT / 2}
              width={width}
              height={PILL_HEIGHT}
              rx={PILL_HEIGHT / 2}
              fill="var(--color-leaf)"
              stroke="var(--color-ink)"
            />
            <text x={circle.x} y={y + 4.25} fill="var(--color-ink)">
              {lineNumber}
            </text>
          </g>
        );
      })}
    </g>
  );
}

/** Where the emphasised stretch begins and ends, told by frequency on the side away from the middle. */
function BandEnds({ ends }: { ends: ReturnType<typeof placeEnds> }) {
  return (
    <g>
      {ends.map(({ at, label, box }) => (
        <g key={`${label} ${at.x}`}>
          <rect
            x={box.left}
            y={box.top}
            width={box.right - box.left}
            height={box.bottom - box.top}
            fill="var(--color-leaf)"
            fillOpacity={0.85}
          />
          <text x={box.left + 4} y={box.top + 13} fill="var(--color-ink)">
            {label}
          </text>
          <circle cx={at.x} cy={at.y} r={3.5} fill="var(--color-leaf)" stroke="var(--color-ink)" strokeWidth={1.75} />
        </g>
      ))}
    </g>
  );
}

const END_HEIGHT = 18;

/** Labels beside their ends, each moved away from those that stand already. */
function placeEnds({ ends, rim }: SmithScene) {
  const placed: { readonly at: Pixel; readonly label: string; readonly box: Box }[] = [];
  for (const { frequency, at } of [...ends].sort((one, other) => one.at.y - other.at.y)) {
    if (Math.hypot(at.x - rim.x, at.y - rim.y) > rim.radius) continue;
    const label = formatFrequency(frequency);
    // Two sweeps of a measurement end at the same place.
    if (placed.some((other) => other.label === label && Math.hypot(at.x - other.at.x, at.y - other.at.y) < 8)) continue;
    const width = estimateTextWidth(label, 12) + 8;
    const left = at.x >= rim.x ? at.x + 10 : at.x - 10 - width;
    const boxAt = (top: number) => ({ left, right: left + width, top, bottom: top + END_HEIGHT });
    let box = boxAt(at.y - END_HEIGHT / 2);
    const meets = () => placed.some((other) => overlaps(box, other.box, 1));
    while (meets()) box = boxAt(box.top + 4);
    placed.push({ at, label, box });
  }
  return placed;
}
