// The address of a quote's curves, read and written.
import { expect, test } from "vitest";
import { curveDataSearch, curvesSearch, readCurveDataQuery, readCurvesQuery } from "~/forms/curves";

const read = (search: string) => readCurvesQuery(new URLSearchParams(search));
const readData = (search: string) => readCurveDataQuery(new URLSearchParams(search));

test("what is unknown counts as absent", () => {
  const nothing = { view: "scales", unit: null, temperature: null, line: null, port: 1, values: false };
  expect(read("")).toEqual(nothing);
  expect(read("view=polar&temperature=warm&port=3&values=yes")).toEqual(nothing);
});

test("a view's address reads as it was written, and says only what is not the default", () => {
  const query = { view: "impedance", unit: "A 7&1", temperature: -30, line: "3.1", port: 2, values: true } as const;
  expect(read(curvesSearch(query))).toEqual(query);
  expect(curvesSearch(read(""))).toBe("");
});

test("data is asked of one measurement by a view that has data", () => {
  expect(readData("view=margin&unit=A&temperature=25&line=2.1&from=1e9&to=2e9")).toEqual({
    view: "margin",
    unit: "A",
    temperature: 25,
    port: 1,
    line: "2.1",
    window: [1e9, 2e9],
  });
  expect(readData("view=margin&unit=A&temperature=25&from=2e9&to=1e9")).not.toHaveProperty("window");
  for (const search of ["view=scales&unit=A&temperature=25", "view=margin&temperature=25", "view=margin&unit=A"])
    expect(readData(search)).toBeNull();
});

test("the address of data reads as it was written, windows to the hertz", () => {
  const query = { view: "delay", unit: "A", temperature: 25, port: 1, line: "5.1", window: [1e9, 1.5e9] } as const;
  expect(readData(curveDataSearch(query))).toEqual(query);
});
