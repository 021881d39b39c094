// Curves of one measurement of a submitted quote, by view: margin against frequency, reflections, delay, impedance.
import type { CurveDataQuery } from "~/forms/curves";
import { prepare, type Band, type Requirement } from "~/rf/index";
import {
  delayData,
  impedanceData,
  locusData,
  marginData,
  type DelayData,
  type ImpedanceData,
  type LocusData,
  type MarginData,
  type PreparedSweepData,
  type Resolution,
} from "~/rf/curve-data";
import { isPointwise } from "~/rf/margin-curve";
import { setupInUse, statedOf } from "~/rf/score-sweep";
import { eachNetwork } from "./measured-networks.server";
import type { Person } from "./person.server";
import { readVersionSweeps } from "./quote-results.server";
import { scoredRevision } from "./quote-scores.server";
import { readScoringFrame, type ScoringFrame } from "./scoring-sweeps.server";
import { findSubmittedQuote, type SubmittedQuote } from "./submitted-quotes.server";

interface Sweeps {
  /** The files of the measurement, by sweep. */
  readonly files: readonly { readonly sweepId: string; readonly name: string }[];
}

export type QuoteCurves = Sweeps &
  (
    | {
        readonly view: "margin";
        /** Null for a line that has no margin at a frequency. */ readonly margin: MarginData | null;
      }
    | { readonly view: "smith"; readonly loci: readonly LocusData[] }
    | { readonly view: "delay"; readonly delay: DelayData }
    | { readonly view: "impedance"; readonly impedances: readonly ImpedanceData[] }
  );

/** px columns of the figures. */
const COLUMNS = 900;

/** The curves of a measurement of a quote's current version, or null where the person does not see it or there is none. */
export async function readQuoteCurves(
  person: Person,
  quotePublicId: string,
  query: CurveDataQuery,
): Promise<QuoteCurves | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const revisionId = await scoredRevision(person, found.version);
  const [frame, rows] = await Promise.all([
    readScoringFrame(person, { revisionId, measurementPlan: found.rfq.measurementPlan }),
    readVersionSweeps(person, found.version.id),
  ]);
  const ids = rows
    .filter(({ serial, temperature }) => (serial ?? "") === query.unit && Number(temperature) === query.temperature)
    .map(({ id }) => id);
  if (ids.length === 0) return null;
  const { sweeps, files } = await prepareSweeps(person, found, frame, ids);
  return { files, ...curvesFor(sweeps, frame, query) };
}

/** The measurements that curves can be asked of, or null where the person does not see the quote. */
export async function readCurvePlaces(
  person: Person,
  quotePublicId: string,
): Promise<{ readonly unit: string; readonly temperature: number }[] | null> {
  const found = await findSubmittedQuote(person, quotePublicId);
  if (!found) return null;
  const sweeps = await readVersionSweeps(person, found.version.id);
  const places = sweeps.map(({ serial, temperature }) => ({ unit: serial ?? "", temperature: Number(temperature) }));
  return places.filter(
    ({ unit, temperature }, index) =>
      places.findIndex((other) => other.unit === unit && other.temperature === temperature) === index,
  );
}

/** As scoring takes them: at the specification's impedances, with the setup stated or assumed. */
async function prepareSweeps(person: Person, { version, rfq }: SubmittedQuote, frame: ScoringFrame, ids: number[]) {
  const sweeps: PreparedSweepData[] = [];
  const files: { sweepId: string; name: string }[] = [];
  for await (const { measurement, network, fileName } of eachNetwork(person, ids)) {
    const setup = setupInUse(statedOf(version.setup, measurement.setup), rfq.assumedSetup);
    sweeps.push({ id: measurement.publicId, prepared: prepare(network, frame.impedance), setup });
    files.push({ sweepId: measurement.publicId, name: fileName });
  }
  return { sweeps, files };
}

type CurvesOfView = QuoteCurves extends infer Curves ? (Curves extends Sweeps ? Omit<Curves, "files"> : never) : never;

function curvesFor(sweeps: readonly PreparedSweepData[], frame: ScoringFrame, query: CurveDataQuery): CurvesOfView {
  const resolution: Resolution = { columns: COLUMNS, window: query.window };
  const requirement = requirementOf(frame, query.line);
  switch (query.view) {
    case "margin": {
      const { lowestTestFrequency } = frame;
      const isDrawn = requirement !== undefined && isPointwise(requirement);
      return {
        view: "margin",
        margin: isDrawn ? marginData(sweeps, requirement, { ...resolution, lowestTestFrequency }) : null,
      };
    }
    case "smith":
      return { view: "smith", loci: locusData(sweeps, matchBands(frame)) };
    case "delay":
      return { view: "delay", delay: delayData(sweeps, delayOptions(frame, requirement), resolution) };
    case "impedance":
      return { view: "impedance", impedances: impedanceData(sweeps, query.port ?? 1, resolution) };
  }
}

function requirementOf({ lines, requirements }: ScoringFrame, lineNumber: string | undefined): Requirement | undefined {
  const key = lines.find((line) => line.lineNumber === lineNumber)?.lineKey;
  return requirements.find(({ id }) => id === key);
}

const bandsOf = ({ requirements }: ScoringFrame, kinds: readonly Requirement["kind"][]): Band[] =>
  requirements.flatMap((requirement) =>
    "band" in requirement && kinds.includes(requirement.kind) ? [requirement.band] : [],
  );

const matchBands = (frame: ScoringFrame): Band[] => bandsOf(frame, ["return-loss", "insertion-loss"]);

/** As the chosen delay line takes it; without one, between neighbours, its aperture told over the passband. */
function delayOptions(frame: ScoringFrame, requirement: Requirement | undefined) {
  if (requirement?.kind === "group-delay" || requirement?.kind === "group-delay-variation") {
    const { aperture, maxStep, band } = requirement;
    return { aperture, maxStep, band };
  }
  const bands = bandsOf(frame, ["insertion-loss"]);
  const band: Band = [Math.min(...bands.map(([from]) => from)), Math.max(...bands.map(([, to]) => to))];
  return { band: bands.length === 0 ? ([0, Infinity] as const) : band };
}
