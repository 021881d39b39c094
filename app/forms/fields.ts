// Building blocks of the forms: how posted text becomes a figure, an amount, an address, and how zod's issues become sentences by field.
import { z } from "zod";
import { isAmount, printExact } from "~/commerce/money";
import type { FieldErrors } from "~/forms/form";
import { readNumber } from "~/rf/quantity-number";
import { parseQuantity, type QuantityOptions } from "~/rf/quantity";

/** What was typed, by field name. */
export type FormValues = Record<string, string>;

export type FormResult<T> =
  | { readonly ok: true; readonly value: T }
  | { readonly ok: false; readonly errors: FieldErrors; readonly values: FormValues };

/** Text fields of a post, line ends as "\n"; files are left out, of a repeated name the last counts (a box over its hidden field). */
export function formValues(source: FormData | Readonly<Record<string, string>>): FormValues {
  const entries = source instanceof FormData ? [...source.entries()] : Object.entries(source);
  const texts = entries.flatMap(([name, value]) => (typeof value === "string" ? [[name, value] as const] : []));
  return Object.fromEntries(texts.map(([name, value]) => [name, value.replace(/\r\n?/g, "\n")]));
}

/** Values without the named fields: a password is never sent back. */
export function withoutFields(values: FormValues, ...names: readonly string[]): FormValues {
  return Object.fromEntries(Object.entries(values).filter(([name]) => !names.includes(name)));
}

export function addError(errors: FieldErrors, field: string, sentence: string): void {
  (errors[field] ??= []).push(sentence);
}

/** The schema's output, or undefined with its issues added to `errors`, each under `prefix` and its path. */
export function collect<S extends z.ZodType>(
  schema: S,
  values: unknown,
  errors: FieldErrors,
  prefix = "",
): z.output<S> | undefined {
  const parsed = schema.safeParse(values);
  if (parsed.success) return parsed.data;
  for (const issue of parsed.error.issues) {
    const path = issue.path.join(".");
    addError(errors, path === "" ? prefix.replace(/\.$/, "") || "form" : prefix + path, issue.message);
  }
  return undefined;
}

/** A form of named fields only. */
export function parseFields<S extends z.ZodType>(schema: S, source: FormData | FormValues): FormResult<z.output<S>> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const value = collect(schema, values, errors);
  return value === undefined ? { ok: false, errors, values } : { ok: true, value };
}

export const hasErrors = (errors: FieldErrors): boolean => Object.keys(errors).length > 0;

/** The rows of a repeated group, by their posted index, ascending: `lines.0.kind` → index 0, field `kind`. */
export function groupRows(
  values: FormValues,
  group: string,
): { readonly index: number; readonly fields: FormValues }[] {
  const rows = new Map<number, FormValues>();
  for (const [name, value] of Object.entries(values)) {
    const match = /^([a-zA-Z]+)\.(\d{1,4})\.([a-zA-Z]+)$/.exec(name);
    if (!match || match[1] !== group) continue;
    const index = Number(match[2]);
    const fields = rows.get(index) ?? {};
    fields[match[3] ?? ""] = value; // written into: a copy for each field would take quadratic time
    rows.set(index, fields);
  }
  return [...rows].sort(([a], [b]) => a - b).map(([index, fields]) => ({ index, fields }));
}

/** Length in characters (code points), as the database counts them. */
export const countCharacters = (text: string): number => Array.from(text).length;
const CONTROL = /[\u0000-\u001F\u007F-\u009F\u2028\u2029]/u;

const typed = z.string().default("");

/** One line of text, trimmed. */
export const textField = (empty: string, longest: number) =>
  typed.transform((text, context) => {
    const trimmed = text.trim();
    if (trimmed === "") context.addIssue(empty);
    else if (CONTROL.test(trimmed)) context.addIssue("Use one line without control characters.");
    else if (countCharacters(trimmed) > longest)
      context.addIssue(`Use at most ${longest} characters; this has ${countCharacters(trimmed)}.`);
    return trimmed;
  });

export const optionalTextField = (longest: number) =>
  typed.transform((text, context) => {
    const trimmed = text.trim();
    if (CONTROL.test(trimmed)) context.addIssue("Use one line without control characters.");
    if (countCharacters(trimmed) > longest)
      context.addIssue(`Use at most ${longest} characters; this has ${countCharacters(trimmed)}.`);
    return trimmed === "" ? null : trimmed;
  });

/** Text of several lines, trimmed. */
export const longTextField = (longest: number, shortest = 0, tooShort = "") =>
  typed.transform((text, context) => {
    const trimmed = text.trim();
    if (countCharacters(trimmed) < shortest) context.addIssue(tooShort);
    if (countCharacters(trimmed) > longest)
      context.addIssue(`Use at most ${longest} characters; this has ${countCharacters(trimmed)}.`);
    return trimmed;
  });

/** A quantity in the core's unit; `empty` is the sentence for a blank field. */
export const quantityField = (options: QuantityOptions, empty: string) =>
  typed.transform((text, context) => {
    const parsed = text.trim() === "" ? ({ ok: false, reason: empty } as const) : parseQuantity(text, options);
    if (parsed.ok) return parsed.value;
    context.addIssue(parsed.reason);
    return z.NEVER;
  });

export const optionalQuantityField = (options: QuantityOptions) =>
  typed.transform((text, context) => {
    if (text.trim() === "") return null;
    const parsed = parseQuantity(text, options);
    if (parsed.ok) return parsed.value;
    context.addIssue(parsed.reason);
    return z.NEVER;
  });

/** A quantity that falls back to `fallback` where the field is blank. */
export const quantityFieldOr = (options: QuantityOptions, fallback: number) =>
  optionalQuantityField(options).transform((value) => value ?? fallback);

/** Bounds of a whole number, both included, and the word for what is counted, in the plural: "units". */
export interface WholeBounds {
  readonly least: number;
  readonly most: number;
  readonly what: string;
}

/** A whole number, or why the text is none. Marks are refused with the remedy: "1,000" could be 1. */
export function readWhole(text: string, { least, most, what }: WholeBounds): number | { readonly reason: string } {
  const entry = text.trim();
  if (/^[\d,.'\s]*\d[,.'\s]\d+$/.test(entry))
    return { reason: `Write a whole number without marks: ${entry.replace(/\D/g, "")}.` };
  if (!/^\d{1,12}$/.test(entry)) return { reason: `Give a whole number of ${what}.` };
  const value = Number(entry);
  return value < least || value > most ? { reason: `Give ${least} to ${most} ${what}.` } : value;
}

const wholeOr = (text: string, bounds: WholeBounds, context: { addIssue(message: string): void }) => {
  const read = readWhole(text, bounds);
  if (typeof read === "number") return read;
  context.addIssue(read.reason);
  return z.NEVER;
};

export const wholeField = (bounds: WholeBounds) => typed.transform((text, context) => wholeOr(text, bounds, context));

export const wholeFieldOr = <F extends number | null>(bounds: WholeBounds, fallback: F) =>
  typed.transform((text, context): number | F => (text.trim() === "" ? fallback : wholeOr(text, bounds, context)));

/** DECIMAL(18,4): 14 digits before the point, 4 after. Returns the exact amount as decimal text, or why it is none. */
export function readAmount(text: string, lowest: "zero" | "above-zero"): string | { readonly reason: string } {
  const read = readNumber(text, "");
  if (!read.ok) return { reason: read.reason };
  const { negative, digits, exponent, rest } = read.number;
  if (rest !== "") return { reason: `“${rest}” is not expected after the amount. The currency is set by the RFQ.` };
  const [whole = "", decimals = ""] = digits.split(".");
  if (exponent !== 0 || whole.length > 14) return { reason: "Give an amount of at most 14 digits before the point." };
  if (decimals.length > 4) return { reason: "Use at most four decimals." };
  const written = `${whole === "" ? "0" : whole}${decimals === "" ? "" : `.${decimals}`}`;
  const amount = isAmount(written) ? printExact(written) : "0";
  if (negative && amount !== "0") return { reason: "An amount is not negative." };
  return lowest === "above-zero" && amount === "0" ? { reason: "A price is more than 0." } : amount;
}

/** An amount as decimal text; a blank field is refused with the sentence `empty`. */
export const amountField = (lowest: "zero" | "above-zero", empty: string) =>
  typed.transform((text, context): string => {
    const read = text.trim() === "" ? { reason: empty } : readAmount(text, lowest);
    if (typeof read === "string") return read;
    context.addIssue(read.reason);
    return z.NEVER;
  });

/** One plain address, in lower case: no display name, no list, nothing that could open a second header line. */
export const emailField = typed.transform((text, context) => {
  const address = text.trim().toLowerCase();
  if (address === "") context.addIssue("Enter an e-mail address.");
  else if (address.length > 254 || !EMAIL.test(address))
    context.addIssue("Enter one e-mail address, as in name@example.com.");
  return address;
});

const EMAIL =
  /^[a-z0-9!#$%&'*+/=?^_`{|}~-]{1,64}(?:\.[a-z0-9!#$%&'*+/=?^_`{|}~-]{1,64})*@(?:[a-z0-9](?:[a-z0-9-]{0,61}[a-z0-9])?\.)+[a-z][a-z0-9-]{0,61}[a-z0-9]$/;

/** One of a closed list; a blank or absent field is refused with the same sentence. */
export const choiceField = <const T extends readonly [string, ...string[]]>(choices: T, sentence: string) =>
  z.enum(choices, { error: sentence });

/** The random 16 characters that name a row in addresses. */
export const publicIdField = (sentence: string) => z.string({ error: sentence }).regex(/^[A-Za-z0-9_-]{16}$/, sentence);
