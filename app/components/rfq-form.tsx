// The form of an RFQ: what is asked, at which quantities, until when, and what is assumed of a measurement.
import type { ReactNode } from "react";
import type { FormState } from "~/forms/form";
import { MOST_BREAKS } from "~/forms/rfq";
import { PROPOSED_SETUP, SETUP_FIELDS } from "~/forms/setup";
import { SETUP_HELP } from "~/forms/setup-help";
import { Button } from "./button";
import { Field, PostForm, SelectField, TextAreaField } from "./form";
import { MeasurementPlanFields } from "./measurement-plan-fields";
import { Section } from "./page";

interface RfqFormProps {
  state: FormState;
  /** IANA names to choose from. */
  zones: readonly string[];
  idempotencyKey?: string;
  /** Sent back with the form, to see whether the draft was changed meanwhile. */
  lockVersion?: number;
  save: string;
  /** Stands beside the button. */
  beside?: ReactNode;
}

export function RfqForm({ state, zones, idempotencyKey, lockVersion, save, beside }: RfqFormProps) {
  return (
    <PostForm
      state={state}
      guardsUnsaved
      className="mt-9"
      {...(idempotencyKey === undefined ? {} : { idempotencyKey })}
    >
      {/* Of the page that was filled in: the answer to a refused form was read later, and may hold another's changes. */}
      {lockVersion === undefined ? null : (
        <input type="hidden" name="lockVersion" value={state.values.lockVersion ?? lockVersion} />
      )}
      {/* Return in a field presses the first button of a form: saving, not "Remove". */}
      <button name="intent" value="save" tabIndex={-1} aria-hidden className="sr-only" />
      <input type="hidden" name="currency" value={state.values.currency ?? ""} />
      <Request />
      <Quantities currency={state.values.currency ?? ""} />
      <Due zones={zones} state={state} />
      <MeasurementPlanFields state={state} />
      <AssumedSetup />
      <div className="mt-9 flex flex-wrap items-center gap-5 border-t border-rule pt-5">
        <Button kind="filled">{save}</Button>
        {beside}
      </div>
    </PostForm>
  );
}

function Request() {
  return (
    <div className="grid gap-4 desktop:grid-cols-2">
      <Field name="title" label="Title" maxLength={90} required />
      <SelectField
        name="decisionRule"
        label="Decision rule"
        options={[
          { value: "simple", label: "simple acceptance: pass and conditional pass comply" },
          { value: "guarded", label: "guarded acceptance: pass alone complies" },
        ]}
      />
      <TextAreaField
        name="text"
        label="Text to the suppliers"
        rows={5}
        className="col-span-full"
        hint="Goes out in the invitation's mail, before anything is accepted: keep confidential figures in the specification."
      />
    </div>
  );
}

function Quantities({ currency }: { currency: string }) {
  return (
    <Section
      title="Quantities"
      note={`A unit price in ${currency} is asked at each break. Quotes are compared at one of them.`}
    >
      <div className="grid grid-cols-2 gap-4 tablet:grid-cols-4 desktop:grid-cols-7">
        {Array.from({ length: MOST_BREAKS }, (_, k) => (
          <Field key={k} name={`breaks.${k}`} label={`Break ${k + 1}`} inputMode="numeric" autoComplete="off" />
        ))}
        <Field
          name="askedQuantity"
          label="Compared at"
          inputMode="numeric"
          autoComplete="off"
          hint="One of the breaks"
          required
        />
      </div>
    </Section>
  );
}

function Due({ zones, state }: { zones: readonly string[]; state: FormState }) {
  const isTwice = state.errors.dueOffset !== undefined;
  const offset = state.values.dueOffset ?? "";
  return (
    <Section
      title="Quotes due"
      note="A quote that arrives at this minute or later is refused. The server's clock decides."
    >
      <div className="grid gap-4 tablet:grid-cols-3 desktop:grid-cols-4">
        <Field name="dueDate" label="Date" type="date" required />
        <Field name="dueTime" label="Time" type="time" required />
        <SelectField name="dueZone" label="Time zone" options={zones.map((zone) => ({ value: zone, label: zone }))} />
        {isTwice ? (
          <Field name="dueOffset" label="Offset" placeholder="+01:00" />
        ) : (
          <input type="hidden" name="dueOffset" value={offset} />
        )}
      </div>
    </Section>
  );
}

const HELP: Partial<Record<(typeof SETUP_FIELDS)[number]["field"], string>> = {
  transmission: "k = 2, on |S21| well above the noise",
  transmissionRelative: "Between two points of a sweep; blank: from both points' own",
  directivity: "Residual, after calibration",
  sourceMatch: "Residual, after calibration",
  loadMatch: "Residual, after calibration",
  tracking: "Residual, after calibration",
  noiseFloor: "Highest indication with both ports terminated",
  groupDelay: "k = 2; blank: no figure is assumed",
  phase: "k = 2; blank: no figure is assumed",
};

function AssumedSetup() {
  return (
    <Section
      title="Assumed setup"
      note="What a supplier leaves out of the measurement setup takes these figures, and the result is marked assumed. Proposed figures are common practice."
    >
      <div className="grid gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
        {SETUP_FIELDS.map(({ field, label, unit }) => (
          <Field
            key={field}
            name={`setup.${field}`}
            label={label}
            inputMode="decimal"
            autoComplete="off"
            placeholder={field in PROPOSED_SETUP ? undefined : `none, ${unit}`}
            hint={HELP[field]}
          />
        ))}
        <SelectField
          name="setup.noiseFloorKind"
          label="Noise floor is"
          options={[
            { value: "peak", label: "peak over the sweep" },
            { value: "rms", label: "rms" },
          ]}
          hint="An rms figure is lowered to a peak one"
        />
      </div>
      <SetupHelp />
    </Section>
  );
}

function SetupHelp() {
  return (
    <details className="mt-4 text-13">
      <summary className="text-signal">Where to find each figure</summary>
      <dl className="mt-2 max-w-210 border-t border-rule">
        {[...SETUP_FIELDS, { field: "noiseFloorKind", label: "Noise floor, peak or rms" } as const].map(
          ({ field, label }) => (
            <div key={field} className="gap-x-5 border-b border-rule py-2 tablet:grid tablet:grid-cols-[220px_1fr]">
              <dt className="text-quiet">{label}</dt>
              <dd>{SETUP_HELP[field]}</dd>
            </div>
          ),
        )}
      </dl>
    </details>
  );
}
