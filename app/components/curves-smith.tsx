// Smith charts of both ports at one measurement, with the return-loss limits that are asked there.
import { useMemo } from "react";
import { href } from "react-router";
import { SmithFigure, type SmithPort } from "~/charts/smith-figure";
import type { SmithLimit } from "~/charts/smith-plot";
import { passbands, wallsFromRequirements } from "~/charts/walls";
import { curveDataSearch } from "~/forms/curves";
import type { LocusData } from "~/rf/curve-data";
import { formatImpedances } from "./requirement-words";
import { useCurves } from "./curves-fetch";
import type { CurvesViewProps } from "./curves-view";
import { placeWords, scoredRequirements, unscoredWords } from "./curves-words";

export interface SmithAnswer {
  readonly view: "smith";
  readonly loci: readonly LocusData[];
}

export function CurvesSmith({ quoteId, chosen, values, table }: CurvesViewProps<SmithAnswer>) {
  const { place, lines } = chosen;
  const query = { view: "smith", unit: place.unit, temperature: place.celsius } as const;
  const address = `${href("/api/v1/quotes/:quoteId/curves", { quoteId })}${curveDataSearch(query)}`;
  const loci = useCurves<SmithAnswer>(address, undefined, values)?.loci;
  const requirements = useMemo(() => scoredRequirements(lines), [lines]);
  const bands = useMemo(() => passbands(wallsFromRequirements(requirements)), [requirements]);
  const ports = useMemo(() => loci && portsOf(loci, requirements), [loci, requirements]);
  const sloped = requirements.filter((line) => line.kind === "return-loss" && typeof line.min !== "number");
  const references = [1, 2].map((port) => loci?.find((locus) => locus.port === port)?.reference);
  return (
    <SmithFigure
      ports={ports}
      bands={bands}
      title={`Smith chart, ${placeWords(place)}`}
      caption={
        <>
          <span>
            {placeWords(place)}; values of the grid are normalised
            {references[0] !== undefined && references[1] !== undefined
              ? ` to ${formatImpedances([references[0], references[1]])}`
              : ""}
          </span>
          <span>
            {bands.length === 0 ? "No passband is asked" : "Strong within the passband"}; outside a limit is hatched
          </span>
          {sloped.length === 0 ? null : (
            <span>{sloped.map(({ lineNumber }) => lineNumber).join(", ")} is sloped and no circle: see its margin</span>
          )}
          {unscoredWords(lines) === "" ? null : <span>{unscoredWords(lines)}</span>}
        </>
      }
      table={table}
    />
  );
}

function portsOf(loci: readonly LocusData[], requirements: ReturnType<typeof scoredRequirements>): SmithPort[] {
  return ([1, 2] as const).map((port) => ({
    port,
    loci: loci.filter((locus) => locus.port === port).map((locus) => ({ ...locus, id: locus.sweepId })),
    limits: requirements.flatMap((line): SmithLimit[] =>
      line.kind === "return-loss" && line.port === port && typeof line.min === "number"
        ? [{ lineNumber: line.lineNumber, returnLoss: line.min, band: line.band }]
        : [],
    ),
  }));
}
