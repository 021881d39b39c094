// The data the charts take: walls, traces and worst points, in Hz and positive dB, as pages and routes pass them.
import type { Band, Limit, Requirement, Verdict } from "~/rf/index";

/** The two panels of the drawing: |S21| (and |S12|) above, return loss below. */
export type Panel = "transmission" | "match";

export type Parameter = "s21" | "s12" | "s11" | "s22";

/** A requirement with the number its line carries everywhere. */
export type NumberedRequirement = Requirement & { readonly lineNumber: string };

/** A limit as it is drawn: from its edge to the end of its panel. Lines whose limits coincide share one wall. */
export interface Wall {
  /** Requirement ids of the lines that share this wall, in line order; at least one. */
  readonly ids: readonly string[];
  readonly lineNumbers: readonly string[];
  /** S-parameters the wall bounds. */
  readonly parameters: readonly Parameter[];
  readonly panel: Panel;
  /** "floor": a pillar standing on the panel's end (a maximum); "ceiling": hanging from 0 dB (a minimum). */
  readonly side: "floor" | "ceiling";
  readonly band: Band;
  /** dB; breakpoints in Hz where it slopes. */
  readonly limit: Limit;
  /** Relative rejection: the band whose least loss the limit counts from. */
  readonly relativeTo?: Band;
}

/** One curve, already decimated by the server (least and greatest level per pixel column). */
export interface TraceSeries {
  readonly id: string;
  /** Named at its line: "S21", or "unit 0420, 70 °C". */
  readonly label: string;
  readonly parameter: Parameter;
  /** Hz, ascending. */
  readonly frequency: readonly number[];
  /** dB of loss or return loss, positive; Infinity is a null. */
  readonly level: readonly number[];
  /** "worst": ink (the first four of a panel by colour and dash); "other": the thin lines behind. */
  readonly emphasis: "worst" | "other";
}

/** A reported point: ring, whisker and plate in the drawing, a row in the list under it. */
export interface WorstPoint {
  readonly lineNumber: string;
  readonly verdict: Verdict;
  /** Hz; NaN where nothing was reached. */
  readonly frequency: number;
  /** In `unit`, as is `margin`, `limit` and `interval`. */
  readonly value: number;
  readonly margin: number;
  /** "dB", "ns", "deg", "MHz" … */
  readonly unit: string;
  /** Lower and upper end of the value's interval. */
  readonly interval?: readonly [number, number];
  /** The panel it is drawn in; absent: told in the list alone (ripple, delay). */
  readonly panel?: Panel;
  readonly limit?: number;
  /** The limit in words, "max 0.95 dB". */
  readonly limitText?: string;
  /** Which unit and temperature, "unit 0420, 70 °C". */
  readonly label?: string;
}

export interface DrawingProps {
  readonly walls: readonly Wall[];
  readonly traces?: readonly TraceSeries[] | undefined;
  /** Most severe first; the first three that can be placed get a plate. */
  readonly worstPoints?: readonly WorstPoint[] | undefined;
  /** Level scale of the S21 panel; absent: stretched where a loss limit is under a tenth of the range. */
  readonly stretched?: boolean | undefined;
  /** px. Absent: as wide as its column, 860 until that is known. */
  readonly width?: number | undefined;
  /** px. Absent: 0.8 of the width, 470 on phones. */
  readonly height?: number | undefined;
  /** Requirement whose wall carries handles. */
  readonly selectedId?: string | undefined;
  /** Accessible name, "Drawing of SPEC-0042 B". */
  readonly title: string;
  /** Accessible description; absent: made from walls and worst points. */
  readonly description?: string | undefined;
  /** One variant only; absent: both, switched at 720 px. */
  readonly phone?: boolean | undefined;
  /** Hz, the part of the frequency axis shown; absent: all that walls and traces span. */
  readonly window?: Band | undefined;
  /** A low drawing beside another: no dimension lines above it and no plates. */
  readonly compact?: boolean | undefined;
}

/** One line's margin on a common scale, such as percent of the limit. */
export interface StripMargin {
  readonly lineNumber: string;
  /** On the strip's scale; > 0 complies. */
  readonly margin: number;
  readonly verdict: Verdict;
}

export interface MarginStripProps {
  readonly margins: readonly StripMargin[];
  /** Ends of the scale; what lies beyond is a chevron there. Default [-12, 22]. */
  readonly scale?: readonly [number, number];
  /** Said after each figure, "% of limit". */
  readonly unit: string;
  /** px; default 240. */
  readonly width?: number;
  /** Whose margins, for the accessible name. */
  readonly label: string;
}

export interface DecisionStripProps {
  readonly value: number;
  readonly interval: readonly [number, number];
  readonly limit: number;
  /** "max": the wall stands on the right of the limit; "min": on the left. */
  readonly sense: "max" | "min";
  readonly verdict: Verdict;
  readonly unit: string;
  /** "Line 2.1, unit 0420, 70 °C". */
  readonly label: string;
  /** px; default 420. */
  readonly width?: number;
}

export interface TraceFigureProps {
  readonly walls: readonly Wall[];
  /** Absent while they are fetched: the walls stand, the height stays. */
  readonly traces?: readonly TraceSeries[] | undefined;
  readonly worstPoints?: readonly WorstPoint[] | undefined;
  readonly title: string;
  readonly description?: string | undefined;
  readonly selectedId?: string | undefined;
  /** Words under the figure: which unit, which file. */
  readonly caption?: string | undefined;
  /** @default "full" */
  readonly initialView?: "full" | "passband" | undefined;
  /** Told after each zoom, so that the page can fetch finer data; undefined = all. */
  readonly onWindowChange?: ((window: Band | undefined) => void) | undefined;
}
