// One row of the specification form: which fields each kind takes, and what they come to.
import { z } from "zod";
import type { FieldErrors } from "~/forms/form";
import { addError, collect, optionalQuantityField, quantityField, textField, type FormValues } from "~/forms/fields";
import type { Band, Limit, Requirement } from "~/rf/contract";
import { formatBand, formatQuantity, parseQuantity, type LevelMeaning } from "~/rf/quantity";

/** A line the supplier states instead of measuring: what, and the limit in words. */
export interface DeclaredRequirement {
  readonly id: string;
  readonly kind: "declared";
  readonly name: string;
  readonly limit: string;
}

/** Kinds the form offers, in the order of their groups. */
export const LINE_KINDS = [
  "insertion-loss",
  "ripple",
  "rejection",
  "reverse-isolation",
  "return-loss",
  "declared",
] as const;

export type SpecificationLineKind = (typeof LINE_KINDS)[number];
export type SpecificationRequirement = Requirement | DeclaredRequirement;

/** The unit a bare frequency is in. */
export const FREQUENCY_UNIT = "MHz";

/** Highest limit taken: beyond it nothing is measured, and a comma meant as a decimal mark shows. */
const HIGHEST_LEVEL = 200;
const HIGHEST_FREQUENCY = 1e13;

/** Fields that hold text of the row; a row where these and the kind are blank was never begun. */
const TEXT_FIELDS = ["from", "to", "limit", "limitEnd", "relativeFrom", "relativeTo", "window", "name"] as const;

type TextField = (typeof TEXT_FIELDS)[number];

const blank = (text: string | undefined) => (text ?? "").trim() === "";

export const isBlankLine = (fields: FormValues): boolean =>
  blank(fields.kind) && TEXT_FIELDS.every((field) => blank(fields[field]));

const frequency = { kind: "frequency", unit: FREQUENCY_UNIT } as const;
const edges = {
  from: quantityField(frequency, "Enter the lower edge."),
  to: quantityField(frequency, "Enter the upper edge."),
};
const level = (meaning: LevelMeaning) =>
  quantityField({ kind: "level", unit: "dB", meaning }, "Enter the limit.").superRefine(checkLevel);
const optionalLevel = (meaning: LevelMeaning) =>
  optionalQuantityField({ kind: "level", unit: "dB", meaning }).superRefine(checkLevel);

function checkLevel(value: number | null, context: { addIssue(message: string): void }) {
  if (value === null || Number.isNaN(value)) return;
  if (value <= 0) context.addIssue("A limit is more than 0 dB.");
  if (value > HIGHEST_LEVEL)
    context.addIssue(`A limit is at most ${HIGHEST_LEVEL} dB; this reads as ${formatQuantity(value, "level")}.`);
}

const shared = {
  lineKey: z
    .string()
    .regex(/^([A-Za-z0-9_-]{1,16})?$/, "Reload the page: the key of this line is damaged.")
    .default(""),
  temperature: z.enum(["", "ambient", "range"], { error: "Choose ambient, range or neither." }).default(""),
};

/** Fields the kind does not take are refused when filled: silently dropped text would look like a limit. */
function unused(name: string, ...fields: readonly TextField[]) {
  const empty = z.string().default("").refine(blank, `${name} does not take this. Clear the field.`);
  return Object.fromEntries(fields.map((field) => [field, empty]));
}

const reference = { relativeFrom: optionalQuantityField(frequency), relativeTo: optionalQuantityField(frequency) };

const InsertionLoss = z.object({
  ...unused("Insertion loss", "relativeFrom", "relativeTo", "window", "name"),
  ...shared,
  ...edges,
  limit: level("loss"),
  limitEnd: optionalLevel("loss"),
});
const Ripple = z.object({
  ...unused("Ripple", "limitEnd", "relativeFrom", "relativeTo", "name"),
  ...shared,
  ...edges,
  limit: level("ripple"),
  window: optionalQuantityField(frequency),
});
const Rejection = z.object({
  ...unused("Rejection", "window", "name"),
  ...shared,
  ...edges,
  ...reference,
  limit: level("loss"),
  limitEnd: optionalLevel("loss"),
});
const ReverseIsolation = z.object({
  ...unused("Reverse isolation", "relativeFrom", "relativeTo", "window", "name"),
  ...shared,
  ...edges,
  limit: level("loss"),
  limitEnd: optionalLevel("loss"),
});
const ReturnLoss = z.object({
  ...unused("Return loss", "relativeFrom", "relativeTo", "window", "name"),
  ...shared,
  ...edges,
  port: z.enum(["1", "2"], { error: "Choose port 1 or port 2." }),
  limit: level("return-loss"),
  limitEnd: optionalLevel("return-loss"),
});
const Declared = z.object({
  ...unused("A declared line", "from", "to", "limitEnd", "relativeFrom", "relativeTo", "window"),
  lineKey: shared.lineKey,
  temperature: z.literal("", { error: "Name the temperature in the limit of a declared line." }).default(""),
  name: textField("Enter what is declared.", 80),
  limit: textField("Enter the limit in words.", 200),
});

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
  const kind = LINE_KINDS.find((offered) => offered === fields.kind);
  const read = <S extends z.ZodType>(schema: S) => collect(schema, fields, errors, prefix);
  const fault = (field: string, sentence: string) => addError(errors, prefix + field, sentence);
  const identity = (line: { lineKey: string; temperature: "" | "ambient" | "range" }) => ({
    id: line.lineKey === "" ? newLineKey() : line.lineKey,
    ...(line.temperature === "" ? {} : { temperature: line.temperature }),
  });
  switch (kind) {
    case "insertion-loss": {
      const line = read(InsertionLoss);
      const band = line && bandOf(line, fault);
      return line && band && { ...identity(line), kind, band, max: limitOver(band, line, fault) };
    }
    case "ripple": {
      const line = read(Ripple);
      const band = line && bandOf(line, fault);
      if (!line || !band) return undefined;
      if (line.window !== null && !(line.window > 0 && line.window <= band[1] - band[0])) {
        fault(
          "window",
          `A window is above 0 and no wider than the band, ${formatQuantity(band[1] - band[0], "frequency")}.`,
        );
      }
      return {
        ...identity(line),
        kind,
        band,
        max: line.limit,
        ...(line.window === null ? {} : { window: line.window }),
      };
    }
    case "rejection": {
      const line = read(Rejection);
      const band = line && bandOf(line, fault);
      if (!line || !band) return undefined;
      const relativeTo = referenceOf(line, fault);
      return {
        ...identity(line),
        kind,
        band,
        min: limitOver(band, line, fault),
        ...(relativeTo ? { relativeTo } : {}),
      };
    }
    case "reverse-isolation": {
      const line = read(ReverseIsolation);
      const band = line && bandOf(line, fault);
      return line && band && { ...identity(line), kind, band, min: limitOver(band, line, fault) };
    }
    case "return-loss": {
      const line = read(ReturnLoss);
      const band = line && bandOf(line, fault);
      const port = line?.port === "1" ? 1 : 2;
      return line && band && { ...identity(line), kind, port, band, min: limitOver(band, line, fault) };
    }
    case "declared": {
      const line = read(Declared);
      return line && { id: identity(line).id, kind, name: line.name, limit: line.limit };
    }
    case undefined:
      fault("kind", "Choose what this line limits.");
      return undefined;
  }
}

type Fault = (field: string, sentence: string) => void;

function bandOf({ from, to }: { from: number; to: number }, fault: Fault): Band | undefined {
  if (from > to) {
    fault(
      "to",
      `The lower edge lies above the upper: ${formatQuantity(from, "frequency")} to ${formatQuantity(to, "frequency")}.`,
    );
  } else if (to === 0) fault("to", "The upper edge is above DC.");
  else if (to > HIGHEST_FREQUENCY)
    fault("to", `${formatQuantity(to, "frequency")} is beyond any filter. Check the unit.`);
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

function referenceOf(line: { relativeFrom: number | null; relativeTo: number | null }, fault: Fault): Band | undefined {
  const { relativeFrom: from, relativeTo: to } = line;
  if (from === null && to === null) return undefined;
  if (from === null || to === null) {
    fault(from === null ? "relativeFrom" : "relativeTo", "Give both edges of the reference band, or neither.");
    return undefined;
  }
  return bandOf({ from, to }, (_field, sentence) => fault("relativeTo", sentence));
}

/**
 * A requirement as the row's fields.
 * @throws RangeError for a kind or a slope the form cannot show: dropping a part of it would change the specification
 */
export function lineToValues(line: SpecificationRequirement): FormValues {
  const frequencyText = (hz: number) => formatQuantity(hz, "frequency");
  if (line.kind === "declared") return { lineKey: line.id, kind: line.kind, name: line.name, limit: line.limit };
  const kind = LINE_KINDS.find((offered) => offered === line.kind);
  if (!kind || !("band" in line)) throw new RangeError(`The form does not offer ${line.kind}`);
  if (line.maxStep !== undefined) throw new RangeError("The form does not offer a largest step");
  const values: FormValues = {
    lineKey: line.id,
    kind,
    from: frequencyText(line.band[0]),
    to: frequencyText(line.band[1]),
    temperature: line.temperature ?? "",
    ...limitTexts("min" in line ? line.min : line.max, line.band, kind === "return-loss" ? returnLossText : levelText),
  };
  if (line.kind === "return-loss") values.port = String(line.port);
  if (line.kind === "ripple" && line.window !== undefined) values.window = frequencyText(line.window);
  if (line.kind === "rejection" && line.relativeTo) {
    values.relativeFrom = frequencyText(line.relativeTo[0]);
    values.relativeTo = frequencyText(line.relativeTo[1]);
  }
  return values;
}

const levelText = (value: number): string => formatQuantity(value, "level");

/** Decimals a return loss is typed with at most; one with more was most likely typed as a VSWR. */
const MOST_DECIMALS = 4;

/** A return loss in dB, or as the VSWR it was typed as where that is shorter and reads back to the same number. */
function returnLossText(value: number): string {
  const text = levelText(value);
  if (value === Number(value.toFixed(MOST_DECIMALS))) return text;
  const reflection = 10 ** (-value / 20);
  const ratio = (1 + reflection) / (1 - reflection);
  const written = `${Number(ratio.toFixed(MOST_DECIMALS))}:1`;
  const read = parseQuantity(written, { kind: "level", meaning: "return-loss" });
  return read.ok && read.value === value ? written : text;
}

function limitTexts(limit: Limit, band: Band, text: (value: number) => string): FormValues {
  if (typeof limit === "number") return { limit: text(limit) };
  const [first, last, ...more] = limit.points;
  if (!first || !last || more.length > 0 || limit.scale !== "linear" || first[0] !== band[0] || last[0] !== band[1]) {
    throw new RangeError(`The form shows a slope from edge to edge of ${formatBand(band)} only`);
  }
  return { limit: text(first[1]), limitEnd: text(last[1]) };
}
