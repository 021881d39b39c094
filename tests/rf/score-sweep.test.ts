// A sweep by itself: what it covers counts, and what it does not reach is told as a number of lines.
import { expect, test } from "vitest";
import type { StoredResult } from "~/rf/index";
import { standingOfSweep } from "~/rf/score-sweep";

const result = (id: string, verdict: StoredResult["verdict"]): StoredResult => ({
  id,
  verdict,
  value: 1,
  frequency: 1e9,
  limit: 2,
  margin: 1,
  interval: [1, 1],
  marginInterval: [1, 1],
  decidingFrequency: 1e9,
});

test("a sweep is judged by the lines it covers: the wide lines a passband sweep does not reach make it no worse", () => {
  const fine = [result("a", "pass"), result("b", "not-covered"), result("c", "conditional-pass")];
  expect(standingOfSweep(fine)).toMatchObject({ verdict: "conditional-pass", linesCovered: 2, lines: 3 });
  expect(standingOfSweep([...fine, result("d", "fail")])).toMatchObject({ verdict: "fail", linesCovered: 3, lines: 4 });
});

test("a sweep that covers no line whole is not covered, and keeps its results", () => {
  const none = [result("a", "not-covered"), result("b", "not-covered")];
  expect(standingOfSweep(none)).toEqual({ results: none, verdict: "not-covered", linesCovered: 0, lines: 2 });
});
