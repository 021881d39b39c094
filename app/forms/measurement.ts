// Unit, temperature and setup of a sweep, as the supplier types them, and where several sweeps are placed at once.
import { z } from "zod";
import {
  addError,
  collect,
  formValues,
  hasErrors,
  optionalTextField,
  type FormResult,
  type FormValues,
} from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { readSetup } from "~/forms/setup";
import type { Setup } from "~/rf/contract";
import { formatQuantity, parseQuantity } from "~/rf/quantity";
import { COLDEST, HOTTEST } from "~/rf/sweep-labels";

export interface SweepLabelInput {
  readonly serial: string | null;
  /** °C to a tenth, "-30.0": exact decimal text. */
  readonly temperature: string | null;
}

const temperatureField = z
  .string()
  .default("")
  .transform((text, context): string | null => {
    if (text.trim() === "") return null;
    const parsed = parseQuantity(text, { kind: "temperature" });
    if (!parsed.ok) context.addIssue(parsed.reason);
    else if (parsed.value < COLDEST || parsed.value > HOTTEST)
      context.addIssue(`Enter a temperature from ${COLDEST} to ${HOTTEST} °C.`);
    else if (Number(parsed.value.toFixed(1)) !== parsed.value) context.addIssue("Give the temperature to a tenth.");
    else return parsed.value.toFixed(1);
    return z.NEVER;
  });

const SweepLabels = z.object({ serial: optionalTextField(60), temperature: temperatureField });

/** Reads `serial` and `temperature`; a blank field leaves the figure open. */
export function parseSweepLabels(source: FormData | FormValues): FormResult<SweepLabelInput> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const value = collect(SweepLabels, values, errors);
  return value && !hasErrors(errors) ? { ok: true, value } : { ok: false, errors, values };
}

/** A stored temperature as it is written in the field: "-30.0" becomes "−30". */
export const temperatureText = (stored: string | null): string =>
  stored === null ? "" : formatQuantity(Number(stored), "temperature").replace(/\s*°C$/u, "");

/** Where sweeps are put together; a part left open stays as each has it. */
export interface Placement {
  /** Public ids of the sweeps, each once. */
  readonly measurements: readonly string[];
  readonly serial?: string;
  /** °C, exact decimal text. */
  readonly temperature?: string;
}

/** A place as an option's value, "-30.0 HR2-0411": the temperature has no space, the serial may. */
export const placeValue = (serial: string, temperature: string): string => `${temperature} ${serial}`;

/**
 * Reads the ticked boxes `select.<id>`, a `place` chosen from those there are, and `placeSerial` and `placeTemperature`, which go before
 * the chosen place.
 */
export function parsePlacement(source: FormData | FormValues): FormResult<Placement> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const measurements = Object.keys(values).flatMap((name) => /^select\.(\w{16})$/.exec(name)?.[1] ?? []);
  const { place = "", placeSerial = "", placeTemperature = "" } = values;
  const chosen = /^(\S+) (.+)$/u.exec(place);
  const labels = parseSweepLabels({
    serial: placeSerial.trim() === "" ? (chosen?.[2] ?? "") : placeSerial,
    temperature: placeTemperature.trim() === "" ? (chosen?.[1] ?? "") : placeTemperature,
  });
  if (measurements.length === 0) addError(errors, "form", "Tick the files to be placed.");
  if (!labels.ok) {
    for (const [name, sentences = []] of Object.entries(labels.errors))
      for (const sentence of sentences)
        addError(errors, name === "serial" ? "placeSerial" : "placeTemperature", sentence);
  } else if (labels.value.serial === null && labels.value.temperature === null)
    addError(errors, "place", "Choose a place, or enter a unit or a temperature.");
  if (!labels.ok || hasErrors(errors)) return { ok: false, errors, values };
  const { serial, temperature } = labels.value;
  return {
    ok: true,
    value: { measurements, ...(serial === null ? {} : { serial }), ...(temperature === null ? {} : { temperature }) },
  };
}

/** Which sweeps a setup of one is stored with: that one, all of its unit, or all with the same range. */
export const SETUP_SCOPES = ["sweep", "unit", "range"] as const;
export type SetupScope = (typeof SETUP_SCOPES)[number];

export interface SweepSetupInput {
  /** Null: nothing of its own, the quote's counts. */
  readonly setup: Setup | null;
  readonly scope: SetupScope;
}

/** Reads `setup.*` of one sweep and `scope`. */
export function parseSweepSetup(source: FormData | FormValues): FormResult<SweepSetupInput> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const setup = readSetup(values, errors, false);
  const scope = SETUP_SCOPES.find((name) => name === (values.scope ?? "sweep"));
  if (!scope) addError(errors, "scope", "Choose which sweeps this counts for.");
  if (!scope || hasErrors(errors)) return { ok: false, errors, values };
  return { ok: true, value: { setup: Object.keys(setup).length === 0 ? null : setup, scope } };
}
