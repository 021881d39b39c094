// The requirement table alone and with what a quote reached.
import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";
import { RequirementTable, type LineResult } from "~/components/requirement-table";
import { requirementLines } from "~/components/requirement-words";
import { SHORT_LINES } from "../support/factories";

const lines = requirementLines({
  impedances: [50, 50],
  ambient: 25,
  temperatureRange: [-30, 70],
  lowestTestFrequency: null,
  lines: SHORT_LINES,
});
const rowsOf = (html: string) => [...html.matchAll(/<tr[^>]*>.*?<\/tr>/gs)].map(([row]) => row);
const rowOf = (html: string, number: string) => rowsOf(html).find((row) => row.includes(`>${number}</th>`)) ?? "";
const text = (html: string) =>
  html
    .replace(/<[^>]*>/g, " ")
    .replace(/\s+/g, " ")
    .trim();

test("without results there are three columns, under the groups that have lines", () => {
  const html = renderToStaticMarkup(<RequirementTable lines={lines} />);
  const groups = rowsOf(html).filter((row) => row.includes("data-table-group"));
  expect(groups.map(text)).toEqual(["1 General", "2 Passband", "3 Stopband", "4 Match", "6 Declared"]);
  expect([...html.matchAll(/<th[^>]*scope="col"/g)]).toHaveLength(3);
  expect(text(rowOf(html, "2.1"))).toBe("2.1 Insertion loss 1.9200 to 1.9800 GHz max 1.2 dB");
});

const results: Record<string, LineResult> = {
  lineloss: { verdict: "fail", margin: -0.001, value: 1.201, frequency: 1.98e9, limit: 1.2 },
  linerej1: { verdict: "conditional-pass", margin: 0.4, value: 50.4, frequency: 2.04e9 },
  linerl1: { verdict: "not-covered", margin: NaN, value: null },
  linepower: { verdict: "declared" },
};

test("results add the worst value, the margin with its sign and the verdict's mark", () => {
  const html = renderToStaticMarkup(<RequirementTable lines={lines} results={results} decisionRule="guarded" />);
  const loss = rowOf(html, "2.1");
  expect(text(loss)).toContain("1.201 dB at 1.9800 GHz");
  expect(text(loss)).toContain("−0.001 dB");
  expect(loss).toContain('aria-label="fail"');
  expect(text(rowOf(html, "4.1"))).toContain("not covered");
  expect(text(rowOf(html, "6.1"))).toContain("declared");
  expect(rowOf(html, "4.2")).not.toContain("<svg");
});

test("what does not comply is tinted by the RFQ's decision rule", () => {
  const tinted = (decisionRule: "simple" | "guarded") => {
    const html = renderToStaticMarkup(<RequirementTable {...{ lines, results, decisionRule }} />);
    return ["2.1", "3.1", "4.1", "6.1"].filter((number) => /bg-\w+\/16/.test(rowOf(html, number)));
  };
  expect(tinted("simple")).toEqual(["2.1", "4.1"]);
  expect(tinted("guarded")).toEqual(["2.1", "3.1", "4.1"]);
});
