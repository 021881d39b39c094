// The temperature drift a supplier states, as it is typed: "2 ppm", "−12.5 ppm/K", "±2 ppm/K", and the rise of the conductor's resistance.
import { addError, type FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { formatQuantity, parseQuantity } from "~/rf/quantity";
import type { StatedDrift } from "~/rf/stated-measurement";

/** Beyond any filter: what lies above is a slip of the unit. */
const MOST_PPM = 1000;
const MOST_LOSS = 0.05;

/** Of annealed copper, a kelvin, about 20 °C: common practice for silver and copper plating. */
export const COPPER_PER_KELVIN = 0.0039;

type Read<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly reason: string };

const refuse = (reason: string) => ({ ok: false, reason }) as const;

/** Reads `drift.*`: "2 ppm", "−12.5 ppm/K", "±2 ppm/K" where the sign is not known. Null where none is stated. */
export function readDrift(values: FormValues, errors: FieldErrors): StatedDrift | null {
  const ppm = (values["drift.ppmPerKelvin"] ?? "").trim();
  const loss = (values["drift.lossPerKelvin"] ?? "").trim();
  const drift = ppm === "" ? null : readPpm(ppm);
  const rise = loss === "" ? null : readLossRise(loss);
  if (drift && !drift.ok) addError(errors, "drift.ppmPerKelvin", drift.reason);
  if (rise && !rise.ok) addError(errors, "drift.lossPerKelvin", rise.reason);
  if (!drift && rise)
    addError(errors, "drift.ppmPerKelvin", "Enter the drift too, 0 where the frequencies do not move.");
  if (!drift?.ok) return null;
  return rise?.ok ? { ...drift.value, lossPerKelvin: rise.value } : drift.value;
}

const EITHER = /^(?:±|\+\/[-\u2212])\s*/u;
const PPM_UNIT = /\s*ppm(?:\s*(?:\/|per)\s*(?:K|kelvin|(?:°|deg)?\s?C))?$/iu;

function readPpm(text: string): Read<StatedDrift> {
  const either = EITHER.test(text);
  const parsed = parseQuantity(text.replace(EITHER, "").replace(PPM_UNIT, ""), { kind: "plain", unit: "ppm/K" });
  if (!parsed.ok) return parsed;
  const { value: ppmPerKelvin } = parsed;
  if (Math.abs(ppmPerKelvin) > MOST_PPM) return refuse(`At most ${MOST_PPM} ppm/K either way.`);
  if (!either) return { ok: true, value: { ppmPerKelvin } };
  return ppmPerKelvin > 0
    ? { ok: true, value: { ppmPerKelvin, either } }
    : refuse("± takes a figure above 0: write ±2 ppm/K.");
}

const LOSS_UNIT = /\s*(?:1\s*)?(?:\/|per)\s*(?:K|kelvin|(?:°|deg)?\s?C)$/iu;

/** A share a kelvin, or a percentage: "0.0039", "0.39 %/K". */
function readLossRise(text: string): Read<number> {
  const bare = text.replace(LOSS_UNIT, "");
  const parsed = parseQuantity(bare.replace(/\s*%$/, ""), { kind: "plain" });
  if (!parsed.ok) return parsed;
  const share = bare.endsWith("%") ? Number((parsed.value / 100).toPrecision(15)) : parsed.value;
  if (share <= 0) return refuse("Enter a figure above 0, or leave the field blank.");
  if (share > MOST_LOSS) return refuse(`At most ${MOST_LOSS} a kelvin; copper has ${COPPER_PER_KELVIN}.`);
  return { ok: true, value: share };
}

/** "±2 ppm/K" */
export const driftText = ({ ppmPerKelvin, either }: StatedDrift): string =>
  `${either ? "±" : ""}${formatQuantity(ppmPerKelvin, "plain", { unit: "ppm/K" })}`;

/** A drift as the form's fields; parsed again they give the same drift. */
export const driftToValues = (drift: StatedDrift | null): FormValues => ({
  "drift.ppmPerKelvin": drift === null ? "" : driftText(drift),
  "drift.lossPerKelvin": drift?.lossPerKelvin === undefined ? "" : formatQuantity(drift.lossPerKelvin, "plain"),
});
