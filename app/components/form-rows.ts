// Rows of a form as flat field values ("lines.3.from"): which there are, one more, one less, by script and by submit buttons alike.
import { groupRows, type FormValues } from "~/forms/fields";

/** A repeated group of fields, and the buttons that change it: `add-line`, `remove-line.3`. */
export interface RowGroup {
  /** "lines" */
  readonly group: string;
  /** The field that an empty row begins with. */
  readonly field: string;
  /** "line" */
  readonly noun: string;
}

/** Indices of the rows, ascending; gaps are what was removed. */
export const rowIndices = (values: FormValues, { group }: RowGroup): number[] =>
  groupRows(values, group).map(({ index }) => index);

/** Values with an empty row after the last. */
export function addRow(values: FormValues, rows: RowGroup): FormValues {
  const index = Math.max(-1, ...rowIndices(values, rows)) + 1;
  return { ...values, [`${rows.group}.${index}.${rows.field}`]: "" };
}

/** Values without the row of this index. */
export function removeRow(values: FormValues, { group }: RowGroup, index: number): FormValues {
  const prefix = `${group}.${index}.`;
  return Object.fromEntries(Object.entries(values).filter(([name]) => !name.startsWith(prefix)));
}

/** Values with at least so many rows to type in. */
export function withRowsOf(values: FormValues, rows: RowGroup, count = 1): FormValues {
  let filled = values;
  while (rowIndices(filled, rows).length < count) filled = addRow(filled, rows);
  return filled;
}

/** What the pressed button makes of the rows, one at least left; null where it was no button of theirs. */
export function changeRows(values: FormValues, rows: RowGroup): FormValues | null {
  const intent = values.intent ?? "";
  if (intent === `add-${rows.noun}`) return addRow(values, rows);
  const removed = new RegExp(`^remove-${rows.noun}\\.(\\d{1,4})$`).exec(intent)?.[1];
  return removed === undefined ? null : withRowsOf(removeRow(values, rows, Number(removed)), rows);
}
