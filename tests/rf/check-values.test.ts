// Published figures with their sources: every row is checked, or listed with the reason why it is not.
import { expect, test } from "vitest";
import notComputed from "../reference/check-values-not-computed.json";
import { DELAY_CHECKS } from "./check-values/delay";
import { NETWORK_CHECKS } from "./check-values/networks";
import { PASSIVITY_CHECKS } from "./check-values/passivity";
import { REFLECTION_CHECKS } from "./check-values/reflection";
import { checkValueRows, sourceOf } from "./check-values/row";
import { TOLERANCE_CHECKS } from "./check-values/tolerance";
import { UNCERTAINTY_CHECKS } from "./check-values/uncertainty";

const checks = [
  ...REFLECTION_CHECKS,
  ...NETWORK_CHECKS,
  ...DELAY_CHECKS,
  ...UNCERTAINTY_CHECKS,
  ...PASSIVITY_CHECKS,
  ...TOLERANCE_CHECKS,
];
const listed: Readonly<Record<string, string>> = notComputed.rows;
const parts: Readonly<Record<string, string>> = notComputed.parts;
const checked = checkValueRows.filter(({ id }) => !(id in listed));

for (const row of checked) {
  test(`${row.id}: ${row.what} [${sourceOf(row)}]`, () => {
    const matching = checks.filter(({ ids }) => ids.test(row.id));
    expect(matching, "checks of this row").toHaveLength(1);
    matching[0]?.check(row);
  });
}

test("every row is checked or listed with a reason, none twice and none dropped", () => {
  const ids = checkValueRows.map(({ id }) => id);
  expect(new Set(ids).size).toBe(330);
  expect(Object.keys(listed).filter((id) => !ids.includes(id))).toEqual([]);
  expect(checked.length + Object.keys(listed).length).toBe(330);
  expect(Object.values(listed).filter((reason) => reason.trim() === "")).toEqual([]);
  // A row that a check takes is not listed as not computed.
  expect(Object.keys(listed).filter((id) => checks.some(({ ids: pattern }) => pattern.test(id)))).toEqual([]);
  console.log(`${checked.length} check values checked, ${Object.keys(listed).length} not computed by the product`);
});

test("parts of checked rows that the product does not compute are listed by the beginning of their ids", () => {
  for (const [beginning, reason] of Object.entries(parts)) {
    expect(
      checked.some(({ id }) => id.startsWith(beginning)),
      beginning,
    ).toBe(true);
    expect(reason).not.toBe("");
  }
});

test("a source not re-read is said to be from memory in the name of its test", () => {
  const remembered = checked.filter(({ source_confidence: confidence }) => confidence?.includes("from memory"));
  expect(remembered.length).toBeGreaterThan(60);
  remembered.forEach((row) => expect(sourceOf(row)).toContain("from memory"));
});
