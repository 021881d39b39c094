// The evidence grid as a page shows it: every cell says in words what its mark says, and what is missing stands beneath.
import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";
import { EvidenceGrid } from "~/components/evidence-grid";
import { evidenceOf, type DeliveredSweep } from "~/rf/evidence";

const sweep = (unit: string, temperature: number): DeliveredSweep => ({
  unit,
  temperature,
  from: 1e9,
  to: 2e9,
  points: 1001,
  steps: [[1e9, 2e9, 1e6]],
});
const asked = { units: 3, unitsOverRange: 1, ambient: 25, range: [-30, 70] as const, plan: {} };
const textOf = (markup: string) =>
  markup
    .replace(/<svg[\s\S]*?<\/svg>/g, " ")
    .replace(/<[^>]+>/g, " ")
    .replace(/\s+/g, " ");

test("units stand against temperatures, each cell with its count and state, what is missing beneath", () => {
  const delivered = [sweep("A", 25), sweep("A", 25), sweep("A", -30), sweep("B", 25), sweep("B", 50)];
  const markup = renderToStaticMarkup(<EvidenceGrid evidence={evidenceOf(asked, delivered)} />);
  const text = textOf(markup);
  expect(text).toContain("Unit −30 °C lower end +25 °C ambient +50 °C not asked +70 °C upper end");
  expect(text).toContain("A over temperature 1 sweep , delivered 2 sweeps , delivered not asked missing");
  expect(text).toContain("B ambient not asked 1 sweep , delivered 1 sweep, not asked not asked");
  expect(text).toContain("not delivered unit 3 of 3 not asked missing not asked not asked");
  expect(text).toContain("3 units asked, 2 measured.");
  expect(text).toContain("Unit A at +70 °C: no measurement.");
});

test("marks are hidden from those who hear the words beside them", () => {
  const markup = renderToStaticMarkup(<EvidenceGrid evidence={evidenceOf(asked, [sweep("A", 25)])} />);
  const marks = markup.match(/<svg[^>]*>/g) ?? [];
  expect(marks.length).toBeGreaterThan(3);
  for (const mark of marks) expect(mark).toContain('aria-hidden="true"');
});

test("where all that was asked is there, that is said", () => {
  const delivered = ["A", "B", "C"].flatMap((unit) => [-30, 25, 70].map((celsius) => sweep(unit, celsius)));
  const text = textOf(renderToStaticMarkup(<EvidenceGrid evidence={evidenceOf(asked, delivered)} />));
  expect(text).toContain("All that was asked is there.");
});

test("a sweep that delivers a part says so, and so does a copy under another serial", () => {
  const plan = { sweeps: [{ band: [1e9, 3e9] as const, maxStep: 1e6 }] };
  const evidence = evidenceOf(
    { ...asked, units: 1, unitsOverRange: 0, plan },
    [sweep("A", 25), sweep("B", 25)],
    new Map([["B", "A"]]),
  );
  const text = textOf(renderToStaticMarkup(<EvidenceGrid evidence={evidence} />));
  expect(text).toContain("A same data as B 2 sweeps, in part");
  expect(text).toContain("Unit A at +25 °C: 2.0000 to 3.0000 GHz not swept.");
});
