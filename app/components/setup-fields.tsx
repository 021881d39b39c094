// Fields of a measurement setup: what a blank one takes stands in it, and under each where an engineer finds the figure.
import { Fragment } from "react";
import { SETUP_FIELDS, type SetupField } from "~/forms/setup";
import { SETUP_HELP } from "~/forms/setup-help";
import type { Setup } from "~/rf/contract";
import { Field, SelectField } from "./form";
import { blankWords } from "./setup-words";

interface SetupFieldsProps {
  /** What the RFQ assumes. */
  assumed: Setup;
  /** For a sweep's own: what the quote states. */
  quote?: Setup;
}

/** `setup.*`, in the columns of a grid. Stands in a form. */
export function SetupFields({ assumed, quote }: SetupFieldsProps) {
  return (
    <>
      {SETUP_FIELDS.map((field) => (
        <Fragment key={field.field}>
          <div className="min-w-0">
            <Field
              name={`setup.${field.field}`}
              label={labelWithUnit(field)}
              placeholder={blankWords(field, assumed, quote)}
              inputMode="decimal"
              autoComplete="off"
            />
            <SetupHelp field={field.field} label={field.label} />
          </div>
          {field.field === "noiseFloor" ? <NoiseFloorKind /> : null}
        </Fragment>
      ))}
    </>
  );
}

/** "Directivity, dB"; a sign at the end stands before the unit. */
const labelWithUnit = ({ label, unit }: SetupField): string => `${label}${label.endsWith("±") ? "" : ","} ${unit}`;

function NoiseFloorKind() {
  return (
    <div className="min-w-0">
      <SelectField
        name="setup.noiseFloorKind"
        label="Noise floor figure is"
        options={[
          { value: "peak", label: "highest indication (peak)" },
          { value: "rms", label: "rms" },
        ]}
      />
      <SetupHelp field="noiseFloorKind" label="Noise floor figure" />
    </div>
  );
}

function SetupHelp({ field, label }: { field: keyof Setup; label: string }) {
  return (
    <details className="text-12 text-quiet">
      <summary className="inline-block min-h-6 py-1 underline decoration-rule underline-offset-3">
        Where to find it<span className="sr-only">: {label}</span>
      </summary>
      <p className="max-w-110 pb-1 text-13">{SETUP_HELP[field]}</p>
    </details>
  );
}
