// Rows of the specification form as the submit buttons and the script both change them.
import { expect, test } from "vitest";
import { addLine, editRows, lineIndices, readRows, removeLine, withRows } from "~/components/specification-rows";

const values = {
  title: "Band-pass",
  "lines.0.kind": "rejection",
  "lines.0.from": "2040",
  "lines.0.to": "2140",
  "lines.0.limit": "50",
  "lines.3.kind": "insertion-loss",
  "lines.3.from": "1920",
  "lines.3.lineKey": "kept",
};

test("a line is added after the last, and removing one leaves the others as they were typed", () => {
  expect(lineIndices(addLine(values))).toEqual([0, 3, 4]);
  expect(lineIndices(addLine({}))).toEqual([0]);
  const { "lines.3.kind": _kind, "lines.3.from": _from, "lines.3.lineKey": _key, ...rest } = values;
  expect(removeLine(values, 3)).toEqual(rest);
  expect(lineIndices(withRows({}, 3))).toEqual([0, 1, 2]);
});

test("only the buttons of the rows change rows, and the last one leaves an empty row", () => {
  expect(editRows({ ...values, intent: "save" })).toBeNull();
  expect(editRows({ ...values, intent: "remove-line.x" })).toBeNull();
  expect(editRows(values)).toBeNull();
  expect(editRows({ ...values, intent: "show-fields" })).toEqual({ ...values, intent: "show-fields" });
  expect(lineIndices(editRows({ ...values, intent: "add-line" }) ?? {})).toEqual([0, 3, 4]);
  expect(lineIndices(editRows({ ...values, intent: "remove-line.0" }) ?? {})).toEqual([3]);
  expect(editRows({ "lines.2.kind": "ripple", intent: "remove-line.2" })).toEqual({
    intent: "remove-line.2",
    "lines.0.kind": "",
  });
});

test("rows are numbered as they will be, and read one by one", () => {
  const rows = readRows(addLine(values), new Map([["withdrawn", "3.1"]]));
  expect(rows.map(({ lineNumber }) => lineNumber)).toEqual(["3.2", "2.1", ""]);
  expect(rows[0]?.requirement).toMatchObject({ kind: "rejection", band: [2.04e9, 2.14e9], min: 50 });
  expect(rows[1]).not.toHaveProperty("requirement");
  expect(readRows({ ...values, "lines.3.to": "1980", "lines.3.limit": "1" })[1]?.requirement?.id).toBe("kept");
});

test("a return loss reads as that of port 1 while the list of ports stands untouched", () => {
  const [row] = readRows({
    "lines.0.kind": "return-loss",
    "lines.0.from": "1920",
    "lines.0.to": "1980",
    "lines.0.limit": "15",
  });
  expect(row?.requirement).toMatchObject({ kind: "return-loss", port: 1 });
});
