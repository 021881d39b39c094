// The outlook in words: shares that are never rounded up, why there is none, and the sentences beside them.
import type { MeasuredDefinition, NoOutlookReason } from "~/rf/index";
import { formatNumber } from "./format";
import { describeDefinition, requirementUnit } from "./requirement-words";

/** "97.3 %", rounded down: at least that much was shown. Two digits from 99.9 % on. */
export function shareWords(share: number): string {
  const decimals = share >= 0.999 ? 2 : 1;
  const scale = 10 ** decimals;
  // A share found to twelve digits that is a round figure stays one.
  return `${formatNumber(Math.floor(share * 100 * scale + 1e-7) / scale, decimals)} %`;
}

/** "at least 97.3 % conform, with 95 % confidence, if these units are a random sample" */
export const shareSentence = (share: number): string =>
  `at least ${shareWords(share)} conform, with 95 % confidence, if these units are a random sample`;

/** Of lines together: where nothing is left of the whole, that is said instead of a share. */
export const jointSentence = (share: number): string =>
  share > 0 ? shareSentence(share) : "no share can be stated, for what the lines leave open adds up to the whole";

const counted = (count: number, one: string): string => `${count} ${count === 1 ? one : `${one}s`}`;

/** Why a line has no outlook. @param units that have a margin, identical data counted once */
export function noOutlookWords(reason: NoOutlookReason, units: number): string {
  const sentences: Record<NoOutlookReason, string> = {
    predicted: "None: predicted, not measured.",
    "not-covered": `None: the data of ${counted(units, "unit")} covers the line, 3 are needed.`,
    "too-few-units": `None: ${counted(units, "unit")} measured, 3 are needed.`,
    "duplicate-data": `None: ${counted(units, "unit")} with different data, 3 are needed.`,
    "infinite-margin": "None: a margin is infinite.",
    "no-spread": "None: the margins are equal, which shows no spread.",
  };
  return sentences[reason];
}

export interface LineWords {
  readonly requirement: string;
  /** Band and limit: "1.9200 to 1.9800 GHz, max 1.20 dB". */
  readonly condition: string;
  /** The shown unit of value and margin, and what the core's figure is multiplied by for it. */
  readonly unit: string;
  readonly scale: number;
}

export function lineWords(definition: MeasuredDefinition, lowestTestFrequency: number | null): LineWords {
  const { requirement, band, limit } = describeDefinition(definition, lowestTestFrequency ?? undefined);
  return {
    requirement,
    condition: [band, limit].filter((part) => part !== "").join(", "),
    ...requirementUnit(definition.kind),
  };
}

/** "2.1", "2.1 and 2.2", "2.1, 2.2 and 3.1" */
export function listed(items: readonly string[]): string {
  return items.length < 2 ? (items[0] ?? "") : `${items.slice(0, -1).join(", ")} and ${items.at(-1) ?? ""}`;
}

/** "+2.1", "−0.4", "0.0": a drift in ppm/K with its sign. */
export function driftWords(ppmPerKelvin: number): string {
  const text = formatNumber(ppmPerKelvin, 1);
  return Number(ppmPerKelvin.toFixed(1)) > 0 ? `+${text}` : text;
}
