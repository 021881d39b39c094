// Fields of a quote's terms: prices at the asked quantities, delivery, validity and conditions.
import { INCOTERMS } from "~/commerce/incoterms";
import { Field, SelectField, TextAreaField } from "./form";
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
