// Fields of a quote's terms: prices at the asked quantities, delivery, validity, conditions, and the setup of the data.
import { INCOTERMS } from "~/commerce/incoterms";
import { SETUP_FIELDS } from "~/forms/setup";
import type { Setup } from "~/rf/index";
import { formatQuantity } from "~/rf/quantity";
import { Field, SelectField, TextAreaField, useField } from "./form";
import { formatNumber } from "./format";
import { Section } from "./page";

interface PricesProps {
  breaks: readonly number[];
  /** The one quotes are compared at. */
  quantity: number;
  currency: string;
}

export function PriceFields({ breaks, quantity, currency }: PricesProps) {
  return (
    <Section title="Prices" note={`In ${currency}, net. Quotes are compared at ${formatNumber(quantity, 0)} pieces.`}>
      <div className="grid grid-cols-1 gap-4 tablet:grid-cols-3 desktop:grid-cols-4">
        {breaks.map((count) => (
          <Field
            key={count}
            name={`prices.${count}`}
            label={`Unit price at ${formatNumber(count, 0)}`}
            unit={currency}
            inputMode="decimal"
            autoComplete="off"
            {...(count === quantity ? { hint: "Compared at this quantity" } : {})}
          />
        ))}
        <Field
          name="nre"
          label="NRE, once"
          unit={currency}
          inputMode="decimal"
          autoComplete="off"
          hint="Tooling and engineering; 0 where there is none"
        />
      </div>
    </Section>
  );
}

export function DeliveryFields() {
  return (
    <Section title="Delivery and quantities">
      <div className="grid grid-cols-1 gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
        <Field name="leadVolumeDays" label="Lead time, volume" unit="days" inputMode="numeric" autoComplete="off" />
        <Field
          name="leadFirstDays"
          label="Lead time, first units"
          unit="days"
          inputMode="numeric"
          autoComplete="off"
          hint="Calendar days from order; may stay blank"
        />
        <Field name="minimumQuantity" label="Minimum quantity" unit="pieces" inputMode="numeric" autoComplete="off" />
        <Field name="orderMultiple" label="Order multiple" unit="pieces" inputMode="numeric" autoComplete="off" />
      </div>
    </Section>
  );
}

const RULES = [{ value: "", label: "none stated" }, ...INCOTERMS.map((rule) => ({ value: rule, label: rule }))];

export function ConditionFields() {
  return (
    <Section title="Conditions">
      <div className="grid grid-cols-1 gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
        <Field name="validUntil" label="Valid to" type="date" />
        <SelectField name="incoterms" label="Incoterms 2020 rule" options={RULES} />
        <Field name="place" label="Named place" maxLength={120} hint="Required with a rule" />
        <Field name="paymentTerms" label="Payment terms" maxLength={500} />
        <TextAreaField name="remarks" label="Remarks to the buyer" rows={3} className="col-span-full" />
      </div>
    </Section>
  );
}

const BASES = [
  { value: "measured", label: "measured on the quoted part" },
  { value: "similar", label: "measured on a similar part" },
  { value: "simulated", label: "simulated" },
];

export function BasisFields({ assumedSetup }: { assumedSetup: Setup }) {
  const { value: basis = "" } = useField("basis");
  const bases = basis === "" ? [{ value: "", label: "" }, ...BASES] : BASES;
  return (
    <Section
      title="Measured data and setup"
      note="A field left blank takes what the RFQ assumes, and results that rest on it are marked."
    >
      <div className="grid grid-cols-1 gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
        <SelectField name="basis" label="Basis of the data" options={bases} />
        {SETUP_FIELDS.map(({ field, label, unit, kind }) => (
          <Field
            key={field}
            name={`setup.${field}`}
            label={label}
            unit={unit}
            inputMode="decimal"
            autoComplete="off"
            hint={assumedWords(assumedSetup[field], kind, unit)}
          />
        ))}
        <SelectField
          name="setup.noiseFloorKind"
          label="Noise floor figure is"
          options={[
            { value: "peak", label: "highest indication (peak)" },
            { value: "rms", label: "rms" },
          ]}
        />
      </div>
    </Section>
  );
}

function assumedWords(assumed: number | undefined, kind: (typeof SETUP_FIELDS)[number]["kind"], unit: string): string {
  if (assumed === undefined) return "Nothing is assumed";
  return `Assumed: ${formatQuantity(assumed, kind, kind === "plain" ? { unit } : {})}`;
}
