// Unit and temperature of one sweep, as the supplier types them.
import { z } from "zod";
import { collect, formValues, hasErrors, optionalTextField, type FormResult, type FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { formatQuantity, parseQuantity } from "~/rf/quantity";

export interface SweepLabelInput {
  readonly serial: string | null;
  /** °C to a tenth, "-30.0": exact decimal text. */
  readonly temperature: string | null;
}

/** °C: what lies beyond is no temperature of a measurement. */
export const COLDEST = -270;
export const HOTTEST = 500;

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
