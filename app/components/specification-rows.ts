// Rows of the specification form: one more, one less, and what each reads as while it is typed.
import { groupRows, type FormValues } from "~/forms/fields";
import { parseLine } from "~/forms/specification-line";
import { isBlankLine, kindOf, type SpecificationRequirement } from "~/forms/specification-line-kinds";
import { numberRevision } from "~/rf/line-numbers";
import { addRow, changeRows, removeRow, rowIndices, withRowsOf, type RowGroup } from "./form-rows";

/** Rows a new form begins with. */
export const BLANK_ROWS = 3;

const LINES: RowGroup = { group: "lines", field: "kind", noun: "line" };

export const lineIndices = (values: FormValues): number[] => rowIndices(values, LINES);
export const addLine = (values: FormValues): FormValues => addRow(values, LINES);
export const removeLine = (values: FormValues, index: number): FormValues => removeRow(values, LINES, index);
export const withRows = (values: FormValues, count = 1): FormValues => withRowsOf(values, LINES, count);

/**
 * What a submit button asks for besides saving: "add-line", "remove-line.3", and "show-fields", which draws the fields of the
 * kinds as they are chosen. Null for anything else.
 */
export const editRows = (values: FormValues): FormValues | null =>
  values.intent === "show-fields" ? values : changeRows(values, LINES);

export interface ReadRow {
  readonly index: number;
  readonly fields: FormValues;
  /** "3.2"; empty while the row has no kind. */
  readonly lineNumber: string;
  /** Absent while the row does not read as a requirement. */
  readonly requirement?: SpecificationRequirement;
}

/**
 * The rows as they stand while they are typed, each read by itself.
 *
 * @param released numbers of released revisions by line key
 */
export function readRows(values: FormValues, released: ReadonlyMap<string, string> = new Map()): ReadRow[] {
  const rows = groupRows(values, "lines");
  const keyOf = ({ index, fields }: { index: number; fields: FormValues }) =>
    fields.lineKey === undefined || fields.lineKey === "" ? `row-${index}` : fields.lineKey;
  const kinds = rows.flatMap((row) => {
    const kind = kindOf(row.fields);
    return kind === undefined ? [] : [{ lineKey: keyOf(row), kind }];
  });
  const numbers = new Map(numberRevision(kinds, released).map((number, place) => [kinds[place]?.lineKey, number]));
  return rows.map((row) => {
    const requirement = isBlankLine(row.fields) ? undefined : readRow(row.fields, keyOf(row));
    return { ...row, lineNumber: numbers.get(keyOf(row)) ?? "", ...(requirement ? { requirement } : {}) };
  });
}

function readRow(fields: FormValues, lineKey: string): SpecificationRequirement | undefined {
  const errors = {};
  // The list of ports stands at its first entry until another is chosen.
  const port = fields.port === undefined || fields.port === "" ? "1" : fields.port;
  const requirement = parseLine({ ...fields, port, lineKey }, () => lineKey, errors, "");
  return Object.keys(errors).length === 0 ? requirement : undefined;
}
