// What a quote states of its measurement: basis of the data, instrument, the setup's figures, and the part's temperature drift.
import { COPPER_PER_KELVIN } from "~/forms/stated-drift";
import type { Setup } from "~/rf/contract";
import { Field, SelectField, useField } from "./form";
import { SetupFields } from "./setup-fields";
import { Section } from "./page";

const BASES = [
  { value: "measured", label: "measured on the quoted part" },
  { value: "similar", label: "measured on a similar part" },
  { value: "simulated", label: "simulated" },
];

const columns = "grid grid-cols-1 gap-4 tablet:grid-cols-2 desktop:grid-cols-4";

/** Stands in the form of the draft. */
export function QuoteSetupFields({ assumed }: { assumed: Setup }) {
  return (
    <Section
      id="measurement-setup"
      title="Measurement setup"
      note="Of all sweeps; a sweep may have figures of its own. A field left blank takes what the RFQ assumes, and results that rest on it are marked assumed."
    >
      <InstrumentFields />
      <h3 className="mt-6 mb-2">Uncertainties, after calibration</h3>
      <div className={columns}>
        <SetupFields assumed={assumed} />
      </div>
      <DriftFields />
    </Section>
  );
}

function InstrumentFields() {
  const { value: basis = "" } = useField("basis");
  return (
    <div className={columns}>
      <SelectField
        name="basis"
        label="Basis of the data"
        options={basis === "" ? [{ value: "", label: "" }, ...BASES] : BASES}
      />
      <Field name="instrument.analyser" label="Analyser" maxLength={200} autoComplete="off" hint="Maker and type" />
      <Field
        name="instrument.calibration"
        label="Calibration method"
        maxLength={200}
        autoComplete="off"
        hint="As SOLT with a 3.5 mm kit, at the connector"
      />
      <Field name="instrument.calibratedOn" label="Calibrated on" type="date" />
    </div>
  );
}

function DriftFields() {
  return (
    <>
      <h3 className="mt-6 mb-2">Temperature drift of the part</h3>
      <div className={columns}>
        <Field
          name="drift.ppmPerKelvin"
          label="Drift of the frequencies, ppm/K"
          placeholder="none stated"
          autoComplete="off"
          hint="+3 ppm/K, or ±2 ppm/K where the sign is not known. Predicts temperatures that were not measured."
        />
        <Field
          name="drift.lossPerKelvin"
          label="Rise of the resistance, 1/K"
          placeholder="none taken"
          autoComplete="off"
          hint={`Raises insertion loss above ambient. Copper and silver: ${COPPER_PER_KELVIN} (common practice).`}
        />
      </div>
    </>
  );
}
