// The specification form as a browser posts it.
import { newIdempotencyKey } from "~/services/identifiers.server";

export type Row = Readonly<Record<string, string>>;

export const passband = { from: "1920", to: "1980" } as const;

/** A post of the form: title block, rows, and a key of its own. */
export function posted(rows: readonly Row[] = [], fields: Row = {}): FormData {
  const form = new FormData();
  const block = { title: "Band-pass", z1: "50", z2: "75", ambient: "", idempotencyKey: newIdempotencyKey(), ...fields };
  for (const [name, value] of Object.entries(block)) form.set(name, value);
  rows.forEach((row, index) => {
    for (const [field, value] of Object.entries(row)) form.set(`lines.${index}.${field}`, value);
  });
  return form;
}

/** The value of an outcome that has to be good. */
export function must<T>(outcome: { readonly ok: true; readonly value: T } | { readonly ok: false } | null): T {
  if (!outcome?.ok) throw new Error(`refused: ${JSON.stringify(outcome)}`);
  return outcome.value;
}
