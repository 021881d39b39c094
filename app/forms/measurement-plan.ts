// Fields of the measurement plan in the RFQ's form: rows `sweeps.0.from` …, and `plan.temperatures`, `plan.ifBandwidth` …
import type { FieldErrors } from "~/forms/form";
import { addError, collect, groupRows, optionalTextField, type FormValues } from "~/forms/fields";
import { MOST_PLANNED_SWEEPS, type MeasurementPlan, type PlannedSweep } from "~/rf/measurement-plan";
import { formatQuantity, parseQuantity, type QuantityOptions } from "~/rf/quantity";

export const MOST_PLAN_TEMPERATURES = 8;
export const REFERENCE_PLANES = ["connector", "board", "fixture"] as const;

/** The units that bare figures are in. */
export const SWEEP_UNIT = "MHz";
const IF_BANDWIDTH = { kind: "frequency", unit: "Hz" } as const;
const POWER = { kind: "plain", unit: "dBm" } as const;
const FREQUENCY = { kind: "frequency", unit: SWEEP_UNIT } as const;
const TEMPERATURE = { kind: "temperature", unit: "°C" } as const;

const HIGHEST_FREQUENCY = 1e13;
const HIGHEST_IF_BANDWIDTH = 100e6;
const POWER_DBM = { least: -120, most: 60 } as const;
const HOTTEST = 500;
const LONGEST_WORDS = 200;

const SWEEP_FIELDS = ["from", "to", "maxStep"] as const;

const text = (values: FormValues, name: string) => (values[name] ?? "").trim();
const hertz = (value: number) => formatQuantity(value, "frequency");

/** Reads the plan; what is blank is not asked for, and a plan in which nothing is asked is `{}`. */
export function readPlan(values: FormValues, errors: FieldErrors): MeasurementPlan {
  const sweeps = readSweeps(values, errors);
  const temperatures = readTemperatures(text(values, "plan.temperatures"), errors);
  const figure = (name: string, options: QuantityOptions, refusal: (value: number) => string | undefined) =>
    readFigure(text(values, `plan.${name}`), options, refusal, (reason) => addError(errors, `plan.${name}`, reason));
  const ifBandwidth = figure("ifBandwidth", IF_BANDWIDTH, above0(HIGHEST_IF_BANDWIDTH));
  const delayAperture = figure("delayAperture", FREQUENCY, above0(HIGHEST_FREQUENCY));
  const power = figure("power", POWER, (dBm) =>
    dBm < POWER_DBM.least || dBm > POWER_DBM.most
      ? `Give ${formatQuantity(POWER_DBM.least, "plain")} to ${POWER_DBM.most} dBm.`
      : undefined,
  );
  return {
    ...(sweeps.length === 0 ? {} : { sweeps }),
    ...(temperatures.length === 0 ? {} : { temperatures }),
    ...(ifBandwidth === undefined ? {} : { ifBandwidth }),
    ...(power === undefined ? {} : { power }),
    ...(delayAperture === undefined ? {} : { delayAperture }),
    ...readReferencePlane(values, errors),
  };
}

const above0 = (most: number) => (value: number) => {
  if (value <= 0) return "Enter a figure above 0, or leave the field blank.";
  return value > most ? `At most ${hertz(most)}.` : undefined;
};

function readFigure(
  entry: string,
  options: QuantityOptions,
  refusal: (value: number) => string | undefined,
  fault: (reason: string) => void,
): number | undefined {
  if (entry === "") return undefined;
  const parsed = parseQuantity(entry, options);
  const reason = parsed.ok ? refusal(parsed.value) : parsed.reason;
  if (reason !== undefined) fault(reason);
  return parsed.ok && reason === undefined ? parsed.value : undefined;
}

/** The rows of the sweeps, ascending by lower end; a row without text is none. */
export function readSweeps(values: FormValues, errors: FieldErrors): PlannedSweep[] {
  const rows = groupRows(values, "sweeps").filter(({ fields }) =>
    SWEEP_FIELDS.some((field) => (fields[field] ?? "").trim() !== ""),
  );
  const seen = new Set<string>();
  const sweeps = rows.flatMap(({ index, fields }, row): PlannedSweep[] => {
    const fault = (field: string, reason: string) => addError(errors, `sweeps.${index}.${field}`, reason);
    if (row >= MOST_PLANNED_SWEEPS) fault("from", `At most ${MOST_PLANNED_SWEEPS} sweeps.`);
    const sweep = readSweep(fields, fault);
    if (sweep === undefined) return [];
    const key = sweep.band.join(" ");
    if (seen.has(key)) fault("from", "This range is listed twice.");
    seen.add(key);
    return [sweep];
  });
  return sweeps.sort((one, other) => one.band[0] - other.band[0] || one.band[1] - other.band[1]);
}

type Fault = (field: string, reason: string) => void;

/** One row, or undefined with its reasons told to `fault`. */
export function readSweep(fields: FormValues, fault: Fault = () => undefined): PlannedSweep | undefined {
  const entry = (field: (typeof SWEEP_FIELDS)[number], empty: string) => {
    const typed = (fields[field] ?? "").trim();
    const parsed = typed === "" ? ({ ok: false, reason: empty } as const) : parseQuantity(typed, FREQUENCY);
    if (!parsed.ok) fault(field, parsed.reason);
    return parsed.ok ? parsed.value : undefined;
  };
  const from = entry("from", "Enter the lower end.");
  const to = entry("to", "Enter the upper end.");
  const maxStep = entry("maxStep", "Enter the largest step.");
  if (from === undefined || to === undefined || maxStep === undefined) return undefined;
  const width = to - from;
  if (from >= to) fault("to", `The upper end lies above the lower: ${hertz(from)} to ${hertz(to)}.`);
  else if (to > HIGHEST_FREQUENCY) fault("to", `${hertz(to)} is beyond any filter. Check the unit.`);
  else if (maxStep <= 0) fault("maxStep", "A step is above 0.");
  else if (maxStep >= width) fault("maxStep", `A step is narrower than its range, ${hertz(width)}.`);
  else return { band: [from, to], maxStep };
  return undefined;
}

/**
 * A list as "−10, 50 °C" or "−10; 50". A comma inside a number is left to the reading of numbers, which refuses it with the
 * remedy: "12,5" is never taken for two temperatures.
 */
function readTemperatures(entry: string, errors: FieldErrors): number[] {
  const parts = entry.split(/\s*(?:;|,(?!\d)|\band\b)\s*|\s+(?=[+\-\u2212]?\d)/u).filter((part) => part !== "");
  const temperatures = new Set<number>();
  const fault = (reason: string) => addError(errors, "plan.temperatures", reason);
  for (const part of parts) {
    const parsed = parseQuantity(part, TEMPERATURE);
    if (!parsed.ok) fault(parsed.reason);
    else if (parsed.value > HOTTEST) fault(`At most ${HOTTEST} °C.`);
    else if (temperatures.has(parsed.value)) fault(`${formatQuantity(parsed.value, "temperature")} is listed twice.`);
    else temperatures.add(parsed.value);
  }
  if (temperatures.size > MOST_PLAN_TEMPERATURES) fault(`At most ${MOST_PLAN_TEMPERATURES} temperatures.`);
  return [...temperatures].sort((a, b) => a - b);
}

const PlaneWords = optionalTextField(LONGEST_WORDS);

function readReferencePlane(
  values: FormValues,
  errors: FieldErrors,
): Pick<MeasurementPlan, "referencePlane" | "referencePlaneWords"> {
  const posted = text(values, "plan.referencePlane");
  const referencePlane = REFERENCE_PLANES.find((plane) => plane === posted);
  const words = collect(PlaneWords, values["plan.referencePlaneWords"] ?? "", errors, "plan.referencePlaneWords");
  const fault = (field: string, reason: string) => addError(errors, `plan.${field}`, reason);
  if (posted !== "" && referencePlane === undefined) fault("referencePlane", "Choose connector, board or fixture.");
  else if (referencePlane === undefined && words)
    fault("referencePlane", "Choose which reference plane this describes.");
  else if (referencePlane === "fixture" && words === null)
    fault("referencePlaneWords", "Say how the fixture is de-embedded.");
  return {
    ...(referencePlane === undefined ? {} : { referencePlane }),
    ...(words ? { referencePlaneWords: words } : {}),
  };
}

/** A plan as the form's fields; parsed again they give the same plan. */
export function planToValues(plan: MeasurementPlan): FormValues {
  const optional = (value: number | undefined, print: (value: number) => string) =>
    value === undefined ? "" : print(value);
  const values: FormValues = {
    "plan.temperatures": (plan.temperatures ?? []).map((celsius) => formatQuantity(celsius, "temperature")).join("; "),
    "plan.ifBandwidth": optional(plan.ifBandwidth, hertz),
    "plan.power": optional(plan.power, (dBm) => formatQuantity(dBm, "plain", { unit: "dBm" })),
    "plan.delayAperture": optional(plan.delayAperture, hertz),
    "plan.referencePlane": plan.referencePlane ?? "",
    "plan.referencePlaneWords": plan.referencePlaneWords ?? "",
  };
  (plan.sweeps ?? []).forEach(({ band: [from, to], maxStep }, index) => {
    values[`sweeps.${index}.from`] = hertz(from);
    values[`sweeps.${index}.to`] = hertz(to);
    values[`sweeps.${index}.maxStep`] = hertz(maxStep);
  });
  return values;
}
