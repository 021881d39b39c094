// A sheet of the draft as its page shows it, and what a post of it comes to: kept, and in order or told what is not.
import { formValues, hasErrors, type FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import type { Person } from "./person.server";
import { readQuoteHead, saveDraft } from "./quotes.server";
import { checkSheet, readQuoteTerms, typedErrors, type DraftSheet } from "./quote-terms.server";

export interface DraftRefusal {
  readonly values: FormValues;
  readonly errors: FieldErrors;
  readonly lockVersion: number;
  /** Whether the entries were kept all the same. */
  readonly saved: boolean;
}

/** What the sheet's page shows; null where the person does not see the quote. @param address with `?check`, faults are told */
export async function readSheet(person: Person, quotePublicId: string, sheet: DraftSheet, address: string) {
  const head = await readQuoteHead(person, quotePublicId);
  const terms = head && (await readQuoteTerms(person, quotePublicId));
  const { searchParams } = new URL(address);
  const errors = terms && searchParams.has("check") ? await checkSheet(person, quotePublicId, sheet) : {};
  if (!head || !terms || !errors) return null;
  return { head, terms, errors, wasSaved: searchParams.has("saved") };
}

/** `"in-order"` where the next sheet may follow; null where the person does not see the quote. */
export async function saveSheet(
  person: Person,
  quotePublicId: string,
  sheet: DraftSheet,
  form: FormData,
): Promise<"in-order" | DraftRefusal | null> {
  const values = formValues(form);
  const saved = await saveDraft(person, quotePublicId, values, Number(values.lockVersion));
  const stored = saved && (await readQuoteTerms(person, quotePublicId));
  const found = stored && (await checkSheet(person, quotePublicId, sheet));
  if (!saved || !stored || !found) return null;
  const { lockVersion } = stored;
  if (!saved.ok) return { values, errors: saved.errors, lockVersion, saved: false };
  const errors = typedErrors(found, values);
  return hasErrors(errors) ? { values, errors, lockVersion, saved: true } : "in-order";
}
