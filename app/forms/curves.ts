// A quote's curves as the address asks for them: which measurement, line, view and port; and the address of another view.
import type { Band } from "~/rf/index";

/** "scales": the curves with zoom and wide view; their data has an address of its own. */
export const CURVE_VIEWS = ["scales", "margin", "smith", "delay", "impedance"] as const;
export type CurveView = (typeof CURVE_VIEWS)[number];

export interface CurvesQuery {
  readonly view: CurveView;
  /** Serial; null: the measurement that decides. */
  readonly unit: string | null;
  /** °C. */
  readonly temperature: number | null;
  /** "3.1"; null: the line that decides. */
  readonly line: string | null;
  /** Whose impedance. */
  readonly port: 1 | 2;
  /** The curves come with the page, with their values as a table: for reading without script. */
  readonly values: boolean;
}

/** What is asked of one measurement's data. */
export interface CurveDataQuery {
  readonly view: Exclude<CurveView, "scales">;
  readonly unit: string;
  readonly temperature: number;
  readonly line?: string | undefined;
  readonly port?: 1 | 2 | undefined;
  /** Hz. */
  readonly window?: Band | undefined;
}

/** Reads `?view=margin&unit=0420&temperature=70&line=2.1`; what is unknown counts as absent. */
export function readCurvesQuery(search: URLSearchParams): CurvesQuery {
  return {
    view: CURVE_VIEWS.find((view) => view === search.get("view")) ?? "scales",
    unit: search.get("unit"),
    temperature: figure(search, "temperature") ?? null,
    line: search.get("line"),
    port: search.get("port") === "2" ? 2 : 1,
    values: search.get("values") === "1",
  };
}

/** The same with `from` and `to` in Hz; null without a view of data, a unit or a temperature. */
export function readCurveDataQuery(search: URLSearchParams): CurveDataQuery | null {
  const { view, unit, temperature, line, port } = readCurvesQuery(search);
  if (view === "scales" || unit === null || temperature === null) return null;
  const [from, to] = [figure(search, "from"), figure(search, "to")];
  return {
    view,
    unit,
    temperature,
    port,
    ...(line === null ? {} : { line }),
    ...(from !== undefined && to !== undefined && from < to ? { window: [from, to] } : {}),
  };
}

/** The search part of a view's address, "?view=margin&unit=0420&temperature=70&line=2.1", without what is the default anyway. */
export function curvesSearch({ view, unit, temperature, line, port, values }: CurvesQuery): string {
  const search = new URLSearchParams();
  if (view !== "scales") search.set("view", view);
  if (unit !== null && temperature !== null) {
    search.set("unit", unit);
    search.set("temperature", String(temperature));
  }
  if (line !== null) search.set("line", line);
  if (view === "impedance" && port === 2) search.set("port", "2");
  if (values) search.set("values", "1");
  const text = search.toString();
  return text === "" ? "" : `?${text}`;
}

/** The search part of the address of one measurement's data. */
export function curveDataSearch({ view, unit, temperature, line, port, window }: CurveDataQuery): string {
  const search = new URLSearchParams({ view, unit, temperature: String(temperature) });
  if (line !== undefined) search.set("line", line);
  if (port !== undefined) search.set("port", String(port));
  if (window !== undefined) {
    search.set("from", String(Math.round(window[0])));
    search.set("to", String(Math.round(window[1])));
  }
  return `?${search.toString()}`;
}

function figure(search: URLSearchParams, name: string): number | undefined {
  const text = search.get(name);
  const value = text === null || text.trim() === "" ? NaN : Number(text);
  return Number.isFinite(value) ? value : undefined;
}
