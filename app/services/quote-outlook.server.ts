// The outlook of a submitted quote: what its stored margins say of production and temperature, and how well its units match.
import type { OutlookQuery } from "~/forms/outlook";
import {
  jointShare,
  placeOf,
  placesOf,
  productionOutlook,
  temperatureOutlook,
  type Cell,
  type MeasuredDefinition,
  type PlaceOutlook,
  type ProductionOutlook,
  type TemperaturePlace,
} from "~/rf/index";
import { isMeasured } from "~/rf/line-definition";
import { unitsAlike } from "~/rf/lot-notes";
import type { StatedDrift } from "~/rf/stated-measurement";
import type { Person } from "./person.server";
import { readObservedDrift, type DriftObservations } from "./quote-outlook-drift.server";
import { readMatching, type MatchingView } from "./quote-outlook-matching.server";
import { readQuoteResults, readVersionSweeps, type QuoteLine } from "./quote-results.server";
import { readScores } from "./quote-scores.server";
import { readScoringFrame, type ScoringFrame } from "./scoring-sweeps.server";
import { findSubmittedQuote, type SubmittedQuoteHead } from "./submitted-quotes.server";

/** A measured line with its stored cells. */
export interface OutlookLine extends Pick<QuoteLine, "lineKey" | "lineNumber"> {
  readonly definition: MeasuredDefinition;
  readonly cells: readonly Cell[];
}

export interface ProductionPlace {
  readonly place: TemperaturePlace;
  readonly lines: readonly { readonly lineKey: string; readonly outlook: ProductionOutlook }[];
  /** The share that conforms to all lines which have one; null where none has. */
  readonly joint: number | null;
}

export interface QuoteOutlook {
  readonly head: SubmittedQuoteHead;
  /** Null until the version is scored. */
  readonly outlook: OutlookFigures | null;
}

export interface OutlookFigures {
  readonly lines: readonly OutlookLine[];
  /** Hz; for the words of a band from DC. */
  readonly lowestTestFrequency: number | null;
  /** °C, lower end first. */
  readonly range: readonly [number, number] | null;
  /** Ascending by temperature; those at which a line is scored. Empty where the data is not of the quoted part. */
  readonly production: readonly ProductionPlace[];
  /** Units whose data is that of another unit, with the one they count as. */
  readonly copies: readonly { readonly unit: string; readonly original: string }[];
  /** Ascending: ambient, the ends of the range, and other temperatures that were measured at. */
  readonly places: readonly TemperaturePlace[];
  /** By line, in their order. */
  readonly temperatures: readonly { readonly lineKey: string; readonly places: readonly PlaceOutlook[] }[];
  readonly statedDrift: StatedDrift | null;
  readonly drift: DriftObservations;
  readonly matching: MatchingView;
}

/**
 * The outlook of a quote's current version, or null where the person does not see it. Production and temperature come from the stored results
 * without evaluating anything again; only matching and the observed drift read files.
 */
export async function readQuoteOutlook(
  person: Person,
  quotePublicId: string,
  query: OutlookQuery,
): Promise<QuoteOutlook | null> {
  const [results, found] = await Promise.all([
    readQuoteResults(person, quotePublicId),
    findSubmittedQuote(person, quotePublicId),
  ]);
  if (!results || !found) return null;
  const { head, lowestTestFrequency } = results;
  const { version, rfq } = found;
  const score = (await readScores(person, [version])).get(version.id);
  if (!score) return { head, outlook: null };
  // The revision the figures speak of: after an amendment it need not be the one the version was submitted to.
  const { revisionId, notes } = score.summary;
  const [frame, sweeps] = await Promise.all([
    readScoringFrame(person, { revisionId, measurementPlan: rfq.measurementPlan }),
    readVersionSweeps(person, version.id),
  ]);
  const lines = results.lines.flatMap(({ lineKey, lineNumber, definition, cells }): OutlookLine[] =>
    isMeasured(definition) ? [{ lineKey, lineNumber, definition, cells }] : [],
  );
  const places = placesOf(
    lines.flatMap(({ cells }) => cells.map(({ temperature }) => temperature)),
    frame,
  );
  const aliases = unitsAlike(notes);
  const [drift, matching] = await Promise.all([
    readObservedDrift(person, frame, sweeps),
    readMatching(person, frame, sweeps, query),
  ]);
  const isOfQuotedPart = version.basis === "measured";
  const outlook: OutlookFigures = {
    lines,
    lowestTestFrequency,
    range: frame.range ?? null,
    production: isOfQuotedPart ? productionOf(lines, places, frame, aliases) : [],
    copies: [...aliases].map(([unit, original]) => ({ unit, original })),
    places,
    temperatures: lines.map(({ lineKey, cells }) => ({ lineKey, places: temperatureOutlook(cells, places, frame) })),
    statedDrift: version.drift,
    drift,
    matching,
  };
  return { head, outlook };
}

/** Each place with the lines that have a scored cell there. */
function productionOf(
  lines: readonly OutlookLine[],
  places: readonly TemperaturePlace[],
  frame: ScoringFrame,
  aliases: ReadonlyMap<string, string>,
): ProductionPlace[] {
  return places.flatMap((place): ProductionPlace[] => {
    const here = lines.flatMap(({ lineKey, cells }) => {
      const scored = cells.filter((cell) => cell.scored && placeOf(cell.temperature, frame).celsius === place.celsius);
      return scored.length === 0 ? [] : [{ lineKey, outlook: productionOutlook(scored, aliases) }];
    });
    const shares = here.flatMap(({ outlook }) => (outlook.kind === "found" ? [outlook.conforming] : []));
    return here.length === 0 ? [] : [{ place, lines: here, joint: shares.length === 0 ? null : jointShare(shares) }];
  });
}
