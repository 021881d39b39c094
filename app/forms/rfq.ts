// The form of an RFQ: quantities, due date with its zone, decision rule, measurement plan, what is assumed of a measurement, whom to invite.
import { z } from "zod";
import { isCurrency } from "~/commerce/currencies";
import type { FieldErrors } from "~/forms/form";
import {
  addError,
  choiceField,
  collect,
  emailField,
  formValues,
  groupRows,
  hasErrors,
  longTextField,
  parseFields,
  readWhole,
  textField,
  wholeField,
  wholeFieldOr,
  type FormResult,
  type FormValues,
} from "~/forms/fields";
import { planToValues, readPlan } from "~/forms/measurement-plan";
import { readSetup, setupToValues } from "~/forms/setup";
import { readZonedTime, zonedTimeToText } from "~/forms/zoned-time";
import type { Setup } from "~/rf/contract";
import type { MeasurementPlan } from "~/rf/measurement-plan";

export const MOST_BREAKS = 6;
export const MOST_INVITATIONS = 30;
export const DEFAULT_UNITS_ASKED = 3;
export const DEFAULT_UNITS_OVER_RANGE = 1;

/** Largest quantity taken: a price of 14 digits times it is still exact. */
export const QUANTITY_BOUNDS = { least: 1, most: 10_000_000, what: "pieces" } as const;

export interface InvitationInput {
  readonly company: string;
  /** One address, lower case. */
  readonly email: string;
}

export interface RfqInput {
  readonly title: string;
  /** Ascending, each once. */
  readonly breaks: readonly number[];
  /** One of `breaks`: the quantity at which quotes are compared. */
  readonly askedQuantity: number;
  readonly dueAt: Date;
  readonly dueZone: string;
  readonly decisionRule: "simple" | "guarded";
  /** ISO 4217. */
  readonly currency: string;
  readonly text: string;
  readonly unitsAsked: number;
  readonly unitsOverRange: number;
  /** `{}` where nothing is asked. */
  readonly measurementPlan: MeasurementPlan;
  readonly assumedSetup: Setup;
  readonly invitations: readonly InvitationInput[];
}

const Invitation = z.object({ company: textField("Enter the company's name.", 120), email: emailField });

const Header = z.object({
  title: textField("Enter a title.", 90),
  askedQuantity: wholeField(QUANTITY_BOUNDS),
  decisionRule: choiceField(["simple", "guarded"], "Choose the decision rule."),
  currency: z
    .string()
    .default("")
    .transform((text, context) => {
      const code = text.trim().toUpperCase();
      if (!isCurrency(code)) context.addIssue("Choose a currency by its ISO 4217 code, as EUR.");
      return code;
    }),
  text: longTextField(10_000),
  unitsAsked: wholeFieldOr({ least: 1, most: 100, what: "units" }, DEFAULT_UNITS_ASKED),
  unitsOverRange: wholeFieldOr({ least: 1, most: 100, what: "units" }, DEFAULT_UNITS_OVER_RANGE),
});

/**
 * Reads the posted form: `title`, `breaks.0` …, `askedQuantity`, `dueDate`, `dueTime`, `dueZone` (`dueOffset` where a time occurs twice),
 * `decisionRule`, `currency`, `text`, `unitsAsked`, `unitsOverRange`, `sweeps.0.from` …, `plan.*`, `setup.*`, `invitations.0.company`, `invitations.0.email` …
 * @param now the clock to compare the due date with; the service asks the database's again
 */
export function parseRfqForm(source: FormData | FormValues, { now }: { readonly now: Date }): FormResult<RfqInput> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const header = collect(Header, values, errors);
  const breaks = readBreaks(values, errors);
  const dueAt = readDue(values, now, errors);
  const measurementPlan = readPlan(values, errors);
  const assumedSetup = readSetup(values, errors, true);
  const invitations = readInvitations(values, errors);
  if (header && breaks.length > 0 && !breaks.includes(header.askedQuantity)) {
    addError(errors, "askedQuantity", `The asked quantity is one of the price breaks: ${breaks.join(", ")}.`);
  }
  if (header && header.unitsOverRange > header.unitsAsked) {
    addError(errors, "unitsOverRange", `No more than the ${header.unitsAsked} units asked in all.`);
  }
  if (!header || !dueAt || hasErrors(errors)) return { ok: false, errors, values };
  const dueZone = (values.dueZone ?? "").trim();
  return { ok: true, value: { ...header, breaks, dueAt, dueZone, measurementPlan, assumedSetup, invitations } };
}

function readBreaks(values: FormValues, errors: FieldErrors): number[] {
  const fields = Object.keys(values)
    .filter((name) => /^breaks\.\d{1,3}$/.test(name) && (values[name] ?? "").trim() !== "")
    .sort((a, b) => Number(a.slice(7)) - Number(b.slice(7)));
  if (fields.length === 0) addError(errors, "breaks.0", "Enter a quantity.");
  const quantities = new Set<number>();
  fields.forEach((name, index) => {
    const quantity = readWhole(values[name] ?? "", QUANTITY_BOUNDS);
    if (typeof quantity !== "number") addError(errors, name, quantity.reason);
    else if (index >= MOST_BREAKS) addError(errors, name, `At most ${MOST_BREAKS} quantities.`);
    else if (quantities.has(quantity)) addError(errors, name, `${quantity} is listed twice.`);
    else quantities.add(quantity);
  });
  return [...quantities].sort((a, b) => a - b);
}

const DUE_FIELDS = { date: "dueDate", time: "dueTime", zone: "dueZone" } as const;

function readDue(values: FormValues, now: Date, errors: FieldErrors): Date | undefined {
  const field = (name: string) => (values[name] ?? "").trim();
  const [date, time, zone, offset] = ["dueDate", "dueTime", "dueZone", "dueOffset"].map(field);
  const read = readZonedTime({ date: date ?? "", time: time ?? "", zone: zone ?? "", offset: offset ?? "" });
  if (!read.ok) {
    addError(errors, DUE_FIELDS[read.field], read.reason);
    if (read.offsets) addError(errors, "dueOffset", `Choose ${read.offsets.join(" or ")}.`);
    return undefined;
  }
  if (read.instant.getTime() <= now.getTime()) {
    addError(errors, "dueDate", "The due date lies in the past. Choose a later one.");
    return undefined;
  }
  return read.instant;
}

function readInvitations(values: FormValues, errors: FieldErrors): InvitationInput[] {
  const rows = groupRows(values, "invitations").filter(({ fields }) =>
    [fields.company, fields.email].some((text) => (text ?? "").trim() !== ""),
  );
  const companies = new Set<string>();
  const addresses = new Set<string>();
  return rows.flatMap(({ index, fields }, row) => {
    const prefix = `invitations.${index}.`;
    const invitation = collect(Invitation, fields, errors, prefix);
    if (row >= MOST_INVITATIONS) addError(errors, `${prefix}company`, `At most ${MOST_INVITATIONS} invitations.`);
    if (!invitation) return [];
    const company = invitation.company.toLocaleLowerCase("en");
    if (companies.has(company)) addError(errors, `${prefix}company`, "This company is listed twice.");
    if (addresses.has(invitation.email)) addError(errors, `${prefix}email`, "This address is listed twice.");
    companies.add(company);
    addresses.add(invitation.email);
    return [invitation];
  });
}

/** One invitation added to an RFQ: fields `company` and `email`. */
export const parseInvitationForm = (source: FormData | FormValues): FormResult<InvitationInput> =>
  parseFields(Invitation, source);

/** An RFQ as the form's fields; parsed again they give the same RFQ. */
export function rfqToValues(rfq: RfqInput): FormValues {
  const due = zonedTimeToText(rfq.dueAt, rfq.dueZone);
  const values: FormValues = {
    title: rfq.title,
    askedQuantity: String(rfq.askedQuantity),
    dueDate: due.date,
    dueTime: due.time,
    dueZone: due.zone,
    dueOffset: due.offset,
    decisionRule: rfq.decisionRule,
    currency: rfq.currency,
    text: rfq.text,
    unitsAsked: String(rfq.unitsAsked),
    unitsOverRange: String(rfq.unitsOverRange),
    ...planToValues(rfq.measurementPlan),
    ...setupToValues(rfq.assumedSetup),
  };
  rfq.breaks.forEach((quantity, index) => (values[`breaks.${index}`] = String(quantity)));
  rfq.invitations.forEach(({ company, email }, index) => {
    values[`invitations.${index}.company`] = company;
    values[`invitations.${index}.email`] = email;
  });
  return values;
}
