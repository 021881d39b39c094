// One row of the specification form read: the requirement its fields come to, or what is wrong with which.
import { z } from "zod";
import type { FieldErrors } from "~/forms/form";
import { addError, collect, optionalQuantityField, quantityField, textField, type FormValues } from "~/forms/fields";
import {
  FREQUENCY_UNIT,
  isBlank,
  kindOf,
  LINE_FIELDS,
  TEXT_FIELDS,
  type SpecificationLineKind,
  type SpecificationRequirement,
} from "~/forms/specification-line-kinds";
import type { Band, Limit } from "~/rf/contract";
import { formatQuantity, type LevelMeaning } from "~/rf/quantity";

/** Highest limit taken: beyond it nothing is measured, and a comma meant as a decimal mark shows. */
const HIGHEST_LEVEL = 200;
const HIGHEST_FREQUENCY = 1e13;
const LONGEST_DELAY = 1;
const LARGEST_PHASE = 360;
const LARGEST_RATIO = 1000;

interface Context {
  addIssue(message: string): void;
}

const frequency = { kind: "frequency", unit: FREQUENCY_UNIT } as const;
const hertz = (value: number) => formatQuantity(value, "frequency");

/** A figure above 0 and up to `most`; the words of `print` show how it was read. */
const reach =
  (what: string, most: number, zero: string, print: (value: number) => string) =>
  (value: number | null, context: Context) => {
    if (value === null || Number.isNaN(value)) return;
    if (value <= 0) context.addIssue(`${what} is more than ${zero}.`);
    else if (value > most) context.addIssue(`${what} is at most ${print(most)}; this reads as ${print(value)}.`);
  };

const decibels = (value: number) => formatQuantity(value, "level");
const reachOfLevel = (what: string) => reach(what, HIGHEST_LEVEL, "0 dB", decibels);
const reachOfFrequency = (what: string) => reach(what, HIGHEST_FREQUENCY, "0 Hz", hertz);

const level = (meaning: LevelMeaning) =>
  quantityField({ kind: "level", unit: "dB", meaning }, "Enter the limit.").superRefine(reachOfLevel("A limit"));
const optionalLevel = (meaning: LevelMeaning) =>
  optionalQuantityField({ kind: "level", unit: "dB", meaning }).superRefine(reachOfLevel("A limit"));
/** Of the response below its peak. */
const below = (empty: string) =>
  quantityField({ kind: "level", unit: "dB", meaning: "loss" }, empty).superRefine(reachOfLevel("A level"));
const delay = quantityField({ kind: "time", unit: "ns" }, "Enter the limit.").superRefine(
  reach("A limit", LONGEST_DELAY, "0 ns", (value) => formatQuantity(value, "time")),
);
const positive = (what: string, empty: string) => quantityField(frequency, empty).superRefine(reachOfFrequency(what));
const optionalPositive = (what: string) => optionalQuantityField(frequency).superRefine(reachOfFrequency(what));
const degrees = quantityField({ kind: "plain", unit: "" }, "Enter the limit.").superRefine(
  reach("A limit", LARGEST_PHASE, "0°", (value) => `${formatQuantity(value, "plain")}°`),
);
const ratio = quantityField({ kind: "plain", unit: "" }, "Enter the largest ratio.").superRefine((value, context) => {
  if (value < 1) context.addIssue("A shape factor is 1 or more.");
  if (value > LARGEST_RATIO) context.addIssue(`A shape factor is at most ${LARGEST_RATIO}.`);
});

const LINE_NAMES: Readonly<Record<SpecificationLineKind, string>> = {
  "insertion-loss": "Insertion loss",
  ripple: "Ripple",
  "centre-frequency": "Centre frequency",
  bandwidth: "Bandwidth",
  rejection: "Rejection",
  "reverse-isolation": "Reverse isolation",
  "shape-factor": "Shape factor",
  "return-loss": "Return loss",
  "group-delay": "Group delay",
  "group-delay-variation": "Group delay variation",
  "phase-linearity": "Phase linearity",
  declared: "A declared line",
};

/** Fields the kind does not take are refused when filled: silently dropped text would look like a limit. */
function unused(kind: SpecificationLineKind) {
  const empty = z
    .string()
    .default("")
    .refine(isBlank, `${LINE_NAMES[kind]} does not take this. Clear the field.`)
    .transform(() => undefined);
  const others = TEXT_FIELDS.filter((field) => !LINE_FIELDS[kind].includes(field));
  return Object.fromEntries(others.map((field) => [field, empty]));
}

const lineKey = z
  .string()
  .regex(/^([A-Za-z0-9_-]{1,16})?$/, "Reload the page: the key of this line is damaged.")
  .default("");
const shared = {
  lineKey,
  temperature: z.enum(["", "ambient", "range"], { error: "Choose ambient, range or neither." }).default(""),
  maxStep: optionalPositive("A step"),
};
const edges = {
  from: quantityField(frequency, "Enter the lower edge."),
  to: quantityField(frequency, "Enter the upper edge."),
};
const search = { withinFrom: optionalQuantityField(frequency), withinTo: optionalQuantityField(frequency) };
const window = optionalQuantityField(frequency);
const aperture = optionalQuantityField(frequency);
const sloped = (meaning: LevelMeaning) => ({ limit: level(meaning), limitEnd: optionalLevel(meaning) });

const SCHEMAS = {
  "insertion-loss": z.object({ ...unused("insertion-loss"), ...shared, ...edges, ...sloped("loss") }),
  ripple: z.object({ ...unused("ripple"), ...shared, ...edges, limit: level("ripple"), window }),
  "centre-frequency": z.object({
    ...unused("centre-frequency"),
    ...shared,
    ...search,
    nominal: positive("A frequency", "Enter the nominal frequency."),
    limit: positive("A tolerance", "Enter the tolerance."),
    level: below("Enter the level below the peak."),
  }),
  bandwidth: z.object({
    ...unused("bandwidth"),
    ...shared,
    ...search,
    least: optionalPositive("A bandwidth"),
    largest: optionalPositive("A bandwidth"),
    level: below("Enter the level below the peak."),
  }),
  rejection: z.object({
    ...unused("rejection"),
    ...shared,
    ...edges,
    ...sloped("loss"),
    relativeFrom: optionalQuantityField(frequency),
    relativeTo: optionalQuantityField(frequency),
  }),
  "reverse-isolation": z.object({ ...unused("reverse-isolation"), ...shared, ...edges, ...sloped("loss") }),
  "shape-factor": z.object({
    ...unused("shape-factor"),
    ...shared,
    ...search,
    level: below("Enter the first level."),
    levelEnd: below("Enter the second level."),
    limit: ratio,
  }),
  "return-loss": z.object({
    ...unused("return-loss"),
    ...shared,
    ...edges,
    ...sloped("return-loss"),
    port: z.enum(["1", "2"], { error: "Choose port 1 or port 2." }),
  }),
  "group-delay": z.object({ ...unused("group-delay"), ...shared, ...edges, limit: delay, aperture }),
  "group-delay-variation": z.object({
    ...unused("group-delay-variation"),
    ...shared,
    ...edges,
    limit: delay,
    window,
    aperture,
  }),
  "phase-linearity": z.object({ ...unused("phase-linearity"), ...shared, ...edges, limit: degrees }),
  declared: z.object({
    ...unused("declared"),
    lineKey,
    temperature: z.literal("", { error: "Name the temperature in the limit of a declared line." }).default(""),
    name: textField("Enter what is declared.", 80),
    limit: textField("Enter the limit in words.", 200),
  }),
};

type Fault = (field: string, sentence: string) => void;

/**
 * A row's requirement, or undefined with the reasons added under `prefix` + field.
 * @param newLineKey makes the key of a row that has none
 */
export function parseLine(
  fields: FormValues,
  newLineKey: () => string,
  errors: FieldErrors,
  prefix: string,
): SpecificationRequirement | undefined {
  const kind = kindOf(fields);
  const fault: Fault = (field, sentence) => addError(errors, prefix + field, sentence);
  if (kind === undefined) {
    fault("kind", "Choose what this line limits.");
    return undefined;
  }
  const faults = Object.keys(errors).length;
  const typed = { ...fields, limit: withoutSigns(kind, fields.limit ?? "") };
  const definition = readDefinition(kind, (schema) => collect(schema, typed, errors, prefix), fault);
  if (definition === undefined || Object.keys(errors).length > faults) return undefined;
  return { ...definition, id: isBlank(fields.lineKey) ? newLineKey() : (fields.lineKey ?? "") };
}

/** A limit without what its field says already: the ± of a tolerance, the degrees of a phase. */
function withoutSigns(kind: SpecificationLineKind, text: string): string {
  if (kind === "centre-frequency") return text.replace(/^\s*(±|\+\/[-\u2212])/u, "");
  return kind === "phase-linearity" ? text.replace(/(°|degrees?|deg)\s*$/u, "") : text;
}

type WithoutId<R> = R extends { readonly id: string } ? Omit<R, "id"> : never;
type Definition = WithoutId<SpecificationRequirement>;
type Read = <S extends z.ZodType>(schema: S) => z.output<S> | undefined;

function readDefinition(kind: SpecificationLineKind, read: Read, fault: Fault): Definition | undefined {
  switch (kind) {
    case "insertion-loss": {
      const line = read(SCHEMAS[kind]);
      const band = line && bandOf(line, fault);
      return line && band && { kind, band, max: limitOver(band, line, fault), ...conditions(line, band, fault) };
    }
    case "rejection": {
      const line = read(SCHEMAS[kind]);
      const band = line && bandOf(line, fault);
      const relativeTo = line && optionalBand(line.relativeFrom, line.relativeTo, RELATIVE, fault);
      const min = line && band && limitOver(band, line, fault);
      if (!line || !band || min === undefined) return undefined;
      return { kind, band, min, ...(relativeTo ? { relativeTo } : {}), ...conditions(line, band, fault) };
    }
    case "reverse-isolation": {
      const line = read(SCHEMAS[kind]);
      const band = line && bandOf(line, fault);
      return line && band && { kind, band, min: limitOver(band, line, fault), ...conditions(line, band, fault) };
    }
    case "return-loss": {
      const line = read(SCHEMAS[kind]);
      const band = line && bandOf(line, fault);
      if (!line || !band) return undefined;
      const port = line.port === "1" ? 1 : 2;
      return { kind, port, band, min: limitOver(band, line, fault), ...conditions(line, band, fault) };
    }
    case "ripple":
    case "phase-linearity": {
      const line = read(SCHEMAS[kind]);
      const band = line && bandOf(line, fault);
      return line && band && { kind, band, max: line.limit, ...conditions(line, band, fault) };
    }
    case "group-delay":
    case "group-delay-variation": {
      const line = read(SCHEMAS[kind]);
      const band = line && bandOf(line, fault);
      return line && band && { kind, band, max: line.limit, ...conditions(line, band, fault) };
    }
    case "centre-frequency":
    case "bandwidth":
    case "shape-factor":
      return readCrossing(kind, read, fault);
    case "declared": {
      const line = read(SCHEMAS.declared);
      return line && { kind, name: line.name, limit: line.limit };
    }
  }
}

/** The kinds that are read where the response crosses a level. */
function readCrossing(
  kind: "centre-frequency" | "bandwidth" | "shape-factor",
  read: Read,
  fault: Fault,
): Definition | undefined {
  if (kind === "centre-frequency") {
    const line = read(SCHEMAS[kind]);
    if (!line) return undefined;
    if (line.limit >= line.nominal) fault("limit", `A tolerance is less than the frequency, ${hertz(line.nominal)}.`);
    return { kind, level: line.level, nominal: line.nominal, tolerance: line.limit, ...sought(line, fault) };
  }
  if (kind === "bandwidth") {
    const line = read(SCHEMAS[kind]);
    if (!line) return undefined;
    const { least, largest } = line;
    if (least === null && largest === null) fault("least", "Enter the least bandwidth, the largest, or both.");
    if (least !== null && largest !== null && least > largest)
      fault("largest", `The largest bandwidth lies below the least, ${hertz(least)}.`);
    const ends = { ...(least === null ? {} : { min: least }), ...(largest === null ? {} : { max: largest }) };
    return { kind, level: line.level, ...ends, ...sought(line, fault) };
  }
  const line = read(SCHEMAS[kind]);
  if (!line) return undefined;
  if (line.levelEnd <= line.level)
    fault("levelEnd", `The second level lies deeper than the first, ${formatQuantity(line.level, "level")}.`);
  return { kind, levels: [line.level, line.levelEnd], max: line.limit, ...sought(line, fault) };
}

interface ReadConditions {
  readonly temperature: "" | "ambient" | "range";
  readonly maxStep: number | null;
  readonly window?: number | null;
  readonly aperture?: number | null;
}

const temperatureOf = ({ temperature }: ReadConditions) => (temperature === "" ? {} : { temperature });

/** What a line over a band adds, of what its kind takes. */
function conditions(line: ReadConditions, [from, to]: Band, fault: Fault) {
  const { maxStep, window = null, aperture = null } = line;
  const width = to - from;
  if (maxStep !== null && width > 0 && maxStep >= width)
    fault("maxStep", `A step is narrower than the band, ${hertz(width)}.`);
  const noWider = (name: string) => `${name} is above 0 and no wider than the band, ${hertz(width)}.`;
  if (window !== null && !(window > 0 && window <= width)) fault("window", noWider("A window"));
  if (aperture !== null && !(aperture > 0 && (width === 0 || aperture <= width)))
    fault("aperture", noWider("An aperture"));
  return {
    ...temperatureOf(line),
    ...(window === null ? {} : { window }),
    ...(aperture === null ? {} : { aperture }),
    ...(maxStep === null ? {} : { maxStep }),
  };
}

interface ReadSearch extends ReadConditions {
  readonly withinFrom: number | null;
  readonly withinTo: number | null;
}

function sought(line: ReadSearch, fault: Fault) {
  const band = optionalBand(line.withinFrom, line.withinTo, SEARCH, fault);
  if (band && band[0] === band[1]) fault("withinTo", "A peak is sought in a band, not at one frequency.");
  return {
    ...temperatureOf(line),
    ...(band ? { within: band } : {}),
    ...(line.maxStep === null ? {} : { maxStep: line.maxStep }),
  };
}

function bandOf({ from, to }: { from: number; to: number }, fault: Fault): Band | undefined {
  if (from > to) fault("to", `The lower edge lies above the upper: ${hertz(from)} to ${hertz(to)}.`);
  else if (to === 0) fault("to", "The upper edge is above DC.");
  else if (to > HIGHEST_FREQUENCY) fault("to", `${hertz(to)} is beyond any filter. Check the unit.`);
  else return [from, to];
  return undefined;
}

/** A flat limit, or a straight one in dB against frequency from the lower edge to the upper. */
function limitOver(band: Band, line: { limit: number; limitEnd: number | null }, fault: Fault): Limit {
  if (line.limitEnd === null || line.limitEnd === line.limit) return line.limit;
  if (band[0] === band[1]) fault("limitEnd", "A single frequency takes one limit. Clear the second.");
  return {
    scale: "linear",
    points: [
      [band[0], line.limit],
      [band[1], line.limitEnd],
    ],
  };
}

const RELATIVE = { from: "relativeFrom", to: "relativeTo", name: "reference band" };
const SEARCH = { from: "withinFrom", to: "withinTo", name: "search band" };

function optionalBand(from: number | null, to: number | null, fields: typeof RELATIVE, fault: Fault): Band | undefined {
  if (from === null && to === null) return undefined;
  if (from !== null && to !== null) return bandOf({ from, to }, (_field, sentence) => fault(fields.to, sentence));
  fault(from === null ? fields.from : fields.to, `Give both edges of the ${fields.name}, or neither.`);
  return undefined;
}
