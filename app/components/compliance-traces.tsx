// The overlay plot of a quote: curves of all units fetched after the page, walls and worst points on it.
import { useEffect, useMemo, useRef, useState } from "react";
import { href, useFetcher } from "react-router";
import { TraceFigure } from "~/charts/trace-figure";
import type { Panel, TraceSeries, WorstPoint } from "~/charts/types";
import { wallsFromRequirements } from "~/charts/walls";
import { isMeasured, verdictRank, type Band, type Requirement } from "~/rf/index";
import { cellAt, celsiusWords, shownResult, type ComplianceLine } from "./compliance-words";
import { describeDefinition, numberedRequirements } from "./requirement-words";

interface TracesProps {
  quoteId: string;
  supplierName: string;
  lines: readonly ComplianceLine[];
  /** Whose curves stand out. */
  place: { readonly unit: string; readonly celsius: number } | null;
  selectedKey: string | undefined;
}

/** ms a zoom has to rest before finer curves are fetched. */
const ZOOM_RESTS = 250;

export function ComplianceTraces({ quoteId, supplierName, lines, place, selectedKey }: TracesProps) {
  const [window, setWindow] = useState<Band>();
  const isReverse = lines.some(
    ({ lineKey, definition }) => lineKey === selectedKey && definition.kind === "reverse-isolation",
  );
  const traces = useTraces(tracesAddress(quoteId, place, isReverse, window));
  const walls = useMemo(() => wallsFromRequirements(numberedRequirements(lines)), [lines]);
  const worstPoints = useMemo(() => worstPointsOf(lines), [lines]);
  const caption = place ? `Unit ${place.unit}, ${celsiusWords(place.celsius)}, over all units` : undefined;
  return (
    <TraceFigure
      walls={walls}
      traces={traces}
      worstPoints={worstPoints}
      title={`Measured curves of ${supplierName}`}
      caption={caption}
      selectedId={selectedKey}
      onWindowChange={setWindow}
    />
  );
}

/** Fetched again where another unit is to stand out, and finer where the figure is zoomed; the last ones stay meanwhile. */
function useTraces(address: string): TraceSeries[] | undefined {
  const { load, data } = useFetcher<{ traces: TraceSeries[] }>();
  const loaded = useRef<string>(undefined);
  useEffect(() => {
    if (loaded.current === address) return;
    const rest = loaded.current === undefined ? 0 : ZOOM_RESTS;
    const timer = setTimeout(() => {
      loaded.current = address;
      void load(address);
    }, rest);
    return () => clearTimeout(timer);
  }, [address, load]);
  return data?.traces;
}

function tracesAddress(
  quoteId: string,
  place: TracesProps["place"],
  isReverse: boolean,
  window: Band | undefined,
): string {
  const search = new URLSearchParams({
    ...(place ? { unit: place.unit, temperature: String(place.celsius) } : {}),
    ...(isReverse ? { reverse: "1" } : {}),
    ...(window ? { from: String(Math.round(window[0])), to: String(Math.round(window[1])) } : {}),
  });
  return `${href("/api/v1/quotes/:quoteId/traces", { quoteId })}?${search.toString()}`;
}

const PANELS: Partial<Record<Requirement["kind"], Panel>> = {
  "insertion-loss": "transmission",
  rejection: "transmission",
  "reverse-isolation": "transmission",
  "return-loss": "match",
};

/** The reported point of each measured line that does not simply pass there, worst first; where all pass, of the closest line. */
function worstPointsOf(lines: readonly ComplianceLine[]): WorstPoint[] {
  const points = lines.flatMap((line) => {
    const point = worstPointOf(line);
    return point ? [{ point, credited: line.creditedMargin ?? Infinity }] : [];
  });
  points.sort((a, b) => verdictRank(a.point.verdict) - verdictRank(b.point.verdict) || a.credited - b.credited);
  const near = points.filter(({ point }) => point.verdict !== "pass");
  return (near.length > 0 ? near : points.slice(0, 1)).map(({ point }) => point);
}

function worstPointOf(line: ComplianceLine): WorstPoint | null {
  const { definition, unit, temperature, lineNumber } = line;
  if (unit === null || temperature === null || !isMeasured(definition)) return null;
  const cell = cellAt(line, unit, temperature);
  if (!cell) return null;
  const shown = shownResult(definition, cell);
  const panel = PANELS[definition.kind];
  return {
    lineNumber,
    verdict: cell.result.verdict,
    frequency: cell.result.frequency,
    value: shown.value,
    margin: shown.margin,
    unit: shown.unit,
    interval: shown.interval,
    limit: shown.limit,
    limitText: describeDefinition(definition).limit,
    label: `unit ${unit}, ${celsiusWords(temperature)}`,
    ...(panel ? { panel } : {}),
  };
}
