// Units' margins of one line against the wall at zero, with their mean and how far three deviations reach: rows of a column that share one wall.
import { useId } from "react";
import { formatMargin } from "~/components/format";
import { HatchPattern } from "./drawing-walls";

const HEIGHT = 44;
const MIDDLE = HEIGHT / 2;
const DEFAULT_WIDTH = 300;
/** Where the wall stands, the same in every row, so that the column shows one wall. */
const WALL = 0.24;
const INSET = 8;
/** Deviations that the whisker reaches to either side: common practice. */
const REACH = 3;

interface SpreadProps {
  /** In the line's shown unit. */
  readonly margins: readonly { readonly unit: string; readonly margin: number }[];
  /** Absent where there is no outlook. */
  readonly moments?: { readonly mean: number; readonly deviation: number };
  readonly unit: string;
  /** "Line 2.1 at +70 °C"; begins the accessible name. */
  readonly label: string;
  readonly width?: number;
}

/** Every row has a scale of its own: what counts is how far the units stand from the wall against how far they spread. */
export function OutlookSpread({ margins, moments, unit, label, width = DEFAULT_WIDTH }: SpreadProps) {
  const id = useId();
  const wall = WALL * width;
  const finite = margins.filter(({ margin }) => Number.isFinite(margin));
  const place = placer(
    finite.map(({ margin }) => margin),
    moments,
    width,
  );
  return (
    <svg
      role="img"
      aria-label={spreadWords(margins, unit, label)}
      width={width}
      height={HEIGHT}
      viewBox={`0 0 ${width} ${HEIGHT}`}
      className="block tablet:max-desktop:h-auto tablet:max-desktop:w-50"
    >
      <defs>
        <HatchPattern id={`${id}-hatch`} />
        <linearGradient id={`${id}-fade`} x1={1} x2={0}>
          <stop offset={0} stopColor="var(--color-sheet)" stopOpacity={0} />
          <stop offset={1} stopColor="var(--color-sheet)" stopOpacity={0.78} />
        </linearGradient>
      </defs>
      <rect x={0} y={0} width={wall} height={HEIGHT} fill={`url(#${id}-hatch)`} />
      <rect x={0} y={0} width={wall} height={HEIGHT} fill={`url(#${id}-fade)`} />
      <line x1={wall} x2={wall} y1={0} y2={HEIGHT} stroke="var(--color-ink)" strokeWidth={2.25} />
      {moments ? <Whisker moments={moments} place={place} width={width} /> : null}
      {finite.map(({ unit: name, margin }) => (
        <path
          key={name}
          d={margin < 0 ? cross(place(margin)) : `M${place(margin)} ${MIDDLE - 7}v14`}
          fill="none"
          stroke={margin < 0 ? "var(--color-fail)" : "var(--color-ink)"}
          strokeWidth={1.75}
        />
      ))}
    </svg>
  );
}

const cross = (x: number): string => `M${x - 4} ${MIDDLE - 4}l8 8M${x + 4} ${MIDDLE - 4}l-8 8`;

/** Mean as a diamond, the whisker to three deviations on either side; an end beyond the strip has no cap. */
function Whisker({
  moments: { mean, deviation },
  place,
  width,
}: {
  moments: NonNullable<SpreadProps["moments"]>;
  place: (margin: number) => number;
  width: number;
}) {
  const [from, to] = [place(mean - REACH * deviation), place(mean + REACH * deviation)];
  const isWithin = (x: number) => x > 0 && x < width;
  const caps = [from, to].filter(isWithin).map((x) => `M${x} ${MIDDLE - 4}v8`);
  const x = place(mean);
  return (
    <g stroke="var(--color-signal)">
      <path
        d={`M${Math.max(0, from)} ${MIDDLE}H${Math.min(width, to)}${caps.join("")}`}
        fill="none"
        strokeWidth={1.25}
      />
      <path
        d={`M${x} ${MIDDLE - 6}l4.5 6l-4.5 6l-4.5-6z`}
        fill="var(--color-sheet)"
        strokeWidth={1.25}
        strokeLinejoin="round"
      />
    </g>
  );
}

/** Zero at the wall, and the farthest of units and whisker within the strip on its own side. */
function placer(
  margins: readonly number[],
  moments: SpreadProps["moments"],
  width: number,
): (margin: number) => number {
  const wall = WALL * width;
  const reach = moments ? [-REACH, REACH].map((count) => moments.mean + count * moments.deviation) : [];
  const most = Math.max(0, ...margins, ...reach) / (width - wall - INSET);
  // The whisker may leave the strip on the wall's side: only units make room there.
  const least = Math.max(0, ...margins.map((margin) => -margin)) / (wall - INSET);
  const perPixel = Math.max(most, least);
  return (margin) => (perPixel === 0 ? wall : wall + margin / perPixel);
}

function spreadWords(margins: SpreadProps["margins"], unit: string, label: string): string {
  if (margins.length === 0) return `${label}: no margins`;
  const each = margins.map((one) => `${one.unit} ${formatMargin(one.margin)}`);
  return `${label}: margins ${each.join(", ")}${unit === "" ? "" : ` ${unit}`}`;
}

/** What the marks of the strips mean. */
export function OutlookSpreadLegend() {
  return (
    <ul className="flex flex-wrap items-center gap-x-5 gap-y-1 text-12" aria-label="Marks of the strips">
      <Sign words="a unit" d="M8 2v12" stroke="var(--color-ink)" />
      <Sign words="a unit that does not comply" d="M4 4l8 8M12 4l-8 8" stroke="var(--color-fail)" />
      <Sign words="mean and three deviations s" d="M0 8h16M1 4v8M15 4v8" stroke="var(--color-signal)" diamond />
    </ul>
  );
}

function Sign({ words, d, stroke, diamond }: { words: string; d: string; stroke: string; diamond?: boolean }) {
  return (
    <li className="inline-flex items-center gap-1.75">
      <svg
        aria-hidden
        width={16}
        height={16}
        viewBox="0 0 16 16"
        fill="none"
        stroke={stroke}
        className="mark-beside-text"
      >
        <path d={d} strokeWidth={diamond ? 1.25 : 1.75} />
        {diamond ? <path d="M8 3l3.75 5l-3.75 5l-3.75-5z" fill="var(--color-sheet)" strokeWidth={1.25} /> : null}
      </svg>
      {words}
    </li>
  );
}
