// The form of a quote's terms, setup and declarations. A draft keeps the fields as typed; this reads them at submission.
import { z } from "zod";
import { INCOTERMS, isIncoterm, type Incoterm } from "~/commerce/incoterms";
import type { FieldErrors } from "~/forms/form";
import {
  addError,
  amountField,
  choiceField,
  collect,
  countCharacters,
  formValues,
  hasErrors,
  longTextField,
  optionalTextField,
  readAmount,
  wholeField,
  wholeFieldOr,
  type FormResult,
  type FormValues,
} from "~/forms/fields";
import { instrumentToValues, readInstrument } from "~/forms/quote-setup";
import { QUANTITY_BOUNDS } from "~/forms/rfq";
import { readSetup, setupToValues } from "~/forms/setup";
import { driftToValues, readDrift } from "~/forms/stated-drift";
import { isDate } from "~/forms/zoned-time";
import type { Setup } from "~/rf/contract";
import type { Instrument, StatedDrift } from "~/rf/stated-measurement";

/** What the RFQ sets for the form. */
export interface QuoteTermsContext {
  /** Quantities a unit price is asked for. */
  readonly breaks: readonly number[];
  /** ISO 4217, the RFQ's. */
  readonly currency: string;
  /** Keys of the lines the supplier declares. */
  readonly declaredLineKeys: readonly string[];
  /** Today's date, "2026-11-27": a validity that has passed is refused. */
  readonly today: string;
}

export interface Declaration {
  readonly lineKey: string;
  readonly answer: "comply" | "exception";
  /** The offered figure in words; an exception always has it. */
  readonly text: string | null;
}

/** Amounts are exact decimal text in `currency`. */
export interface QuoteTerms {
  readonly currency: string;
  /** Ascending; at least one. */
  readonly prices: readonly { readonly quantity: number; readonly unitPrice: string }[];
  readonly nre: string;
  readonly leadFirstDays: number | null;
  readonly leadVolumeDays: number;
  /** "2027-03-31". */
  readonly validUntil: string;
  readonly minimumQuantity: number | null;
  readonly orderMultiple: number | null;
  readonly incoterms: Incoterm | null;
  readonly place: string | null;
  readonly paymentTerms: string | null;
  readonly remarks: string | null;
  readonly basis: "measured" | "similar" | "simulated";
  readonly setup: Setup;
  readonly instrument: Instrument;
  /** Null where none is stated. */
  readonly drift: StatedDrift | null;
  /** One for each declared line, in the context's order. */
  readonly declarations: readonly Declaration[];
}

const days = { least: 0, most: 3650, what: "days" } as const;

const Terms = z.object({
  nre: amountField("zero", "Enter the NRE; 0 where there is none."),
  leadFirstDays: wholeFieldOr(days, null),
  leadVolumeDays: wholeField(days),
  validUntil: z
    .string({ error: "Enter the date the quote is valid to." })
    .trim()
    .refine(isDate, "Enter the date as year-month-day, 2027-03-31."),
  minimumQuantity: wholeFieldOr(QUANTITY_BOUNDS, null),
  orderMultiple: wholeFieldOr(QUANTITY_BOUNDS, null),
  incoterms: z
    .string()
    .default("")
    .transform((text, context): Incoterm | null => {
      const rule = text.trim().toUpperCase();
      if (rule === "") return null;
      if (isIncoterm(rule)) return rule;
      context.addIssue(`Choose an Incoterms 2020 rule: ${INCOTERMS.join(", ")}.`);
      return z.NEVER;
    }),
  place: optionalTextField(120),
  paymentTerms: optionalTextField(500),
  remarks: longTextField(4000).transform((text) => (text === "" ? null : text)),
  basis: choiceField(["measured", "similar", "simulated"], "Choose what the data was taken on."),
});

/**
 * Reads terms, setup and declarations: `prices.100` …, the fields of `QuoteTerms` by name, `setup.*`, `instrument.*`, `drift.*`,
 * `declarations.<lineKey>.answer` and `.text`. Takes a post or the values a draft kept.
 */
export function parseQuoteTerms(source: FormData | FormValues, context: QuoteTermsContext): FormResult<QuoteTerms> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const terms = collect(Terms, values, errors);
  const prices = readPrices(values, context.breaks, errors);
  const setup = readSetup(values, errors, false);
  const instrument = readInstrument(values, context.today, errors);
  const drift = readDrift(values, errors);
  const declarations = context.declaredLineKeys.flatMap((key) => readDeclaration(values, key, errors) ?? []);
  if (terms) refuseTerms(terms, context.today, errors);
  if (!terms || hasErrors(errors)) return { ok: false, errors, values };
  return { ok: true, value: { ...terms, currency: context.currency, prices, setup, instrument, drift, declarations } };
}

function readPrices(values: FormValues, breaks: readonly number[], errors: FieldErrors) {
  const filled = [...breaks]
    .sort((a, b) => a - b)
    .filter((quantity) => (values[`prices.${quantity}`] ?? "").trim() !== "");
  if (filled.length === 0)
    addError(errors, `prices.${Math.min(...breaks)}`, "Enter a unit price at one quantity at least.");
  return filled.flatMap((quantity) => {
    const unitPrice = readAmount(values[`prices.${quantity}`] ?? "", "above-zero");
    if (typeof unitPrice === "string") return [{ quantity, unitPrice }];
    addError(errors, `prices.${quantity}`, unitPrice.reason);
    return [];
  });
}

function refuseTerms(terms: z.output<typeof Terms>, today: string, errors: FieldErrors): void {
  if (terms.validUntil < today) addError(errors, "validUntil", "The validity lies in the past. Choose a later date.");
  if (terms.incoterms && !terms.place) addError(errors, "place", `Name the place for ${terms.incoterms}.`);
  if (!terms.incoterms && terms.place) addError(errors, "incoterms", "Choose the Incoterms 2020 rule for this place.");
}

const LONGEST_DECLARATION = 2000;

function readDeclaration(values: FormValues, lineKey: string, errors: FieldErrors): Declaration | undefined {
  const name = `declarations.${lineKey}`;
  const answer = values[`${name}.answer`] ?? "";
  const text = (values[`${name}.text`] ?? "").trim();
  if (answer !== "comply" && answer !== "exception") {
    addError(errors, `${name}.answer`, "Say whether you comply or take an exception.");
    return undefined;
  }
  if (answer === "exception" && text === "") addError(errors, `${name}.text`, "Say what you offer instead.");
  if (countCharacters(text) > LONGEST_DECLARATION)
    addError(errors, `${name}.text`, `Use at most ${LONGEST_DECLARATION} characters.`);
  return { lineKey, answer, text: text === "" ? null : text };
}

/** Terms as the form's fields; parsed again they give the same terms. */
export function quoteTermsToValues(terms: QuoteTerms): FormValues {
  const number = (value: number | null) => (value === null ? "" : String(value));
  const values: FormValues = {
    nre: terms.nre,
    leadFirstDays: number(terms.leadFirstDays),
    leadVolumeDays: number(terms.leadVolumeDays),
    validUntil: terms.validUntil,
    minimumQuantity: number(terms.minimumQuantity),
    orderMultiple: number(terms.orderMultiple),
    incoterms: terms.incoterms ?? "",
    place: terms.place ?? "",
    paymentTerms: terms.paymentTerms ?? "",
    remarks: terms.remarks ?? "",
    basis: terms.basis,
    ...setupToValues(terms.setup),
    ...instrumentToValues(terms.instrument),
    ...driftToValues(terms.drift),
  };
  for (const { quantity, unitPrice } of terms.prices) values[`prices.${quantity}`] = unitPrice;
  for (const { lineKey, answer, text } of terms.declarations) {
    values[`declarations.${lineKey}.answer`] = answer;
    values[`declarations.${lineKey}.text`] = text ?? "";
  }
  return values;
}
