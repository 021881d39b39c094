// The measurement plan in words, for the buyer's overview and the supplier's invitation.
import type { MeasurementPlan, PlannedSweep } from "~/rf/measurement-plan";
import { formatQuantity } from "~/rf/quantity";
import { formatBand } from "./format";
import { shortFrequency } from "./requirement-words";

export type PlanFact = readonly [label: string, lines: readonly string[]];

const PLANES = { connector: "at the connectors", board: "on the board", fixture: "in a fixture, de-embedded" } as const;

/** What a band swept too coarsely comes to; stands beside the steps wherever they are asked. */
export const COVERAGE_SENTENCE = "A band swept more coarsely than this is not covered.";

/** "1.9200 to 1.9800 GHz, steps of 600 kHz at most" */
export function sweepWords({ band, maxStep }: PlannedSweep, lowestTestFrequency: number | null = null): string {
  const words = formatBand(band, lowestTestFrequency === null ? {} : { lowestTestFrequency });
  return `${words}, steps of ${shortFrequency(maxStep)} at most`;
}

/** What the plan asks for, in the order of its form; nothing of what it leaves open. */
export function planFacts(plan: MeasurementPlan, lowestTestFrequency: number | null): PlanFact[] {
  const { sweeps = [], temperatures = [], ifBandwidth, power, delayAperture } = plan;
  const celsius = temperatures.map((value) => formatQuantity(value, "temperature"));
  const facts: PlanFact[] = [
    ["Further temperatures", celsius.length === 0 ? [] : [celsius.join(", ")]],
    ["Sweeps", sweeps.map((sweep) => sweepWords(sweep, lowestTestFrequency))],
    ["IF bandwidth", ifBandwidth === undefined ? [] : [shortFrequency(ifBandwidth)]],
    ["Power at the input", power === undefined ? [] : [formatQuantity(power, "plain", { unit: "dBm" })]],
    [
      "Group-delay aperture",
      delayAperture === undefined ? [] : [`${shortFrequency(delayAperture)}, where a line states none`],
    ],
    ["Reference plane", planeWords(plan)],
  ];
  return facts.filter(([, lines]) => lines.length > 0);
}

function planeWords({ referencePlane, referencePlaneWords }: MeasurementPlan): string[] {
  if (referencePlane === undefined) return [];
  return [PLANES[referencePlane], ...(referencePlaneWords === undefined ? [] : [referencePlaneWords])];
}
