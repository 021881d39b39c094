// The form of a specification draft: title-block fields and one row a requirement, typed in engineering units.
import { z } from "zod";
import type { FieldErrors } from "~/forms/form";
import {
  addError,
  collect,
  formValues,
  groupRows,
  hasErrors,
  optionalQuantityField,
  textField,
  quantityFieldOr,
  type FormResult,
  type FormValues,
} from "~/forms/fields";
import { parseLine } from "~/forms/specification-line";
import { isBlankLine, type DeclaredRequirement, type SpecificationRequirement } from "~/forms/specification-line-kinds";
import { lineToValues } from "~/forms/specification-line-values";
import type { Requirement } from "~/rf/contract";
import type { RequirementDefinition } from "~/rf/line-definition";
import { numberRevision } from "~/rf/line-numbers";
import { checkMask, describeContradiction } from "~/rf/mask-check";
import { formatQuantity } from "~/rf/quantity";

export {
  FREQUENCY_UNIT,
  LINE_KINDS,
  type DeclaredRequirement,
  type SpecificationLineKind,
  type SpecificationRequirement,
} from "~/forms/specification-line-kinds";

/** Figures in Hz, dB, °C, ohm. A requirement's id is the key that names its line through all revisions. */
export interface SpecificationDraft {
  readonly title: string;
  readonly z1: number;
  readonly z2: number;
  /** °C, lower end first; null where the specification gives no range. */
  readonly temperatureRange: readonly [number, number] | null;
  readonly ambient: number;
  /** Where a band from DC is taken to start. */
  readonly lowestTestFrequency: number | null;
  readonly requirements: readonly SpecificationRequirement[];
}

export interface SpecificationFormOptions {
  /** Numbers of released revisions by line key, withdrawn lines included: messages name lines as the revision will. */
  readonly released?: ReadonlyMap<string, string>;
  /** Makes the key of a new line. */
  readonly newLineKey?: () => string;
}

export const MOST_LINES = 100;

const temperature = { kind: "temperature", unit: "°C" } as const;
const ohm = { kind: "impedance", unit: "Ω" } as const;

const TitleBlock = z.object({
  title: textField("Enter a title.", 90),
  z1: quantityFieldOr(ohm, 50),
  z2: quantityFieldOr(ohm, 50),
  temperatureFrom: optionalQuantityField(temperature),
  temperatureTo: optionalQuantityField(temperature),
  ambient: quantityFieldOr(temperature, 25),
  lowestTestFrequency: optionalQuantityField({ kind: "frequency", unit: "MHz" }),
});

/**
 * Reads the posted form. Rows without kind and text are no rows; a mask that contradicts itself is refused with the places.
 * Errors are keyed by field (`title`, `lines.3.from`), `form` for the whole.
 */
export function parseSpecificationForm(
  source: FormData | FormValues,
  options: SpecificationFormOptions = {},
): FormResult<SpecificationDraft> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const block = collect(TitleBlock, values, errors);
  const temperatureRange = block ? readRange(block, errors) : null;
  if (block?.lowestTestFrequency === 0) {
    addError(errors, "lowestTestFrequency", "The lowest test frequency is above DC.");
  }
  const lines = readLines(values, errors, options.newLineKey ?? randomLineKey);
  const hasRange = (values.temperatureFrom ?? "").trim() !== "" || (values.temperatureTo ?? "").trim() !== "";
  for (const { index, requirement } of lines) {
    if (!hasRange && "temperature" in requirement && requirement.temperature === "range") {
      addError(
        errors,
        `lines.${index}.temperature`,
        "Give the temperature range of the specification, or choose ambient.",
      );
    }
  }
  if (!hasErrors(errors)) refuseContradictions(lines, errors, options.released ?? new Map());
  if (!block || hasErrors(errors)) return { ok: false, errors, values };
  const { title, z1, z2, ambient, lowestTestFrequency } = block;
  const requirements = lines.map(({ requirement }) => requirement);
  return { ok: true, value: { title, z1, z2, temperatureRange, ambient, lowestTestFrequency, requirements } };
}

function readRange(block: z.output<typeof TitleBlock>, errors: FieldErrors): readonly [number, number] | null {
  const { temperatureFrom: from, temperatureTo: to } = block;
  if (from === null && to === null) return null;
  if (from === null || to === null) {
    addError(
      errors,
      from === null ? "temperatureFrom" : "temperatureTo",
      "Give both ends of the temperature range, or neither.",
    );
    return null;
  }
  if (from >= to) addError(errors, "temperatureTo", "The upper temperature lies above the lower one.");
  return [from, to];
}

interface PlacedLine {
  readonly index: number;
  readonly requirement: SpecificationRequirement;
}

function readLines(values: FormValues, errors: FieldErrors, newLineKey: () => string): PlacedLine[] {
  const rows = groupRows(values, "lines").filter(({ fields }) => !isBlankLine(fields));
  if (rows.length > MOST_LINES) {
    addError(errors, "form", `A specification holds at most ${MOST_LINES} lines; this has ${rows.length}.`);
    return [];
  }
  const keys = new Set<string>();
  return rows.flatMap(({ index, fields }) => {
    const requirement = parseLine(fields, newLineKey, errors, `lines.${index}.`);
    if (!requirement) return [];
    if (keys.has(requirement.id))
      addError(errors, "form", "Two lines carry the same key. Reload the page and enter the last line again.");
    keys.add(requirement.id);
    return [{ index, requirement }];
  });
}

const isDeclared = (line: SpecificationRequirement): line is DeclaredRequirement => line.kind === "declared";

function refuseContradictions(
  lines: readonly PlacedLine[],
  errors: FieldErrors,
  released: ReadonlyMap<string, string>,
) {
  const requirements = lines.map(({ requirement }) => requirement);
  const numbers = numberRevision(
    requirements.map(({ id, kind }) => ({ lineKey: id, kind })),
    released,
  );
  const placeOf = new Map(
    lines.map(({ index, requirement }, row) => [
      requirement.id,
      { index, number: numbers[row] ?? "", field: limitField(requirement) },
    ]),
  );
  const measured = requirements.filter((line): line is Requirement => !isDeclared(line));
  for (const contradiction of checkMask(measured)) {
    const sentence = describeContradiction(contradiction, (id) => placeOf.get(id)?.number ?? id);
    for (const id of contradiction.lines) {
      const { index, field } = placeOf.get(id) ?? { index: 0, field: "limit" };
      addError(errors, `lines.${index}.${field}`, sentence);
    }
  }
}

/** The field in which the row's limit stands. */
function limitField(requirement: SpecificationRequirement): string {
  if (requirement.kind !== "bandwidth") return "limit";
  return requirement.min === undefined ? "largest" : "least";
}

/** 16 characters from an alphabet of 32, 80 bits. */
function randomLineKey(): string {
  const alphabet = "abcdefghijkmnpqrstuvwxyz23456789";
  return [...crypto.getRandomValues(new Uint8Array(16))].map((byte) => alphabet[byte % 32]).join("");
}

/** The fields of a draft as the form shows them; parsed again they give the same draft. */
export function specificationToValues(draft: SpecificationDraft): FormValues {
  const [from, to] = draft.temperatureRange ?? [null, null];
  const celsius = (value: number | null) => (value === null ? "" : formatQuantity(value, "temperature"));
  const values: FormValues = {
    title: draft.title,
    z1: formatQuantity(draft.z1, "impedance"),
    z2: formatQuantity(draft.z2, "impedance"),
    temperatureFrom: celsius(from),
    temperatureTo: celsius(to),
    ambient: celsius(draft.ambient),
    lowestTestFrequency:
      draft.lowestTestFrequency === null ? "" : formatQuantity(draft.lowestTestFrequency, "frequency"),
  };
  draft.requirements.forEach((requirement, index) => {
    for (const [field, value] of Object.entries(lineToValues(requirement))) values[`lines.${index}.${field}`] = value;
  });
  return values;
}

/** A requirement as a line is stored: its key, and the definition without it. */
export function toDefinition(requirement: SpecificationRequirement): {
  lineKey: string;
  definition: RequirementDefinition;
} {
  const { id, ...definition } = requirement;
  return { lineKey: id, definition };
}

/** The reverse of `toDefinition`. */
export function fromDefinition(lineKey: string, definition: RequirementDefinition): SpecificationRequirement {
  return { ...definition, id: lineKey };
}

/** The proposal for the lowest test frequency, Hz: the lower of 10 MHz and a tenth of the lowest edge above DC; null where no band starts at DC. */
export function proposeLowestTestFrequency(requirements: readonly SpecificationRequirement[]): number | null {
  const bands = requirements.flatMap((line) => ("band" in line ? [line.band] : []));
  if (!bands.some(([from]) => from === 0)) return null;
  const edges = bands.flat().filter((hz) => hz > 0);
  return Math.min(10e6, ...edges.map((hz) => hz / 10));
}
