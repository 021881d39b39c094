// Rows of the specification form as flat field values: which there are, one more, one less, and what each reads as.
import { groupRows, type FormValues } from "~/forms/fields";
import { isBlankLine, LINE_KINDS, parseLine, type SpecificationRequirement } from "~/forms/specification-line";
import { numberRevision } from "~/rf/line-numbers";

/** Rows a new form begins with. */
export const BLANK_ROWS = 3;

/** Indices of the rows, ascending; gaps are what was removed. */
export const lineIndices = (values: FormValues): number[] => groupRows(values, "lines").map(({ index }) => index);

/** Values with an empty row after the last. */
export function addLine(values: FormValues): FormValues {
  const index = Math.max(-1, ...lineIndices(values)) + 1;
  return { ...values, [`lines.${index}.kind`]: "" };
}

/** Values without the row of this index. */
export function removeLine(values: FormValues, index: number): FormValues {
  const prefix = `lines.${index}.`;
  return Object.fromEntries(Object.entries(values).filter(([name]) => !name.startsWith(prefix)));
}

/** Values with at least one row to type in. */
export const withRows = (values: FormValues, count = 1): FormValues => {
  let filled = values;
  while (lineIndices(filled).length < count) filled = addLine(filled);
  return filled;
};

/** What a form's submit button asks for, besides saving: "add-line", "remove-line.3". Null for anything else. */
export function editRows(values: FormValues): FormValues | null {
  const intent = values.intent ?? "";
  if (intent === "add-line") return addLine(values);
  const removed = /^remove-line\.(\d{1,4})$/.exec(intent)?.[1];
  return removed === undefined ? null : withRows(removeLine(values, Number(removed)));
}

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
    const kind = LINE_KINDS.find((offered) => offered === row.fields.kind);
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
  const requirement = parseLine({ ...fields, lineKey }, () => lineKey, errors, "");
  return Object.keys(errors).length === 0 ? requirement : undefined;
}
