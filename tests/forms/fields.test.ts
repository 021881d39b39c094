// How a post's fields are gathered into rows, also where somebody sends more of them than any form has.
import { expect, test } from "vitest";
import { groupRows } from "~/forms/fields";

test("fields of a group come by row in the order of their index, and others are left out", () => {
  const values = { "lines.2.kind": "c", "lines.0.kind": "a", "lines.0.max": "1.2", "other.0.kind": "x", title: "t" };
  expect(groupRows(values, "lines")).toEqual([
    { index: 0, fields: { kind: "a", max: "1.2" } },
    { index: 2, fields: { kind: "c" } },
  ]);
});

test("thirty thousand fields of one row are read in a moment", () => {
  const letters = (number: number) => [...String(number)].map((digit) => "abcdefghij"[Number(digit)]).join("");
  const values = Object.fromEntries(Array.from({ length: 30_000 }, (_, at) => [`lines.0.${letters(at)}`, ""]));
  const begun = performance.now();
  const [row] = groupRows(values, "lines");
  expect(performance.now() - begun).toBeLessThan(5_000); // milliseconds; minutes where each field copies the row
  expect(Object.keys(row?.fields ?? {}).length).toBe(30_000);
});
