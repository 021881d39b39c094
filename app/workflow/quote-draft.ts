// A quote's terms and declarations while they are typed: kept as they stand in the fields, checked at submission.

/** Field name to text, as the form sent it. */
export interface QuoteDraft {
  readonly values: Readonly<Record<string, string>>;
}

export const EMPTY_QUOTE_DRAFT: QuoteDraft = { values: {} };
