// The measured curves of a submitted quote for its overlay plot, thinned to what a figure can show.
import { decimate, prepare, type Band, type Series } from "~/rf/index";
import { curvesOf } from "~/rf/curves";
import { eachNetwork, type MeasuredNetwork } from "./measured-networks.server";
import type { Person } from "./person.server";
import { readScores, scoredRevision } from "./quote-scores.server";
import { readVersionSweeps } from "./quote-results.server";
import { readScoringFrame } from "./scoring-sweeps.server";
import { findSubmittedQuote, type SubmittedQuote } from "./submitted-quotes.server";

export interface TraceQuery {
  /** The sweeps of this unit and temperature (°C) stand out; absent: those of the line that decides. */
  readonly unit?: string | undefined;
  readonly temperature?: number | undefined;
  /** S12 stands out too, where reverse isolation is looked at. @default false */
  readonly reverse?: boolean | undefined;
  /** Hz; absent: the whole sweeps. */
  readonly window?: Band | undefined;
}

type Parameter = "s21" | "s12" | "s11" | "s22";

export interface QuoteTrace {
  readonly id: string;
  readonly label: string;
  readonly parameter: Parameter;
  /** Hz, ascending, to the hertz. */
  readonly frequency: readonly number[];
  /** dB of loss or return loss, positive, to a thousandth. */
  readonly level: readonly number[];
  readonly emphasis: "worst" | "other";
}

/** px columns of the figure for the curves that stand out; the thin ones behind share what a plot can carry. */
const COLUMNS = 800;
const COLUMNS_BEHIND = 4_000;

/** The curves of a quote's current version, or null where the person does not see it. */
export async function readQuoteTraces(
  person: Person,
  quotePublicId: string,
  query: TraceQuery,
): Promise<QuoteTrace[] | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const revisionId = await scoredRevision(person, found.version);
  const [frame, sweeps, reported] = await Promise.all([
    readScoringFrame(person, { revisionId, measurementPlan: found.rfq.measurementPlan }),
    readVersionSweeps(person, found.version.id),
    reportedPlace(person, found, query),
  ]);
  const behind = Math.min(300, Math.max(60, Math.floor(COLUMNS_BEHIND / Math.max(1, sweeps.length))));
  const ids = sweeps.map(({ id }) => id);
  const traces: QuoteTrace[] = [];
  for await (const measured of eachNetwork(person, ids)) {
    const { serial, temperature } = measured.measurement;
    const standsOut = reported !== null && serial === reported.unit && Number(temperature) === reported.celsius;
    const parameters: Parameter[] = ["s21", ...(standsOut && query.reverse ? ["s12" as const] : []), "s11", "s22"];
    const drawn: Drawn = {
      emphasis: standsOut ? "worst" : "other",
      columns: standsOut ? COLUMNS : behind,
      window: query.window,
    };
    traces.push(...tracesOf(measured, frame.impedance, parameters, drawn));
  }
  return traces;
}

async function reportedPlace(person: Person, { version }: SubmittedQuote, { unit, temperature }: TraceQuery) {
  if (unit !== undefined && temperature !== undefined) return { unit, celsius: temperature };
  const score = (await readScores(person, [version])).get(version.id);
  const worst = score?.lines.get(score.summary.worstLineKey ?? "");
  return worst?.unit ? { unit: worst.unit, celsius: Number(worst.temperature) } : null;
}

interface Drawn {
  readonly emphasis: "worst" | "other";
  readonly columns: number;
  readonly window: Band | undefined;
}

/** A parameter that was not measured has no curve. */
function tracesOf(
  { measurement, network }: MeasuredNetwork,
  impedance: readonly [number, number],
  parameters: readonly Parameter[],
  { emphasis, columns, window }: Drawn,
): QuoteTrace[] {
  const curves = curvesOf(prepare(network, impedance));
  return parameters.flatMap((parameter) => {
    if (!curves.isMeasured(parameter)) return [];
    const { x, y } = thinned(curves.frequency, curves.loss(parameter), columns, window);
    const name = parameter.toUpperCase();
    return [
      {
        id: `${measurement.publicId} ${parameter}`,
        label: emphasis === "worst" ? name : `${name} of unit ${measurement.serial ?? ""}`,
        parameter,
        frequency: Array.from(x, Math.round),
        level: Array.from(y, (level) => Math.round(level * 1000) / 1000),
        emphasis,
      },
    ];
  });
}

/** The whole curve, with a window of it as fine as the columns allow: the figure keeps its full range however far it is zoomed. */
function thinned(frequency: Series, level: Series, columns: number, window: Band | undefined) {
  const whole = decimate(frequency, level, columns);
  if (!window) return whole;
  const fine = decimate(frequency, level, columns, window);
  const first = fine.x[0] ?? Infinity;
  const last = fine.x[fine.x.length - 1] ?? -Infinity;
  const before = whole.x.filter((hz) => hz < first).length;
  const after = whole.x.findIndex((hz) => hz > last);
  const end = after < 0 ? whole.x.length : after;
  const join = (coarse: Float64Array, dense: Float64Array) => [
    ...coarse.subarray(0, before),
    ...dense,
    ...coarse.subarray(end),
  ];
  return { x: join(whole.x, fine.x), y: join(whole.y, fine.y) };
}
