// What a post of a sheet of the draft comes to: kept, and either in order or told what is not.
import { formValues, hasErrors, type FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import type { Person } from "./person.server";
import { saveDraft } from "./quotes.server";
import { checkSheet, readQuoteTerms, typedErrors } from "./quote-terms.server";

export type DraftSheet = "terms" | "declarations";

export interface DraftRefusal {
  readonly values: FormValues;
  readonly errors: FieldErrors;
  readonly lockVersion: number;
  /** Whether the entries were kept all the same. */
  readonly saved: boolean;
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
