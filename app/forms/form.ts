// What a form's action hands back: the outcome, errors keyed by field, and the state a form is drawn again from.

/** Sentences by field name; the key `form` holds what concerns the whole form. */
export type FieldErrors = Partial<Record<string, string[]>>;

/** An expected outcome, returned and never thrown. */
export type Result<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly errors: FieldErrors };

export const ok = <T>(value: T): Result<T> => ({ ok: true, value });
export const invalid = (errors: FieldErrors): Result<never> => ({ ok: false, errors });

/** The typed input and what is wrong with it, as an action sends it back with status 400. */
export interface FormState {
  readonly values: Partial<Record<string, string>>;
  readonly errors: FieldErrors;
}
