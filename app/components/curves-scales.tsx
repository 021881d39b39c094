// The curves of a measurement at two scales, over those of all units.
import { useMemo, useState } from "react";
import { href } from "react-router";
import { TwoScaleFigure } from "~/charts/two-scale-figure";
import type { TraceSeries } from "~/charts/types";
import { wallsFromRequirements } from "~/charts/walls";
import type { Band } from "~/rf/index";
import type { CurvesViewProps } from "./curves-view";
import { useCurves } from "./curves-fetch";
import { placeWords, reportedPoints, scoredRequirements, unscoredWords } from "./curves-words";

interface Traces {
  readonly traces: readonly TraceSeries[];
}

export function CurvesScales({ quoteId, supplierName, chosen, values, table }: CurvesViewProps<Traces>) {
  const { place, lines, selected } = chosen;
  const [window, setWindow] = useState<Band>();
  const search = new URLSearchParams({
    unit: place.unit,
    temperature: String(place.celsius),
    ...(selected?.line.definition.kind === "reverse-isolation" ? { reverse: "1" } : {}),
  });
  const address = `${href("/api/v1/quotes/:quoteId/traces", { quoteId })}?${search.toString()}`;
  const data = useCurves<Traces>(address, window, values);
  const walls = useMemo(() => wallsFromRequirements(scoredRequirements(lines)), [lines]);
  const points = useMemo(() => reportedPoints(lines, selected), [lines, selected]);
  return (
    <TwoScaleFigure
      walls={walls}
      traces={data?.traces}
      worstPoints={points}
      title={`Curves of ${supplierName}, ${placeWords(place)}`}
      caption={[`${placeWords(place)}, over all units`, unscoredWords(lines)].filter(Boolean).join("; ")}
      selectedId={selected?.line.lineKey}
      onWindowChange={setWindow}
      table={table}
    />
  );
}
