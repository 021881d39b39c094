// A requirement as the row of the specification form that reads back to it.
import type { FormValues } from "~/forms/fields";
import type { SpecificationRequirement } from "~/forms/specification-line-kinds";
import type { Band, Limit, Requirement } from "~/rf/contract";
import { formatBand, formatQuantity, parseQuantity } from "~/rf/quantity";

const hertz = (value: number): string => formatQuantity(value, "frequency");
const decibels = (value: number): string => formatQuantity(value, "level");
const plain = (value: number): string => formatQuantity(value, "plain");

/**
 * A requirement as the row's fields.
 * @throws RangeError for a slope the form cannot show: dropping a part of it would change the specification
 */
export function lineToValues(line: SpecificationRequirement): FormValues {
  if (line.kind === "declared") return { lineKey: line.id, kind: line.kind, name: line.name, limit: line.limit };
  return {
    lineKey: line.id,
    kind: line.kind,
    temperature: line.temperature ?? "",
    ...("band" in line ? { from: hertz(line.band[0]), to: hertz(line.band[1]) } : withinTexts(line.within)),
    ...limitsOf(line),
    ...frequencyTexts({
      window: "window" in line ? line.window : undefined,
      aperture: "aperture" in line ? line.aperture : undefined,
      maxStep: line.maxStep,
    }),
  };
}

const withinTexts = (within: Band | undefined): FormValues =>
  within === undefined ? {} : { withinFrom: hertz(within[0]), withinTo: hertz(within[1]) };

const frequencyTexts = (figures: Readonly<Record<string, number | undefined>>): FormValues =>
  Object.fromEntries(
    Object.entries(figures).flatMap(([field, value]) => (value === undefined ? [] : [[field, hertz(value)]])),
  );

function limitsOf(line: Requirement): FormValues {
  switch (line.kind) {
    case "insertion-loss":
      return levelTexts(line.max, line.band, decibels);
    case "reverse-isolation":
      return levelTexts(line.min, line.band, decibels);
    case "return-loss":
      return { port: String(line.port), ...levelTexts(line.min, line.band, returnLossText) };
    case "rejection":
      return {
        ...levelTexts(line.min, line.band, decibels),
        ...frequencyTexts({ relativeFrom: line.relativeTo?.[0], relativeTo: line.relativeTo?.[1] }),
      };
    case "ripple":
      return { limit: decibels(line.max) };
    case "group-delay":
    case "group-delay-variation":
      return { limit: formatQuantity(line.max, "time") };
    case "phase-linearity":
      return { limit: `${plain(line.max)}°` };
    case "centre-frequency":
      return { nominal: hertz(line.nominal), limit: hertz(line.tolerance), level: decibels(line.level) };
    case "bandwidth":
      return { level: decibels(line.level), ...frequencyTexts({ least: line.min, largest: line.max }) };
    case "shape-factor":
      return { level: decibels(line.levels[0]), levelEnd: decibels(line.levels[1]), limit: plain(line.max) };
  }
}

/** Decimals a return loss is typed with at most; one with more was most likely typed as a VSWR. */
const MOST_DECIMALS = 4;

/** A return loss in dB, or as the VSWR it was typed as where that is shorter and reads back to the same number. */
function returnLossText(value: number): string {
  const text = decibels(value);
  if (value === Number(value.toFixed(MOST_DECIMALS))) return text;
  const reflection = 10 ** (-value / 20);
  const ratio = (1 + reflection) / (1 - reflection);
  const written = `${Number(ratio.toFixed(MOST_DECIMALS))}:1`;
  const read = parseQuantity(written, { kind: "level", meaning: "return-loss" });
  return read.ok && read.value === value ? written : text;
}

function levelTexts(limit: Limit, band: Band, text: (value: number) => string): FormValues {
  if (typeof limit === "number") return { limit: text(limit) };
  const [first, last, ...more] = limit.points;
  if (!first || !last || more.length > 0 || limit.scale !== "linear" || first[0] !== band[0] || last[0] !== band[1]) {
    throw new RangeError(`The form shows a slope from edge to edge of ${formatBand(band)} only`);
  }
  return { limit: text(first[1]), limitEnd: text(last[1]) };
}
