// A line of a specification in words: what it limits, over which band, by how much.
import type { Limit, Requirement } from "~/rf/index";
import { measuredRequirements, type RequirementDefinition, type SpecificationLine } from "~/rf/line-definition";
import { compareLineNumbers } from "~/rf/line-numbers";
import { formatQuantity } from "~/rf/quantity";
import { formatBand, formatFrequency, formatNumber } from "./format";

/** What the words of a revision are made from; the data `readSpecificationView` answers has it. */
export interface WordedSpecification {
  /** Ohm, port 1 and port 2. */
  readonly impedances: readonly [number, number];
  /** °C. */
  readonly ambient: number;
  readonly temperatureRange: readonly [number, number] | null;
  /** Hz. */
  readonly lowestTestFrequency: number | null;
  readonly lines: readonly SpecificationLine[];
}

/** A row of the requirement table. */
export interface RequirementLine {
  /** Names the line through all revisions; the two general lines have keys of their own. */
  readonly lineKey: string;
  /** "3.2"; its first part is the group. */
  readonly lineNumber: string;
  /** "Rejection, sloped" */
  readonly requirement: string;
  /** "2.0050 to 2.0400 GHz, at ambient"; empty where there is nothing to add. */
  readonly band: string;
  /** "min 34.5 dB" */
  readonly limit: string;
  /** The general lines, which nothing is measured against. */
  readonly general?: boolean;
}

const celsius = (value: number) => formatQuantity(value, "temperature");

/** "50 / 75 Ω" */
export const formatImpedances = ([first, second]: readonly [number, number]): string =>
  `${formatQuantity(first, "plain")} / ${formatQuantity(second, "impedance")}`;

/** "−30 to +70 °C" */
export function formatTemperatureRange([from, to]: readonly [number, number]): string {
  const signed = (value: number) => `${value > 0 ? "+" : ""}${formatQuantity(value, "plain")}`;
  return `${signed(from)} to ${signed(to)} °C`;
}

/** All rows of a revision: impedance and temperature as 1.1 and 1.2, then the lines in the order of their numbers. */
export function requirementLines(specification: WordedSpecification): RequirementLine[] {
  const { impedances, ambient, temperatureRange, lines } = specification;
  const lowest = specification.lowestTestFrequency ?? undefined;
  return [
    {
      lineKey: "reference-impedance",
      lineNumber: "1.1",
      requirement: "Reference impedance",
      band: "port 1, port 2",
      limit: formatImpedances(impedances),
      general: true,
    },
    {
      lineKey: "temperature",
      lineNumber: "1.2",
      requirement: "Temperature",
      band: temperatureRange ? `ambient ${celsius(ambient)}` : "ambient",
      limit: temperatureRange ? formatTemperatureRange(temperatureRange) : celsius(ambient),
      general: true,
    },
    ...[...lines]
      .sort((one, other) => compareLineNumbers(one.lineNumber, other.lineNumber))
      .map(({ lineKey, lineNumber, definition }) => ({
        lineKey,
        lineNumber,
        ...describeDefinition(definition, lowest),
      })),
  ];
}

interface Words {
  readonly requirement: string;
  readonly band: string;
  readonly limit: string;
}

/**
 * The words of one line.
 *
 * @param lowestTestFrequency Hz, said beside a band that starts at DC
 */
export function describeDefinition(definition: RequirementDefinition, lowestTestFrequency?: number): Words {
  if (definition.kind === "declared") return { requirement: definition.name, band: "", limit: definition.limit };
  const [band, ...conditions] = [bandWords(definition, lowestTestFrequency), ...conditionsOf(definition)];
  return {
    requirement: nameOf(definition),
    band: [band, ...conditions].filter((part) => part !== "").join(", "),
    limit: limitWords(definition),
  };
}

type Measured = Exclude<RequirementDefinition, { kind: "declared" }>;
type Kind = Requirement["kind"];

const NAMES: Record<Kind, string> = {
  "insertion-loss": "Insertion loss",
  ripple: "Ripple, peak to peak",
  rejection: "Rejection",
  "return-loss": "Return loss",
  "reverse-isolation": "Reverse isolation",
  "group-delay": "Group delay",
  "group-delay-variation": "Group delay variation",
  "phase-linearity": "Phase linearity",
  "centre-frequency": "Centre frequency",
  bandwidth: "Bandwidth",
  "shape-factor": "Shape factor",
};

/** "Rejection"; for a list to choose from. */
export const kindName = (kind: Kind | "declared"): string => (kind === "declared" ? "Declared" : NAMES[kind]);

function nameOf(definition: Measured): string {
  const name = definition.kind === "return-loss" ? `Return loss, port ${definition.port}` : NAMES[definition.kind];
  const relative = definition.kind === "rejection" && definition.relativeTo ? ", relative" : "";
  const limit = levelLimit(definition);
  return `${name}${relative}${limit !== undefined && isSloped(limit) ? ", sloped" : ""}`;
}

function bandWords(definition: Measured, lowestTestFrequency: number | undefined): string {
  const band = "band" in definition ? definition.band : definition.within;
  if (band === undefined) return "";
  const words = formatBand(band, lowestTestFrequency === undefined ? {} : { lowestTestFrequency });
  return "band" in definition ? words : `peak within ${words}`;
}

function conditionsOf(definition: Measured): string[] {
  const conditions: string[] = [];
  if ("window" in definition && definition.window !== undefined)
    conditions.push(`in any ${shortFrequency(definition.window)}`);
  if ("aperture" in definition && definition.aperture !== undefined)
    conditions.push(`aperture ${shortFrequency(definition.aperture)}`);
  if (definition.kind === "rejection" && definition.relativeTo)
    conditions.push(`below the least loss of ${formatBand(definition.relativeTo)}`);
  if ("level" in definition) conditions.push(`at ${formatQuantity(definition.level, "level")}`);
  if (definition.kind === "shape-factor") conditions.push(`${definition.levels.join(" to ")} dB`);
  if (definition.maxStep !== undefined) conditions.push(`steps of ${shortFrequency(definition.maxStep)} at most`);
  if (definition.temperature !== undefined)
    conditions.push(definition.temperature === "ambient" ? "at ambient" : "over temperature");
  return conditions;
}

/** A width or a frequency by itself, without trailing zeros: "2.5 MHz", "9 kHz". */
export const shortFrequency = (hz: number): string =>
  formatFrequency(hz, { decimals: 9 })
    .replace(/(\.\d*?)0+(?=\s)/, "$1")
    .replace(/\.(?=\s)/, "");

function levelLimit(definition: Measured): Limit | undefined {
  switch (definition.kind) {
    case "insertion-loss":
      return definition.max;
    case "rejection":
    case "return-loss":
    case "reverse-isolation":
      return definition.min;
    default:
      return undefined;
  }
}

/** One digit more than a filter is measured to: a VSWR limit comes to a decibel figure without end. */
const level = (value: number) => formatQuantity(Number(value.toFixed(3)), "plain");

const levels = (limit: Limit): readonly number[] =>
  typeof limit === "number" ? [limit] : limit.points.map(([, value]) => value);

const isSloped = (limit: Limit): boolean => new Set(levels(limit)).size > 1;

function limitWords(definition: Measured): string {
  const limit = levelLimit(definition);
  if (limit !== undefined) {
    const sense = definition.kind === "insertion-loss" ? "max" : "min";
    const shown = levels(limit).filter((value, index, all) => value !== all[index - 1]);
    return `${sense} ${shown.map(level).join(" to ")} dB`;
  }
  switch (definition.kind) {
    case "ripple":
      return `max ${level(definition.max)} dB`;
    case "group-delay":
    case "group-delay-variation":
      return `max ${formatQuantity(definition.max, "time")}`;
    case "phase-linearity":
      return `max ${level(definition.max)}°`;
    case "centre-frequency":
      return `${formatBand([definition.nominal, definition.nominal])} ± ${shortFrequency(definition.tolerance)}`;
    case "bandwidth":
      return bandwidthWords(definition);
    case "shape-factor":
      return `max ${level(definition.max)}`;
    default:
      return "";
  }
}

function bandwidthWords({ min, max }: { readonly min?: number; readonly max?: number }): string {
  if (min !== undefined && max !== undefined) return `${shortFrequency(min)} to ${shortFrequency(max)}`;
  return min === undefined ? `max ${shortFrequency(max ?? 0)}` : `min ${shortFrequency(min)}`;
}

/** The unit a line's value and margin are shown in, and what the core's figure is multiplied by for it. */
export interface RequirementUnit {
  readonly unit: string;
  readonly scale: number;
}

export function requirementUnit(kind: Kind): RequirementUnit {
  switch (kind) {
    case "group-delay":
    case "group-delay-variation":
      return { unit: "ns", scale: 1e9 };
    case "phase-linearity":
      return { unit: "°", scale: 1 };
    case "centre-frequency":
    case "bandwidth":
      return { unit: "MHz", scale: 1e-6 };
    case "shape-factor":
      return { unit: "", scale: 1 };
    default:
      return { unit: "dB", scale: 1 };
  }
}

/** The measured lines with the numbers their walls carry: what `wallsFromRequirements` draws. */
export function numberedRequirements(
  lines: readonly SpecificationLine[],
): (Requirement & { readonly lineNumber: string })[] {
  const numbers = new Map(lines.map(({ lineKey, lineNumber }) => [lineKey, lineNumber]));
  return measuredRequirements(lines).map((requirement) => ({
    ...requirement,
    lineNumber: numbers.get(requirement.id) ?? "",
  }));
}

/**
 * What insertion attenuation of IEC 60862-1, the ratio of the load's power before and after the filter is put in, has over the
 * transducer loss told here: 10 log10((R1 + R2)² / (4 R1 R2)), dB. 0 for equal impedances.
 */
export function impedanceOffsetDb([first, second]: readonly [number, number]): number {
  return 10 * Math.log10((first + second) ** 2 / (4 * first * second));
}

/** The sentence about that offset, or null where the impedances are equal. */
export function impedanceOffsetWords(impedances: readonly [number, number]): string | null {
  if (impedances[0] === impedances[1]) return null;
  const offset = formatNumber(impedanceOffsetDb(impedances), 3);
  return `Losses are transducer losses between ${formatImpedances(impedances)}. The insertion attenuation of IEC 60862-1, before and after the filter is put in, is ${offset} dB less.`;
}

/** Whether a band of the lines starts at DC, so that the lowest test frequency matters. */
export const startsAtDc = (lines: readonly SpecificationLine[]): boolean =>
  lines.some(({ definition }) => "band" in definition && definition.band[0] === 0);
