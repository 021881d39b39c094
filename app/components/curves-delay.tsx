// Group delay of one measurement, taken as the chosen delay line takes it, with the limits that can be drawn.
import { useMemo, useState } from "react";
import { href } from "react-router";
import { fullRange, passbandWindow } from "~/charts/frequency-range";
import { ValueFigure } from "~/charts/value-figure";
import type { ValuePanel } from "~/charts/value-plot";
import { passbands, wallsFromRequirements } from "~/charts/walls";
import { curveDataSearch } from "~/forms/curves";
import type { DelayData } from "~/rf/curve-data";
import type { Band, Requirement } from "~/rf/index";
import { lineOfKind } from "./curves-chosen";
import { delayPanel, isDelay, NANOSECONDS, type DelayLine, type NumberedRequirement } from "./curves-delay-panel";
import { useCurves } from "./curves-fetch";
import type { CurvesViewProps } from "./curves-view";
import { placeWords, scoredRequirements } from "./curves-words";
import { formatNumber } from "./format";
import { Notice } from "./notice";
import { shortFrequency } from "./requirement-words";

export interface DelayAnswer {
  readonly view: "delay";
  readonly delay: DelayData;
}

export function CurvesDelay({ quoteId, chosen, values, table }: CurvesViewProps<DelayAnswer>) {
  const { place, lines } = chosen;
  const [window, setWindow] = useState<Band>();
  const drawn = lineOfKind(chosen, ({ definition: { kind } }) => kind.startsWith("group-delay"));
  const query = {
    view: "delay",
    unit: place.unit,
    temperature: place.celsius,
    ...(drawn ? { line: drawn.line.lineNumber } : {}),
  } as const;
  const address = `${href("/api/v1/quotes/:quoteId/curves", { quoteId })}${curveDataSearch(query)}`;
  const data = useCurves<DelayAnswer>(address, window, values)?.delay;
  const requirements = useMemo(() => scoredRequirements(lines), [lines]);
  const walls = useMemo(() => wallsFromRequirements(requirements), [requirements]);
  const line = requirements.filter(isDelay).find(({ id }) => id === drawn?.line.lineKey);
  const panel = useMemo(() => data && delayPanel(data, requirements, line), [data, requirements, line]);
  const full = fullOf(data, walls);
  if (data?.stretches.length === 0) return <Notice tone="near">S21 was not measured: there is no delay.</Notice>;
  return (
    <ValueFigure
      panels={panel && [panel]}
      full={full}
      initialWindow={delayWindow(line, walls, full)}
      parts={namedParts(passbandWindow(walls, full))}
      passbands={passbands(walls)}
      title={`Group delay, ${placeWords(place)}`}
      description={`Group delay of S21 against frequency. ${data ? apertureWords(data, line) : ""}`}
      unit="ns"
      format={(value) => formatNumber(value, 2)}
      caption={
        data ? <Caption data={data} line={line} panel={panel} requirements={requirements} /> : "Group delay of S21"
      }
      table={table}
      onWindowChange={setWindow}
    />
  );
}

const namedParts = (passband: Band | undefined) => (passband ? [{ name: "Passband", window: passband }] : []);

function fullOf(data: DelayData | undefined, walls: ReturnType<typeof wallsFromRequirements>): Band {
  const stretches = data?.stretches ?? [];
  const first = Math.min(...stretches.map(({ frequency }) => frequency[0] ?? Infinity));
  const last = Math.max(...stretches.map(({ frequency }) => frequency.at(-1) ?? -Infinity));
  return first < last ? [first, last] : (fullRange(walls) ?? [1e9, 2e9]);
}

/** The band of the line with a quarter of it on either side, else the passband; outside the delay is mostly noise. */
function delayWindow(line: DelayLine | undefined, walls: ReturnType<typeof wallsFromRequirements>, full: Band) {
  if (!line) return passbandWindow(walls, full);
  const room = (line.band[1] - line.band[0]) / 4 || line.band[1] * 1e-3;
  return [Math.max(full[0], line.band[0] - room), Math.min(full[1], line.band[1] + room)] as const;
}

/** "Delay over 1 MHz, as line 5.1 asks"; between neighbours the aperture is what the steps make it. */
function apertureWords({ aperture }: DelayData, line: DelayLine | undefined): string {
  if (aperture === null) return "No delay lies in the band.";
  const [least, largest] = aperture;
  if (line?.aperture !== undefined)
    return `Aperture ${shortFrequency(line.aperture)}, as line ${line.lineNumber} asks.`;
  const width = least === largest ? shortFrequency(largest) : `${shortFrequency(least)} to ${shortFrequency(largest)}`;
  return `Aperture ${width}: between neighbouring samples, no line states one.`;
}

interface CaptionProps {
  readonly data: DelayData;
  readonly line: DelayLine | undefined;
  readonly panel: ValuePanel | undefined;
  readonly requirements: readonly NumberedRequirement[];
}

function Caption({ data, line, panel, requirements }: CaptionProps) {
  const asked = requirements.filter(isDelay);
  const drawn = new Set((panel?.walls ?? []).map(({ id }) => id));
  const relative = asked.filter(({ id, kind }) => kind === "group-delay-variation" && drawn.has(id));
  const left = asked.filter(({ id }) => !drawn.has(id));
  const numbers = (lines: readonly Requirement[]) =>
    lines.map(({ id }) => asked.find((one) => one.id === id)?.lineNumber).join(", ");
  return (
    <>
      <span>{apertureWords(data, line)}</span>
      <span>
        {data.uncertainty === null
          ? "No uncertainty of the delay is stated or assumed."
          : `Each delay ± ${formatNumber(data.uncertainty * NANOSECONDS, 2)} ns (k = 2).`}
      </span>
      {asked.length === 0 ? <span>The specification asks nothing of the delay here.</span> : null}
      {relative.length === 0 ? null : <span>{numbers(relative)} counts from the least delay in its band.</span>}
      {left.length === 0 ? null : (
        <span>
          {numbers(left)} is not drawn: taken over another aperture, in a sliding window or on one of several sweeps.
        </span>
      )}
    </>
  );
}
