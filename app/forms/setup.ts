// Fields of a measurement setup, the same for the RFQ's assumed setup and the one a quote states: `setup.transmission` …
import type { FieldErrors } from "~/forms/form";
import { addError, type FormValues } from "~/forms/fields";
import type { Setup } from "~/rf/contract";
import { formatQuantity, parseQuantity, type QuantityKind } from "~/rf/quantity";

type SetupFigure = Exclude<keyof Setup, "noiseFloorKind">;

export interface SetupField {
  readonly field: SetupFigure;
  readonly label: string;
  readonly kind: QuantityKind;
  readonly unit: string;
  /** Largest figure taken, in the kind's own unit. */
  readonly most: number;
}

export const SETUP_FIELDS: readonly SetupField[] = [
  { field: "transmission", label: "Transmission, expanded uncertainty", kind: "level", unit: "dB", most: 20 },
  {
    field: "transmissionRelative",
    label: "Relative transmission, expanded uncertainty",
    kind: "level",
    unit: "dB",
    most: 20,
  },
  { field: "directivity", label: "Directivity", kind: "level", unit: "dB", most: 100 },
  { field: "sourceMatch", label: "Source match", kind: "level", unit: "dB", most: 100 },
  { field: "loadMatch", label: "Load match", kind: "level", unit: "dB", most: 100 },
  { field: "tracking", label: "Reflection tracking, ±", kind: "level", unit: "dB", most: 20 },
  { field: "noiseFloor", label: "Noise floor below a through", kind: "level", unit: "dB", most: 200 },
  { field: "groupDelay", label: "Group delay, expanded uncertainty", kind: "time", unit: "ns", most: 1e-3 },
  { field: "phase", label: "Phase, expanded uncertainty", kind: "plain", unit: "deg", most: 180 },
];

/** Whether a field of a quote's draft is typed on its Data sheet. */
export const isDataField = (name: string): boolean => name === "basis" || /^(?:setup|instrument|drift)\./.test(name);

/** A figure of a setup with its unit: "0.1 dB". @param value in the kind's own unit */
export const setupText = ({ kind, unit }: SetupField, value: number): string =>
  formatQuantity(value, kind, kind === "plain" ? { unit } : {});

/** What an RFQ proposes to assume where a supplier states nothing: common practice, without a source. */
export const PROPOSED_SETUP = {
  transmission: 0.1,
  directivity: 36,
  sourceMatch: 32,
  loadMatch: 36,
  tracking: 0.1,
  noiseFloor: 90,
  noiseFloorKind: "peak",
} as const satisfies Setup;

/**
 * Reads `setup.*`. Blank fields are left out: no figure was stated.
 * @param assumed for the RFQ's own: what PROPOSED_SETUP names must have a figure, since silence would count as no uncertainty; fields that
 *   were not posted at all take the proposal
 */
export function readSetup(values: FormValues, errors: FieldErrors, assumed: boolean): Setup {
  const figures: Partial<Record<SetupFigure, number>> = {};
  for (const field of SETUP_FIELDS) {
    const text = values[`setup.${field.field}`];
    const proposal =
      assumed && field.field in PROPOSED_SETUP ? PROPOSED_SETUP[field.field as keyof typeof PROPOSED_SETUP] : undefined;
    if (text === undefined && typeof proposal === "number") figures[field.field] = proposal;
    else if ((text ?? "").trim() !== "") readFigure(text ?? "", field, figures, errors);
    else if (proposal !== undefined)
      addError(errors, `setup.${field.field}`, `Enter a figure; ${proposal} ${field.unit} is usual.`);
  }
  const kind = values["setup.noiseFloorKind"] ?? "";
  if (!["", "peak", "rms"].includes(kind)) addError(errors, "setup.noiseFloorKind", "Choose peak or rms.");
  if (figures.noiseFloor === undefined) return figures;
  return { ...figures, noiseFloorKind: kind === "rms" ? "rms" : "peak" };
}

function readFigure(
  text: string,
  field: SetupField,
  figures: Partial<Record<SetupFigure, number>>,
  errors: FieldErrors,
) {
  const parsed = parseQuantity(text, {
    kind: field.kind,
    unit: field.unit,
    ...(field.kind === "level" ? { meaning: "loss" } : {}),
  });
  const name = `setup.${field.field}`;
  if (!parsed.ok) addError(errors, name, parsed.reason);
  else if (parsed.value <= 0) addError(errors, name, "Enter a figure above 0, or leave the field blank.");
  else if (parsed.value > field.most) {
    addError(errors, name, `At most ${setupText(field, field.most)}.`);
  } else figures[field.field] = parsed.value;
}

/** A setup as the form's fields; parsed again they give the same setup. */
export function setupToValues(setup: Setup): FormValues {
  const texts = SETUP_FIELDS.map((field) => {
    const value = setup[field.field];
    return [`setup.${field.field}`, value === undefined ? "" : setupText(field, value)] as const;
  });
  return { ...Object.fromEntries<string>(texts), "setup.noiseFloorKind": setup.noiseFloorKind ?? "peak" };
}
