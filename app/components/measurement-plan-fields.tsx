// The measurement plan in the RFQ's form: units and temperatures, sweeps row by row, how the part is to be measured.
import { X } from "lucide-react";
import { useState } from "react";
import type { FormValues } from "~/forms/fields";
import type { FieldErrors, FormState } from "~/forms/form";
import { readSweep, readSweeps, SWEEP_UNIT } from "~/forms/measurement-plan";
import { leastPoints, MOST_PLANNED_SWEEPS } from "~/rf/measurement-plan";
import { Button } from "./button";
import { EntryCell, EntryErrors } from "./entry-cell";
import { Field, SelectField } from "./form";
import { addRow, changeRows, removeRow, rowIndices, withRowsOf, type RowGroup } from "./form-rows";
import { formatNumber } from "./format";
import { COVERAGE_SENTENCE, sweepWords } from "./measurement-plan-words";
import { Section } from "./page";

const SWEEPS: RowGroup = { group: "sweeps", field: "from", noun: "sweep" };

/** What a submit button of the sweeps asks for, besides saving the form; null for anything else. */
export const editSweeps = (values: FormValues): FormValues | null => changeRows(values, SWEEPS);

export function MeasurementPlanFields({ state }: { state: FormState }) {
  return (
    <Section
      title="Measurement plan"
      note="Suppliers see what is asked, what they have delivered and what is missing. A field left blank asks for nothing."
    >
      <div className="grid gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
        <Field
          name="unitsAsked"
          label="Units in all"
          inputMode="numeric"
          hint="Each with its serial and its own files"
        />
        <Field
          name="unitsOverRange"
          label="Of these over temperature"
          inputMode="numeric"
          hint="Measured at ambient and at both ends of the range"
        />
        <Field
          name="plan.temperatures"
          label="Further temperatures"
          unit="°C"
          autoComplete="off"
          hint="Besides those, as −10; 50"
        />
      </div>
      <Sweeps state={state} />
      <HowMeasured />
    </Section>
  );
}

function HowMeasured() {
  return (
    <div className="mt-6 grid gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
      <Field
        name="plan.ifBandwidth"
        label="IF bandwidth, at most"
        unit="Hz"
        autoComplete="off"
        hint="The noise floor falls with it by 10 dB a decade"
      />
      <Field
        name="plan.power"
        label="Power at the input"
        unit="dBm"
        autoComplete="off"
        hint="At the reference plane of port 1"
      />
      <Field
        name="plan.delayAperture"
        label="Group-delay aperture"
        unit="MHz"
        autoComplete="off"
        hint="For delay lines that state none; sweeps have to reach half of it beyond their bands. Blank: the step of the sweep"
      />
      <SelectField
        name="plan.referencePlane"
        label="Reference plane"
        options={[
          { value: "", label: "left open" },
          { value: "connector", label: "connector" },
          { value: "board", label: "board" },
          { value: "fixture", label: "fixture, de-embedded" },
        ]}
      />
      <Field
        name="plan.referencePlaneWords"
        label="Where the plane lies, and how a fixture is de-embedded"
        autoComplete="off"
        maxLength={200}
        className="col-span-full"
        hint="For example: end of the 50 Ω line, 2 mm before the pad; 2x-thru structure on the same panel, its file sent along"
      />
    </div>
  );
}

const columns =
  "grid grid-cols-2 gap-x-1.5 gap-y-1 tablet:grid-cols-[minmax(0,1fr)_minmax(0,1fr)_minmax(0,1fr)_minmax(0,2.6fr)_36px]";

/** Controlled rows: an answer that comes back without script begins them anew from what was typed. */
function Sweeps({ state }: { state: FormState }) {
  const [values, setValues] = useState<FormValues>(() => withRowsOf(sweepValues(state.values), SWEEPS));
  const indices = rowIndices(values, SWEEPS);
  const liveErrors: FieldErrors = {};
  readSweeps(values, liveErrors);
  return (
    <div className="mt-6">
      <h3>Sweeps</h3>
      <p className="pb-2 text-13 text-quiet">
        {COVERAGE_SENTENCE} The proposal is made from the released revision: over each passband a hundredth of its
        width, over all edges a tenth of the narrowest other band. Bare figures are {SWEEP_UNIT}.
      </p>
      <div
        aria-hidden
        className={`${columns} border-b-[1.5px] border-ink pb-2 text-12 text-quiet max-tablet:hidden [&>span]:pl-2`}
      >
        <span>From, MHz</span>
        <span>To, MHz</span>
        <span>Largest step, MHz</span>
        <span>Read as</span>
      </div>
      {indices.map((index, place) => (
        <SweepRow
          key={index}
          index={index}
          place={place + 1}
          values={values}
          liveErrors={liveErrors}
          onChange={(field, value) => setValues((current) => ({ ...current, [`sweeps.${index}.${field}`]: value }))}
          onRemove={() => setValues((current) => withRowsOf(removeRow(current, SWEEPS, index), SWEEPS))}
        />
      ))}
      <div className="pt-2">
        <Button
          name="intent"
          value="add-sweep"
          disabled={indices.length >= MOST_PLANNED_SWEEPS}
          onClick={(event) => {
            event.preventDefault();
            setValues((current) => addRow(current, SWEEPS));
          }}
        >
          Add sweep
        </Button>
      </div>
    </div>
  );
}

const sweepValues = (values: FormState["values"]): FormValues =>
  Object.fromEntries(
    Object.entries(values).flatMap(([name, value]) =>
      value === undefined || !name.startsWith("sweeps.") ? [] : [[name, value]],
    ),
  );

interface SweepRowProps {
  index: number;
  /** Counted from 1. */
  place: number;
  values: FormValues;
  liveErrors: FieldErrors;
  onChange: (field: string, value: string) => void;
  onRemove: () => void;
}

function SweepRow({ index, place, values, liveErrors, onChange, onRemove }: SweepRowProps) {
  const prefix = `sweeps.${index}.`;
  const text = (field: string) => values[prefix + field] ?? "";
  const cell = (field: string, label: string) => (
    <EntryCell
      name={prefix + field}
      label={label}
      value={text(field)}
      liveErrors={liveErrors}
      onChange={(value) => onChange(field, value)}
    />
  );
  const sweep = readSweep({ from: text("from"), to: text("to"), maxStep: text("maxStep") });
  return (
    <fieldset className={`${columns} min-w-0 border-b border-rule py-1.5`}>
      <legend className="sr-only">Sweep {place}</legend>
      {cell("from", "From, MHz")}
      {cell("to", "To, MHz")}
      {cell("maxStep", "Largest step, MHz")}
      <p className="self-center pl-2 text-13 text-quiet max-tablet:order-last max-tablet:col-span-2">
        {sweep === undefined ? null : `= ${sweepWords(sweep)}, ${formatNumber(leastPoints(sweep), 0)} points`}
      </p>
      <button
        name="intent"
        value={`remove-sweep.${index}`}
        aria-label={`Remove sweep ${place}`}
        title="Remove sweep"
        onClick={(event) => {
          event.preventDefault();
          onRemove();
        }}
        className="grid size-9 place-items-center self-end justify-self-end text-quiet hover:text-fail pointer-coarse:size-11"
      >
        <X size={20} strokeWidth={1.75} aria-hidden />
      </button>
      <EntryErrors
        names={["from", "to", "maxStep"].map((field) => prefix + field)}
        liveErrors={liveErrors}
        className="col-span-full"
      />
    </fieldset>
  );
}
